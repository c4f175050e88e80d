//! Brakewright computes disc brakes.

pub mod api;
pub mod calc;
pub mod data;
pub mod probe;
pub mod server;
pub mod settings;
