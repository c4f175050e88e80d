//! The calculations, seen through the front door.

mod actuation_force;
pub(crate) mod common;
mod conformity;
mod faults;
mod pad_capacity;
mod record;
mod stop_energy;
mod stopping;
mod stopping_faults;
mod stopping_limits;
mod stopping_machines;
