//! Who may come in, how often, how many at once, and with what.

pub mod admission;
pub mod body;
pub(super) mod browser;
pub mod client;
pub mod keys;
pub mod rate;
