//! The description of the interface: what is common to all operations, and the finished document.

use std::sync::LazyLock;

use serde_json::Value;
use utoipa::openapi::header::HeaderBuilder;
use utoipa::openapi::path::Operation;
use utoipa::openapi::tag::TagBuilder;
use utoipa::openapi::{
    ComponentsBuilder, ContactBuilder, ContentBuilder, InfoBuilder, LicenseBuilder, OpenApi,
    OpenApiBuilder, PathItem, Ref, RefOr, ResponseBuilder, ServerBuilder,
};
use utoipa::{PartialSchema, ToSchema};

use super::error_code::ErrorCode;
use super::problem::{ErrorItem, PROBLEM_JSON, Problem};
use super::{examples, openapi_30, openapi_guard};

/// The tag of the published data.
const CATALOG: &str = "Catalog";

const DESCRIPTION: &str = "\
Brakewright calculates disc brakes: what a pad carries, what presses it, how a machine stops, and what \
that does to the disc. Every calculation is a `POST` that changes nothing, so any call may be repeated.

* A quantity is an object with its unit, `{\"value\": 95, \"unit\": \"mm\"}`; a ratio is a bare number. \
In requests a unit may also be given by its UCUM code or its UN/ECE Recommendation 20 common code.
* Unknown members, `null` and repeated members are refused, so that a typo never becomes a silent default. \
Answers may gain members.
* A failure is a problem document (RFC 9457) that lists every fault found, each with its place.
* A service may ask for a key, sent as `Authorization: Bearer`, and may give each client a share of requests; then \
every answer says in `RateLimit-Policy` and `RateLimit` what the share is and what is left of it.

**Cautions.** The results are calculations for selecting a brake, not proofs. Confirm them by test on the \
machine. Local codes and licensed practice decide. Brakes protect people: have a competent engineer review \
inputs, assumptions and results before anything is built or released.";

/// What the document says before any operation is added.
pub(super) fn base() -> OpenApi {
    let info = InfoBuilder::new()
        .title("Brakewright")
        .version(env!("CARGO_PKG_VERSION"))
        .description(Some(DESCRIPTION))
        .contact(Some(ContactBuilder::new().name(Some("The Brakewright maintainers")).build()))
        .license(Some(
            LicenseBuilder::new()
                .name("MIT OR Apache-2.0")
                .identifier(Some("MIT OR Apache-2.0"))
                .build(),
        ));
    let components = ComponentsBuilder::new()
        .schema(Problem::name(), Problem::schema())
        .schema(ErrorItem::name(), ErrorItem::schema())
        .schema(ErrorCode::name(), ErrorCode::schema());
    let components = openapi_guard::add_to(components);
    OpenApiBuilder::new()
        .info(info.build())
        .servers(Some([ServerBuilder::new().url("/").description(Some("This service")).build()]))
        .components(Some(components.build()))
        .security(Some(openapi_guard::optional_key()))
        .tags(Some([
            tag("Calculations", "What the service computes. Nothing is stored."),
            tag(
                CATALOG,
                "The published data that calculations can start from, each row with its source.",
            ),
            tag("Service", "The state of the service itself, and what its problems mean."),
        ]))
        .build()
}

fn tag(name: &str, description: &str) -> utoipa::openapi::Tag {
    TagBuilder::new().name(name).description(Some(description)).build()
}

/// Adds the failures to every operation: they are the same everywhere.
fn add_failures(document: &mut OpenApi) {
    for item in document.paths.paths.values_mut() {
        for operation in operations(item) {
            for (range, description) in
                [("4XX", "The request was refused."), ("5XX", "The service cannot answer now.")]
            {
                let content = ContentBuilder::new()
                    .schema(Some(Ref::from_schema_name(Problem::name())))
                    .build();
                let response = ResponseBuilder::new()
                    .description(description)
                    .content(PROBLEM_JSON, content)
                    .build();
                operation.responses.responses.insert(range.to_owned(), response.into());
            }
        }
    }
}

/// Adds to the lists of the catalog how clients need not load them twice: it is the same for all.
fn add_caching(document: &mut OpenApi) {
    let header = |text| RefOr::T(HeaderBuilder::new().description(Some(text)).build());
    for item in document.paths.paths.values_mut() {
        let Some(operation) = &mut item.get else { continue };
        let is_catalog = operation.tags.iter().flatten().any(|tag| tag == CATALOG);
        let Some(RefOr::T(found)) = operation.responses.responses.get_mut("200") else { continue };
        if !is_catalog {
            continue;
        }
        found.headers.insert("ETag".to_owned(), header("The strong entity tag of this text."));
        found.headers.insert("Cache-Control".to_owned(), header("How long it may be kept."));
        let unchanged = ResponseBuilder::new()
            .description("Unchanged: `If-None-Match` names the entity tag. There is no body.")
            .build();
        operation.responses.responses.insert("304".to_owned(), unchanged.into());
    }
}

pub(super) fn operations(item: &mut PathItem) -> impl Iterator<Item = &mut Operation> {
    [&mut item.get, &mut item.post].into_iter().filter_map(Option::as_mut)
}

static DOCUMENT: LazyLock<(String, String)> = LazyLock::new(|| {
    let mut document = super::described_routes().split_for_parts().1;
    add_caching(&mut document);
    add_failures(&mut document);
    document.paths.paths.iter_mut().for_each(|(path, item)| openapi_guard::describe(path, item));
    // Made of strings, lists and maps only: serialising cannot fail.
    let mut value = serde_json::to_value(document).unwrap_or_default();
    examples::insert(&mut value);
    (pretty(&value), pretty(&openapi_30::from_31(value)))
});

fn pretty(value: &Value) -> String {
    format!("{value:#}\n")
}

/// The description, OpenAPI 3.1, as it is served and kept in `openapi/v1.json`.
#[must_use]
pub fn openapi_json() -> &'static str {
    &DOCUMENT.0
}

/// The description for older generators, OpenAPI 3.0, derived from the other.
#[must_use]
pub fn openapi_30_json() -> &'static str {
    &DOCUMENT.1
}
