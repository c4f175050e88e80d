//! `GET /v1/methods`: the equations behind the answers.

use std::sync::LazyLock;

use axum::body::Body;
use axum::extract::Path;
use axum::http::{HeaderMap, Response};
use serde::Serialize;
use utoipa::ToSchema;

use super::{Catalog, Provenance};
use crate::api::problem::Problem;
use crate::calc::method::{Method, Symbol};
use crate::calc::method_index;

/// The methods that an answer may name in `record.methods`.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct MethodList {
    /// In the order in which a calculation meets them.
    pub items: Vec<MethodItem>,
}

/// The data sheet of an equation or procedure.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct MethodItem {
    /// Identifier, as in `record.methods`.
    pub id: String,
    /// What it finds.
    pub name: &'static str,
    /// Who published it.
    pub source: &'static str,
    /// How it was found.
    pub provenance: Provenance,
    /// The equation, in plain characters.
    pub equation: &'static str,
    /// Its symbols.
    pub symbols: Vec<MethodSymbol>,
    /// Where it holds.
    pub valid: &'static str,
    /// How exact it is.
    pub accuracy: &'static str,
    /// A worked value, by hand or from the source.
    pub worked: &'static str,
}

/// A symbol of an equation.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
pub struct MethodSymbol {
    /// As in the equation.
    pub symbol: &'static str,
    /// What it stands for.
    pub meaning: &'static str,
    /// Coherent SI unit, `1` for a ratio.
    pub unit: &'static str,
}

static CATALOG: LazyLock<Catalog> = LazyLock::new(|| {
    let list = MethodList { items: items() };
    Catalog::new("methods", &list, &list.items, |item| &item.id)
});

/// List the methods.
///
/// The equations behind the answers, each with its symbols, where it holds, how exact it is, its published source and
/// a worked value.
#[utoipa::path(
    get, path = "/methods", tag = "Catalog", operation_id = "methods",
    responses((status = OK, description = "Every method.", body = MethodList)),
)]
pub(super) async fn methods(headers: HeaderMap) -> Response<Body> {
    CATALOG.list(&headers)
}

/// Show a method.
///
/// One row of the list: what an entry of `record.methods` means.
#[utoipa::path(
    get, path = "/methods/{id}", tag = "Catalog", operation_id = "method",
    params(("id" = String, Path, description = "Identifier of the method, as in `record.methods`.", example = "pad.annular_sector.uniform_wear")),
    responses((status = OK, description = "The method.", body = MethodItem)),
)]
pub(super) async fn method(
    Path(id): Path<String>,
    headers: HeaderMap,
) -> Result<Response<Body>, Problem> {
    CATALOG.row(&id, &headers)
}

fn items() -> Vec<MethodItem> {
    method_index::all().map(item).collect()
}

fn item(method: &Method) -> MethodItem {
    MethodItem {
        id: method.id.to_owned(),
        name: method.name,
        source: method.source,
        provenance: method.provenance.into(),
        equation: method.equation,
        symbols: method.symbols.iter().map(symbol).collect(),
        valid: method.valid,
        accuracy: method.accuracy,
        worked: method.worked,
    }
}

const fn symbol(symbol: &Symbol) -> MethodSymbol {
    MethodSymbol { symbol: symbol.symbol, meaning: symbol.meaning, unit: symbol.unit }
}
