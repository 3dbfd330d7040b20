//! Searches for the starters of Latin squares: quasi-difference matrices with prescribed symmetries
//! and V(m, t) vectors.
//!
//! Both are deterministic: the same parameters and seed give the same answer, for any machine.

mod cover;
mod quasi_difference;
mod random;
mod space;
mod symmetry;
#[cfg(test)]
mod tests;
mod v_vector;

pub use quasi_difference::{QuasiDifferenceSearch, quasi_difference_matrix};
pub use symmetry::Symmetry;
pub use v_vector::least_v_vector;
