mod bulk;
mod course;
mod property;
mod reference;
mod slab;
mod volumes;
