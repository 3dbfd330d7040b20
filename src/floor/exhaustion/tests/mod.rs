//! Tests of the exhaustion that reach over its files.

mod classes;
mod decisions;
mod isomorphism;
mod records;
