//! What surrounds every route, in one place.

use std::any::Any;
use std::sync::Arc;
use std::time::Duration;

use axum::Router;
use axum::body::Body;
use axum::extract::{DefaultBodyLimit, Request, State};
use axum::http::header::{
    ACCEPT, ACCEPT_ENCODING, ALLOW, CACHE_CONTROL, CONTENT_ENCODING, CONTENT_LENGTH,
    CONTENT_SECURITY_POLICY, CONTENT_TYPE, ETAG, IF_NONE_MATCH, LINK, REFERRER_POLICY, RETRY_AFTER,
    X_CONTENT_TYPE_OPTIONS,
};
use axum::http::{HeaderName, HeaderValue, Method, Response, StatusCode};
use axum::middleware::{Next, from_fn, from_fn_with_state, map_response};
use axum::response::IntoResponse;
use tokio::sync::Semaphore;
use tower_http::catch_panic::CatchPanicLayer;
use tower_http::cors::CorsLayer;
use tower_http::timeout::TimeoutLayer;

use super::access_log;
use super::problem::{PROBLEM_JSON, Problem, ProblemKind};
use super::request_id::{self, REQUEST_ID};

/// Scripts and styles of the documentation page come from this service alone; its styles are partly inline.
const CONTENT_POLICY: HeaderValue = HeaderValue::from_static(
    "default-src 'self'; script-src 'self'; style-src 'self' 'unsafe-inline'; img-src 'self' data:; \
     connect-src 'self'; object-src 'none'; base-uri 'none'; form-action 'none'; frame-ancestors 'self'",
);

/// Browsers need not ask again for two hours; a JSON `POST` from another origin always asks first.
const PREFLIGHT_LIFETIME: Duration = Duration::from_hours(2);

/// The limits within which requests are served.
#[derive(Debug, Clone)]
pub struct LayerSettings {
    /// Largest body of a route that sets no limit of its own.
    pub max_body_bytes: usize,
    /// Longest time from the head of a request to the head of its answer.
    pub request_timeout: Duration,
    /// Most requests in progress at once.
    pub max_concurrency: usize,
    /// Origins whose pages may call the service.
    pub allowed_origins: Vec<HeaderValue>,
}

/// Surrounds the routes; the first layer here is the innermost.
pub fn wrap(routes: Router, settings: &LayerSettings) -> Router {
    let places = Arc::new(Semaphore::new(settings.max_concurrency));
    let time_limit =
        TimeoutLayer::with_status_code(StatusCode::REQUEST_TIMEOUT, settings.request_timeout);
    let routes = routes
        // A route may set a larger limit inside this one.
        .layer(DefaultBodyLimit::max(settings.max_body_bytes))
        // The limit above counts what arrives, so nothing that unfolds later may be let in.
        .layer(from_fn(refuse_compressed))
        // Reading the body is part of the handler's time: a slow body is bounded, too.
        .layer(time_limit)
        // A request that waits for a place helps nobody; it is told to come again.
        .layer(from_fn_with_state(places, shed))
        // Inside what follows, so that a failed request is still logged and readable to a browser.
        .layer(CatchPanicLayer::custom(after_panic));
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

/// Refuses encoded bodies: 415 with `Accept-Encoding`, as RFC 9110 (15.5.16) asks.
async fn refuse_compressed(request: Request, next: Next) -> Response<Body> {
    let plain = |value: &HeaderValue| value.as_bytes().eq_ignore_ascii_case(b"identity");
    if request.headers().get_all(CONTENT_ENCODING).iter().all(plain) {
        return next.run(request).await;
    }
    Problem::new(ProblemKind::UnsupportedMediaType, "the body must not be compressed")
        .with_header(ACCEPT_ENCODING, HeaderValue::from_static("identity"))
        .into_response()
}

/// Lets a request in if there is a place. Health is always answered: a busy replica is not a dead one.
async fn shed(
    State(places): State<Arc<Semaphore>>,
    request: Request,
    next: Next,
) -> Response<Body> {
    if request.uri().path().starts_with("/health/") {
        return next.run(request).await;
    }
    if let Ok(_place) = places.try_acquire() {
        next.run(request).await
    } else {
        Problem::of_kind(ProblemKind::Overloaded).into_response()
    }
}

/// Answers preflight requests and marks answers for the origins listed. Without any, browsers keep others out.
fn allow_origins(routes: Router, origins: &[HeaderValue]) -> Router {
    if origins.is_empty() {
        return routes;
    }
    let exposed = [ALLOW, ETAG, LINK, RETRY_AFTER, REQUEST_ID];
    let sent = [ACCEPT, CONTENT_TYPE, IF_NONE_MATCH, TRACEPARENT, REQUEST_ID];
    let cors = CorsLayer::new()
        .allow_origin(origins.to_vec())
        .allow_methods([Method::GET, Method::HEAD, Method::POST])
        .allow_headers(sent)
        .expose_headers(exposed)
        .max_age(PREFLIGHT_LIFETIME);
    routes.layer(cors)
}

/// The header by which W3C Trace Context names a trace.
pub(super) const TRACEPARENT: HeaderName = HeaderName::from_static("traceparent");

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

/// Adds the headers that tell browsers and caches what they must not do.
async fn protect(request: Request, next: Next) -> Response<Body> {
    let is_post = request.method() == Method::POST;
    let mut response = next.run(request).await;
    let headers = response.headers_mut();
    headers.insert(X_CONTENT_TYPE_OPTIONS, HeaderValue::from_static("nosniff"));
    headers.insert(REFERRER_POLICY, HeaderValue::from_static("no-referrer"));
    headers.insert(CONTENT_SECURITY_POLICY, CONTENT_POLICY);
    // The answer to a POST depends on its body, which is no cache's key.
    if is_post {
        headers.insert(CACHE_CONTROL, HeaderValue::from_static("no-store"));
    }
    response
}

/// Answers for a handler that panicked. What it said may hold a request's data and goes nowhere.
fn after_panic(_: Box<dyn Any + Send + 'static>) -> Response<Body> {
    tracing::error!("a request handler panicked");
    Problem::of_kind(ProblemKind::Internal).into_response()
}
