//! Brakewright computes disc brakes.

pub mod calc;
