//! Searches by computation.

pub mod blocks;
mod random;
pub mod symmetric;

pub use random::Random;
