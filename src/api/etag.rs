//! Documents that change only with the program: strong entity tags and 304 (RFC 9110, 8.8.3 and 13.1.2).

use std::fmt::Write as _;

use axum::body::{Body, Bytes};
use axum::http::header::{CACHE_CONTROL, CONTENT_TYPE, ETAG, IF_NONE_MATCH};
use axum::http::{HeaderMap, HeaderValue, Response, StatusCode};
use sha2::{Digest, Sha256};

/// Caches may keep a document for five minutes and must ask again after that: a new version shows soon.
const CACHING: HeaderValue = HeaderValue::from_static("public, max-age=300, must-revalidate");

/// A document with its entity tag, made once.
#[derive(Debug, Clone)]
pub struct Document {
    bytes: Bytes,
    tag: HeaderValue,
}

impl Document {
    /// A JSON document.
    #[must_use]
    pub fn json(bytes: impl Into<Bytes>) -> Self {
        let bytes = bytes.into();
        let tag = entity_tag(&bytes);
        Self { bytes, tag }
    }

    /// The document, or 304 if the client has it.
    #[must_use]
    pub fn respond(&self, request: &HeaderMap) -> Response<Body> {
        catalog_response(&self.bytes, &self.tag, request)
    }
}

/// A strong entity tag: the first half of the SHA-256 of the bytes, in quotes.
#[must_use]
pub fn entity_tag(bytes: &[u8]) -> HeaderValue {
    let mut tag = String::from("\"");
    for byte in Sha256::digest(bytes).iter().take(16) {
        // Writing to a string cannot fail.
        let _ = write!(tag, "{byte:02x}");
    }
    tag.push('"');
    HeaderValue::try_from(tag).unwrap_or(HeaderValue::from_static("\"\""))
}

/// Answers a conditional GET: JSON bytes with their tag, or 304 without a body.
#[must_use]
pub fn catalog_response(bytes: &Bytes, tag: &HeaderValue, request: &HeaderMap) -> Response<Body> {
    let known = client_has(request, tag);
    let mut response = Response::new(if known { Body::empty() } else { bytes.clone().into() });
    if known {
        *response.status_mut() = StatusCode::NOT_MODIFIED;
    } else {
        let json = HeaderValue::from_static("application/json");
        response.headers_mut().insert(CONTENT_TYPE, json);
    }
    response.headers_mut().insert(ETAG, tag.clone());
    response.headers_mut().insert(CACHE_CONTROL, CACHING);
    response
}

/// Whether `If-None-Match` names the tag. The comparison is the weak one, as the RFC demands here.
fn client_has(request: &HeaderMap, tag: &HeaderValue) -> bool {
    let tag = tag.to_str().unwrap_or_default();
    let listed = request.get_all(IF_NONE_MATCH).iter().filter_map(|header| header.to_str().ok());
    // Our tags hold no comma, so a list may be split at every one.
    listed.flat_map(|list| list.split(',')).any(|item| {
        let item = item.trim();
        item == "*" || item.strip_prefix("W/").unwrap_or(item) == tag
    })
}
