//! What one evaluation and one request cost. `cargo bench` runs all, `cargo bench -- NAME` some.
//!
//! The inputs are invented. A request is measured beside a floor: a handler behind the same layers that reads
//! the same body into the same type and answers as many bytes without computing anything.
#![expect(clippy::unwrap_used, reason = "a bench fails by panicking")]
#![allow(missing_docs, reason = "the macros of the bench library make undocumented functions")]

mod calculation;
mod floor;
mod parts;
mod request;
mod service;
mod stream;

use criterion::{criterion_group, criterion_main};

criterion_group!(benches, calculation::all, service::all, stream::all);
criterion_main!(benches);
