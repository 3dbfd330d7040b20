//! Arrays from linear and Z4-linear codes.
//!
//! The words of a linear code of dual distance d′ are an array of strength d′ − 1 (Delsarte 1973).
//! Functions here return the code, a [`LinearCode`]; its dual distance is computed from all its
//! words, never quoted.
//!
//! | wanted | function |
//! | --- | --- |
//! | strength t over GF(q), q^m − 1 factors (one more for odd t, q = 2: extended) | [`bch`] |
//! | Golay arrays: 2^24 at strength 7, 3^12 at strength 5; half as many factors as levels allow | [`quadratic_residue`] |
//! | any cyclic code | [`dual_of_cyclic`] |
//! | strength 2^(r+1) − 1, 2^m two-level factors | [`reed_muller`] |
//! | strength 5, 2^m two-level factors in 4^m runs: half of what is linear | [`kerdock`] |
//!
//! For few factors, [`greedy_points`](super::field::greedy_points) is often as good.

mod bch;
mod cyclic;
mod kerdock;
mod linear;
mod quadratic_residue;
mod reed_muller;

pub use bch::bch;
pub use cyclic::dual_of_cyclic;
pub use kerdock::kerdock;
pub use linear::LinearCode;
pub use quadratic_residue::quadratic_residue;
pub use reed_muller::reed_muller;

#[cfg(test)]
mod tests;
