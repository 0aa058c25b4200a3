//! The `zij` program.

fn main() {}
