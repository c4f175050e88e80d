//! The disc.

use serde::Deserialize;
use utoipa::ToSchema;

use crate::api::measure::{
    Density, HeatTransferCoefficient, Length, Mass, SpecificHeat, Temperature, ThermalConductivity,
};
use crate::api::parse::{At, Reader};
use crate::calc::disc::{
    Construction as Built, Cooling as Cooled, Disc as Plate, DiscMaterial as Material,
};
use crate::calc::disc::{DEFAULT_EMISSIVITY, DiscMaterialParts, DiscParts};
use crate::calc::fault::FaultCode;
use crate::data::disc_materials;

/// What the pads rub on. It is needed for temperatures only.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Disc {
    /// What it is made of.
    pub material: DiscMaterial,
    /// Largest radius.
    pub outer_radius: Length,
    /// Smallest radius.
    pub inner_radius: Length,
    /// From face to face.
    pub thickness: Length,
    /// Solid (the default) or ventilated.
    #[schema(nullable = false)]
    pub construction: Option<Construction>,
    /// Mass of the rubbed ring only, without hat. It overrides the computed one; a ventilated disc needs it for
    /// temperatures.
    #[schema(nullable = false)]
    pub mass: Option<Mass>,
    /// How the disc gives off heat between stops.
    #[schema(nullable = false)]
    pub cooling: Option<Cooling>,
}

/// How a disc is built.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Deserialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum Construction {
    /// One plate.
    Solid,
    /// Two plates with air between them.
    Ventilated,
}

/// What a disc is made of: a row of `GET /v1/disc-materials`, or its properties, or a row with overrides.
#[derive(Debug, Clone, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct DiscMaterial {
    /// A row of `GET /v1/disc-materials`.
    #[schema(nullable = false, example = "gray_cast_iron")]
    pub id: Option<String>,
    /// Density.
    #[schema(nullable = false)]
    pub density: Option<Density>,
    /// Specific heat capacity, constant over temperature.
    #[schema(nullable = false)]
    pub specific_heat: Option<SpecificHeat>,
    /// Thermal conductivity, constant over temperature.
    #[schema(nullable = false)]
    pub conductivity: Option<ThermalConductivity>,
    /// Emissivity of the surface, above 0 and not above 1; 0.55 if left out.
    #[schema(nullable = false)]
    pub emissivity: Option<f64>,
    /// Highest bulk temperature.
    #[schema(nullable = false)]
    pub max_temperature: Option<Temperature>,
}

/// How a disc gives off heat: a coefficient, or a model that estimates one.
#[derive(Debug, Clone, Copy, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Cooling {
    /// Heat transfer coefficient in all, radiation included.
    #[schema(nullable = false)]
    pub coefficient: Option<HeatTransferCoefficient>,
    /// What estimates the coefficient.
    #[schema(nullable = false)]
    pub model: Option<CoolingModel>,
}

/// A model of cooling.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Deserialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum CoolingModel {
    /// A free disc that turns in still air.
    RotatingDisc,
    /// A disc in the airstream of a vehicle.
    Airstream,
}

impl Disc {
    /// The disc that is meant.
    pub fn read(&self, at: &At<'_>, reader: &mut Reader) -> Option<Plate> {
        let material = self.material.read(&at.member("material"), reader);
        let construction = self.construction.map(|given| match given {
            Construction::Solid => Built::Solid,
            Construction::Ventilated => Built::Ventilated,
        });
        let construction =
            reader.word(&at.member("construction"), construction, Built::Solid, "solid");
        let outer_radius = reader.quantity(&at.member("outer_radius"), &self.outer_radius);
        let inner_radius = reader.quantity(&at.member("inner_radius"), &self.inner_radius);
        let thickness = reader.quantity(&at.member("thickness"), &self.thickness);
        let mass = reader.optional(&at.member("mass"), self.mass.as_ref());
        let cooling = self.cooling.and_then(|cooling| cooling.read(&at.member("cooling"), reader));
        let material = material?;
        let parts = DiscParts {
            material,
            outer_radius,
            inner_radius,
            thickness,
            construction,
            mass,
            cooling,
        };
        reader.take(at, Plate::new(parts))
    }
}

impl DiscMaterial {
    fn read(&self, at: &At<'_>, reader: &mut Reader) -> Option<Material> {
        let row = self.id.as_ref().map(|id| (id, disc_materials::find(id)));
        if let Some((id, None)) = row {
            let near = disc_materials::closest(id);
            let hint = near.map_or(String::new(), |near| format!("; did you mean {near}?"));
            let detail = format!("is not a row of GET /v1/disc-materials{hint}");
            reader.fault(&at.member("id"), FaultCode::UnknownId, detail);
        }
        let parts = DiscMaterialParts {
            catalog: row.and_then(|(_, row)| row).map(|row| row.material.clone()),
            density: reader.optional(&at.member("density"), self.density.as_ref()),
            specific_heat: reader
                .optional(&at.member("specific_heat"), self.specific_heat.as_ref()),
            conductivity: reader.optional(&at.member("conductivity"), self.conductivity.as_ref()),
            emissivity: self.emissivity,
            max_temperature: reader
                .optional(&at.member("max_temperature"), self.max_temperature.as_ref()),
        };
        if matches!(row, Some((_, None))) {
            return None;
        }
        let material = reader.take(at, Material::new(parts))?;
        if material.emissivity_is_default() {
            reader.ratio(&at.member("emissivity"), None, DEFAULT_EMISSIVITY);
        }
        Some(material)
    }
}

impl Cooling {
    fn read(self, at: &At<'_>, reader: &mut Reader) -> Option<Cooled> {
        match (self.coefficient, self.model) {
            (Some(_), Some(_)) => {
                reader.fault(
                    &at.member("model"),
                    FaultCode::Conflict,
                    "give either this or coefficient, not both",
                );
                None
            }
            (None, None) => {
                reader.fault(at, FaultCode::Missing, "give coefficient or model");
                None
            }
            (Some(coefficient), None) => {
                let at = at.member("coefficient");
                let coefficient = reader.quantity(&at, &coefficient);
                if coefficient.value > 0.0 {
                    return Some(Cooled::Coefficient(coefficient));
                }
                reader.fault(&at, FaultCode::NotPositive, "must be above 0");
                None
            }
            (None, Some(CoolingModel::RotatingDisc)) => Some(Cooled::RotatingDisc),
            (None, Some(CoolingModel::Airstream)) => Some(Cooled::Airstream),
        }
    }
}
