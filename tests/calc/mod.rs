mod disc;
mod heat;
mod lining;
mod motion;
mod pad;
