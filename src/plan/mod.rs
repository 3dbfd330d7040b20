//! From an array to a plan: which factor on which column, and what is confused with what.
//!
//! | folder | what it does |
//! | --- | --- |
//! | `assign` | factors onto the columns of an array, so that wanted interactions can be estimated |
//! | `effects` | what a plan can tell apart and how well: estimable terms, aliasing, efficiencies, inflation |
//!
//! Behind the feature `plan`, on by default: it needs a crate for linear algebra.

pub mod assign;
pub mod effects;
