//! The multiplication table of a field.

use super::Scheme;
use crate::algebra::{AlgebraError, Field};
use crate::construct::ConstructError;

/// The difference scheme D(p^a, p^a, p^b): the multiplication table of GF(p^a), every product
/// projected to its first b digits.
///
/// Row x and column y, in the order of [`Field`], hold the projection of x·y, an additive map onto
/// the elementary abelian group of order p^b.
///
/// All of these must hold:
/// * p is a prime, p^a at most 65,535,
/// * 1 ≤ b ≤ a.
///
/// Guarantee: D(p^a, p^a, p^b), first row and first column zero, and the rows of the developed
/// array form a group. For b = a (index 1) it is the whole table.
///
/// # Errors
/// [`ConstructError::Algebra`] when there is no field with p^a elements, p not prime included;
/// [`ConstructError::Condition`] when b is out of range.
///
/// Cost: p^{2a} field multiplications. Reference: Bose & Bush 1952, Annals of Mathematical
/// Statistics 23, 508–524 (difference schemes).
///
/// ```
/// use trysquare::construct::scheme::field_table;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let d = field_table(3, 2, 1)?;
/// assert_eq!((d.rows(), d.columns(), d.order()), (9, 9, 3));
/// assert!(d.is_difference_scheme());
/// let judged = certify(&trysquare::construct::scheme::developed(&d)?, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn field_table(p: u16, a: u32, b: u32) -> Result<Scheme, ConstructError> {
    if b == 0 || b > a {
        let needs = format!("1 <= b <= a, but a is {a} and b is {b}");
        return Err(ConstructError::condition("Field table", needs));
    }
    let q = u32::from(p).checked_pow(a).unwrap_or(u32::MAX);
    let field = Field::new(q)?;
    if field.characteristic() != u32::from(p) {
        return Err(AlgebraError::NotAPrimePower { q: u32::from(p) }.into());
    }
    let s = p.pow(b);
    Scheme::from_fn(s, q as usize, q as usize, |_, x, y| field.mul(x as u16, y as u16) % s)
}
