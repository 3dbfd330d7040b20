//! Hadamard matrices: n × n matrices H over ±1 with H·Hᵀ = nI, and through
//! [`Hadamard::to_array`] the saturated arrays OA(n, 2^{n−1}, 2).
//!
//! An order above 2 is a multiple of 4. When to prefer which:
//!
//! | order n | use |
//! | --- | --- |
//! | 2^k | [`sylvester`]: linear, every column a sum of k generators |
//! | q + 1, q ≡ 3 (mod 4) a prime power | [`paley_one`] |
//! | 2(q + 1), q ≡ 1 (mod 4) a prime power | [`paley_two`] |
//! | 4q, q ≡ 1 (mod 4) a prime power, H(q − 1) known | [`miyamoto`] |
//! | a product of two orders that are known | [`kronecker`] |
//! | 4m otherwise | [`goethals_seidel`] from four rows that somebody found (Williamson's are the symmetric ones) |
//! | 4(3n − 1) otherwise | [`turyn_type`] from a set of Turyn-type sequences |
//! | 4tw, t and w coprime | [`cooper_wallis`] from T-matrices of order t and Williamson's of order w |
//!
//! The first five need nothing but the order. Where several reach the same order they give
//! matrices that are in general not equivalent; prefer the row that stands higher, which costs
//! less and has the larger group of symmetries. The data for the last three are arguments; those
//! known to the project lie in the folder `catalog/`.
//!
//! [`conference`] builds their relatives with a zero diagonal, C·Cᵀ = (n − 1)I, for the
//! [blocks](crate::construct::conference_blocks).
//!
//! **Orders not reached.** Up to 1000 there is a matrix of every order but 668, 716, 892, for which
//! none is known in the literature, and 996. For 996 = 4·249 the rows constant on the orbits of the
//! only useful group of units modulo 249 (order 41) were tried exhaustively, and there are none;
//! T-matrices of order 83 = 3·28 − 1, from Turyn-type sequences with n = 28, times Williamson's of
//! order 3 would do, but we have no such sequences.

mod conference;
mod cooper_wallis;
mod four_circulants;
mod kronecker;
mod matrix;
mod miyamoto;
mod paley_one;
mod paley_two;
mod sylvester;
mod turyn;

pub use conference::{MAX_CONFERENCE_ORDER, conference, has_conference};
pub use cooper_wallis::cooper_wallis;
pub use four_circulants::goethals_seidel;
pub use kronecker::kronecker;
pub use matrix::{Hadamard, MAX_ORDER};
pub use miyamoto::miyamoto;
pub use paley_one::paley_one;
pub use paley_two::paley_two;
pub use sylvester::sylvester;
pub use turyn::{t_sequences, turyn_type};

use super::ConstructError;
use crate::algebra::Field;

/// Which elements of the field are squares of non-zero elements, indexed by element.
fn squares(field: &Field) -> Vec<bool> {
    field.elements().map(|a| field.is_nonzero_square(a)).collect()
}

/// Refuses a sequence with an entry other than ±1.
fn check_signs(construction: &'static str, name: &str, signs: &[i8]) -> Result<(), ConstructError> {
    match signs.iter().position(|&e| e != 1 && e != -1) {
        None => Ok(()),
        Some(i) => Err(ConstructError::condition(
            construction,
            format!("every entry is 1 or -1, but entry {i} of {name} is {}", signs[i]),
        )),
    }
}

#[cfg(test)]
mod tests;
