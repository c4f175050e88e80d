pub mod close;
