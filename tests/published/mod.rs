mod linings;
mod pads;
