//! The description for programs, the pages for people.

use std::sync::{Arc, LazyLock};

use axum::body::{Body, Bytes};
use axum::extract::Path;
use axum::http::header::{CONTENT_ENCODING, CONTENT_TYPE, LOCATION};
use axum::http::{HeaderMap, HeaderValue, Response, StatusCode};
use axum::response::IntoResponse;
use axum::routing::{Router, get};
use serde::Serialize;
use utoipa::ToSchema;
use utoipa_swagger_ui::Config;

use super::etag::Document;
use super::extract::Answer;
use super::openapi;
use super::problem::{Problem, ProblemKind};

static DESCRIPTION: LazyLock<Document> =
    LazyLock::new(|| Document::json(openapi::openapi_json().as_bytes()));

static DESCRIPTION_30: LazyLock<Document> =
    LazyLock::new(|| Document::json(openapi::openapi_30_json().as_bytes()));

/// The page finds the description relative to itself, so that a path prefix of a proxy does no harm.
static PAGE: LazyLock<Arc<Config<'static>>> = LazyLock::new(|| {
    let config = Config::from("../openapi.json")
        .validator_url("none")
        .use_base_layout()
        .try_it_out_enabled(true);
    Arc::new(config)
});

/// The routes that are not part of the described interface.
pub(super) fn routes() -> Router {
    let description = |headers: HeaderMap| async move { DESCRIPTION.respond(&headers) };
    let description_30 = |headers: HeaderMap| async move { DESCRIPTION_30.respond(&headers) };
    Router::new()
        .route("/openapi.json", get(description))
        .route("/openapi-3.0.json", get(description_30))
        .route("/", get(|| async { redirect(HeaderValue::from_static("docs/")) }))
        .route("/docs", get(|| async { redirect(HeaderValue::from_static("docs/")) }))
        .route("/docs/", get(|| async { page("index.html") }))
        .route("/docs/{*file}", get(|Path(file): Path<String>| async move { page(&file) }))
}

/// A relative redirection: it survives a proxy that adds a prefix.
fn redirect(to: HeaderValue) -> Response<Body> {
    (StatusCode::TEMPORARY_REDIRECT, [(LOCATION, to)]).into_response()
}

/// A file of the documentation page; all are part of the program.
fn page(file: &str) -> Response<Body> {
    match utoipa_swagger_ui::serve(file, Arc::clone(&PAGE)) {
        Ok(Some(found)) => {
            let bytes = Bytes::from(found.bytes.into_owned());
            let mut response = ([(CONTENT_TYPE, found.content_type)], bytes).into_response();
            if found.gzpipped {
                let gzip = HeaderValue::from_static("gzip");
                response.headers_mut().insert(CONTENT_ENCODING, gzip);
            }
            response
        }
        Ok(None) => Problem::of_status(StatusCode::NOT_FOUND).into_response(),
        Err(error) => {
            tracing::error!(%error, "a file of the documentation page cannot be made");
            Problem::of_status(StatusCode::INTERNAL_SERVER_ERROR).into_response()
        }
    }
}

/// What a kind of problem means: the page behind the `type` of a problem.
#[derive(Debug, Clone, Serialize, ToSchema)]
pub(super) struct ProblemPage {
    /// The `type` of such problems.
    #[serde(rename = "type")]
    #[schema(value_type = String, format = "uri-reference")]
    type_reference: &'static str,
    /// The kind in a few words.
    #[schema(value_type = String)]
    title: &'static str,
    /// The HTTP status it is sent with.
    status: u16,
    /// What it means and what the client can do.
    #[schema(value_type = String)]
    meaning: &'static str,
}

/// Explain a kind of problem.
///
/// The `type` of every failure's answer is the address of its explanation here.
#[utoipa::path(
    get, path = "/problems/{kind}", tag = "Service", operation_id = "problem_kind",
    params((
        "kind" = String, Path, example = "invalid_request",
        description = "The last segment of a problem's `type`, such as `invalid_request`.",
    )),
    responses((status = OK, description = "What such problems mean.", body = ProblemPage)),
)]
pub(super) async fn problem_kind(Path(kind): Path<String>) -> Result<Answer<ProblemPage>, Problem> {
    let found = ProblemKind::ALL.iter().find(|known| known.code() == kind);
    let Some(kind) = found else {
        let known: Vec<&str> = ProblemKind::ALL.iter().map(|kind| kind.code()).collect();
        let detail = format!("the kinds of problems are {}", known.join(", "));
        return Err(Problem::new(ProblemKind::NotFound, detail));
    };
    Ok(Answer(ProblemPage {
        type_reference: kind.type_reference(),
        title: kind.title(),
        status: kind.status().as_u16(),
        meaning: kind.meaning(),
    }))
}
