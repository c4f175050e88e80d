//! What several tests share.

pub mod client;
