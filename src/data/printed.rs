//! Values as a source prints them: a number or a range, and a unit.

use super::units;
use crate::calc::quantity::Dimension;

/// Density of water that a specific gravity refers to, kg/m³.
const WATER: f64 = 1000.0;

/// A printed value.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Printed<'text> {
    lower: f64,
    upper: Option<f64>,
    unit: &'text str,
}

impl<'text> Printed<'text> {
    /// Reads `300-400 psi` or `500 psi`.
    pub(super) fn parse(text: &'text str) -> Result<Self, String> {
        let (numbers, unit) = text.split_once(' ').ok_or_else(|| format!("{text}: no unit"))?;
        let (lower, upper) = match numbers.split_once('-') {
            Some((lower, upper)) => (number(lower)?, Some(number(upper)?)),
            None => (number(numbers)?, None),
        };
        match upper {
            Some(upper) if upper <= lower => Err(format!("{text}: not a range")),
            _ => Ok(Self { lower, upper, unit }),
        }
    }

    /// The value, or the lower bound of the range, in SI.
    pub(super) fn lower(&self, dimension: Dimension) -> Result<f64, String> {
        if self.unit == "SG" && dimension == Dimension::Density {
            return Ok(self.lower * WATER);
        }
        let unit = units::find(dimension, self.unit);
        unit.map(|unit| unit.to_si(self.lower))
            .ok_or_else(|| format!("{}: not its unit", self.unit))
    }

    /// The upper bound in SI, if it is a range.
    pub(super) fn upper(&self, dimension: Dimension) -> Result<Option<f64>, String> {
        let bound = |upper| Self { lower: upper, upper: None, unit: self.unit }.lower(dimension);
        self.upper.map(bound).transpose()
    }

    /// The value in SI; a range is refused.
    pub(super) fn single(&self, dimension: Dimension) -> Result<f64, String> {
        match self.upper {
            None => self.lower(dimension),
            Some(upper) => Err(format!("{}-{upper}: one value is needed", self.lower)),
        }
    }
}

/// A plain decimal number.
pub(super) fn number(text: &str) -> Result<f64, String> {
    text.parse().map_err(|error| format!("{text}: {error}"))
}
