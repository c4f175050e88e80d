//! Building blocks that requests share: wire shapes and their way into the calculation.

pub mod actuation;
pub mod brake;
pub mod delays;
pub mod disc;
pub mod event;
pub mod fitted;
pub mod lining;
pub mod machine;
pub mod pad;
pub mod stop;
pub mod temperatures;
