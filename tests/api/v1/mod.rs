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
mod selection;
mod spec_check;
mod spec_check_faults;
mod spec_check_heat;
mod spec_check_limits;
mod spec_check_properties;
mod spec_check_requests;
mod spec_check_rules;
pub(crate) mod spec_checks;
mod stop_energy;
mod stopping;
mod stopping_faults;
mod stopping_limits;
mod stopping_machines;
