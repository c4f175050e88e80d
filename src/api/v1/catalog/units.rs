//! `GET /v1/units`: the unit table.

use std::sync::LazyLock;

use axum::body::Body;
use axum::extract::Path;
use axum::http::{HeaderMap, Response};
use serde::Serialize;
use utoipa::ToSchema;

use super::{Catalog, Provenance};
use crate::api::problem::Problem;
use crate::data::magnitude;
use crate::data::units::{self, Scale, Unit};

const SI_SOURCE: &str = "BIPM, The International System of Units (SI Brochure), 9th edition, 2019";
const US_SOURCE: &str = "International yard and pound (1959): 0.9144 m, 0.45359237 kg; standard gravity 9.80665 m/s2 (CGPM 1901); International Table Btu 1055.05585262 J";
const CODE_SOURCE: &str = "codes: UCUM 2.2 (2024); UN/ECE Recommendation 20, revision 17 (2021)";

/// The units that requests may use.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct UnitList {
    /// By dimension; the first of each system is what answers use, but a way travelled is answered in m or ft.
    pub items: Vec<UnitItem>,
}

/// A unit of one dimension.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct UnitItem {
    /// Dimension and name for generated code, joined by a dot.
    pub id: String,
    /// The name in words.
    pub name: &'static str,
    /// What it measures.
    pub dimension: &'static str,
    /// The plain symbol: what descriptions list and answers use.
    pub symbol: &'static str,
    /// The UCUM code (case sensitive), accepted instead of the symbol.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub ucum: Option<&'static str>,
    /// The UN/ECE Recommendation 20 common code, accepted instead of the symbol.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub recommendation_20: Option<&'static str>,
    /// The systems it belongs to: `si`, `us`.
    pub systems: Vec<&'static str>,
    /// The coherent SI unit of the dimension.
    pub si_unit: &'static str,
    /// Coherent SI units per unit.
    pub factor: f64,
    /// The factor as an expression of exact constants.
    pub exact_factor: &'static str,
    /// What is added to the value before scaling.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub offset: Option<f64>,
    /// How a value becomes a number of coherent SI units.
    pub to_si: &'static str,
    /// Where the factor and the codes come from.
    pub source: String,
    /// Whether the codes were read in the standards or entered from memory.
    pub provenance: Provenance,
}

static CATALOG: LazyLock<Catalog> = LazyLock::new(|| {
    let list = UnitList { items: items() };
    Catalog::new("units", &list, &list.items, |item| &item.id)
});

/// List the units.
///
/// Every unit that a quantity may be given in, by dimension, with the UCUM and UN/ECE Recommendation 20 codes that are
/// accepted in place of the symbol and the exact factor to SI.
#[utoipa::path(
    get, path = "/units", tag = "Catalog", operation_id = "units",
    responses((status = OK, description = "Every unit.", body = UnitList)),
)]
pub(super) async fn units(headers: HeaderMap) -> Response<Body> {
    CATALOG.list(&headers)
}

/// Show a unit.
///
/// One row of the list.
#[utoipa::path(
    get, path = "/units/{id}", tag = "Catalog", operation_id = "unit",
    params(("id" = String, Path, description = "Identifier of the unit.", example = "length.inch")),
    responses((status = OK, description = "The unit.", body = UnitItem)),
)]
pub(super) async fn unit(
    Path(id): Path<String>,
    headers: HeaderMap,
) -> Result<Response<Body>, Problem> {
    CATALOG.row(&id, &headers)
}

fn items() -> Vec<UnitItem> {
    units::all().iter().map(item).collect()
}

fn item(unit: &Unit) -> UnitItem {
    let systems = [("si", unit.is_si), ("us", unit.is_us)];
    let factor_source = if unit.is_si { SI_SOURCE } else { US_SOURCE };
    UnitItem {
        id: format!("{}.{}", unit.dimension.id(), unit.variant.to_lowercase()),
        name: unit.name,
        dimension: unit.dimension.id(),
        symbol: unit.symbol,
        ucum: unit.ucum,
        recommendation_20: unit.recommendation_20,
        systems: systems.into_iter().filter_map(|(id, is_in)| is_in.then_some(id)).collect(),
        si_unit: magnitude::of(unit.dimension).unit,
        factor: unit.factor(),
        exact_factor: unit.exact,
        offset: unit.offset(),
        to_si: to_si(unit.scale),
        source: format!("{factor_source}; {CODE_SOURCE}"),
        provenance: unit.codes.into(),
    }
}

const fn to_si(scale: Scale) -> &'static str {
    match scale {
        Scale::Linear { .. } => "value * factor",
        Scale::Shifted { .. } => "(value + offset) * factor",
        Scale::RiseOverRun { .. } => "atan(value * factor)",
    }
}
