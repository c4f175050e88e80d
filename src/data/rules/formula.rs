//! Distance limits that are printed as a formula in the speed.

use crate::calc::quantity::Dimension;
use crate::data::printed::number;
use crate::data::units;

/// S = t·v + v²/(2a), as printed and in SI.
#[derive(Debug, Clone, PartialEq)]
pub struct Formula {
    /// As printed, with the units of the distance and of the speed V.
    pub text: String,
    /// Of v: the time t, s.
    pub linear: f64,
    /// Of v²: 1/(2a), s²/m.
    pub quadratic: f64,
}

impl Formula {
    /// Reads `0.15 V + V2/130 [m, km/h]`.
    pub(super) fn parse(text: &str) -> Result<Self, String> {
        let wrong = || format!("{text}: not a formula such as 0.15 V + V2/130 [m, km/h]");
        let (terms, units) =
            text.strip_suffix(']').and_then(|text| text.split_once(" [")).ok_or_else(wrong)?;
        let (length, speed) = units.split_once(", ").ok_or_else(wrong)?;
        let unit = |dimension, symbol| {
            units::find(dimension, symbol).map(|unit| unit.to_si(1.0)).ok_or_else(wrong)
        };
        let (length, speed) = (unit(Dimension::Length, length)?, unit(Dimension::Speed, speed)?);
        let mut formula = Self { text: text.to_owned(), linear: 0.0, quadratic: 0.0 };
        for term in terms.split(" + ") {
            if let Some(divisor) = term.strip_prefix("V2/") {
                formula.quadratic += length / (number(divisor)? * speed * speed);
            } else if let Some(factor) = term.strip_suffix(" V2") {
                formula.quadratic += number(factor)? * length / (speed * speed);
            } else {
                let factor = term.strip_suffix(" V").ok_or_else(wrong)?;
                formula.linear += number(factor)? * length / speed;
            }
        }
        Ok(formula)
    }

    /// The distance from `speed`, m/s, in m.
    #[must_use]
    pub fn at(&self, speed: f64) -> f64 {
        (self.linear + self.quadratic * speed) * speed
    }

    /// The constant deceleration a that its second term stands for, m/s², if it has one.
    #[must_use]
    pub fn deceleration(&self) -> Option<f64> {
        (self.quadratic > 0.0).then(|| 0.5 / self.quadratic)
    }
}
