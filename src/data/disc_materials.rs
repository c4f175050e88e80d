//! The catalog of disc materials: typed access to `disc_materials.toml`.

use std::sync::LazyLock;

use serde::Deserialize;

use super::nearest::nearest;
pub use super::printed_curve::CurveForm;
use super::printed_curve::{Printed, PrintedCurve, sentence};
use crate::calc::disc::{CatalogOrigin, DiscMaterial};
use crate::calc::fault::Faults;
use crate::calc::heat::property::{Conductivity, SpecificHeat};
use crate::calc::method::Provenance;
use crate::calc::quantity::{MassDensity, Si, ThermodynamicTemperature, ZERO_CELSIUS};

/// The table as it is reviewed.
pub const TEXT: &str = include_str!("disc_materials.toml");

static ROWS: LazyLock<Vec<DiscMaterialRow>> = LazyLock::new(|| parse(TEXT).unwrap_or_default());

/// Members that a row may hold.
const MEMBERS: [&str; 5] =
    ["density", "specific_heat", "conductivity", "emissivity", "max_temperature"];

/// One material of the catalog.
#[derive(Debug, Clone, PartialEq)]
pub struct DiscMaterialRow {
    /// Identifier, as in a request.
    pub id: String,
    /// Name for people.
    pub name: String,
    /// Who published the values.
    pub source: String,
    /// How they were found.
    pub provenance: Provenance,
    /// What to know about them.
    pub note: String,
    /// How the specific heat is printed.
    pub specific_heat_form: CurveForm,
    /// How the conductivity is printed.
    pub conductivity_form: CurveForm,
    /// The material itself.
    pub material: DiscMaterial,
}

/// Every material, in the order of the table. A test proves that the table can be read.
#[must_use]
pub fn all() -> &'static [DiscMaterialRow] {
    &ROWS
}

/// The material with this identifier.
#[must_use]
pub fn find(id: &str) -> Option<&'static DiscMaterialRow> {
    all().iter().find(|row| row.id == id)
}

/// The identifier most like `id`, if one is much like it.
#[must_use]
pub fn closest(id: &str) -> Option<&'static str> {
    nearest(id, all().iter().map(|row| row.id.as_str()))
}

/// Reads a table of disc materials.
///
/// # Errors
/// A sentence that names the row: unknown members or units, values without a physical meaning.
pub fn parse(text: &str) -> Result<Vec<DiscMaterialRow>, String> {
    let table: Table = toml::from_str(text).map_err(|error| error.to_string())?;
    table.material.into_iter().map(Row::read).collect()
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct Table {
    material: Vec<Row>,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct Row {
    id: String,
    name: String,
    source: String,
    provenance: String,
    #[serde(default)]
    from_memory: Vec<String>,
    #[serde(default)]
    seen: Vec<String>,
    note: String,
    density: Printed,
    specific_heat: PrintedCurve,
    conductivity: PrintedCurve,
    emissivity: Option<f64>,
    max_temperature: Option<Printed>,
}

impl Row {
    fn read(self) -> Result<DiscMaterialRow, String> {
        let id = self.id.clone();
        self.checked().map_err(|reason| format!("{id}: {reason}"))
    }

    fn checked(self) -> Result<DiscMaterialRow, String> {
        let provenance = Provenance::named(&self.provenance)
            .ok_or_else(|| format!("unknown provenance {}", self.provenance))?;
        Ok(DiscMaterialRow {
            material: self.material(provenance)?,
            specific_heat_form: self.specific_heat.form(),
            conductivity_form: self.conductivity.form(),
            id: self.id,
            name: self.name,
            source: self.source,
            provenance,
            note: self.note,
        })
    }

    fn material(&self, provenance: Provenance) -> Result<DiscMaterial, String> {
        let mut faults = Faults::new();
        let density = self.density.read("kg/m3")?;
        faults.positive("density", density);
        if let Some(emissivity) = self.emissivity {
            faults.efficiency("emissivity", emissivity);
        }
        let limit = self.max_temperature.as_ref().map(|limit| limit.read("degC")).transpose()?;
        let limit = limit.map(|celsius| celsius + ZERO_CELSIUS);
        if let Some(limit) = limit {
            faults.positive("max_temperature", limit);
        }
        faults.into_result(()).map_err(|faults| sentence(&faults))?;
        Ok(DiscMaterial {
            density: MassDensity::from_si(density),
            specific_heat: SpecificHeat::new(self.specific_heat.read("J/(kg.K)")?),
            conductivity: Conductivity::new(self.conductivity.read("W/(m.K)")?),
            emissivity: self.emissivity,
            max_temperature: limit.map(ThermodynamicTemperature::from_si),
            max_temperature_from_catalog: limit.is_some(),
            origin: Some(self.origin(provenance)?),
        })
    }

    fn origin(&self, provenance: Provenance) -> Result<CatalogOrigin, String> {
        let listed = self.from_memory.iter().chain(&self.seen);
        if let Some(stray) = listed.into_iter().find(|member| !self.holds(member)) {
            return Err(format!("has no {stray}"));
        }
        let remembered = |member: &&str| match provenance {
            Provenance::Seen => self.from_memory.iter().any(|name| name == member),
            Provenance::Memory => !self.seen.iter().any(|name| name == member),
        };
        let held = MEMBERS.iter().copied().filter(|member| self.holds(member));
        let from_memory = held.filter(remembered).map(str::to_owned).collect();
        Ok(CatalogOrigin { id: self.id.clone(), provenance, from_memory })
    }

    fn holds(&self, member: &str) -> bool {
        match member {
            "emissivity" => self.emissivity.is_some(),
            "max_temperature" => self.max_temperature.is_some(),
            other => MEMBERS.contains(&other),
        }
    }
}
