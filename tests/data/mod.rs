mod disc_materials;
mod procedures;
