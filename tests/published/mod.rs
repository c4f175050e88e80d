mod motion;
mod pads;
