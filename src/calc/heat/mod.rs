//! Heat of one stop: what a disc takes up, how warm its body and its surface become.

pub mod bulk;
pub mod disc_heat;
pub mod partition;
pub mod property;
pub mod slab;
pub mod substance;
