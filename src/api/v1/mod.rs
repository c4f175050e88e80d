//! Version 1 of the interface: the list of its routes.

use utoipa_axum::router::OpenApiRouter;

/// The routes below `/v1`.
pub(super) fn routes() -> OpenApiRouter {
    OpenApiRouter::default()
}
