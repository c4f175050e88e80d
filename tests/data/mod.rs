mod disc_materials;
mod nearest;
mod procedures;
mod units;
