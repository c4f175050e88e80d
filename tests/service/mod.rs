//! The program as a process.

mod heavy;
mod process;
