//! `GET /v1/friction-codes`: the friction letters of SAE J866.

use std::sync::LazyLock;

use axum::body::Body;
use axum::extract::Path;
use axum::http::{HeaderMap, Response};
use serde::Serialize;
use utoipa::ToSchema;

use super::{Catalog, Provenance};
use crate::api::measure::Finite;
use crate::api::problem::Problem;
use crate::data::friction_codes::{self, FrictionLetter, FrictionLetters};

/// The letters of a two-letter friction code.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct FrictionCodeList {
    /// From low to high friction.
    pub items: Vec<FrictionCodeItem>,
}

/// A letter of the two-letter identification of SAE J866. The code identifies a lining by its friction in one
/// small-sample test. It sets no requirement and does not predict how a brake performs.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct FrictionCodeItem {
    /// The letter.
    pub id: String,
    /// What it stands for.
    pub name: String,
    /// Who published it.
    pub source: String,
    /// How it was found.
    pub provenance: Provenance,
    /// Its friction is over this coefficient.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = f64)]
    pub low: Option<Finite>,
    /// But not over this one.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, value_type = f64)]
    pub high: Option<Finite>,
    /// Whether a request's `friction_code` may begin with it: only a letter with both bounds gives a friction range.
    pub may_come_first: bool,
}

static CATALOG: LazyLock<Catalog> = LazyLock::new(|| {
    let list = FrictionCodeList { items: items() };
    Catalog::new("friction-codes", &list, &list.items, |item| &item.id)
});

/// List the friction letters.
///
/// The letters of SAE J866. In a request's `friction_code` the first letter gives low, middle and high friction; the
/// second is only echoed. The code identifies a lining; it does not rate it.
#[utoipa::path(
    get, path = "/friction-codes", tag = "Catalog", operation_id = "friction_codes",
    responses((status = OK, description = "Every letter.", body = FrictionCodeList)),
)]
pub(super) async fn friction_codes(headers: HeaderMap) -> Response<Body> {
    CATALOG.list(&headers)
}

/// Show a friction letter.
///
/// One row of the list.
#[utoipa::path(
    get, path = "/friction-codes/{id}", tag = "Catalog", operation_id = "friction_code",
    params(("id" = String, Path, description = "The letter.", example = "F")),
    responses((status = OK, description = "The letter.", body = FrictionCodeItem)),
)]
pub(super) async fn friction_code(
    Path(id): Path<String>,
    headers: HeaderMap,
) -> Result<Response<Body>, Problem> {
    CATALOG.row(&id, &headers)
}

fn items() -> Vec<FrictionCodeItem> {
    let table = friction_codes::table();
    table.letters.iter().map(|letter| item(letter, table)).collect()
}

fn item(letter: &FrictionLetter, table: &FrictionLetters) -> FrictionCodeItem {
    FrictionCodeItem {
        id: letter.letter.to_string(),
        name: name(letter),
        source: table.source.clone(),
        provenance: table.found().into(),
        low: letter.low.map(Finite),
        high: letter.high.map(Finite),
        may_come_first: letter.low.is_some() && letter.high.is_some(),
    }
}

fn name(letter: &FrictionLetter) -> String {
    match (letter.low, letter.high) {
        (Some(low), Some(high)) => format!("Friction over {low}, but not over {high}"),
        (Some(low), None) => format!("Friction over {low}"),
        (None, Some(high)) => format!("Friction not over {high}"),
        (None, None) => "Unclassified friction".to_owned(),
    }
}
