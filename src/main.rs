//! The command line.
#![forbid(unsafe_code)]

fn main() {}
