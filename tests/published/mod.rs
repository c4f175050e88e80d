mod motion;
mod pads;
mod heat;
