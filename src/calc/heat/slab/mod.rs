//! Surface temperature of a slab that is heated on one face, the other face insulated.

mod flux;
mod peak;
mod response;
mod rise;
mod volumes;

pub use flux::PiecewiseLinearFlux;
pub use response::{SLAB_SURFACE, constant_flux_response, flux_ramp_response};
pub use rise::Slab;
pub use volumes::{SLAB_VOLUMES, SlabStep, SlabVolumes};
