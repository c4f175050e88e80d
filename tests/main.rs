//! All tests, in one binary; folders mirror `src`, `published` holds the checks against outside sources.
#![expect(
    clippy::unwrap_used,
    clippy::panic,
    clippy::indexing_slicing,
    reason = "a test fails by panicking"
)]
#![expect(
    clippy::disallowed_methods,
    reason = "expected values may come from another mathematics library"
)]
#![expect(clippy::float_cmp, reason = "what is compared exactly is meant exactly")]
#![expect(clippy::doc_markdown, reason = "formulas in comments are not code")]
#![allow(missing_docs, reason = "tests are named as sentences")]

mod api;
mod architecture;
mod calc;
mod data;
mod published;
mod service;
mod support;
