//! What can be had at N runs.

pub mod seed;
