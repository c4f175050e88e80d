//! The closed table of the kinds of failures.

use axum::http::StatusCode;

macro_rules! problem_kinds {
    ($($name:ident = $code:literal, $status:ident, $title:literal, $meaning:literal;)*) => {
        /// Why there is no answer. Clients tell the kinds apart by `type`.
        #[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
        pub enum ProblemKind { $(#[doc = $meaning] $name,)* }

        impl ProblemKind {
            /// Every kind, in the order of this table.
            pub const ALL: &'static [Self] = &[$(Self::$name,)*];

            /// The last segment of the kind's `type`.
            #[must_use]
            pub const fn code(self) -> &'static str {
                match self { $(Self::$name => $code,)* }
            }

            /// The `type`: a relative reference that this service resolves to a page.
            #[must_use]
            pub const fn type_reference(self) -> &'static str {
                match self { $(Self::$name => concat!("/problems/", $code),)* }
            }

            /// The HTTP status it is sent with.
            #[must_use]
            pub const fn status(self) -> StatusCode {
                match self { $(Self::$name => StatusCode::$status,)* }
            }

            /// A few words for people, the same on every occurrence.
            #[must_use]
            pub const fn title(self) -> &'static str {
                match self { $(Self::$name => $title,)* }
            }

            /// What it means and what the client can do.
            #[must_use]
            pub const fn meaning(self) -> &'static str {
                match self { $(Self::$name => $meaning,)* }
            }
        }
    };
}

problem_kinds! {
    BadRequest = "bad_request", BAD_REQUEST, "The request cannot be understood",
        "The address, the headers or the transfer of the request is broken.";
    MalformedJson = "malformed_json", BAD_REQUEST, "The body is not JSON",
        "The body could not be read as JSON text; `line` and `column` say where reading stopped.";
    DuplicateMember = "duplicate_member", BAD_REQUEST, "A member is given twice",
        "An object in the body names the member at `pointer` more than once, so its value would be a guess.";
    Unauthorized = "unauthorized", UNAUTHORIZED, "A key is needed",
        "The request carries no key in force; send one as `Authorization: Bearer` followed by the key.";
    NotFound = "not_found", NOT_FOUND, "Nothing is here",
        "No endpoint or catalog row has this address; `/openapi.json` lists the endpoints.";
    MethodNotAllowed = "method_not_allowed", METHOD_NOT_ALLOWED, "The method is not allowed here",
        "The address exists and answers other methods, which the header `Allow` lists.";
    NotAcceptable = "not_acceptable", NOT_ACCEPTABLE, "No acceptable form of the answer",
        "The header `Accept` admits none of the media types that this endpoint can answer with.";
    RequestTimeout = "request_timeout", REQUEST_TIMEOUT, "The request took too long",
        "The body did not arrive, or the answer was not ready, within the time limit. Retrying is safe.";
    PayloadTooLarge = "payload_too_large", PAYLOAD_TOO_LARGE, "The body is too large",
        "The body exceeds the size limit of this endpoint.";
    UnsupportedMediaType = "unsupported_media_type", UNSUPPORTED_MEDIA_TYPE, "The body is of the wrong kind",
        "The body must be uncompressed JSON, declared as `Content-Type: application/json`.";
    InvalidRequest = "invalid_request", UNPROCESSABLE_ENTITY, "The request is not valid",
        "The body is JSON but not a valid request; `errors` lists every fault with its place, up to 100.";
    TooManyRequests = "too_many_requests", TOO_MANY_REQUESTS, "Too many requests",
        "This client sent more than its share; `Retry-After` says when to try again.";
    Internal = "internal", INTERNAL_SERVER_ERROR, "The service has a defect",
        "The service failed on this request. Please report it with the `instance`.";
    Overloaded = "overloaded", SERVICE_UNAVAILABLE, "The service is busy",
        "As many requests as this replica takes are in progress; `Retry-After` says when to try again.";
    Draining = "draining", SERVICE_UNAVAILABLE, "The service is shutting down",
        "This replica finishes its work and takes no more; another one will answer.";
}

impl ProblemKind {
    /// The kind that stands for a status which something else than this service's own code chose.
    #[must_use]
    pub fn of_status(status: StatusCode) -> Self {
        let catch_all = if status.is_server_error() { Self::Internal } else { Self::BadRequest };
        // The table lists the general kind of a status before its special cases.
        Self::ALL.iter().find(|kind| kind.status() == status).copied().unwrap_or(catch_all)
    }
}
