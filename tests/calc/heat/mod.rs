mod bulk;
mod property;
mod reference;
mod slab;
mod volumes;
