//! Paley's second construction.

use super::{Hadamard, squares};
use crate::algebra::Field;
use crate::construct::ConstructError;

/// The Hadamard matrix of order 2(q + 1) for a prime power q ≡ 1 (mod 4).
///
/// H = C ⊗ [[1, 1], [1, −1]] + I ⊗ [[1, −1], [−1, −1]] with the symmetric conference matrix
/// C = [[0, e], [eᵀ, Q]], Q the table χ(x − y) of the quadratic character over GF(q), x and y in the
/// order of [`Field`].
///
/// All of these must hold:
/// * q is a prime power,
/// * q ≡ 1 (mod 4),
/// * 2(q + 1) is at most [`MAX_ORDER`](super::MAX_ORDER).
///
/// Guarantee: order 2(q + 1), symmetric.
///
/// # Errors
/// [`ConstructError::Algebra`] when q is no prime power, [`ConstructError::Condition`] when it is
/// not 1 modulo 4 or too large.
///
/// Cost: 4(q + 1)² entries. Reference: Paley 1933, Journal of Mathematics and Physics 12, 311–320.
///
/// ```
/// use trysquare::construct::hadamard::paley_two;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let h = paley_two(17)?;
/// assert!(h.order() == 36 && h.is_hadamard());
/// let judged = certify(&h.to_array()?, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn paley_two(q: u32) -> Result<Hadamard, ConstructError> {
    const NAME: &str = "Paley II";
    let field = Field::new(q)?;
    if q % 4 != 1 {
        return Err(ConstructError::condition(NAME, format!("q is 1 modulo 4, but q is {q}")));
    }
    let square = squares(&field);
    Hadamard::from_fn(NAME, 2 * (q as usize + 1), |row, column| {
        let (i, a, j, b) = (row / 2, row % 2, column / 2, column % 2);
        if i == j {
            return (a, b) != (0, 0);
        }
        let conference_negative =
            i > 0 && j > 0 && !square[field.sub((i - 1) as u16, (j - 1) as u16) as usize];
        conference_negative ^ (a == 1 && b == 1)
    })
}
