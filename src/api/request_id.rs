//! Every request has an id: the client's own if it is usable, else a new one.

use axum::body::Body;
use axum::extract::Request;
use axum::http::{HeaderName, HeaderValue, Response};
use axum::middleware::Next;
use tower_http::request_id::{MakeRequestId, MakeRequestUuid};

use super::problem::Problem;

/// The header that carries the id both ways.
pub const REQUEST_ID: HeaderName = HeaderName::from_static("x-request-id");

/// The longest id that is taken over.
const LONGEST: usize = 128; // bytes

/// The id of a request, as an extension of it.
#[derive(Debug, Clone)]
pub struct RequestId(HeaderValue);

impl RequestId {
    /// The id as text.
    #[must_use]
    pub fn as_str(&self) -> &str {
        self.0.to_str().unwrap_or_default()
    }

    /// The id as a URN: in the registered namespace if it is a UUID.
    #[must_use]
    pub fn urn(&self) -> String {
        let id = self.as_str();
        let namespace = if is_uuid(id) { "uuid" } else { "request-id" };
        format!("urn:{namespace}:{id}")
    }
}

/// Gives the request its id, sends it back, and completes a problem with it.
pub(super) async fn identify(mut request: Request, next: Next) -> Response<Body> {
    let given = request.headers().get(REQUEST_ID).filter(|value| is_usable(value)).cloned();
    let id = RequestId(given.unwrap_or_else(|| new_id(&request)));
    request.extensions_mut().insert(id.clone());
    let mut response = next.run(request).await;
    if let Some(problem) = response.extensions_mut().remove::<Problem>() {
        *response.body_mut() = Body::from(problem.at_instance(id.urn()).to_json());
    }
    response.headers_mut().insert(REQUEST_ID, id.0);
    response
}

/// Letters, digits and `-._` only: safe in a log line, a header and a URN.
fn is_usable(id: &HeaderValue) -> bool {
    let bytes = id.as_bytes();
    let safe = |byte: &u8| byte.is_ascii_alphanumeric() || b"-._".contains(byte);
    !bytes.is_empty() && bytes.len() <= LONGEST && bytes.iter().all(safe)
}

fn new_id(request: &Request) -> HeaderValue {
    let id = MakeRequestUuid.make_request_id(request);
    id.map_or(HeaderValue::from_static("unknown"), |id| id.header_value().clone())
}

fn is_uuid(id: &str) -> bool {
    id.len() == 36
        && id.bytes().enumerate().all(|(place, byte)| match place {
            8 | 13 | 18 | 23 => byte == b'-',
            _ => byte.is_ascii_hexdigit(),
        })
}
