//! JSON in and out. The original extractor is not used: its rejections are not problem documents.

use axum::body::{Body, Bytes};
use axum::extract::{FromRequest, FromRequestParts, Request};
use axum::http::header::{CONTENT_TYPE, HeaderName};
use axum::http::{HeaderMap, HeaderValue, Response};
use axum::response::IntoResponse;
use serde::de::DeserializeOwned;
use serde::{Deserialize, Serialize};
use utoipa::ToSchema;

use super::accept::{JSON, Negotiated};
use super::finite::to_json;
use super::problem::{ErrorItem, Problem, ProblemKind};
use super::shape::{self, MoreUnits};
use crate::calc::fault::FaultCode;

/// Says which media types a `POST` takes; sent with 415.
const ACCEPT_POST: HeaderName = HeaderName::from_static("accept-post");

/// Further codes of units beside the published symbols.
const MORE_UNITS: MoreUnits = crate::data::units::further_codes;

/// A JSON body, decoded. As an argument of a handler it documents the request body, too.
///
/// Refused: 406 if the client takes no form of the answer that the route offers, 415 if the body is not
/// declared as JSON, 413 if it is too large, 400 if it is not JSON, 422 with all faults if it is no `T`.
#[derive(Debug, Clone)]
pub struct Json<T> {
    /// The request.
    pub value: T,
    /// The bytes it was decoded from; the digest of the input is made of them.
    pub body: Bytes,
}

impl<S, T> FromRequest<S> for Json<T>
where
    S: Send + Sync,
    T: DeserializeOwned + ToSchema + 'static,
{
    type Rejection = Problem;

    async fn from_request(request: Request, state: &S) -> Result<Self, Problem> {
        let Undecoded(body) = Undecoded::from_request(request, state).await?;
        Ok(Self { value: decode(&body)?, body })
    }
}

/// A JSON body that is yet to be decoded, for one so large that the serving threads must not do it. Refused as
/// [`Json`] is, but for what is inside.
#[derive(Debug, Clone)]
pub struct Undecoded(pub Bytes);

impl<S: Send + Sync> FromRequest<S> for Undecoded {
    type Rejection = Problem;

    async fn from_request(request: Request, state: &S) -> Result<Self, Problem> {
        let (mut parts, body) = request.into_parts();
        Negotiated::from_request_parts(&mut parts, state).await?;
        require_json(&parts.headers)?;
        let request = Request::from_parts(parts, body);
        let body = Bytes::from_request(request, state).await;
        body.map(Self).map_err(|rejection| Problem::of_status(rejection.into_response().status()))
    }
}

/// Decodes a body that is known to be declared as JSON, such as a line of a stream.
///
/// # Errors
/// 400 if the text is not JSON or names a member twice; 422 with the faults if it is not a `T`.
pub fn decode<T: DeserializeOwned + ToSchema + 'static>(body: &[u8]) -> Result<T, Problem> {
    shape::decode(body, MORE_UNITS)
}

/// The media type that a body is declared as, without its parameters.
fn declared_type(headers: &HeaderMap) -> String {
    let declared = headers.get(CONTENT_TYPE).and_then(|value| value.to_str().ok());
    let essence = declared.and_then(|value| value.split(';').next()).unwrap_or_default();
    essence.trim().to_ascii_lowercase()
}

/// Demands that a body is declared as one of some media types; parameters do not matter.
///
/// # Errors
/// 415 with `Accept-Post` if it is not.
pub fn require_type(headers: &HeaderMap, accepted: &[&'static str]) -> Result<(), Problem> {
    if accepted.contains(&declared_type(headers).as_str()) {
        return Ok(());
    }
    let detail =
        format!("the body must be declared as `Content-Type: {}`", accepted.join("` or `"));
    let problem = Problem::new(ProblemKind::UnsupportedMediaType, detail);
    let listed = HeaderValue::try_from(accepted.join(", "));
    Err(match listed {
        Ok(listed) => problem.with_header(ACCEPT_POST, listed),
        Err(_) => problem,
    })
}

/// The `ref` of a request of which nothing else need be right.
#[must_use]
pub fn reference_of(request: &str) -> Option<String> {
    #[derive(Deserialize)]
    struct Named {
        #[serde(rename = "ref")]
        reference: Option<String>,
    }
    serde_json::from_str::<Named>(request).ok()?.reference
}

/// Demands `application/json` or a type with the suffix `+json`; parameters do not matter.
fn require_json(headers: &HeaderMap) -> Result<(), Problem> {
    let essence = declared_type(headers);
    if essence == JSON || (essence.starts_with("application/") && essence.ends_with("+json")) {
        return Ok(());
    }
    let detail = "the body must be declared as `Content-Type: application/json`";
    let problem = Problem::new(ProblemKind::UnsupportedMediaType, detail);
    Err(problem.with_header(ACCEPT_POST, HeaderValue::from_static(JSON)))
}

/// The problem of an answer with a number beyond what JSON can hold: the input's fault, not the service's.
#[must_use]
pub fn overflow() -> Problem {
    let item = ErrorItem {
        pointer: "#".to_owned(),
        code: FaultCode::OutOfRange.as_str(),
        detail: "a result lies beyond what numbers can hold; look for a slip of units".to_owned(),
    };
    Problem::invalid(vec![item], 1)
}

/// A result as JSON, status 200.
#[derive(Debug, Clone)]
pub struct Answer<T>(pub T);

impl<T: Serialize> IntoResponse for Answer<T> {
    fn into_response(self) -> Response<Body> {
        match to_json(&self.0) {
            Ok(text) => ([(CONTENT_TYPE, HeaderValue::from_static(JSON))], text).into_response(),
            Err(_) => overflow().into_response(),
        }
    }
}
