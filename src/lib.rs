//! Brakewright computes disc brakes.

pub mod api;
pub mod calc;
pub mod data;
mod operate;
pub mod probe;
pub mod server;
mod setting_values;
pub mod settings;
