//! The tests, in one binary. Folders mirror `src/`; `published` holds the checks against outside sources.
#![expect(clippy::unwrap_used, reason = "a test fails by panicking")]

mod calc;
mod data;
mod published;
