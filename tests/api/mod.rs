//! The service seen through its front door.

mod accept;
mod charts;
mod examples;
mod frame;
mod openapi;
mod problems;
mod properties;
mod readme;
mod v1;
