//! Masuyama's schemes with twice as many rows as group elements.

use super::{Scheme, field_table, quadratic_forms};
use crate::algebra::Field;
use crate::construct::ConstructError;

/// The difference scheme D(2q, 2q, q) over the additive group of GF(q).
///
/// For q = 2^m it is [`field_table`]`(2, m + 1, m)`. For odd q, rows (u, x) and columns (v, y) with
/// u, v in {0, 1} and x, y in GF(q) hold quadratic forms in x and y: with a non-square n,
///
/// ```text
/// (0, x), (0, y):  x² + xy + (1 − 1/n)y²/4        (0, x), (1, y):  xy
/// (1, x), (0, y):  nx² + xy                       (1, x), (1, y):  nxy + (1 − n)y²/4
/// ```
///
/// put together by [`quadratic_forms`].
///
/// All of these must hold:
/// * q is a prime power,
/// * q = 2^m: 2q is at most 32,768.
///
/// Guarantee: D(2q, 2q, q), first row and first column zero.
///
/// # Errors
/// [`ConstructError::Algebra`] when there is no such field.
///
/// Cost: 4q² entries. References: Masuyama 1957, Sankhyā 18, 181–184; Jungnickel 1979,
/// Mathematische Zeitschrift 167, 49–60.
///
/// ```
/// use trysquare::construct::scheme::masuyama;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let d = masuyama(5)?;
/// assert_eq!((d.rows(), d.columns(), d.order()), (10, 10, 5));
/// assert!(d.is_difference_scheme());
/// let judged = certify(&trysquare::construct::scheme::developed(&d)?, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn masuyama(q: u32) -> Result<Scheme, ConstructError> {
    let field = Field::new(q)?;
    if field.characteristic() == 2 {
        return field_table(2, field.degree() + 1, field.degree());
    }
    let n = field.generator();
    let invert = |a: u16| field.inv(a).expect("not zero in odd characteristic");
    let two = field.add(1, 1);
    let quarter = invert(field.mul(two, two));
    let beta = |c: u16| field.mul(quarter, field.sub(1, c));
    quadratic_forms(q, &[[[1, 1, beta(invert(n))], [0, 1, 0]], [[n, 1, 0], [0, n, beta(n)]]])
}
