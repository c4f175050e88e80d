//! What several tests share.

pub(crate) mod client;
pub(crate) mod close;
pub(crate) mod json;
pub(crate) mod point;
pub(crate) mod si;
