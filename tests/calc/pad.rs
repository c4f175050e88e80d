//! Pads: what holds for every one of them.
