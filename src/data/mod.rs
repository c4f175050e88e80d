//! Published tables as reviewable text, each row with its source.

pub mod disc_materials;
