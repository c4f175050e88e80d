mod cooling;
mod duty;
mod heat;
mod linings;
mod motion;
mod pads;
mod repeated;
