//! The calculation core: pure functions of quantities.
//!
//! It knows nothing of HTTP, JSON, clocks, files or logging, so it can be read, tested and trusted on its own.

pub mod fault;
pub mod finding;
pub mod friction;
pub mod lining;
pub mod method;
pub mod pad;
pub mod pressure;
pub mod quantity;
