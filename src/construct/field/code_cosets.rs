//! Strength 3 from the cosets of a linear code.

use super::super::ConstructError;
use super::{Room, Subspace, require};
use crate::algebra::{Field, null_space, projective_point_count, projective_points, unit};
use crate::array::Array;

const NAME: &str = "cosets of a code";

/// One q^(n−k)-level factor and n q-level factors in q^n runs at strength 3.
///
/// The runs are all words of length n over GF(q), the q-level factors their letters, and the level
/// of the large factor is the coset of an [n, k] code C in which the word lies (its syndrome). Any
/// two letters take all pairs equally often in each coset, because no two columns of a generator
/// matrix of C are proportional: the dual distance of C is at least 3.
///
/// # Parameters
/// All of these must hold:
/// * `q` is a prime power, at most 65,521;
/// * 2 ≤ `k` < `n` ≤ (q^k − 1)/(q − 1); for k = 2: 3 ≤ n ≤ q + 1;
/// * q^(n−k) ≤ 65,535.
///
/// # Guarantee
/// Strength 3; mix (q^(n−k))^1 q^n, the large factor first; index q^(k−2) with the large factor,
/// q^(n−3) without it. Examples: 9·3^4 in 81 runs (n = 4, k = 2: nine cosets of the tetracode),
/// 16·4^4 in 256 (n = 4, k = 2), 16·2^7 in 128 (n = 7, k = 3).
///
/// # Errors
/// [`ConstructError::Algebra`] when there is no such field, [`ConstructError::Condition`] when n or
/// k is out of range or the size does not fit, [`ConstructError::Array`] when memory does not
/// suffice.
///
/// # Cost
/// O(q^n · n).
///
/// # Reference
/// Delsarte 1973 for dual distance and strength; the codes are shortened dual Hamming codes.
///
/// ```
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = trysquare::construct::field::code_cosets(3, 4, 2)?;
/// assert_eq!((a.runs(), a.mix().to_string()), (81, "3^4 9^1".to_owned()));
/// let judged = certify(&a, &Demand::strength(3))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn code_cosets(q: u32, n: u32, k: u32) -> Result<Array, ConstructError> {
    let field = Field::new(q)?;
    // A number of points that does not fit is above every n.
    let enough = projective_point_count(q, k).is_none_or(|points| points >= n as usize);
    require(NAME, k >= 2 && k < n && enough, || {
        format!("2 ≤ k < n ≤ ({q}^k − 1)/({q} − 1), not n = {n}, k = {k}")
    })?;
    let levels_fit = q.checked_pow(n - k).is_some_and(|s| s <= u32::from(u16::MAX));
    require(NAME, levels_fit, || format!("{q}^{} levels: a factor has 2 to 65535 levels", n - k))?;
    let room = Room::reserve(NAME, q, n, (n as usize).checked_add(1))?;
    let (n, k) = (n as usize, k as usize);
    let checks = null_space(&field, &generator(&field, n, k), n);
    let letters = (0..n).map(|i| vec![unit(n, i)]);
    let all: Vec<Subspace> = std::iter::once(checks).chain(letters).collect();
    room.fill(&field, &all)
}

/// A k × n generator matrix of rank k with columns that are different points of PG(k−1, q): the
/// unit vectors, then the other points in their order.
fn generator(field: &Field, n: usize, k: usize) -> Vec<Vec<u16>> {
    let others = projective_points(field, k).filter(|p| p.iter().filter(|&&x| x != 0).count() > 1);
    let columns: Vec<Vec<u16>> = (0..k).map(|i| unit(k, i)).chain(others).take(n).collect();
    (0..k).map(|row| columns.iter().map(|c| c[row]).collect()).collect()
}
