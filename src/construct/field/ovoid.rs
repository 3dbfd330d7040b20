//! The elliptic quadric.

use super::super::ConstructError;
use super::{Room, as_subspaces};
use crate::algebra::Field;
use crate::array::Array;

const NAME: &str = "ovoid";

/// The array of an ovoid, OA(q^4, q² + 1, q, 3): one factor per point of an elliptic quadric in
/// PG(3, q).
///
/// The quadric is `X_0 X_1 + f(X_2, X_3) = 0` with `f = X_2² + b X_2 X_3 + c X_3²` irreducible, (b, c)
/// the first pair in lexicographic order for which it is. Its points are (0, 1, 0, 0) and
/// (1, −f(x, y), x, y), in that order, y fastest.
///
/// # Parameters
/// `q`: a prime power, at most 65,521.
///
/// # Guarantee
/// Strength 3, index q, mix q^(q²+1). For q > 2 no set of points in PG(3, q) of strength 3 is larger.
///
/// # Errors
/// [`ConstructError::Algebra`] when there is no such field, [`ConstructError::Condition`] or
/// [`ConstructError::Array`] when the size does not fit.
///
/// # Cost
/// O(q^6), the number of cells.
///
/// # Reference
/// Bose 1947 (odd q), Qvist 1952 (even q); Hedayat, Sloane & Stufken 1999, chapter 5.
///
/// ```
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = trysquare::construct::field::ovoid(3)?;
/// assert_eq!((a.runs(), a.mix().to_string()), (81, "3^10".to_owned()));
/// let judged = certify(&a, &Demand::strength(3))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn ovoid(q: u32) -> Result<Array, ConstructError> {
    let field = Field::new(q)?;
    let factors = (q as usize).checked_pow(2).and_then(|k| k.checked_add(1));
    let room = Room::reserve(NAME, q, 4, factors)?;
    room.fill(&field, &as_subspaces(elliptic_quadric(&field)))
}

/// The q² + 1 points of the quadric.
pub(super) fn elliptic_quadric(field: &Field) -> Vec<Vec<u16>> {
    let form = |b: u16, c: u16, x: u16, y: u16| {
        let cross = field.mul(field.mul(b, x), y);
        field.add(field.add(field.mul(x, x), cross), field.mul(c, field.mul(y, y)))
    };
    // A quadratic form in two variables is irreducible when it has no zero but (0, 0); up to a
    // scalar every other zero has y = 1 or (x, y) = (1, 0), where f = 1.
    let (b, c) = field
        .elements()
        .flat_map(|b| field.elements().map(move |c| (b, c)))
        .find(|&(b, c)| field.elements().all(|x| form(b, c, x, 1) != 0))
        .expect("irreducible quadratic polynomials exist over every finite field");
    let mut points = vec![vec![0, 1, 0, 0]];
    for x in field.elements() {
        points.extend(field.elements().map(|y| vec![1, field.neg(form(b, c, x, y)), x, y]));
    }
    points
}
