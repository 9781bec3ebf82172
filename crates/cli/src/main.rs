//! The binary `topheavy`.
fn main() {}
