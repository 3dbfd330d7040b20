//! The Rao–Hamming arrays.

use super::super::ConstructError;
use super::{Room, as_subspaces, require};
use crate::algebra::{Field, projective_point_count, projective_points};
use crate::array::Array;

const NAME: &str = "Rao-Hamming";

/// The Rao–Hamming array OA(q^n, (q^n − 1)/(q − 1), q, 2): one factor per point of PG(n−1, q).
///
/// # Parameters
/// All of these must hold:
/// * `q` is a prime power, at most 65,521;
/// * `n` ≥ 2.
///
/// # Guarantee
/// Strength 2, index q^(n−2), mix q^((q^n − 1)/(q − 1)), saturated: no further factor fits. The
/// factors stand in the order of
/// [`projective_points`](crate::algebra::projective_points).
///
/// # Errors
/// [`ConstructError::Algebra`] when there is no such field, [`ConstructError::Condition`] when n is
/// below 2 or the sizes do not fit, [`ConstructError::Array`] when memory does not suffice.
///
/// # Cost
/// O(q^(2n−1)), the number of cells.
///
/// # Reference
/// Rao 1947; Hedayat, Sloane & Stufken 1999, section 3.4 (the dual of the Hamming code).
///
/// ```
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = trysquare::construct::field::rao_hamming(3, 2)?;
/// assert_eq!((a.runs(), a.mix().to_string()), (9, "3^4".to_owned()));
/// let judged = certify(&a, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn rao_hamming(q: u32, n: u32) -> Result<Array, ConstructError> {
    let field = Field::new(q)?;
    require(NAME, n >= 2, || format!("n of at least 2, not {n}"))?;
    let room = Room::reserve(NAME, q, n, projective_point_count(q, n))?;
    let points = as_subspaces(projective_points(&field, n as usize));
    room.fill(&field, &points)
}
