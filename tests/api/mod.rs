//! The service seen through its front door.

mod accept;
mod catalog;
mod frame;
mod measure;
mod openapi;
mod parse;
mod problems;
