//! Reading the unit table.

use super::{Scale, Unit};
use crate::calc::method::Provenance;
use crate::calc::quantity::Dimension;

/// The rows as text.
const TEXT: &str = include_str!("../units.tsv");

/// Reads the table.
///
/// # Errors
/// The first row that cannot be read. A test proves that there is none.
pub fn table() -> Result<Vec<Unit>, &'static str> {
    let rows = TEXT.lines().filter(|line| !line.starts_with('#') && !line.is_empty());
    rows.map(|row| unit_of_row(row).ok_or(row)).collect()
}

fn unit_of_row(row: &'static str) -> Option<Unit> {
    let cells: Vec<&'static str> = row.split('\t').collect();
    let &[
        dimension,
        symbol,
        system,
        ucum,
        recommendation_20,
        factor,
        exact,
        offset,
        variant,
        codes,
        name,
    ] = cells.as_slice()
    else {
        return None;
    };
    let dimension = Dimension::ALL.iter().copied().find(|known| known.id() == dimension)?;
    let factor = factor.parse().ok()?;
    let scale = match (offset, symbol) {
        ("-", "%") => Scale::RiseOverRun { factor },
        ("-", _) => Scale::Linear { factor },
        _ => shifted(offset.parse().ok()?, exact)?,
    };
    matches!(system, "si" | "us" | "both").then_some(())?;
    let codes = Provenance::named(codes)?;
    Some(Unit {
        dimension,
        symbol,
        is_si: matches!(system, "si" | "both"),
        is_us: matches!(system, "us" | "both"),
        ucum: code(ucum),
        recommendation_20: code(recommendation_20),
        scale,
        exact,
        variant,
        codes,
        name,
    })
}

fn shifted(offset: f64, exact: &str) -> Option<Scale> {
    let (numerator, denominator) = exact.split_once('/').unwrap_or((exact, "1"));
    let (numerator, denominator) = (numerator.parse().ok()?, denominator.parse().ok()?);
    Some(Scale::Shifted { offset, numerator, denominator })
}

fn code(cell: &'static str) -> Option<&'static str> {
    (cell != "-").then_some(cell)
}
