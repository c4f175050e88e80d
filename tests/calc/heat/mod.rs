mod bulk;
mod property;
mod reference;
mod slab;
