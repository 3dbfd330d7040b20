//! Kronecker sums of difference schemes.

use super::Scheme;
use crate::construct::ConstructError;

/// The Kronecker sum A ⊕ B of D(r1, c1, s) and D(r2, c2, s): a D(r1·r2, c1·c2, s).
///
/// Entry (i·r2 + i′, j·c2 + j′) is A\[i\]\[j\] + B\[i′\]\[j′\]. With one column, B may have any number
/// of rows: with [`zero_column`](super::zero_column) every row of A is repeated r2 times.
///
/// All of these must hold:
/// * both schemes are over groups of the same order.
///
/// Guarantee: D(r1·r2, c1·c2, s); with a zero column in both, the result has one.
///
/// # Errors
/// [`ConstructError::Condition`] when the groups differ, [`ConstructError::Array`] when the result
/// does not fit into memory.
///
/// Cost: one group addition per entry. Reference: Shrikhande 1964, Canadian Journal of Mathematics
/// 16, 736–740.
///
/// ```
/// use trysquare::construct::scheme::{field_table, kronecker_sum, masuyama};
/// use trysquare::verify::{Demand, Verdict, certify};
/// let d = kronecker_sum(&masuyama(3)?, &field_table(3, 1, 1)?)?;
/// assert_eq!((d.rows(), d.columns(), d.order()), (18, 18, 3));
/// assert!(d.is_difference_scheme());
/// let judged = certify(&trysquare::construct::scheme::developed(&d)?, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn kronecker_sum(a: &Scheme, b: &Scheme) -> Result<Scheme, ConstructError> {
    if a.order() != b.order() {
        let needs = format!("both groups have the same order, not {} and {}", a.order(), b.order());
        return Err(ConstructError::condition("Kronecker sum", needs));
    }
    let too_large = || crate::array::ArrayError::TooLarge { runs: a.rows(), factors: a.columns() };
    let rows = a.rows().checked_mul(b.rows()).ok_or_else(too_large)?;
    let columns = a.columns().checked_mul(b.columns()).ok_or_else(too_large)?;
    Scheme::from_fn(a.order(), rows, columns, |g, i, j| {
        let of_a = a.entry(i / b.rows(), j / b.columns());
        g.add(of_a, b.entry(i % b.rows(), j % b.columns()))
    })
}
