mod disc_materials;
mod procedures;
mod units;
