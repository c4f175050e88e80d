//! Every method that an answer may name, for `GET /v1/methods`. A test compares the list with the sources.

use super::method::Method;
use super::{actuation, case, heat, lining, machine, motion, pad, pressure, wear};

/// Every data sheet, in the order in which a calculation meets them.
pub fn all() -> impl Iterator<Item = &'static Method> {
    [
        pad::METHODS,
        pressure::METHODS,
        lining::METHODS,
        actuation::METHODS,
        machine::METHODS,
        motion::METHODS,
        case::stop_energy::METHODS,
        heat::METHODS,
        heat::cooling::METHODS,
        heat::lumped::METHODS,
        heat::repeated::METHODS,
        case::duty_cycle::METHODS,
        case::spec_check::METHODS,
        wear::METHODS,
    ]
    .into_iter()
    .flatten()
    .copied()
}
