//! Brakewright computes disc brakes.

pub mod calc;
pub mod data;
