//! Hadamard matrices read as difference schemes.

use super::Scheme;
use crate::construct::ConstructError;
use crate::construct::hadamard::Hadamard;

/// The difference scheme D(n, n, 2) of a Hadamard matrix of order n: + ↦ 0, − ↦ 1.
///
/// The matrix is normalised first. It may have any order: H·Hᵀ = nI is all that must hold, and
/// the type [`Hadamard`] stands for it.
///
/// Guarantee: D(n, n, 2), first row and first column zero.
///
/// # Errors
/// [`ConstructError::Array`] when the memory cannot be had.
///
/// Cost: n² entries. Reference: Bose & Bush 1952, Annals of Mathematical Statistics 23, 508–524.
///
/// ```
/// use trysquare::construct::{hadamard::paley_one, scheme::from_hadamard};
/// use trysquare::verify::{Demand, Verdict, certify};
/// let d = from_hadamard(&paley_one(11)?)?;
/// assert_eq!((d.rows(), d.columns(), d.order()), (12, 12, 2));
/// let judged = certify(&trysquare::construct::scheme::developed(&d)?, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn from_hadamard(matrix: &Hadamard) -> Result<Scheme, ConstructError> {
    let h = matrix.normalised();
    Scheme::from_fn(2, h.order(), h.order(), |_, i, j| u16::from(h.entry(i, j) < 0))
}
