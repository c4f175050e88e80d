//! Failures as RFC 9457 problem documents.

use axum::body::Body;
use axum::http::header::{CONTENT_TYPE, RETRY_AFTER};
use axum::http::{HeaderName, HeaderValue, Response, StatusCode};
use axum::response::IntoResponse;
use serde::Serialize;
use utoipa::openapi::{RefOr, Schema};
use utoipa::{PartialSchema, ToSchema};

use super::error_code::ErrorCode;
pub use super::problem_kind::ProblemKind;

/// The media type of every failure.
pub const PROBLEM_JSON: &str = "application/problem+json";

/// Most faults that one answer lists; `error_count` has the true number.
pub const MOST_ERRORS: usize = 100;

/// Seconds after which a client that met a busy or leaving replica should try again.
const RETRY_SECONDS: HeaderValue = HeaderValue::from_static("1");

/// One fault of a request body.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, ToSchema)]
pub struct ErrorItem {
    /// Where: an RFC 6901 pointer into the body in fragment form, such as `#/pad/outer_radius`.
    #[schema(example = "#/pad/outer_radius")]
    pub pointer: String,
    /// Why, for programs.
    #[schema(value_type = ErrorCode)]
    pub code: &'static str,
    /// Why, for people.
    pub detail: String,
}

/// A failure, to be answered as RFC 9457 describes it.
#[derive(Debug, Clone, PartialEq, Eq, Serialize)]
#[serde(transparent)]
pub struct Problem(Box<Document>);

impl PartialSchema for Problem {
    fn schema() -> RefOr<Schema> {
        Document::schema()
    }
}

impl ToSchema for Problem {
    fn schemas(schemas: &mut Vec<(String, RefOr<Schema>)>) {
        Document::schemas(schemas);
    }
}

/// A failure, as RFC 9457 describes it. There is no result beside it.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, ToSchema)]
struct Document {
    /// Which kind of problem: a reference, relative to the service, that resolves to an explanation.
    #[serde(rename = "type")]
    #[schema(value_type = String, format = "uri-reference", example = "/problems/invalid_request")]
    type_reference: &'static str,
    /// The kind in a few words.
    #[schema(value_type = String)]
    title: &'static str,
    /// The HTTP status, repeated.
    #[schema(minimum = 400, maximum = 599)]
    status: u16,
    /// What went wrong this time.
    detail: String,
    /// This very occurrence: a URN made of the request id.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, format = "uri-reference")]
    instance: Option<String>,
    /// Line of the body at which reading it as JSON stopped, from 1.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, minimum = 0)]
    line: Option<usize>,
    /// Column of that line, from 1; 0 if the body ended before the line had a character.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, minimum = 0)]
    column: Option<usize>,
    /// The member that the problem is about.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pointer: Option<String>,
    /// How many faults were found in the body.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false, minimum = 1)]
    error_count: Option<usize>,
    /// The faults found, at most 100 of them.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    #[schema(max_items = 100)]
    errors: Vec<ErrorItem>,
    #[serde(skip)]
    #[schema(ignore)]
    headers: Vec<(HeaderName, HeaderValue)>,
}

impl Problem {
    /// A problem of a kind, with what happened this time.
    #[must_use]
    pub fn new(kind: ProblemKind, detail: impl Into<String>) -> Self {
        let problem = Self(Box::new(Document {
            type_reference: kind.type_reference(),
            title: kind.title(),
            status: kind.status().as_u16(),
            detail: detail.into(),
            instance: None,
            line: None,
            column: None,
            pointer: None,
            error_count: None,
            errors: Vec::new(),
            headers: Vec::new(),
        }));
        if kind.status() == StatusCode::SERVICE_UNAVAILABLE {
            return problem.with_header(RETRY_AFTER, RETRY_SECONDS);
        }
        problem
    }

    /// A problem of a kind of which there is nothing more to say.
    #[must_use]
    pub fn of_kind(kind: ProblemKind) -> Self {
        Self::new(kind, kind.meaning())
    }

    /// A body that is JSON but not a valid request.
    ///
    /// `total` is the true number of faults; the first [`MOST_ERRORS`] of `errors` are listed.
    #[must_use]
    pub fn invalid(mut errors: Vec<ErrorItem>, total: usize) -> Self {
        errors.truncate(MOST_ERRORS);
        let total = total.max(errors.len());
        let detail = match errors.as_slice() {
            [only] if total == 1 => only.detail.clone(),
            listed if listed.len() < total => {
                format!("{total} faults were found; the first {} are listed", listed.len())
            }
            _ => format!("{total} faults were found"),
        };
        let mut problem = Self::new(ProblemKind::InvalidRequest, detail);
        problem.0.error_count = Some(total);
        problem.0.errors = errors;
        problem
    }

    /// A body that is not JSON from `line` and `column` on.
    #[must_use]
    pub fn malformed(detail: impl Into<String>, line: usize, column: usize) -> Self {
        let mut problem = Self::new(ProblemKind::MalformedJson, detail);
        (problem.0.line, problem.0.column) = (Some(line), Some(column));
        problem
    }

    /// A body in which the member at `pointer` occurs twice in one object.
    #[must_use]
    pub fn duplicate(pointer: String) -> Self {
        let detail = "a member may be given only once in an object";
        let mut problem = Self::new(ProblemKind::DuplicateMember, detail);
        problem.0.pointer = Some(pointer);
        problem
    }

    /// The problem that stands for an answer which is not a problem document yet.
    #[must_use]
    pub fn of_status(status: StatusCode) -> Self {
        let kind = ProblemKind::of_status(status);
        // The status of the answer is kept, so that what the kind does not know is not lost.
        let mut problem = Self::of_kind(kind);
        problem.0.status = status.as_u16();
        problem
    }

    /// The same problem, sent with one more header.
    #[must_use]
    pub fn with_header(mut self, name: HeaderName, value: HeaderValue) -> Self {
        self.0.headers.push((name, value));
        self
    }

    /// The same problem, with the URN of the request it happened to.
    #[must_use]
    pub fn at_instance(mut self, instance: String) -> Self {
        self.0.instance = Some(instance);
        self
    }

    /// The same problem, of a part of the body: its pointers start at `place`, such as `#/candidates/3`.
    #[must_use]
    pub fn below(mut self, place: &str) -> Self {
        let pointers = self.0.errors.iter_mut().map(|item| &mut item.pointer);
        for pointer in pointers.chain(&mut self.0.pointer) {
            pointer.replace_range(..1, place);
        }
        self
    }

    /// The HTTP status.
    #[must_use]
    pub fn status(&self) -> StatusCode {
        StatusCode::from_u16(self.0.status).unwrap_or(StatusCode::INTERNAL_SERVER_ERROR)
    }

    /// The faults of the body that are listed.
    #[must_use]
    pub fn errors(&self) -> &[ErrorItem] {
        &self.0.errors
    }

    /// The document as JSON text.
    #[must_use]
    pub fn to_json(&self) -> Vec<u8> {
        // Strings and numbers only: serialising cannot fail.
        serde_json::to_vec(self).unwrap_or_default()
    }
}

impl IntoResponse for Problem {
    /// The document, and itself as an extension: the layers add the `instance`.
    fn into_response(self) -> Response<Body> {
        let mut response = Response::new(Body::from(self.to_json()));
        *response.status_mut() = self.status();
        let headers = response.headers_mut();
        headers.insert(CONTENT_TYPE, HeaderValue::from_static(PROBLEM_JSON));
        headers.extend(self.0.headers.iter().cloned());
        response.extensions_mut().insert(self);
        response
    }
}
