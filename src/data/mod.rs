//! Published tables as reviewable text, each row with its source.

pub mod disc_materials;
pub mod friction_codes;
pub mod linings;
pub mod magnitude;
pub mod nearest;
mod printed;
mod printed_curve;
pub mod procedures;
pub mod rules;
pub mod units;
