//! `GET /v1/disc-materials`: the published materials of discs.

use std::sync::LazyLock;

use axum::body::Body;
use axum::extract::Path;
use axum::http::{HeaderMap, Response};
use serde::Serialize;
use utoipa::ToSchema;

use super::{Catalog, Provenance};
use crate::api::measure::{
    Density, Finite, ReportUnits, SpecificHeat, Temperature, ThermalConductivity,
};
use crate::api::problem::Problem;
use crate::calc::quantity::{Si, ThermodynamicTemperature, ZERO_CELSIUS};
use crate::data::disc_materials::{self, CurveForm as Form, DiscMaterialRow};

/// Where properties that change with temperature are shown, degC.
const SHOWN_AT: [f64; 4] = [20.0, 200.0, 400.0, 600.0];

/// The materials that requests may name.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct DiscMaterialList {
    /// In the order of the table.
    pub items: Vec<DiscMaterialItem>,
}

/// A published disc material. `density`, `specific_heat`, `conductivity`, `emissivity` and `max_temperature` have the
/// names and the form of a request's `material`, so they can be copied into one. A property that changes with
/// temperature has no single value to copy: name the material by its `id`.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct DiscMaterialItem {
    /// Identifier.
    pub id: String,
    /// Name for people.
    pub name: String,
    /// Who published it.
    pub source: String,
    /// How it was found.
    pub provenance: Provenance,
    /// Members whose values were entered from memory of the source.
    pub from_memory: Vec<String>,
    /// What to know about the values.
    pub note: String,
    /// Density.
    pub density: Density,
    /// Specific heat capacity, if it is the same at every temperature.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub specific_heat: Option<SpecificHeat>,
    /// Thermal conductivity, if it is the same at every temperature.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub conductivity: Option<ThermalConductivity>,
    /// Emissivity of the surface.
    #[schema(value_type = f64)]
    pub emissivity: Finite,
    /// Whether the source gives no emissivity, so that the service's default stands here.
    pub emissivity_is_default: bool,
    /// Highest bulk temperature, where the source names one.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub max_temperature: Option<Temperature>,
    /// Specific heat over temperature, as calculations use it.
    pub specific_heat_curve: SpecificHeatCurve,
    /// Conductivity over temperature, as calculations use it.
    pub conductivity_curve: ConductivityCurve,
}

/// How a source prints a property over temperature.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
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

impl From<Form> for CurveForm {
    fn from(form: Form) -> Self {
        match form {
            Form::Constant => Self::Constant,
            Form::Table => Self::Table,
            Form::MeanValues => Self::MeanValues,
            Form::Formulas => Self::Formulas,
        }
    }
}

/// Specific heat over temperature.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct SpecificHeatCurve {
    /// How the source prints it.
    pub form: CurveForm,
    /// The curve at a few temperatures: evaluated from the row, not printed there.
    pub evaluated: Vec<SpecificHeatPoint>,
}

/// Specific heat at one temperature.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, ToSchema)]
pub struct SpecificHeatPoint {
    /// The temperature.
    pub temperature: Temperature,
    /// The specific heat there.
    pub specific_heat: SpecificHeat,
}

/// Conductivity over temperature.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct ConductivityCurve {
    /// How the source prints it.
    pub form: CurveForm,
    /// The curve at a few temperatures: evaluated from the row, not printed there.
    pub evaluated: Vec<ConductivityPoint>,
}

/// Conductivity at one temperature.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, ToSchema)]
pub struct ConductivityPoint {
    /// The temperature.
    pub temperature: Temperature,
    /// The conductivity there.
    pub conductivity: ThermalConductivity,
}

static CATALOG: LazyLock<Catalog> = LazyLock::new(|| {
    let list = DiscMaterialList { items: items() };
    Catalog::new("disc-materials", &list, &list.items, |item| &item.id)
});

/// List the published disc materials.
///
/// Density, specific heat, conductivity, emissivity and temperature limit as published. A disc's `material` starts from a
/// row by its `id`.
#[utoipa::path(
    get, path = "/disc-materials", tag = "Catalog", operation_id = "disc_materials",
    responses((status = OK, description = "Every disc material.", body = DiscMaterialList)),
)]
pub(super) async fn disc_materials(headers: HeaderMap) -> Response<Body> {
    CATALOG.list(&headers)
}

/// Show a published disc material.
///
/// One row of the list.
#[utoipa::path(
    get, path = "/disc-materials/{id}", tag = "Catalog", operation_id = "disc_material",
    params(("id" = String, Path, description = "Identifier of the disc material.", example = "gray_cast_iron")),
    responses((status = OK, description = "The disc material.", body = DiscMaterialItem)),
)]
pub(super) async fn disc_material(
    Path(id): Path<String>,
    headers: HeaderMap,
) -> Result<Response<Body>, Problem> {
    CATALOG.row(&id, &headers)
}

fn items() -> Vec<DiscMaterialItem> {
    disc_materials::all().iter().map(item).collect()
}

fn item(row: &DiscMaterialRow) -> DiscMaterialItem {
    let material = &row.material;
    let from_memory = material.origin().map_or(&[][..], |origin| &origin.from_memory);
    let specific_heat_curve = specific_heat(row);
    let conductivity_curve = conductivity(row);
    let is_constant = |form| form == CurveForm::Constant;
    let first_heat = specific_heat_curve.evaluated.first().map(|point| point.specific_heat);
    let first_conductivity = conductivity_curve.evaluated.first().map(|point| point.conductivity);
    DiscMaterialItem {
        id: row.id.clone(),
        name: row.name.clone(),
        source: row.source.clone(),
        provenance: row.provenance.into(),
        from_memory: from_memory.to_vec(),
        note: row.note.clone(),
        density: Density::report(material.density(), ReportUnits::Si),
        specific_heat: first_heat.filter(|_| is_constant(specific_heat_curve.form)),
        conductivity: first_conductivity.filter(|_| is_constant(conductivity_curve.form)),
        emissivity: Finite(material.emissivity()),
        emissivity_is_default: material.emissivity_is_default(),
        max_temperature: material.max_temperature().map(temperature),
        specific_heat_curve,
        conductivity_curve,
    }
}

fn specific_heat(row: &DiscMaterialRow) -> SpecificHeatCurve {
    let point = |at| SpecificHeatPoint {
        temperature: temperature(at),
        specific_heat: SpecificHeat::report(row.material.specific_heat().at(at), ReportUnits::Si),
    };
    SpecificHeatCurve {
        form: row.specific_heat_form.into(),
        evaluated: shown_at().map(point).collect(),
    }
}

fn conductivity(row: &DiscMaterialRow) -> ConductivityCurve {
    let curve = row.material.conductivity();
    let point = |at| ConductivityPoint {
        temperature: temperature(at),
        conductivity: ThermalConductivity::report(curve.at(at), ReportUnits::Si),
    };
    ConductivityCurve {
        form: row.conductivity_form.into(),
        evaluated: shown_at().map(point).collect(),
    }
}

fn shown_at() -> impl Iterator<Item = ThermodynamicTemperature> {
    SHOWN_AT.into_iter().map(|celsius| ThermodynamicTemperature::from_si(celsius + ZERO_CELSIUS))
}

fn temperature(temperature: ThermodynamicTemperature) -> Temperature {
    Temperature::report(temperature, ReportUnits::Si)
}
