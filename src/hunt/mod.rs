//! Searches for starters and arrays.

pub mod latin;
