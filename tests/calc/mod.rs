mod lining;
mod pad;
