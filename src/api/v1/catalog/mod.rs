//! The catalog: the published data and methods that calculations start from, each row with its source.
//!
//! The rows change only with the program, so every answer is made once and carries a strong entity tag.

pub mod disc_materials;
pub mod friction_codes;
pub mod linings;
pub mod methods;
pub mod procedures;
pub mod rules;
pub mod units;

use axum::body::Body;
use axum::http::{HeaderMap, Response};
use serde::Serialize;
use utoipa::ToSchema;
use utoipa_axum::router::OpenApiRouter;
use utoipa_axum::routes;

use crate::api::etag::Document;
use crate::api::finite::to_json;
use crate::api::problem::{Problem, ProblemKind};
use crate::calc::method::Provenance as Found;
use crate::data::nearest::nearest;

/// The routes of the catalog.
pub(super) fn routes() -> OpenApiRouter {
    OpenApiRouter::default()
        .routes(routes!(linings::linings))
        .routes(routes!(linings::lining))
        .routes(routes!(friction_codes::friction_codes))
        .routes(routes!(friction_codes::friction_code))
        .routes(routes!(disc_materials::disc_materials))
        .routes(routes!(disc_materials::disc_material))
        .routes(routes!(procedures::procedures))
        .routes(routes!(procedures::procedure))
        .routes(routes!(rules::rules))
        .routes(routes!(rules::rule))
        .routes(routes!(units::units))
        .routes(routes!(units::unit))
        .routes(routes!(methods::methods))
        .routes(routes!(methods::method))
}

/// How a row was found.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, ToSchema)]
#[serde(rename_all = "snake_case")]
pub enum Provenance {
    /// Read in a copy of the source.
    Seen,
    /// Entered from memory of the named source: check it there before relying on it.
    Memory,
}

impl From<Found> for Provenance {
    fn from(found: Found) -> Self {
        match found {
            Found::Seen => Self::Seen,
            Found::Memory => Self::Memory,
        }
    }
}

/// A list of the catalog and each of its rows, written once.
struct Catalog {
    path: &'static str,
    list: Document,
    rows: Vec<(String, Document)>,
}

impl Catalog {
    /// The documents of a list with the path `path` below `/v1`.
    fn new<L: Serialize, R: Serialize>(
        path: &'static str,
        list: &L,
        rows: &[R],
        id: fn(&R) -> &str,
    ) -> Self {
        let row = |row: &R| (id(row).to_owned(), document(row));
        Self { path, list: document(list), rows: rows.iter().map(row).collect() }
    }

    /// The whole list, or 304 if the client has it.
    fn list(&self, request: &HeaderMap) -> Response<Body> {
        self.list.respond(request)
    }

    /// One row, or 304 if the client has it.
    ///
    /// # Errors
    /// 404 if no row has this identifier, with the one that was most likely meant.
    fn row(&self, id: &str, request: &HeaderMap) -> Result<Response<Body>, Problem> {
        let row = self.rows.iter().find(|(known, _)| known == id);
        row.map(|(_, document)| document.respond(request)).ok_or_else(|| self.unknown(id))
    }

    fn unknown(&self, id: &str) -> Problem {
        let meant = nearest(id, self.rows.iter().map(|(known, _)| known.as_str()));
        let hint = meant.map_or(String::new(), |meant| format!("; did you mean `{meant}`?"));
        let detail = format!("GET /v1/{} lists the rows, and none has this id{hint}", self.path);
        Problem::new(ProblemKind::NotFound, detail)
    }
}

/// The table's numbers are finite, which a test proves, so writing them cannot fail.
fn document(value: &impl Serialize) -> Document {
    Document::json(to_json(value).unwrap_or_default())
}
