//! All tests, in one binary; the folders mirror `src/`.
#![expect(clippy::unwrap_used, reason = "a test fails by panicking")]
#![expect(clippy::panic, reason = "a test fails by panicking")]

mod api;
mod service;
mod support;
