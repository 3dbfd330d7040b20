//! Mutually orthogonal Latin squares: k − 2 of order n are an OA(n², n^k, 2).
//!
//! Which one to take:
//!
//! * n a prime power: [`bush`](crate::construct::field::bush) with t = 2 gives n + 1 factors, the
//!   most there can be.
//! * A difference scheme D(n, c, n), that is a difference matrix of index 1:
//!   [`developed_with_rows`](crate::construct::scheme::developed_with_rows) gives c + 1 factors.
//! * [`quasi_difference`]: a matrix with empty places that stand for points at infinity; from
//!   [`v_vector`] or stored.
//! * [`level_product`](crate::construct::compose::level_product) (MacNeish 1922): as many as the
//!   poorer of two factors of n.
//! * [`wilson`]: n = mt + u + v, blocks of a larger design inflated; best for larger n.

mod quasi_difference;
#[cfg(test)]
mod tests;
mod v_vector;
mod wilson;

pub use quasi_difference::{QuasiDifference, quasi_difference, quasi_difference_levels};
pub use v_vector::v_vector;
pub use wilson::{wilson, wilson_levels};

use super::ConstructError;
use crate::array::Array;

/// An error unless the first `k` factors of `array`, called `what`, can be an OA(s², s^k, 2) by
/// their shape.
fn is_square(
    construction: &'static str,
    what: &str,
    array: &Array,
    k: usize,
    s: usize,
) -> Result<(), ConstructError> {
    let fits = array.factors() >= k && array.levels()[..k].iter().all(|&l| usize::from(l) == s);
    if fits && s.checked_mul(s) == Some(array.runs()) {
        return Ok(());
    }
    Err(ConstructError::condition(
        construction,
        format!("{what} has s² runs and at least {k} factors of s levels first, s = {s}"),
    ))
}
