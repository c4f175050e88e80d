//! Every test of the service, in one binary. Folders mirror `src`; `published` holds the checks against outside sources.

#![expect(clippy::unwrap_used, reason = "a test fails by panicking")]

mod calc;
mod published;
