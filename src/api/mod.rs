//! HTTP and JSON around the calculations; no formulas.

pub mod accept;
mod access_log;
pub mod background;
pub mod count;
mod docs;
pub mod error_code;
pub mod etag;
mod examples;
pub mod extract;
pub mod finite;
pub mod guard;
pub mod health;
pub mod heavy;
pub mod layers;
pub mod measure;
pub mod metrics;
pub mod openapi;
pub mod openapi_30;
mod openapi_guard;
pub mod parse;
pub mod pointer;
pub mod problem;
mod problem_kind;
pub mod record;
pub mod render;
pub mod request_id;
pub mod shape;
pub mod sheet;
pub mod tagged;
pub mod text;
mod trace;
pub mod v1;

use axum::{Extension, Router};
use utoipa_axum::router::OpenApiRouter;
use utoipa_axum::routes;

use health::Readiness;
use layers::LayerSettings;

/// The whole service: described routes, pages, and the layers around them.
pub fn router(settings: &LayerSettings, readiness: Readiness) -> Router {
    let described = described_routes().split_for_parts().0;
    layers::wrap(described.merge(docs::routes()).layer(Extension(readiness)), settings)
}

/// Every route that the description lists: registering a route is documenting it.
fn described_routes() -> OpenApiRouter {
    OpenApiRouter::with_openapi(openapi::base())
        .nest("/v1", v1::routes())
        .routes(routes!(health::live))
        .routes(routes!(health::ready))
        .routes(routes!(docs::problem_kind))
}
