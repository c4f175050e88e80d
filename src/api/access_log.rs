//! One line per request, written when its answer is ready. Bodies and addresses are never logged.

use std::time::Instant;

use axum::body::Body;
use axum::extract::{MatchedPath, Request};
use axum::http::{HeaderMap, Method, Response, StatusCode};
use axum::middleware::Next;

use super::layers::TRACEPARENT;
use super::request_id::RequestId;

/// Measures the request and logs it, also if the client leaves before the answer.
pub(super) async fn write(request: Request, next: Next) -> Response<Body> {
    let mut line = Line::new(&request);
    let response = next.run(request).await;
    line.status = Some(response.status());
    response
}

/// A line in the making; dropping it writes it.
struct Line {
    start: Instant,
    method: Method,
    /// The pattern, not the address: it has few values and no data of the client.
    route: Option<MatchedPath>,
    request_id: Option<RequestId>,
    trace_id: Option<String>,
    status: Option<StatusCode>,
}

impl Line {
    fn new(request: &Request) -> Self {
        Self {
            start: Instant::now(),
            method: request.method().clone(),
            route: request.extensions().get().cloned(),
            request_id: request.extensions().get().cloned(),
            trace_id: trace_id(request.headers()).map(str::to_owned),
            status: None,
        }
    }
}

impl Drop for Line {
    fn drop(&mut self) {
        let method = self.method.as_str();
        let route = self.route.as_ref().map_or("-", MatchedPath::as_str);
        let request_id = self.request_id.as_ref().map_or("-", RequestId::as_str);
        let trace_id = self.trace_id.as_deref();
        let duration_ms = (self.start.elapsed().as_secs_f64() * 1e6).round() / 1e3;
        let Some(status) = self.status else {
            tracing::info!(method, route, duration_ms, request_id, trace_id, "client left");
            return;
        };
        let status = status.as_u16();
        tracing::info!(method, route, status, duration_ms, request_id, trace_id, "answered");
    }
}

/// The trace id of a valid `traceparent` (W3C Trace Context, 3.2): `00-<32 hex>-<16 hex>-<2 hex>`, lower case.
fn trace_id(headers: &HeaderMap) -> Option<&str> {
    let text = headers.get(TRACEPARENT)?.to_str().ok()?;
    let mut parts = text.split('-');
    let [version, trace, parent, flags] = [(); 4].map(|()| parts.next().unwrap_or_default());
    let later_version = version != "00";
    let well_formed = is_hex(version, 2)
        && version != "ff"
        && is_hex(trace, 32)
        && is_hex(parent, 16)
        && is_hex(flags, 2)
        // Only a version after 00 may append more.
        && (later_version || parts.next().is_none());
    let not_zero = |id: &str| id.bytes().any(|digit| digit != b'0');
    (well_formed && not_zero(trace) && not_zero(parent)).then_some(trace)
}

fn is_hex(text: &str, length: usize) -> bool {
    text.len() == length && text.bytes().all(|byte| matches!(byte, b'0'..=b'9' | b'a'..=b'f'))
}
