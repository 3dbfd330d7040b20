//! Strength 3 with two large factors beside two-level factors.

use super::super::ConstructError;
use super::{Room, Subspace, require};
use crate::algebra::{Field, unit, vector};
use crate::array::Array;

const NAME: &str = "two subspaces and points";

/// Two 2^m-level factors and 2^m (2^d − 1) two-level factors in 2^(2m+d) runs at strength 3.
///
/// In GF(2)^m ⊕ GF(2)^m ⊕ GF(2)^d: the subspaces (x, 0, 0) and (0, x, 0), and the points
/// (a, a + v, c) for all a and all c ≠ 0, where v = (1, 0, …, 0). Any three are independent: the
/// difference of two points lies in neither subspace, because its two first parts are equal, and
/// no three points have sum 0, because the sum of the two first parts is v.
///
/// # Parameters
/// All of these must hold:
/// * `m` ≥ 1 and 2^m ≤ 65,535;
/// * `d` ≥ 1.
///
/// # Guarantee
/// Strength 3; mix (2^m)^2 2^(2^m (2^d − 1)), the large factors first, then a fastest and c slowest;
/// index 2^(d−1) for both large factors and one other. Examples: 4^2·2^4 in 32 runs, 4^2·2^12 in 64,
/// 8^2·2^8 in 128.
///
/// # Errors
/// [`ConstructError::Condition`] when m or d is out of range or the size does not fit,
/// [`ConstructError::Array`] when memory does not suffice.
///
/// # Cost
/// O(N · k) for k factors.
///
/// # Reference
/// Own; the criterion is that of [`subspaces`](super::subspaces).
///
/// ```
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = trysquare::construct::field::two_subspaces(2, 2)?;
/// assert_eq!((a.runs(), a.mix().to_string()), (64, "2^12 4^2".to_owned()));
/// let judged = certify(&a, &Demand::strength(3))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn two_subspaces(m: u32, d: u32) -> Result<Array, ConstructError> {
    require(NAME, (1..16).contains(&m) && d >= 1, || format!("1 ≤ m ≤ 15 and d ≥ 1, not m = {m}, d = {d}"))?;
    let n = d.saturating_add(2 * m);
    let points = 2usize.checked_pow(d).and_then(|c| (c - 1).checked_mul(1 << m));
    let room = Room::reserve(NAME, 2, n, points.and_then(|k| k.checked_add(2)))?;
    let field = Field::new(2)?;
    let (m, d, n) = (m as usize, d as usize, n as usize);
    let mut all: Vec<Subspace> =
        [0, m].map(|from| (from..from + m).map(|i| unit(n, i)).collect()).into_iter().collect();
    for c in 1..1usize << d {
        for a in 0..1usize << m {
            let parts = [vector(&field, m, a), vector(&field, m, a ^ 1), vector(&field, d, c)];
            all.push(vec![parts.concat()]);
        }
    }
    room.fill(&field, &all)
}
