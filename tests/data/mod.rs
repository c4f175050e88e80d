mod disc_materials;
