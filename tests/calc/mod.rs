mod disc;
mod heat;
