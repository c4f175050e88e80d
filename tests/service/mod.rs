//! The program as a process.

mod process;
