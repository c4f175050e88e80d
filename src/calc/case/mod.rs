//! One file per thing the service computes: its input, its outcome, and the way from one to the other.

pub mod actuation_force;
pub mod duty_cycle;
pub mod pad_capacity;
pub mod selection;
pub mod spec_check;
pub mod stop_energy;
pub mod stopping;
