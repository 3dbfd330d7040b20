//! Linear arrays with mixed levels from subspaces.

use super::super::ConstructError;
use super::{Addition, Room, require};
use crate::algebra::{Field, first_dependent};
use crate::array::Array;

const NAME: &str = "linear array from subspaces";

/// The linear array of the given subspaces of GF(q)^n: a q^e-level factor per e-dimensional
/// subspace, one run per vector of GF(q)^n.
///
/// # Parameters
/// `q`: the order of the field; `n`: the dimension; `subspaces`: a basis of each subspace, every
/// basis vector of length n; `t`: the strength wanted. All of these must hold:
/// * q is a prime power, at most 65,521, and n ≥ 1, t ≥ 1;
/// * there is at least one subspace, every basis has at least one vector and at most 65,535 levels
///   come of it, entries are below q;
/// * any min(t, number of subspaces) subspaces are independent: their sum is direct.
///
/// # Guarantee
/// Strength min(t, k), index q^n / ∏ levels for every t factors; mix ∏ q^(e_i) in the asked order;
/// runs in base q, first coordinate fastest; level `Σ_j q^(j−1) <v, b_j>` in run v.
///
/// # Errors
/// [`ConstructError::Algebra`] when there is no such field; [`ConstructError::Condition`] when a
/// basis is malformed, or a set of subspaces (named by index from 0) is not independent;
/// [`ConstructError::Array`] when memory does not suffice.
///
/// # Cost
/// O(q^n · k) for the array, at most O(C(k, t) · n · (t·e)²) field operations for the check.
///
/// # Reference
/// Wu, Zhang & Wang 1992 for strength 2; Hedayat, Sloane & Stufken 1999, chapters 3 and 9.
///
/// ```
/// use trysquare::construct::field::subspaces;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let plane = vec![vec![1, 0, 0], vec![0, 1, 0]];
/// let points = [[0, 0, 1], [1, 0, 1], [0, 1, 1], [1, 1, 1]].map(|p| vec![p.to_vec()]);
/// let all: Vec<_> = std::iter::once(plane).chain(points).collect();
/// let a = subspaces(2, 3, &all, 2)?;
/// assert_eq!((a.runs(), a.mix().to_string()), (8, "2^4 4^1".to_owned()));
/// assert!(subspaces(2, 3, &all, 3).unwrap_err().to_string().contains("[0, 1, 2]"));
/// let judged = certify(&a, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn subspaces(q: u32, n: u32, subspaces: &[Vec<Vec<u16>>], t: u32) -> Result<Array, ConstructError> {
    let field = Field::new(q)?;
    require(NAME, n >= 1 && t >= 1, || format!("n and t of at least 1, not n = {n}, t = {t}"))?;
    for (i, basis) in subspaces.iter().enumerate() {
        let well_formed =
            basis.iter().all(|b| u32::try_from(b.len()) == Ok(n) && b.iter().all(|&x| u32::from(x) < q));
        require(NAME, well_formed, || {
            format!("basis vectors of {n} coordinates below {q}: subspace {i} has others")
        })?;
        Addition::new(NAME, &field, basis.len())?;
    }
    let room = Room::reserve(NAME, q, n, Some(subspaces.len()))?;
    if let Some(set) = first_dependent(&field, subspaces, usize::try_from(t).unwrap_or(usize::MAX)) {
        let needs = match set.as_slice() {
            [one] => format!("independent basis vectors: those of subspace {one} are not"),
            _ => format!("any {t} subspaces independent: {set:?} are not"),
        };
        return Err(ConstructError::condition(NAME, needs));
    }
    room.fill(&field, subspaces)
}
