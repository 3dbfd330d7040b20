//! Finite fields, finite abelian groups, and linear algebra over GF(q).

mod field;
mod geometry;
mod group;
mod linear;
mod number;

use thiserror::Error;

pub use field::{Field, prime_powers};
pub use geometry::{projective_point_count, projective_points, span, unit, vector};
pub use group::AbelianGroup;
pub use linear::{Echelon, dot, first_dependent, independent, null_space, rank, row_echelon};
pub use number::{divisors, factorise, is_prime, prime_power};

/// What can be wrong with a request for an algebraic object.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[non_exhaustive]
pub enum AlgebraError {
    /// There is no field with `q` elements, or `q` is above 65,535.
    #[error("there is no field with {q} elements here: write a prime power from 2 to 65,521")]
    NotAPrimePower {
        /// The number of elements asked for.
        q: u32,
    },
    /// The cyclic factors do not make a group of order 2 to 65,535.
    #[error(
        "{factors:?} is no group here: write cyclic orders of at least 2 whose product is at most 65,535"
    )]
    Group {
        /// The cyclic orders asked for.
        factors: Vec<u16>,
    },
}
