//! The disc: what it is made of and how large it is.

mod material;
mod plate;

pub use material::{CatalogOrigin, DEFAULT_EMISSIVITY, DiscMaterial, DiscMaterialParts};
pub use plate::{Construction, Cooling, Disc, DiscParts};
