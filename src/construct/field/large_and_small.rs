//! One factor with many levels beside many factors with fewer.

use super::super::ConstructError;
use super::{require, spread::partition};
use crate::array::Array;

const NAME: &str = "one large and many small subspaces";

/// One p^e-level factor and p^e factors of p^d levels in p^(e+d) runs.
///
/// # Parameters
/// All of these must hold:
/// * `p` is a prime power;
/// * `e` ≥ `d` ≥ 1;
/// * p^e ≤ 65,535.
///
/// # Guarantee
/// Strength 2, index p^(e−d) for two small factors and 1 for a small one with the large one; mix
/// (p^e)^1 (p^d)^(p^e), the large factor first; saturated. Examples: 8·4^8 in 32 runs, 16·4^16 in 64.
/// Runs are numbered by the digits to the base of the prime below p.
///
/// # Errors
/// [`ConstructError::Algebra`] when there is no such field, [`ConstructError::Condition`] when e or
/// d is out of range, [`ConstructError::Array`] when memory does not suffice.
///
/// # Cost
/// O(p^(2e+d)), the number of cells.
///
/// # Reference
/// Wu, Zhang & Wang 1992; Hedayat, Sloane & Stufken 1999, chapter 9.
///
/// ```
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = trysquare::construct::field::large_and_small(2, 3, 2)?;
/// assert_eq!((a.runs(), a.mix().to_string()), (32, "4^8 8^1".to_owned()));
/// let judged = certify(&a, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn large_and_small(p: u32, e: u32, d: u32) -> Result<Array, ConstructError> {
    require(NAME, e >= d && d >= 1, || format!("e ≥ d ≥ 1, not e = {e}, d = {d}"))?;
    partition(NAME, p, 1, d, e)
}
