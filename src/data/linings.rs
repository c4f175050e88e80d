//! The published linings: text in `linings.toml`, typed here.

use std::collections::BTreeMap;
use std::sync::LazyLock;

use serde::Deserialize;

use super::nearest::nearest;
use super::printed::{Printed, number};
use crate::calc::friction::Friction;
use crate::calc::lining::{Limit, Lining, LiningParts, Origin};
use crate::calc::method::Provenance;
use crate::calc::quantity::{Dimension, Si};

/// The table's text.
pub const TEXT: &str = include_str!("linings.toml");

/// A published lining.
#[derive(Debug, Clone, PartialEq)]
pub struct LiningRow {
    /// Identifier.
    pub id: String,
    /// Name for people.
    pub name: String,
    /// Who published it.
    pub source: String,
    /// How it was found.
    pub provenance: Provenance,
    /// Whether it contains asbestos.
    pub contains_asbestos: bool,
    /// Whether its values are for running in oil.
    pub is_wet: bool,
    /// What else the source says.
    pub note: Option<String>,
    /// The values in the words of the source, by member name: ranges are whole here.
    pub printed: Vec<(&'static str, String)>,
    /// The lining itself, checked.
    pub lining: Lining,
}

impl LiningRow {
    /// The parts to start from; members of a request replace them.
    #[must_use]
    pub fn parts(&self) -> LiningParts {
        self.lining.parts().clone()
    }
}

/// Every row, in the order of the text. A test proves that the text can be read.
#[must_use]
pub fn all() -> &'static [LiningRow] {
    static ROWS: LazyLock<Vec<LiningRow>> = LazyLock::new(|| parse(TEXT).unwrap_or_default());
    &ROWS
}

/// The row of an identifier.
#[must_use]
pub fn find(id: &str) -> Option<&'static LiningRow> {
    all().iter().find(|row| row.id == id)
}

/// The identifier most like `id`, if one is much like it.
#[must_use]
pub fn closest(id: &str) -> Option<&'static str> {
    nearest(id, all().iter().map(|row| row.id.as_str()))
}

/// Reads a table.
///
/// # Errors
/// What is wrong, and in which row.
pub fn parse(text: &str) -> Result<Vec<LiningRow>, String> {
    let table: Table = toml::from_str(text).map_err(|error| error.to_string())?;
    let row = |entry: Entry| {
        let id = entry.id.clone();
        entry.into_row(&table.sources).map_err(|error| format!("{id}: {error}"))
    };
    table.lining.into_iter().map(row).collect()
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct Table {
    sources: BTreeMap<String, Source>,
    lining: Vec<Entry>,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct Source {
    text: String,
    provenance: String,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct Entry {
    id: String,
    name: String,
    source: String,
    #[serde(default)]
    asbestos: bool,
    #[serde(default)]
    wet: bool,
    note: Option<String>,
    friction: String,
    max_pressure: Option<String>,
    max_rubbing_speed: Option<String>,
    max_pressure_velocity: Option<String>,
    max_power_flux: Option<String>,
    max_temperature_continuous: Option<String>,
    max_temperature_peak: Option<String>,
    conductivity: Option<String>,
    density: Option<String>,
    specific_heat: Option<String>,
}

impl Entry {
    fn into_row(self, sources: &BTreeMap<String, Source>) -> Result<LiningRow, String> {
        let source = sources.get(&self.source).ok_or("its source is not listed")?;
        let provenance =
            Provenance::named(&source.provenance).ok_or("provenance must be seen or memory")?;
        let parts = self.parts(provenance)?;
        Ok(LiningRow {
            printed: self.printed(),
            lining: Lining::new(parts).map_err(|faults| format!("{:?}", faults.as_slice()))?,
            id: self.id,
            name: self.name,
            source: source.text.clone(),
            provenance,
            contains_asbestos: self.asbestos,
            is_wet: self.wet,
            note: self.note,
        })
    }

    fn parts(&self, provenance: Provenance) -> Result<LiningParts, String> {
        Ok(LiningParts {
            max_pressure: limit(self.max_pressure.as_ref(), Dimension::Pressure)?,
            max_rubbing_speed: limit(self.max_rubbing_speed.as_ref(), Dimension::Speed)?,
            max_pressure_velocity: limit(
                self.max_pressure_velocity.as_ref(),
                Dimension::PressureVelocity,
            )?,
            max_power_flux: limit(self.max_power_flux.as_ref(), Dimension::PowerFlux)?,
            max_temperature_continuous: limit(
                self.max_temperature_continuous.as_ref(),
                Dimension::Temperature,
            )?,
            max_temperature_peak: limit(
                self.max_temperature_peak.as_ref(),
                Dimension::Temperature,
            )?,
            conductivity: single(self.conductivity.as_ref(), Dimension::ThermalConductivity)?,
            density: single(self.density.as_ref(), Dimension::Density)?,
            specific_heat: single(self.specific_heat.as_ref(), Dimension::SpecificHeat)?,
            origin: Origin {
                catalog_id: Some(self.id.clone()),
                provenance: Some(provenance),
                contains_asbestos: self.asbestos,
                friction_code: None,
            },
            ..LiningParts::of_friction(friction(&self.friction)?)
        })
    }

    fn printed(&self) -> Vec<(&'static str, String)> {
        [
            ("friction", Some(&self.friction)),
            ("max_pressure", self.max_pressure.as_ref()),
            ("max_rubbing_speed", self.max_rubbing_speed.as_ref()),
            ("max_pressure_velocity", self.max_pressure_velocity.as_ref()),
            ("max_power_flux", self.max_power_flux.as_ref()),
            ("max_temperature_continuous", self.max_temperature_continuous.as_ref()),
            ("max_temperature_peak", self.max_temperature_peak.as_ref()),
            ("conductivity", self.conductivity.as_ref()),
            ("density", self.density.as_ref()),
            ("specific_heat", self.specific_heat.as_ref()),
        ]
        .into_iter()
        .filter_map(|(member, text)| text.map(|text| (member, text.clone())))
        .collect()
    }
}

/// A limit: of a range the lower bound.
fn limit<Q: Si>(text: Option<&String>, dimension: Dimension) -> Result<Option<Limit<Q>>, String> {
    let lower = text.map(|text| Printed::parse(text)?.lower(dimension)).transpose()?;
    Ok(lower.map(|si| Limit::by_catalog(Q::from_si(si))))
}

/// A property: a range would leave open which value to take.
fn single<Q: Si>(text: Option<&String>, dimension: Dimension) -> Result<Option<Q>, String> {
    let value = text.map(|text| Printed::parse(text)?.single(dimension)).transpose()?;
    Ok(value.map(Q::from_si))
}

fn friction(text: &str) -> Result<Friction, String> {
    let friction = match text.split_once('-') {
        Some((low, high)) => Friction::range(number(low)?, None, number(high)?),
        None => Friction::single(number(text)?),
    };
    friction.map_err(|faults| format!("{:?}", faults.as_slice()))
}
