//! The `overcoat` command.
fn main() {}
