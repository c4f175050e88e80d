//! Heat of one stop: what a disc takes up, how warm its body and its surface become.

pub mod air;
pub mod bulk;
pub mod cooling;
pub mod disc_heat;
pub mod disc_series;
pub mod lumped;
pub mod partition;
pub mod property;
pub mod repeated;
pub mod slab;
pub mod substance;

use super::method::Method;

/// The sheets of this folder, but for those that its files list themselves.
pub static METHODS: &[&Method] = &[
    &partition::SWEPT_RING,
    &partition::PARTITION,
    &property::ENTHALPY,
    &bulk::BULK_RISE,
    &slab::SLAB_SURFACE,
    &slab::SLAB_VOLUMES,
];
