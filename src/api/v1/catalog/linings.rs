//! `GET /v1/linings`: the published linings.

use std::sync::LazyLock;

use axum::body::Body;
use axum::extract::Path;
use axum::http::{HeaderMap, Response};
use serde::Serialize;
use utoipa::ToSchema;

use super::{Catalog, Provenance};
use crate::api::measure::{
    Density, EnergyFlux, Finite, Kind, Measure, PowerFlux, Pressure, PressureVelocity, ReportUnits,
    SpecificHeat, SpecificWear, Speed, Temperature, ThermalConductivity,
};
use crate::api::problem::Problem;
use crate::api::record::CautionText;
use crate::calc::finding::Caution;
use crate::calc::friction::{Friction, FrictionCase};
use crate::calc::lining::Limit;
use crate::calc::method::Provenance as Found;
use crate::data::linings::{self, LiningRow};

/// The linings that requests may name.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct LiningList {
    /// In the order of their sources.
    pub items: Vec<LiningItem>,
}

/// A published lining. Friction, limits and thermal properties have the names and the form of a request's `lining`, so
/// they can be copied into one. Of a limit printed as a range the lower bound stands here.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct LiningItem {
    /// Identifier.
    pub id: String,
    /// Name for people.
    pub name: String,
    /// Who published it.
    pub source: String,
    /// How it was found.
    pub provenance: Provenance,
    /// Whether it contains asbestos: listed only to assess old equipment.
    pub contains_asbestos: bool,
    /// Whether its values are for running in oil.
    pub runs_in_oil: bool,
    /// What else the source says.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub note: Option<String>,
    /// Cautions to be shown with this row.
    pub cautions: Vec<CautionText>,
    /// Friction coefficients against cast iron or steel.
    pub friction: LiningFriction,
    /// Highest pressure anywhere on the pad.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub max_pressure: Option<Pressure>,
    /// Highest rubbing speed at the pad's outer radius.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub max_rubbing_speed: Option<Speed>,
    /// Highest mean pressure times rubbing speed at the effective radius.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub max_pressure_velocity: Option<PressureVelocity>,
    /// Highest friction power per pad area.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub max_power_flux: Option<PowerFlux>,
    /// Highest friction energy per pad area in one stop.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub max_energy_flux: Option<EnergyFlux>,
    /// Highest temperature that may last.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub max_temperature_continuous: Option<Temperature>,
    /// Highest temperature for a short time.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub max_temperature_peak: Option<Temperature>,
    /// Worn volume per friction energy.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub specific_wear: Option<SpecificWear>,
    /// Thermal conductivity.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub conductivity: Option<ThermalConductivity>,
    /// Density.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub density: Option<Density>,
    /// Specific heat capacity.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub specific_heat: Option<SpecificHeat>,
    /// The values in the words and units of the source.
    pub printed: Vec<PrintedValue>,
}

/// Friction coefficients of a published lining: `low`, `nominal` and `high` of a printed range, with `nominal` in its
/// middle, or `nominal` alone where the source prints one value.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, ToSchema)]
pub struct LiningFriction {
    /// The lower bound.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = f64)]
    pub low: Option<Finite>,
    /// The middle of the range, or the only value.
    #[schema(value_type = f64)]
    pub nominal: Finite,
    /// The upper bound.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = f64)]
    pub high: Option<Finite>,
}

/// A value as the source prints it.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, ToSchema)]
pub struct PrintedValue {
    /// The member that it stands for.
    pub member: &'static str,
    /// Its words; a range is whole here. `SG` is specific gravity.
    pub text: String,
}

static CATALOG: LazyLock<Catalog> = LazyLock::new(|| {
    let list = LiningList { items: items() };
    Catalog::new("linings", &list, &list.items, |item| &item.id)
});

/// List the published linings.
///
/// Friction, limits and thermal properties as published, in SI units and in the words of the source. A request's
/// `lining` starts from a row by its `id`.
#[utoipa::path(
    get, path = "/linings", tag = "Catalog", operation_id = "linings",
    responses((status = OK, description = "Every lining.", body = LiningList)),
)]
pub(super) async fn linings(headers: HeaderMap) -> Response<Body> {
    CATALOG.list(&headers)
}

/// Show a published lining.
///
/// One row of the list.
#[utoipa::path(
    get, path = "/linings/{id}", tag = "Catalog", operation_id = "lining",
    params(("id" = String, Path, description = "Identifier of the lining.", example = "sintered_metal_dry")),
    responses((status = OK, description = "The lining.", body = LiningItem)),
)]
pub(super) async fn lining(
    Path(id): Path<String>,
    headers: HeaderMap,
) -> Result<Response<Body>, Problem> {
    CATALOG.row(&id, &headers)
}

fn items() -> Vec<LiningItem> {
    linings::all().iter().map(item).collect()
}

fn item(row: &LiningRow) -> LiningItem {
    let parts = row.lining.parts();
    LiningItem {
        id: row.id.clone(),
        name: row.name.clone(),
        source: row.source.clone(),
        provenance: row.provenance.into(),
        contains_asbestos: row.contains_asbestos,
        runs_in_oil: row.is_wet,
        note: row.note.clone(),
        cautions: cautions(row),
        friction: friction(parts.friction),
        max_pressure: limit(parts.max_pressure),
        max_rubbing_speed: limit(parts.max_rubbing_speed),
        max_pressure_velocity: limit(parts.max_pressure_velocity),
        max_power_flux: limit(parts.max_power_flux),
        max_energy_flux: limit(parts.max_energy_flux),
        max_temperature_continuous: limit(parts.max_temperature_continuous),
        max_temperature_peak: limit(parts.max_temperature_peak),
        specific_wear: property(parts.specific_wear),
        conductivity: property(parts.conductivity),
        density: property(parts.density),
        specific_heat: property(parts.specific_heat),
        printed: printed(row),
    }
}

fn cautions(row: &LiningRow) -> Vec<CautionText> {
    let asbestos = row.contains_asbestos.then_some(Caution::Asbestos);
    let memory = (row.provenance == Found::Memory).then_some(Caution::FromMemory);
    [Some(Caution::LiningDust), asbestos, memory].into_iter().flatten().map(Into::into).collect()
}

fn friction(friction: Friction) -> LiningFriction {
    let at = |case| Finite(friction.at(case));
    LiningFriction {
        low: friction.is_range().then(|| at(FrictionCase::Low)),
        nominal: at(FrictionCase::Nominal),
        high: friction.is_range().then(|| at(FrictionCase::High)),
    }
}

fn limit<K: Kind>(limit: Option<Limit<K::Quantity>>) -> Option<Measure<K>> {
    property(limit.map(|limit| limit.value))
}

fn property<K: Kind>(property: Option<K::Quantity>) -> Option<Measure<K>> {
    property.map(|value| Measure::report(value, ReportUnits::Si))
}

fn printed(row: &LiningRow) -> Vec<PrintedValue> {
    let value =
        |(member, text): &(&'static str, String)| PrintedValue { member, text: text.clone() };
    row.printed.iter().map(value).collect()
}
