//! Values as a source prints them: a number or a range, and a unit.

/// What a printed value measures.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Scale {
    Pressure,
    Speed,
    PressureVelocity,
    PowerFlux,
    Temperature,
    Conductivity,
    Density,
    SpecificHeat,
}

/// A unit as (symbol, scale, factor, offset): SI value = (number + offset) × factor. Factors are exact, or
/// rounded once from lb = 0.45359237 kg, g = 9.80665 m/s², in = 0.0254 m, ft = 0.3048 m.
type Unit = (&'static str, Scale, f64, f64);

const UNITS: &[Unit] = &[
    ("psi", Scale::Pressure, 6_894.757_293_168_361, 0.0),
    ("kPa", Scale::Pressure, 1e3, 0.0),
    ("MPa", Scale::Pressure, 1e6, 0.0),
    ("ft/min", Scale::Speed, 0.005_08, 0.0),
    ("psi.ft/min", Scale::PressureVelocity, 35.025_367_049_295_276, 0.0),
    ("W/mm2", Scale::PowerFlux, 1e6, 0.0),
    ("degF", Scale::Temperature, 5.0 / 9.0, 459.67),
    ("degC", Scale::Temperature, 1.0, 273.15),
    ("W/(m.K)", Scale::Conductivity, 1.0, 0.0),
    ("J/(kg.K)", Scale::SpecificHeat, 1.0, 0.0),
    // Specific gravity, against water of 1000 kg/m³.
    ("SG", Scale::Density, 1e3, 0.0),
];

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
    pub(super) fn lower(&self, scale: Scale) -> Result<f64, String> {
        let unit = UNITS.iter().find(|(symbol, of, ..)| *symbol == self.unit && *of == scale);
        let (.., factor, offset) = unit.ok_or_else(|| format!("{}: not its unit", self.unit))?;
        Ok((self.lower + offset) * factor)
    }

    /// The value in SI; a range is refused.
    pub(super) fn single(&self, scale: Scale) -> Result<f64, String> {
        match self.upper {
            None => self.lower(scale),
            Some(upper) => Err(format!("{}-{upper}: one value is needed", self.lower)),
        }
    }
}

/// A plain decimal number.
pub(super) fn number(text: &str) -> Result<f64, String> {
    text.parse().map_err(|error| format!("{text}: {error}"))
}
