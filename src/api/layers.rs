//! What surrounds every route, in one place.

use std::any::Any;
use std::num::NonZeroU32;
use std::sync::Arc;
use std::time::Duration;

use axum::Router;
use axum::body::Body;
use axum::extract::DefaultBodyLimit;
use axum::http::header::{CONTENT_ENCODING, CONTENT_LENGTH, CONTENT_TYPE};
use axum::http::{HeaderValue, Response, StatusCode};
use axum::middleware::{from_fn, from_fn_with_state, map_response};
use axum::response::IntoResponse;
use tower_http::catch_panic::CatchPanicLayer;
use tower_http::timeout::{RequestBodyTimeoutLayer, TimeoutLayer};

use super::guard::admission::{Gate, admit};
use super::guard::body::refuse_compressed;
use super::guard::browser::{allow_origins, protect};
use super::guard::keys::KeyRing;
use super::problem::{PROBLEM_JSON, Problem, ProblemKind};
use super::{access_log, metrics, request_id};

/// The limits within which requests are served.
#[derive(Debug, Clone)]
pub struct LayerSettings {
    /// Largest body of a route that sets no limit of its own.
    pub max_body_bytes: usize,
    /// Longest time from the head of a request to the head of its answer.
    pub request_timeout: Duration,
    /// Most requests in progress at once.
    pub max_concurrency: usize,
    /// Most requests of one client in a minute; none if it may send as many as it likes.
    pub rate_limit: Option<NonZeroU32>,
    /// The keys, one of which every request needs; none if the service is open.
    pub keys: Option<KeyRing>,
    /// Origins whose pages may call the service.
    pub allowed_origins: Vec<HeaderValue>,
}

impl Default for LayerSettings {
    /// Open to whoever reaches it, within the limits that the program has by default.
    fn default() -> Self {
        Self {
            max_body_bytes: 1024 * 1024,
            request_timeout: Duration::from_secs(30),
            max_concurrency: 1024,
            rate_limit: None,
            keys: None,
            allowed_origins: Vec::new(),
        }
    }
}

/// How much later than the request the body runs out of time, so that it is the request that is answered 408.
const MARGIN: Duration = Duration::from_secs(1);

/// Surrounds the routes; the first layer here is the innermost.
pub fn wrap(routes: Router, settings: &LayerSettings) -> Router {
    let gate = Gate::new(settings.keys.clone(), settings.rate_limit, settings.max_concurrency);
    let time = settings.request_timeout;
    let routes = routes
        // A route may set a larger limit inside this one.
        .layer(DefaultBodyLimit::max(settings.max_body_bytes))
        // The limit above counts what arrives, so nothing that unfolds later may be let in.
        .layer(from_fn(refuse_compressed))
        // A body that is read while the answer is sent already may last, but not pause.
        .layer(RequestBodyTimeoutLayer::new(time + MARGIN))
        // Reading any other body is part of the handler's time: a slow body is bounded, too.
        .layer(TimeoutLayer::with_status_code(StatusCode::REQUEST_TIMEOUT, time))
        .layer(from_fn_with_state(Arc::new(gate), admit))
        // Inside what follows, so that a failed request is still logged and readable to a browser.
        .layer(CatchPanicLayer::custom(after_panic));
    // Outside the gate, so that a page can read why it was turned away.
    allow_origins(routes, &settings.allowed_origins)
        // After everything that may answer by itself: whatever failed, and however, becomes a problem.
        .layer(map_response(as_problem))
        // Sees the final status; the request id is known here.
        .layer(from_fn(access_log::write))
        // Completes problems with their instance.
        .layer(from_fn(request_id::identify))
        .layer(from_fn(protect))
        // Catches a defect in the layers themselves.
        .layer(CatchPanicLayer::custom(after_panic))
}

/// Turns a failure that is no problem document into one; other headers, such as `Allow`, are kept.
async fn as_problem(response: Response<Body>) -> Response<Body> {
    let status = response.status();
    let content_type = response.headers().get(CONTENT_TYPE);
    let is_problem = content_type.is_some_and(|value| value.as_bytes() == PROBLEM_JSON.as_bytes());
    if is_problem || !(status.is_client_error() || status.is_server_error()) {
        return response;
    }
    let mut kept = response.into_parts().0.headers;
    for body_header in [CONTENT_TYPE, CONTENT_LENGTH, CONTENT_ENCODING] {
        kept.remove(body_header);
    }
    let mut response = Problem::of_status(status).into_response();
    response.headers_mut().extend(kept);
    response
}

/// Answers for a handler that panicked. What it said may hold a request's data and goes nowhere.
fn after_panic(_: Box<dyn Any + Send + 'static>) -> Response<Body> {
    metrics::count_panic();
    tracing::error!("a request handler panicked");
    Problem::of_kind(ProblemKind::Internal).into_response()
}
