//! Searches for what no recipe yields.

pub mod subspaces;
