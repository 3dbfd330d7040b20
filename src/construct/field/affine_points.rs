//! All points of AG(n−1, 2).

use super::super::ConstructError;
use super::{Room, as_subspaces, require};
use crate::algebra::{Field, vector};
use crate::array::Array;

const NAME: &str = "affine points";

/// OA(2^n, 2^(n−1), 2, 3): one factor per point of AG(n−1, 2), that is, per vector of GF(2)^n
/// whose last coordinate is 1.
///
/// # Parameters
/// `n` ≥ 3.
///
/// # Guarantee
/// Strength 3, index 2^(n−3), mix 2^(2^(n−1)); meets Rao's bound: no strength-3 array of 2^n runs
/// has more two-level factors. Factor j is the point
/// whose first n − 1 coordinates are the binary digits of j, first coordinate fastest.
///
/// # Errors
/// [`ConstructError::Condition`] when n is below 3 or the size does not fit,
/// [`ConstructError::Array`] when memory does not suffice.
///
/// # Cost
/// O(2^(2n−1)), the number of cells.
///
/// # Reference
/// Rao 1947; the dual of the extended Hamming code, the first-order Reed–Muller code (MacWilliams &
/// Sloane 1977, chapter 13).
///
/// ```
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = trysquare::construct::field::affine_points(4)?;
/// assert_eq!((a.runs(), a.mix().to_string()), (16, "2^8".to_owned()));
/// let judged = certify(&a, &Demand::strength(3))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn affine_points(n: u32) -> Result<Array, ConstructError> {
    require(NAME, n >= 3, || format!("n of at least 3, not {n}"))?;
    let factors = 2usize.checked_pow(n - 1);
    let room = Room::reserve(NAME, 2, n, factors)?;
    let field = Field::new(2)?;
    let points = (0..factors.unwrap_or(0)).map(|j| {
        let mut point = vector(&field, n as usize - 1, j);
        point.push(1);
        point
    });
    room.fill(&field, &as_subspaces(points))
}
