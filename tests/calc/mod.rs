mod actuation;
mod disc;
mod duty;
mod heat;
mod lining;
mod method_index;
mod motion;
mod pad;
