mod pad;
mod disc;
mod heat;
