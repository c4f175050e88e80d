//! Properties over temperature as a table of materials prints them.

use serde::Deserialize;

use crate::calc::fault::Faults;
use crate::calc::heat::property::{Curve, Piece, Pole};

/// How a source prints a property over temperature.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum CurveForm {
    /// One value for every temperature.
    Constant,
    /// Points, straight between them, constant outside.
    Table,
    /// Mean values from a base temperature.
    MeanValues,
    /// Formulas by ranges.
    Formulas,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
pub(super) struct Printed {
    value: f64,
    unit: String,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
pub(super) struct PrintedCurve {
    unit: String,
    value: Option<f64>,
    table: Option<Vec<(f64, f64)>>,
    mean: Option<Vec<(f64, f64)>>,
    mean_from: Option<f64>,
    pieces: Option<Vec<PrintedPiece>>,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
pub(super) struct PrintedPiece {
    from: f64,
    to: f64,
    polynomial: Vec<f64>,
    pole: Option<PrintedPole>,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
pub(super) struct PrintedPole {
    factor: f64,
    at: f64,
}

impl Printed {
    pub(super) fn read(&self, unit: &str) -> Result<f64, String> {
        same_unit(&self.unit, unit).map(|()| self.value)
    }
}

impl PrintedCurve {
    /// The form of a curve that could be read.
    pub(super) const fn form(&self) -> CurveForm {
        match (&self.table, &self.mean, &self.pieces) {
            (Some(_), ..) => CurveForm::Table,
            (_, Some(_), _) => CurveForm::MeanValues,
            (.., Some(_)) => CurveForm::Formulas,
            (None, None, None) => CurveForm::Constant,
        }
    }

    pub(super) fn read(&self, unit: &str) -> Result<Curve, String> {
        same_unit(&self.unit, unit)?;
        let curve = match (self.value, &self.table, &self.mean, self.mean_from, &self.pieces) {
            (Some(value), None, None, None, None) => Curve::constant(value),
            (None, Some(points), None, None, None) => Curve::table(points),
            (None, None, Some(points), Some(base), None) => Curve::mean_from(base, points),
            (None, None, None, None, Some(pieces)) => {
                let pieces: Result<_, String> = pieces.iter().map(PrintedPiece::read).collect();
                Curve::pieces(pieces?)
            }
            _ => return Err("needs exactly one of value, table, mean and pieces".to_owned()),
        };
        curve.map_err(|faults| sentence(&faults))
    }
}

impl PrintedPiece {
    pub(super) fn read(&self) -> Result<Piece, String> {
        let mut polynomial = [0.0; 4];
        if self.polynomial.len() > polynomial.len() {
            return Err("a polynomial has at most four coefficients".to_owned());
        }
        polynomial.iter_mut().zip(&self.polynomial).for_each(|(place, given)| *place = *given);
        let pole = self.pole.as_ref().map(|pole| Pole { factor: pole.factor, at: pole.at });
        Ok(Piece { from: self.from, to: self.to, polynomial, pole })
    }
}

fn same_unit(printed: &str, expected: &str) -> Result<(), String> {
    let same = printed == expected;
    same.then_some(()).ok_or_else(|| format!("unit {printed} where {expected} is read"))
}

/// The faults of a row, for people.
pub(super) fn sentence(faults: &Faults) -> String {
    let words = |fault: &crate::calc::fault::Fault| format!("{} {}", fault.member, fault.detail);
    faults.as_slice().iter().map(words).collect::<Vec<_>>().join("; ")
}
