//! The program as a process.

mod drain;
mod faults;
mod heavy;
mod keys;
mod process;
mod replay;
mod stream;
