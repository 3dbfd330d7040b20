//! Bush's arrays of index 1.

use super::super::ConstructError;
use super::{Room, as_subspaces, require};
use crate::algebra::{Field, unit};
use crate::array::Array;

const NAME: &str = "Bush";

/// Bush's array OA(q^t, q + 1, q, t): the values of all polynomials of degree below t, and their
/// leading coefficient. For even q and t = 3 there is one factor more, the nucleus of the conic,
/// which completes a hyperoval: OA(q^3, q + 2, q, 3).
///
/// # Parameters
/// All of these must hold:
/// * `q` is a prime power, at most 65,521;
/// * 2 ≤ `t` ≤ q + 1.
///
/// # Guarantee
/// Strength t, index 1; mix q^(q+1), or q^(q+2) when q is even and t = 3. Factor x < q is the value
/// at x, factor q the coefficient of X^(t−1), factor q + 1 (when there) that of X. Run i is the
/// polynomial whose coefficients are the base-q digits of i, constant term first.
///
/// # Errors
/// [`ConstructError::Algebra`] when there is no such field, [`ConstructError::Condition`] when t is
/// out of range or q^t does not fit, [`ConstructError::Array`] when memory does not suffice.
///
/// # Cost
/// O(q^(t+1)).
///
/// # Reference
/// Bush 1952, *Orthogonal arrays of index unity*; Hedayat, Sloane & Stufken 1999, theorem 3.1 and, for
/// the factor more when q is even, theorem 3.2.
///
/// ```
/// use trysquare::construct::field::bush;
/// use trysquare::verify::{Demand, Verdict, certify};
/// assert_eq!(bush(3, 2)?.mix().to_string(), "3^4");
/// assert_eq!(bush(4, 3)?.mix().to_string(), "4^6");
/// let judged = certify(&bush(4, 3)?, &Demand::strength(3))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn bush(q: u32, t: u32) -> Result<Array, ConstructError> {
    let field = Field::new(q)?;
    require(NAME, t >= 2 && t - 1 <= q, || format!("2 ≤ t ≤ q + 1 = {}, not t = {t}", q + 1))?;
    let nucleus = q.is_multiple_of(2) && t == 3;
    let room = Room::reserve(NAME, q, t, Some(q as usize + 1 + usize::from(nucleus)))?;
    let mut points: Vec<Vec<u16>> =
        field.elements().map(|x| (0..t).map(|power| field.pow(x, power)).collect()).collect();
    points.push(unit(t as usize, t as usize - 1));
    if nucleus {
        points.push(unit(3, 1));
    }
    room.fill(&field, &as_subspaces(points))
}
