//! The service seen through its front door.

mod accept;
mod charts;
mod frame;
mod openapi;
mod problems;
mod properties;
mod v1;
