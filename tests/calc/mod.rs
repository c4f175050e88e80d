mod disc;
mod heat;
mod motion;
mod pad;
