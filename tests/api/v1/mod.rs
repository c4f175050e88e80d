//! One file per endpoint.

mod duty_cycle;
mod duty_faults;
mod duty_requests;
mod repeated_stops;
