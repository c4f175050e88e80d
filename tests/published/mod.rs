mod heat;
mod motion;
mod pads;
