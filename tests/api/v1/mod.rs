//! The calculations, seen through the front door.

mod actuation_force;
pub(crate) mod common;
mod conformity;
mod duty_cycle;
mod duty_faults;
mod duty_requests;
mod faults;
mod pad_capacity;
mod record;
mod repeated_stops;
mod stop_energy;
mod stopping;
mod stopping_faults;
mod stopping_limits;
mod stopping_machines;
