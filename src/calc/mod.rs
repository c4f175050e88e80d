//! The calculation core: pure functions of quantities.
//!
//! It knows nothing of HTTP, JSON, clocks, files or logging, so it can be read, tested and trusted on its own.

pub mod actuation;
pub mod brake;
pub mod case;
pub mod disc;
pub mod fault;
pub mod finding;
pub mod fitted;
pub mod friction;
pub mod heat;
pub mod lining;
pub mod machine;
pub mod method;
pub mod method_index;
pub mod motion;
pub mod pad;
pub mod pressure;
pub mod quantity;
pub mod wear;
