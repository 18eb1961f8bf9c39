//! Builds, serves and checks.
fn main() {}
