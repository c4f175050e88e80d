//! One line and one count per request, when its answer is ready. Bodies, addresses and keys are never logged.

use std::time::Instant;

use axum::body::Body;
use axum::extract::{MatchedPath, Request};
use axum::http::{Method, Response, StatusCode};
use axum::middleware::Next;

use super::metrics::{self, Present};
use super::request_id::RequestId;
use super::trace::{TRACEPARENT, Trace};

/// Measures the request and logs it, also if the client leaves before the answer.
pub(super) async fn write(mut request: Request, next: Next) -> Response<Body> {
    let trace = Trace::of(request.headers());
    request.extensions_mut().insert(trace.clone());
    let named = trace.header();
    let mut line = Line::new(&request, trace);
    let mut response = next.run(request).await;
    line.status = Some(response.status());
    if let Some(named) = named {
        response.headers_mut().insert(TRACEPARENT, named);
    }
    response
}

/// A line in the making; dropping it writes it.
struct Line {
    start: Instant,
    method: Method,
    /// The pattern, not the address: it has few values and no data of the client.
    route: Option<MatchedPath>,
    request_id: Option<RequestId>,
    trace: Trace,
    status: Option<StatusCode>,
    _present: Present,
}

impl Line {
    fn new(request: &Request, trace: Trace) -> Self {
        Self {
            start: Instant::now(),
            method: request.method().clone(),
            route: request.extensions().get().cloned(),
            request_id: request.extensions().get().cloned(),
            trace,
            status: None,
            _present: Present::request(),
        }
    }
}

impl Drop for Line {
    fn drop(&mut self) {
        let lasted = self.start.elapsed();
        let route = self.route.as_ref().map(MatchedPath::as_str);
        metrics::count_request(&self.method, route, self.status, lasted);
        let method = self.method.as_str();
        let route = route.unwrap_or("-");
        let request_id = self.request_id.as_ref().map_or("-", RequestId::as_str);
        let (trace_id, span_id) = (self.trace.id(), self.trace.span());
        let duration_ms = (lasted.as_secs_f64() * 1e6).round() / 1e3;
        let Some(status) = self.status else {
            tracing::info!(
                method,
                route,
                duration_ms,
                request_id,
                trace_id,
                span_id,
                "client left"
            );
            return;
        };
        let status = status.as_u16();
        tracing::info!(
            method,
            route,
            status,
            duration_ms,
            request_id,
            trace_id,
            span_id,
            "answered"
        );
    }
}
