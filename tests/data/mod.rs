mod disc_materials;
mod nearest;
mod procedures;
mod rules;
mod units;
