//! W3C Trace Context: which request of many services this one is a part of.

use axum::http::{HeaderMap, HeaderName, HeaderValue};
use uuid::Uuid;

/// The header by which a trace is named, both ways.
pub(super) const TRACEPARENT: HeaderName = HeaderName::from_static("traceparent");

/// The place of a request in its trace, as an extension of it.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Trace {
    id: String,
    span: String,
    flags: String,
}

impl Trace {
    /// Goes on with the trace that the request names, or starts one.
    pub(super) fn of(headers: &HeaderMap) -> Self {
        // The half with the version of the UUID in it: never all zeros.
        let span = format!("{:016x}", Uuid::new_v4().as_u64_pair().0);
        match given(headers) {
            Some((id, flags)) => Self { id: id.to_owned(), span, flags: flags.to_owned() },
            None => Self { id: Uuid::new_v4().simple().to_string(), span, flags: "00".to_owned() },
        }
    }

    /// The id that all parts of the trace share: 32 hexadecimal digits.
    pub(super) fn id(&self) -> &str {
        &self.id
    }

    /// The id of this request in it: 16 hexadecimal digits.
    pub(super) fn span(&self) -> &str {
        &self.span
    }

    /// What the answer says.
    pub(super) fn header(&self) -> Option<HeaderValue> {
        HeaderValue::try_from(format!("00-{}-{}-{}", self.id, self.span, self.flags)).ok()
    }
}

/// Trace id and flags of a valid `traceparent` (W3C Trace Context, 3.2): `00-<32 hex>-<16 hex>-<2 hex>`, lower case.
fn given(headers: &HeaderMap) -> Option<(&str, &str)> {
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
    (well_formed && not_zero(trace) && not_zero(parent)).then_some((trace, flags))
}

fn is_hex(text: &str, length: usize) -> bool {
    text.len() == length && text.bytes().all(|byte| matches!(byte, b'0'..=b'9' | b'a'..=b'f'))
}
