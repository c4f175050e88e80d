//! The service seen through its front door.

mod accept;
mod frame;
mod openapi;
mod problems;
mod v1;
