//! The unit table: what a quantity may be given in, and what answers use.
//!
//! The rows stand in `units.tsv`. Units exist only at the border; inside, every quantity is a
//! number of coherent SI units.

mod table;

use std::sync::LazyLock;

pub use table::table;

use crate::calc::method::Provenance;
use crate::calc::quantity::Dimension;

/// A converted number is tried with nine decimals.
const DECIMALS: f64 = 1e9;

/// The relative rounding of the two operations of a conversion.
const CONVERSION_ROUNDING: f64 = 2.0 * f64::EPSILON;

static TABLE: LazyLock<Vec<Unit>> = LazyLock::new(|| table().unwrap_or_default());

/// The unit of a pure ratio, and of a dimension without rows.
static ONE: Unit = Unit {
    dimension: Dimension::Ratio,
    symbol: "1",
    is_si: true,
    is_us: true,
    ucum: Some("1"),
    recommendation_20: Some("C62"),
    scale: Scale::Linear { factor: 1.0 },
    exact: "1",
    variant: "ONE",
    codes: Provenance::Seen,
    name: "one",
};

/// Which units an answer uses.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum System {
    /// International units.
    Si,
    /// United States customary units.
    Us,
}

/// How a number of units becomes a number of coherent SI units.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Scale {
    /// si = value × factor.
    Linear {
        /// Coherent SI units per unit.
        factor: f64,
    },
    /// si = (value + offset) × numerator / denominator: an absolute temperature.
    Shifted {
        /// What lies between the zeros of the scales, in this unit.
        offset: f64,
        /// Of the exact ratio.
        numerator: f64,
        /// Of the exact ratio.
        denominator: f64,
    },
    /// si = atan(value × factor): a slope as rise over run.
    RiseOverRun {
        /// Tangent per unit.
        factor: f64,
    },
}

/// One unit of one dimension.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Unit {
    /// What it measures.
    pub dimension: Dimension,
    /// The plain symbol: what descriptions list and answers use.
    pub symbol: &'static str,
    /// Whether SI reports may use it.
    pub is_si: bool,
    /// Whether US reports may use it.
    pub is_us: bool,
    /// The UCUM code, if there is one.
    pub ucum: Option<&'static str>,
    /// The UN/ECE Recommendation 20 common code, if there is one.
    pub recommendation_20: Option<&'static str>,
    /// The conversion.
    pub scale: Scale,
    /// The exact factor, as an expression of exact constants.
    pub exact: &'static str,
    /// Name for generated code.
    pub variant: &'static str,
    /// How the codes were found.
    pub codes: Provenance,
    /// The name in words.
    pub name: &'static str,
}

impl Unit {
    /// The number of coherent SI units of `value` units.
    #[must_use]
    pub fn to_si(&self, value: f64) -> f64 {
        match self.scale {
            Scale::Linear { factor } => value * factor,
            // Multiplied before divided: 5/9 has no finite binary form.
            Scale::Shifted { offset, numerator, denominator } => {
                (value + offset) * numerator / denominator
            }
            Scale::RiseOverRun { factor } => libm::atan(value * factor),
        }
    }

    /// The number of these units of `si` coherent SI units.
    #[must_use]
    pub fn of_si(&self, si: f64) -> f64 {
        let value = match self.scale {
            Scale::Linear { factor } => si / factor,
            Scale::Shifted { offset, numerator, denominator } => {
                si * denominator / numerator - offset
            }
            Scale::RiseOverRun { factor } => libm::tan(si) / factor,
        };
        self.rounded(value, si)
    }

    /// Whether `text` is the plain symbol or one of the codes.
    #[must_use]
    pub fn is_named(&self, text: &str) -> bool {
        self.symbol == text || self.ucum == Some(text) || self.recommendation_20 == Some(text)
    }

    /// Coherent SI units per unit; of the tangent for a slope in percent.
    #[must_use]
    pub fn factor(&self) -> f64 {
        match self.scale {
            Scale::Linear { factor } | Scale::RiseOverRun { factor } => factor,
            Scale::Shifted { numerator, denominator, .. } => numerator / denominator,
        }
    }

    /// What an absolute temperature adds before scaling.
    #[must_use]
    pub const fn offset(&self) -> Option<f64> {
        match self.scale {
            Scale::Shifted { offset, .. } => Some(offset),
            Scale::Linear { .. } | Scale::RiseOverRun { .. } => None,
        }
    }

    const fn belongs_to(&self, system: System) -> bool {
        match system {
            System::Si => self.is_si,
            System::Us => self.is_us,
        }
    }

    /// The rounder of two numbers that differ by no more than a conversion leaves, so that 300 degC
    /// and 12 in do not come back as 300.00000000000006 degC and 304.79999999999995 mm.
    fn rounded(&self, value: f64, si: f64) -> f64 {
        let round = (value * DECIMALS).round() / DECIMALS;
        let is_same = (self.to_si(round) - si).abs() <= CONVERSION_ROUNDING * si.abs();
        if is_same { round } else { value }
    }
}

/// Every unit, in the order of the table.
#[must_use]
pub fn all() -> &'static [Unit] {
    &TABLE
}

/// The units of a dimension, in the order of the table. Travel is given in units of length.
#[must_use]
pub fn of(dimension: Dimension) -> &'static [Unit] {
    let rows = if dimension == Dimension::Travel { Dimension::Length } else { dimension };
    RANGES.get(rows as usize).and_then(|&(start, end)| TABLE.get(start..end)).unwrap_or_default()
}

/// The unit of a dimension that `text` stands for: plain symbol, UCUM or Recommendation 20 code.
#[must_use]
pub fn find(dimension: Dimension, text: &str) -> Option<&'static Unit> {
    let units = of(dimension);
    units
        .iter()
        .find(|unit| unit.symbol == text)
        .or_else(|| units.iter().find(|unit| unit.is_named(text)))
}

/// The unit in which answers of a system give a dimension.
#[must_use]
pub fn reported(dimension: Dimension, system: System) -> &'static Unit {
    let travel = match (dimension, system) {
        (Dimension::Travel, System::Si) => find(Dimension::Length, "m"),
        (Dimension::Travel, System::Us) => find(Dimension::Length, "ft"),
        (_, System::Si | System::Us) => None,
    };
    travel.or_else(|| of(dimension).iter().find(|unit| unit.belongs_to(system))).unwrap_or(&ONE)
}

/// First row and the row after the last of every dimension, in the order of the dimensions.
static RANGES: LazyLock<Vec<(usize, usize)>> = LazyLock::new(|| {
    let range = |dimension: &Dimension| {
        let is_row = |unit: &Unit| unit.dimension == *dimension;
        let start = TABLE.iter().position(is_row).unwrap_or(0);
        (start, start + TABLE.iter().filter(|unit| is_row(unit)).count())
    };
    Dimension::ALL.iter().map(range).collect()
});

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
