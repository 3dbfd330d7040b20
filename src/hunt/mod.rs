//! Searches by computation.

pub mod blocks;
mod random;

pub use random::Random;
