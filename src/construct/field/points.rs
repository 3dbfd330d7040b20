//! Linear arrays from points of PG(n−1, q).

use super::super::ConstructError;
use super::{Room, as_subspaces, require};
use crate::algebra::{Field, first_dependent};
use crate::array::Array;

const NAME: &str = "linear array from points";

/// The linear array of the given points: one q-level factor per point, one run per vector of
/// GF(q)^n.
///
/// # Parameters
/// `q`: the order of the field. `points`: vectors of n field elements each, the columns of a
/// generator matrix; all of these must hold:
/// * q is a prime power, at most 65,521;
/// * there is at least one point and all have the same length n ≥ 1;
/// * every entry is below q and no point is the zero vector.
///
/// # Guarantee
/// OA(q^n, q^k, t) for k points, t the largest number such that any t points are linearly
/// independent; [`points_strength`] tells. In words of codes: t + 1 is the minimum distance of the
/// code whose parity-check matrix has the points as columns. Index q^(n−t). The symbol of point `b` in
/// run `v` is `<v, b>`; runs in base q, first coordinate fastest.
///
/// # Errors
/// [`ConstructError::Algebra`] when there is no such field, [`ConstructError::Condition`] when a
/// point is malformed or q^n does not fit, [`ConstructError::Array`] when memory does not suffice.
///
/// # Cost
/// O(q^n · k).
///
/// # Reference
/// Bose 1947, *Mathematical theory of the symmetrical factorial design*; for codes, Delsarte 1973.
///
/// ```
/// use trysquare::construct::field::{points, points_strength};
/// use trysquare::verify::{Demand, Verdict, certify};
/// let fano = [[1, 0, 0], [0, 1, 0], [0, 0, 1], [1, 1, 1]].map(|p| p.to_vec());
/// let a = points(2, &fano)?;
/// assert_eq!((a.runs(), a.mix().to_string()), (8, "2^4".to_owned()));
/// assert!(points_strength(2, &fano, 3)? && !points_strength(2, &fano, 4)?);
/// let judged = certify(&a, &Demand::strength(3))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn points(q: u32, points: &[Vec<u16>]) -> Result<Array, ConstructError> {
    let (field, n) = checked(q, points)?;
    let room = Room::reserve(NAME, q, n, Some(points.len()))?;
    room.fill(&field, &as_subspaces(points.iter().cloned()))
}

/// Whether the array of these points has strength `t`: any `t` of them are linearly independent.
///
/// Parameters as for [`points`]; also 1 ≤ t ≤ number of points.
///
/// # Errors
/// [`ConstructError::Algebra`] when there is no such field, [`ConstructError::Condition`] when a
/// point is malformed or `t` is out of range.
///
/// # Cost
/// At most O(C(k, t) · n · t) field operations; it stops at the first dependent set.
pub fn points_strength(q: u32, points: &[Vec<u16>], t: u32) -> Result<bool, ConstructError> {
    let (field, _) = checked(q, points)?;
    let t = usize::try_from(t).unwrap_or(usize::MAX);
    require(NAME, (1..=points.len()).contains(&t), || {
        format!("a strength from 1 to the number of points, {}, not {t}", points.len())
    })?;
    Ok(first_dependent(&field, &as_subspaces(points.iter().cloned()), t).is_none())
}

/// The field and n, when the points are well formed.
fn checked(q: u32, points: &[Vec<u16>]) -> Result<(Field, u32), ConstructError> {
    let field = Field::new(q)?;
    let n = points.first().map_or(0, Vec::len);
    require(NAME, n > 0, || "at least one point with at least one coordinate".to_owned())?;
    for (i, point) in points.iter().enumerate() {
        require(NAME, point.len() == n, || {
            format!("points of one length: point {i} has {} coordinates, point 0 has {n}", point.len())
        })?;
        require(NAME, point.iter().all(|&x| u32::from(x) < q), || {
            format!("coordinates below {q}: point {i} is {point:?}")
        })?;
        require(NAME, point.iter().any(|&x| x != 0), || format!("no zero vector: point {i} is one"))?;
    }
    let n = u32::try_from(n).map_err(|_| ConstructError::condition(NAME, "fewer coordinates"))?;
    Ok((field, n))
}
