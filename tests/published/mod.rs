mod chain;
mod cooling;
mod heat;
mod linings;
mod motion;
mod pads;
mod stops;
