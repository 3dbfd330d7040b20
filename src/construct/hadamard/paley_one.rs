//! Paley's first construction.

use super::{Hadamard, squares};
use crate::algebra::Field;
use crate::construct::ConstructError;

/// The Hadamard matrix of order q + 1 for a prime power q ≡ 3 (mod 4).
///
/// H = I + S with the skew matrix S = [[0, e], [−eᵀ, Q]], Q the table χ(x − y) of the quadratic
/// character over GF(q), x and y in the order of [`Field`].
///
/// All of these must hold:
/// * q is a prime power up to 65,521,
/// * q ≡ 3 (mod 4).
///
/// Guarantee: order q + 1, H + Hᵀ = 2I.
///
/// # Errors
/// [`ConstructError::Algebra`] when q is no prime power, [`ConstructError::Condition`] when it is
/// not 3 modulo 4.
///
/// Cost: (q + 1)² entries. Reference: Paley 1933, Journal of Mathematics and Physics 12, 311–320.
///
/// ```
/// use trysquare::construct::hadamard::paley_one;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let h = paley_one(27)?;
/// assert!(h.order() == 28 && h.is_hadamard());
/// let judged = certify(&h.to_array()?, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn paley_one(q: u32) -> Result<Hadamard, ConstructError> {
    const NAME: &str = "Paley I";
    let field = Field::new(q)?;
    if q % 4 != 3 {
        return Err(ConstructError::condition(NAME, format!("q is 3 modulo 4, but q is {q}")));
    }
    let square = squares(&field);
    Hadamard::from_fn(NAME, q as usize + 1, |i, j| {
        i != j && i > 0 && (j == 0 || !square[field.sub((i - 1) as u16, (j - 1) as u16) as usize])
    })
}
