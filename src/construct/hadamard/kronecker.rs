//! Kronecker products.

use super::{Hadamard, MAX_ORDER};
use crate::construct::ConstructError;

/// The Kronecker product A ⊗ B of Hadamard matrices of orders m and n.
///
/// Entry (i·n + i′, j·n + j′) is A\[i\]\[j\]·B\[i′\]\[j′\].
///
/// All of these must hold:
/// * m·n is at most [`MAX_ORDER`].
///
/// Guarantee: order m·n.
///
/// # Errors
/// [`ConstructError::Condition`] when the order is too large.
///
/// Cost: (m·n)² entries. Reference: Sylvester 1867, Philosophical Magazine 34, 461–475.
///
/// ```
/// use trysquare::construct::hadamard::{kronecker, paley_one, sylvester};
/// use trysquare::verify::{Demand, Verdict, certify};
/// let h = kronecker(&sylvester(1)?, &paley_one(11)?)?;
/// assert!(h.order() == 24 && h.is_hadamard());
/// let judged = certify(&h.to_array()?, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn kronecker(a: &Hadamard, b: &Hadamard) -> Result<Hadamard, ConstructError> {
    const NAME: &str = "Kronecker product";
    let (m, n) = (a.order(), b.order());
    let order = m.checked_mul(n).filter(|&o| o <= MAX_ORDER).ok_or_else(|| {
        ConstructError::condition(NAME, format!("the order is at most {MAX_ORDER}, not {m} x {n}"))
    })?;
    Hadamard::from_fn(NAME, order, |i, j| a.negative(i / n, j / n) ^ b.negative(i % n, j % n))
}
