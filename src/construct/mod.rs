//! One construction per file, named as in the literature.
//!
//! Every function here returns a bare [`Array`](crate::array::Array) (or Hadamard matrix, or
//! difference scheme) whose strength the cited theorem guarantees. Nothing is judged here: whoever
//! hands an array out passes it through `verify` first.

pub mod code;
pub mod compose;
pub mod field;
pub mod hadamard;
pub mod latin;
pub mod scheme;
pub mod strength3;
#[cfg(test)]
mod testing;

mod blocks;
mod conference_blocks;
mod orbits;

use thiserror::Error;

use crate::algebra::AlgebraError;
use crate::array::ArrayError;

pub use blocks::{block_product, block_types};
pub use conference_blocks::{conference_blocks, has_conference_blocks};
pub use orbits::{OrbitColumn, orbit_array};

/// Why a construction cannot be carried out.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[non_exhaustive]
pub enum ConstructError {
    /// One of the conditions in the construction's documentation does not hold.
    #[error("{construction}: {needs}")]
    Condition {
        /// The construction, by its name in the literature.
        construction: &'static str,
        /// What must hold and does not, with the values given.
        needs: String,
    },
    /// An algebraic object that does not exist.
    #[error(transparent)]
    Algebra(#[from] AlgebraError),
    /// The result is no array, or too large a one.
    #[error(transparent)]
    Array(#[from] ArrayError),
}

impl ConstructError {
    /// A broken condition.
    pub(crate) fn condition(construction: &'static str, needs: impl Into<String>) -> Self {
        Self::Condition { construction, needs: needs.into() }
    }
}
