//! The service seen through its front door.

mod accept;
mod examples;
mod frame;
mod openapi;
mod problems;
mod readme;
