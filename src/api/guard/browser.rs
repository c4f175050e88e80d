//! What browsers must be told: which pages may call, and what an answer may never be used for.

use std::time::Duration;

use axum::Router;
use axum::body::Body;
use axum::extract::Request;
use axum::http::header::{
    ACCEPT, ALLOW, AUTHORIZATION, CACHE_CONTROL, CONTENT_SECURITY_POLICY, CONTENT_TYPE, ETAG,
    IF_NONE_MATCH, LINK, REFERRER_POLICY, RETRY_AFTER, WWW_AUTHENTICATE, X_CONTENT_TYPE_OPTIONS,
};
use axum::http::{HeaderValue, Method, Response};
use axum::middleware::Next;
use tower_http::cors::CorsLayer;

use super::rate::{RATE_LIMIT, RATE_LIMIT_POLICY};
use crate::api::request_id::REQUEST_ID;
use crate::api::trace::TRACEPARENT;

/// Scripts and styles of the documentation page come from this service alone; its styles, and those of charts, are
/// partly inline.
const CONTENT_POLICY: HeaderValue = HeaderValue::from_static(
    "default-src 'self'; script-src 'self'; style-src 'self' 'unsafe-inline'; img-src 'self' data:; \
     connect-src 'self'; object-src 'none'; base-uri 'none'; form-action 'none'; frame-ancestors 'none'",
);

/// Browsers need not ask again for two hours; a JSON `POST` from another origin always asks first.
const PREFLIGHT_LIFETIME: Duration = Duration::from_hours(2);

/// Answers preflight requests and marks answers for the origins listed. Without any, browsers keep others out.
pub(in crate::api) fn allow_origins(routes: Router, origins: &[HeaderValue]) -> Router {
    if origins.is_empty() {
        return routes;
    }
    let exposed = [
        ALLOW,
        ETAG,
        LINK,
        RETRY_AFTER,
        WWW_AUTHENTICATE,
        RATE_LIMIT,
        RATE_LIMIT_POLICY,
        REQUEST_ID,
        TRACEPARENT,
    ];
    let sent = [ACCEPT, AUTHORIZATION, CONTENT_TYPE, IF_NONE_MATCH, TRACEPARENT, REQUEST_ID];
    let cors = CorsLayer::new()
        .allow_origin(origins.to_vec())
        .allow_methods([Method::GET, Method::HEAD, Method::POST])
        .allow_headers(sent)
        .expose_headers(exposed)
        .max_age(PREFLIGHT_LIFETIME);
    routes.layer(cors)
}

/// Adds the headers that tell browsers and caches what they must not do.
pub(in crate::api) async fn protect(request: Request, next: Next) -> Response<Body> {
    let is_post = request.method() == Method::POST;
    let mut response = next.run(request).await;
    let headers = response.headers_mut();
    headers.insert(X_CONTENT_TYPE_OPTIONS, HeaderValue::from_static("nosniff"));
    headers.insert(REFERRER_POLICY, HeaderValue::from_static("no-referrer"));
    // A page that knows what it needs sets its own, which is stricter.
    headers.entry(CONTENT_SECURITY_POLICY).or_insert(CONTENT_POLICY);
    // The answer to a POST depends on its body, which is no cache's key.
    if is_post {
        headers.insert(CACHE_CONTROL, HeaderValue::from_static("no-store"));
    }
    response
}
