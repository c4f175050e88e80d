//! The units of the border: plain symbols, UCUM codes and Recommendation 20 codes, with exact factors.

use std::sync::LazyLock;

use crate::calc::quantity::Dimension;

/// The table as text.
pub const TEXT: &str = include_str!("units.tsv");

/// How a unit's numbers become coherent SI.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Conversion {
    /// SI = value × factor.
    Linear(f64),
    /// SI = (value + offset) × factor: a temperature scale.
    Scale {
        /// Kelvins per degree.
        factor: f64,
        /// Degrees from absolute zero to the zero of the scale.
        offset: f64,
    },
    /// SI = atan(value/100): rise over run in percent.
    RiseOverRun,
}

/// A unit of one dimension.
#[derive(Debug, Clone, PartialEq)]
pub struct Unit {
    /// What it measures.
    pub dimension: Dimension,
    /// The plain ASCII symbol.
    pub symbol: &'static str,
    /// Whether SI reports may use it.
    pub is_si: bool,
    /// Whether US reports may use it.
    pub is_us: bool,
    /// UCUM code.
    pub ucum: Option<&'static str>,
    /// UN/ECE Recommendation 20 common code.
    pub recommendation_20: Option<&'static str>,
    /// To coherent SI.
    pub conversion: Conversion,
    /// The factor as a chain of exact constants.
    pub exact: &'static str,
    /// In words.
    pub name: &'static str,
    /// Name for generated code.
    pub variant: &'static str,
}

impl Unit {
    /// The number of coherent SI units in `value` of this unit.
    #[must_use]
    pub fn to_si(&self, value: f64) -> f64 {
        match self.conversion {
            Conversion::Linear(factor) => value * factor,
            // Dividing by 9/5 keeps round Fahrenheit values round; for other scales the factor is 1.
            Conversion::Scale { factor, offset } => (value + offset) / degrees_per_kelvin(factor),
            Conversion::RiseOverRun => libm::atan(value / 100.0),
        }
    }

    /// The number of this unit in `si` coherent SI units.
    #[must_use]
    pub fn of_si(&self, si: f64) -> f64 {
        match self.conversion {
            Conversion::Linear(factor) => si / factor,
            Conversion::Scale { factor, offset } => tidy(si * degrees_per_kelvin(factor) - offset),
            Conversion::RiseOverRun => 100.0 * libm::tan(si),
        }
    }

    /// Whether `text` names this unit by its symbol or one of its codes.
    #[must_use]
    pub fn is_named(&self, text: &str) -> bool {
        self.symbol == text || self.ucum == Some(text) || self.recommendation_20 == Some(text)
    }
}

fn degrees_per_kelvin(factor: f64) -> f64 {
    if factor < 1.0 { 1.8 } else { 1.0 }
}

/// Takes out the digits that the difference of two large numbers leaves behind: 1e-10 of a degree.
fn tidy(degrees: f64) -> f64 {
    let rounded = (degrees * 1e10).round() / 1e10;
    if rounded.is_finite() { rounded } else { degrees }
}

static UNITS: LazyLock<Vec<Unit>> = LazyLock::new(|| parse(TEXT).unwrap_or_default());

/// Where each dimension's units lie in the table; they stand together.
static RANGES: LazyLock<Vec<(usize, usize)>> = LazyLock::new(|| {
    let range = |&dimension: &Dimension| {
        let start = UNITS.iter().position(|unit| unit.dimension == dimension).unwrap_or_default();
        (start, UNITS.iter().filter(|unit| unit.dimension == dimension).count())
    };
    Dimension::ALL.iter().map(range).collect()
});

/// Every unit, in the order of the table.
#[must_use]
pub fn all() -> &'static [Unit] {
    &UNITS
}

/// The units of a dimension, in the order of the table.
#[must_use]
pub fn of(dimension: Dimension) -> &'static [Unit] {
    let &(start, count) = RANGES.get(dimension as usize).unwrap_or(&(0, 0));
    UNITS.get(start..start + count).unwrap_or_default()
}

/// The unit of a dimension that `text` names by symbol, UCUM or Recommendation 20 code.
#[must_use]
pub fn find(dimension: Dimension, text: &str) -> Option<&'static Unit> {
    let units = of(dimension);
    units
        .iter()
        .find(|unit| unit.symbol == text)
        .or_else(|| units.iter().find(|unit| unit.is_named(text)))
}

/// Every further code of the units whose plain symbols are `symbols`, for a check that takes them all.
#[must_use]
pub fn further_codes(symbols: &[&str]) -> Vec<String> {
    let dimension = Dimension::ALL.iter().find(|&&dimension| {
        of(dimension).iter().map(|unit| unit.symbol).eq(symbols.iter().copied())
    });
    let units = dimension.map_or(&[][..], |&dimension| of(dimension));
    let codes = units.iter().flat_map(|unit| [unit.ucum, unit.recommendation_20]).flatten();
    codes.filter(|code| !symbols.contains(code)).map(str::to_owned).collect()
}

/// Reads the table.
///
/// # Errors
/// The first line that does not follow its heading.
pub fn parse(text: &'static str) -> Result<Vec<Unit>, String> {
    let lines = text.lines().filter(|line| !line.starts_with('#') && !line.trim().is_empty());
    lines.skip(1).map(|line| unit(line).ok_or_else(|| format!("not a unit: {line}"))).collect()
}

fn unit(line: &'static str) -> Option<Unit> {
    let mut cells = line.split('\t');
    let dimension = cells.next()?;
    let dimension = *Dimension::ALL.iter().find(|known| known.id() == dimension)?;
    let symbol = cells.next()?;
    let systems = cells.next()?;
    let [ucum, recommendation_20] =
        [cells.next()?, cells.next()?].map(|code| (code != "-").then_some(code));
    let factor: f64 = cells.next()?.parse().ok()?;
    let offset: f64 = cells.next()?.parse().ok()?;
    let exact = cells.next()?;
    let conversion = match (exact, dimension) {
        ("grade", _) => Conversion::RiseOverRun,
        (_, Dimension::Temperature) => Conversion::Scale { factor, offset },
        _ => Conversion::Linear(factor),
    };
    let (is_si, is_us) = match systems {
        "si" => (true, false),
        "us" => (false, true),
        "both" => (true, true),
        _ => return None,
    };
    let (name, variant) = (cells.next()?, cells.next()?);
    cells.next().is_none().then_some(())?;
    Some(Unit {
        dimension,
        symbol,
        is_si,
        is_us,
        ucum,
        recommendation_20,
        conversion,
        exact,
        name,
        variant,
    })
}
