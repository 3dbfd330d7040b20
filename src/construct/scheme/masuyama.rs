//! Masuyama's schemes with twice as many rows as group elements.

use super::{Scheme, field_table};
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
/// normalised afterwards. Within one v the difference of two columns is linear in x. Between
/// v = 0 and v = 1 it is, over u = 0 and u = 1, a quadratic polynomial with leading coefficient 1
/// and n and the same value at its vertex, so together the two take every value twice.
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
/// let d = masuyama(5)?;
/// assert_eq!((d.rows(), d.columns(), d.order()), (10, 10, 5));
/// assert!(d.is_difference_scheme());
/// # Ok::<(), trysquare::construct::ConstructError>(())
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
    let beta = [[field.mul(quarter, field.sub(1, invert(n))), 0], [0, field.mul(quarter, field.sub(1, n))]];
    let alpha = [[1, 0], [n, 0]];
    let gamma = [[1, 1], [1, n]];
    let size = q as usize;
    let scheme = Scheme::from_fn(q as u16, 2 * size, 2 * size, |_, i, j| {
        let (u, x, v, y) = (i / size, (i % size) as u16, j / size, (j % size) as u16);
        let term = |coefficient, a, b| field.mul(coefficient, field.mul(a, b));
        let mixed = field.add(term(alpha[u][v], x, x), term(gamma[u][v], x, y));
        field.add(mixed, term(beta[u][v], y, y))
    })?;
    Ok(scheme.normalised())
}
