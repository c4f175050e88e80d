mod pads;
