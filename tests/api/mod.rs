//! The service seen through its front door.

mod accept;
mod catalog;
mod charts;
mod examples;
mod frame;
mod fuzzed;
mod guard;
mod measure;
mod metrics;
mod openapi;
mod parse;
mod problems;
mod properties;
mod readme;
mod sheet;
mod sheet_formulas;
pub(crate) mod v1;
