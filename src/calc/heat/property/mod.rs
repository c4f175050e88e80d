//! Properties that change with temperature: specific heat and thermal conductivity.
//!
//! Sources print them over °C, as constants, tables, mean values or formulas by ranges. All of these
//! become one [`Curve`]: ranges of cubics, some with a pole, whose integral is closed.

mod conductivity;
mod curve;
mod piece;
mod specific_heat;

pub use conductivity::Conductivity;
pub use curve::{Curve, Point};
pub use piece::{Piece, Pole};
pub use specific_heat::{CEILING, ENTHALPY, SpecificEnergy, SpecificHeat};
