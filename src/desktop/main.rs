//! The program `slidehalt`.
fn main() {}
