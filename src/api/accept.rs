//! Content negotiation: which of the media types on offer the client's `Accept` prefers (RFC 9110, 12.5.1).

use axum::extract::FromRequestParts;
use axum::http::header::ACCEPT;
use axum::http::request::Parts;
use axum::http::{HeaderMap, HeaderValue};

use super::problem::{Problem, ProblemKind};

/// The media type of results.
pub const JSON: &str = "application/json";

/// The media types that a route can answer with, best first.
///
/// A route that offers more than JSON says so with `.layer(Extension(Offers(&[JSON, "image/svg+xml"])))`.
#[derive(Debug, Clone, Copy)]
pub struct Offers(pub &'static [&'static str]);

/// The media type that the answer shall have; extracting it refuses what cannot be satisfied with 406.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Negotiated(pub &'static str);

impl<S: Sync> FromRequestParts<S> for Negotiated {
    type Rejection = Problem;

    async fn from_request_parts(parts: &mut Parts, _: &S) -> Result<Self, Problem> {
        let offers = parts.extensions.get().copied().unwrap_or(Offers(&[JSON])).0;
        choose(&parts.headers, offers).map(Self).ok_or_else(|| {
            let detail = format!("this endpoint answers with {}", offers.join(", "));
            Problem::new(ProblemKind::NotAcceptable, detail)
        })
    }
}

/// The offer that the client prefers, the first of equals; none if it admits no offer.
///
/// Without an `Accept` header everything is admitted. Parts of the header that are no media range are passed over.
#[must_use]
pub fn choose(headers: &HeaderMap, offers: &[&'static str]) -> Option<&'static str> {
    let mut ranges = Vec::new();
    for header in headers.get_all(ACCEPT) {
        ranges.extend(text(header).split(',').filter_map(Range::parse));
    }
    if !headers.contains_key(ACCEPT) {
        return offers.first().copied();
    }
    let mut best = (0, None);
    for &offer in offers {
        let weight = weight_of(offer, &ranges);
        if weight > best.0 {
            best = (weight, Some(offer));
        }
    }
    best.1
}

fn text(header: &HeaderValue) -> &str {
    header.to_str().unwrap_or_default()
}

/// The weight that the most specific range which matches gives an offer; 0 if none does.
fn weight_of(offer: &str, ranges: &[Range<'_>]) -> u16 {
    let (kind, subtype) = offer.split_once('/').unwrap_or((offer, ""));
    let matching =
        ranges.iter().filter_map(|range| Some((range.specificity(kind, subtype)?, range.weight)));
    matching.max().map_or(0, |(_, weight)| weight)
}

/// One media range of an `Accept` header. Parameters other than the weight are passed over.
struct Range<'a> {
    kind: &'a str,
    subtype: &'a str,
    /// In thousandths, 0 to 1000.
    weight: u16,
}

impl<'a> Range<'a> {
    fn parse(item: &'a str) -> Option<Self> {
        let mut parameters = item.split(';').map(str::trim);
        let (kind, subtype) = parameters.next()?.split_once('/')?;
        let weight = parameters.find_map(|parameter| {
            let (name, value) = parameter.split_once('=')?;
            name.trim().eq_ignore_ascii_case("q").then(|| thousandths(value.trim()))
        });
        // A weight that is none makes the range unusable, not preferred.
        Some(Self { kind, subtype, weight: weight.unwrap_or(Some(1000))? })
    }

    fn specificity(&self, kind: &str, subtype: &str) -> Option<u8> {
        if self.kind == "*" && self.subtype == "*" {
            Some(0)
        } else if !self.kind.eq_ignore_ascii_case(kind) {
            None
        } else if self.subtype == "*" {
            Some(1)
        } else {
            self.subtype.eq_ignore_ascii_case(subtype).then_some(2)
        }
    }
}

/// A `qvalue` in thousandths: `1`, `0.5`, `0.333`.
fn thousandths(value: &str) -> Option<u16> {
    let (whole, decimals) = value.split_once('.').unwrap_or((value, ""));
    let digits =
        whole.len() == 1 && decimals.len() <= 3 && decimals.bytes().all(|b| b.is_ascii_digit());
    let weight: u16 = format!("{whole}{decimals:0<3}").parse().ok()?;
    (digits && weight <= 1000).then_some(weight)
}
