//! The `mainstay` binary.
fn main() {}
