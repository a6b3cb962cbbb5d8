//! The `coilwright` program.
fn main() {}
