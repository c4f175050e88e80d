//! What keeps the program running beside its answers: connections, keys that change, the log, the signals.

pub(crate) mod connections;
pub(crate) mod key_watch;
mod lingering;
pub(crate) mod log;
pub(crate) mod signals;
