//! How the description shows that a request may be turned away: keys, shares, places.

use utoipa::ToSchema as _;
use utoipa::openapi::header::HeaderBuilder;
use utoipa::openapi::security::{HttpAuthScheme, HttpBuilder, SecurityRequirement, SecurityScheme};
use utoipa::openapi::{
    ComponentsBuilder, ContentBuilder, PathItem, Ref, RefOr, Response, ResponseBuilder,
};

use super::openapi::operations;
use super::problem::{PROBLEM_JSON, Problem};

/// The name of the security scheme.
const KEY: &str = "api_key";

/// An answer of the gate.
struct TurnedAway {
    status: &'static str,
    name: &'static str,
    meaning: &'static str,
    /// The headers that come with it.
    headers: &'static [(&'static str, &'static str)],
}

const TURNED_AWAY: [TurnedAway; 3] = [
    TurnedAway {
        status: "401",
        name: "Unauthorized",
        meaning: "A key is needed: the service has keys, and none of them came with the request.",
        headers: &[("WWW-Authenticate", "How to send a key (RFC 6750).")],
    },
    TurnedAway {
        status: "429",
        name: "TooManyRequests",
        meaning: "This client's share of requests is used up.",
        headers: &[
            ("Retry-After", "Seconds after which the next request will be taken."),
            (
                "RateLimit-Policy",
                "The share, such as `\"default\";q=600;w=60`: 600 requests in 60 seconds.",
            ),
            (
                "RateLimit",
                "What is left, and in how many seconds all of it is there again, such as `\"default\";r=0;t=60`.",
            ),
        ],
    },
    TurnedAway {
        status: "503",
        name: "Unavailable",
        meaning: "The service is busy or shutting down; another replica may answer.",
        headers: &[("Retry-After", "Seconds after which to try again.")],
    },
];

/// Adds the scheme of the keys and the answers of the gate.
pub(super) fn add_to(components: ComponentsBuilder) -> ComponentsBuilder {
    let key = HttpBuilder::new()
        .scheme(HttpAuthScheme::Bearer)
        .description(Some("A key, if the operator of the service gives out keys."))
        .build();
    let components = components.security_scheme(KEY, SecurityScheme::Http(key));
    TURNED_AWAY
        .iter()
        .fold(components, |components, answer| components.response(answer.name, response(answer)))
}

fn response(answer: &TurnedAway) -> Response {
    let content =
        ContentBuilder::new().schema(Some(Ref::from_schema_name(Problem::name()))).build();
    let response =
        ResponseBuilder::new().description(answer.meaning).content(PROBLEM_JSON, content);
    let response = answer.headers.iter().fold(response, |response, (name, meaning)| {
        response.header(*name, HeaderBuilder::new().description(Some(*meaning)).build())
    });
    response.build()
}

/// A service without keys asks for none, one with keys for one of them.
pub(super) fn optional_key() -> [SecurityRequirement; 2] {
    [SecurityRequirement::default(), SecurityRequirement::new(KEY, [] as [&str; 0])]
}

/// Adds to the operations of a path what the gate may answer. Health passes by it, and problems need no key.
pub(super) fn describe(path: &str, item: &mut PathItem) {
    let calculates = path.starts_with("/v1/");
    for operation in operations(item) {
        if !calculates {
            operation.security = Some(vec![SecurityRequirement::default()]);
        }
        for answer in &TURNED_AWAY {
            if calculates || (answer.status == "503" && path == "/health/ready") {
                let reference = RefOr::Ref(Ref::from_response_name(answer.name));
                operation.responses.responses.insert(answer.status.to_owned(), reference);
            }
        }
    }
}
