//! Sylvester's doubling.

use super::{Hadamard, MAX_ORDER};
use crate::construct::ConstructError;

/// The Hadamard matrix of order 2^k, the k-th Kronecker power of [[1, 1], [1, −1]].
///
/// Entry (i, j) is (−1) to the number of ones that the binary digits of i and j share.
///
/// All of these must hold:
/// * 2^k is at most [`MAX_ORDER`].
///
/// Guarantee: order 2^k, symmetric, first row and column +1.
///
/// # Errors
/// [`ConstructError::Condition`] when the order is too large.
///
/// Cost: 4^k entries. Reference: Sylvester 1867, Philosophical Magazine 34, 461–475.
///
/// ```
/// use trysquare::construct::hadamard::sylvester;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let h = sylvester(3)?;
/// assert!(h.order() == 8 && h.is_hadamard());
/// let judged = certify(&h.to_array()?, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn sylvester(k: u32) -> Result<Hadamard, ConstructError> {
    const NAME: &str = "Sylvester";
    let order = 1usize.checked_shl(k).filter(|&n| n <= MAX_ORDER).ok_or_else(|| {
        ConstructError::condition(NAME, format!("2^k is at most {MAX_ORDER}, but k is {k}"))
    })?;
    Hadamard::from_fn(NAME, order, |i, j| (i & j).count_ones() % 2 == 1)
}
