//! The calculation sheet: a spec check as a page to print, sign and file. It needs no script and nothing from outside.

mod checks;
mod closing;
mod equations;
mod inputs;
pub mod mathml;
mod numbers;
mod summary;
pub mod value;

use std::sync::LazyLock;

use axum::body::Body;
use axum::http::header::{CONTENT_SECURITY_POLICY, CONTENT_TYPE};
use axum::http::{HeaderValue, Response};
use axum::response::IntoResponse;
use base64::Engine as _;
use base64::prelude::BASE64_STANDARD;
use maud::{DOCTYPE, Markup, PreEscaped, html};
use serde_json::Value;
use sha2::{Digest, Sha256};

use super::measure::AnyAmount;
use super::v1::spec_check::answer::{Check, SpecCheckAnswer};
use crate::calc::method::Method;

/// The media type of sheets.
pub const HTML: &str = "text/html";

const STYLE: &str = include_str!("style.css");

/// Nothing may be loaded and nothing may run; the one style is known by its digest.
static CONTENT_POLICY: LazyLock<HeaderValue> = LazyLock::new(|| {
    let digest = BASE64_STANDARD.encode(Sha256::digest(STYLE));
    let policy = format!(
        "default-src 'none'; style-src 'sha256-{digest}'; base-uri 'none'; form-action 'none'; \
         frame-ancestors 'none'"
    );
    // Letters and digits: the fallback is never taken, and it forbids the style, too.
    HeaderValue::try_from(policy).unwrap_or(HeaderValue::from_static("default-src 'none'"))
});

/// What a sheet shows.
#[derive(Debug, Clone, Copy)]
pub struct Sheet<'a> {
    /// The request as given.
    pub request: &'a Value,
    /// The answer, in the units of the answer.
    pub answer: &'a SpecCheckAnswer,
    /// The methods behind it.
    pub methods: &'a [&'static Method],
    /// Temperature of the air, from which temperatures count.
    pub ambient_temperature: &'a AnyAmount,
    /// From this share of a limit on, a result counts as near it.
    pub near_limit_from: f64,
}

/// A sheet as a document.
#[derive(Debug, Clone)]
pub struct Page(Markup);

impl Sheet<'_> {
    /// The sheet as a document.
    #[must_use]
    pub fn page(&self) -> Page {
        let reference = self.answer.record.reference.as_deref().map(value::own);
        let verdict = summary::verdict_word(self.answer.results.verdict);
        Page(html! {
            (DOCTYPE)
            html lang="en" {
                head {
                    meta charset="utf-8";
                    meta name="viewport" content="width=device-width, initial-scale=1";
                    meta name="color-scheme" content="light dark";
                    title {
                        "Brake calculation sheet"
                        @if let Some(reference) = &reference { ": " (reference) }
                        " (" (verdict) ")"
                    }
                    style { (PreEscaped(STYLE)) }
                }
                body {
                    header { (summary::heading(self)) }
                    main {
                        (summary::attention(self))
                        (checks::section(self))
                        (inputs::section(self))
                        (inputs::defaults(self))
                        (numbers::section(self))
                        (equations::section(self))
                        (closing::methods(self))
                        (closing::warnings(self))
                        (closing::cautions(self))
                        (closing::record(self))
                    }
                }
            }
        })
    }

    fn given(&self, list: &str, index: usize) -> Option<&Value> {
        self.request.get(list)?.get(index)
    }

    /// A duty by its number, from 1, and its own name, or the row that it names.
    fn duty_name(&self, index: usize) -> String {
        let duty = self.given("duties", index);
        let name = duty.and_then(|duty| duty.get("name").or_else(|| duty.get("id")));
        let number = index.saturating_add(1);
        match name.and_then(Value::as_str) {
            Some(name) => format!("Duty {number}: {}", value::own(name)),
            None => format!("Duty {number}"),
        }
    }

    /// Brakes by their number, from 1, and their place.
    fn brake_name(&self, index: usize) -> String {
        let axle = self.given("fitted", index).and_then(|entry| entry.get("axle"));
        let number = index.saturating_add(1);
        match axle.and_then(Value::as_str) {
            Some("all") => format!("Brake {number} (all axles)"),
            Some(axle) => format!("Brake {number} ({})", value::words(axle)),
            None => format!("Brake {number}"),
        }
    }

    /// What a check is about: one of the brakes, or the machine.
    fn subject(&self, fitted_index: Option<usize>) -> String {
        fitted_index.map_or_else(|| "Machine".to_owned(), |index| self.brake_name(index))
    }

    fn duties(&self) -> impl Iterator<Item = (usize, Vec<&Check>)> {
        let results = &self.answer.results;
        (0..results.duties.len()).map(|index| {
            let checks = results.checks.iter().filter(|check| check.duty_index == index);
            (index, checks.collect())
        })
    }
}

impl IntoResponse for Page {
    fn into_response(self) -> Response<Body> {
        let content_type = HeaderValue::from_static("text/html; charset=utf-8");
        let headers =
            [(CONTENT_TYPE, content_type), (CONTENT_SECURITY_POLICY, CONTENT_POLICY.clone())];
        (headers, self.0.into_string()).into_response()
    }
}
