//! Version 1 of the interface: the list of its routes.

pub mod actuation_force;
pub mod block;
pub mod catalog;
pub mod duty_cycle;
pub mod pad_capacity;
pub mod selection;
pub mod spec_check;
pub mod spec_checks;
pub mod stop_energy;
pub mod stopping;

use axum::Extension;
use utoipa_axum::router::OpenApiRouter;
use utoipa_axum::routes;

use super::accept::Offers;
use super::guard::body;
use super::render::{pictured, printed};

/// The routes below `/v1`.
pub(super) fn routes() -> OpenApiRouter {
    let pictures = OpenApiRouter::default()
        .routes(routes!(stopping::stopping))
        .routes(routes!(stop_energy::stop_energy))
        .routes(routes!(duty_cycle::duty_cycle));
    let large = OpenApiRouter::default()
        .routes(routes!(selection::selection))
        .layer(body::at_most(selection::BODY_LIMIT));
    let streams = OpenApiRouter::default()
        .routes(routes!(spec_checks::spec_checks))
        .layer(Extension(Offers(spec_checks::FORMS)))
        .layer(body::endless());
    OpenApiRouter::default()
        .routes(routes!(pad_capacity::pad_capacity))
        .routes(routes!(actuation_force::actuation_force))
        .merge(printed(OpenApiRouter::default().routes(routes!(spec_check::spec_check))))
        .merge(pictured(pictures))
        .merge(large)
        .merge(streams)
        .merge(catalog::routes())
}
