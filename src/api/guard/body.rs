//! What a body may be: plain, and no larger than its route takes.

use axum::body::Body;
use axum::extract::{DefaultBodyLimit, Request};
use axum::http::header::{ACCEPT_ENCODING, CONTENT_ENCODING};
use axum::http::{HeaderValue, Response};
use axum::middleware::Next;
use axum::response::IntoResponse;

use crate::api::problem::{Problem, ProblemKind};

/// The largest body of a route that is not content with the general limit; a layer of that route.
pub fn at_most(bytes: usize) -> DefaultBodyLimit {
    DefaultBodyLimit::max(bytes)
}

/// For a route that reads its body piece by piece and bounds each piece; a layer of that route.
///
/// Its body may last as long as it does not pause for longer than the time limit of requests.
pub fn endless() -> DefaultBodyLimit {
    DefaultBodyLimit::disable()
}

/// Refuses encoded bodies: 415 with `Accept-Encoding`, as RFC 9110 (15.5.16) asks.
pub(in crate::api) async fn refuse_compressed(request: Request, next: Next) -> Response<Body> {
    let plain = |value: &HeaderValue| value.as_bytes().eq_ignore_ascii_case(b"identity");
    if request.headers().get_all(CONTENT_ENCODING).iter().all(plain) {
        return next.run(request).await;
    }
    Problem::new(ProblemKind::UnsupportedMediaType, "the body must not be compressed")
        .with_header(ACCEPT_ENCODING, HeaderValue::from_static("identity"))
        .into_response()
}
