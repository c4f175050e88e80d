mod disc;
mod duty;
mod heat;
mod lining;
mod motion;
mod pad;
