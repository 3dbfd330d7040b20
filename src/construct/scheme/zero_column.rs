//! The scheme of one zero column.

use super::Scheme;
use crate::construct::ConstructError;

/// The difference scheme D(r, 1, s) of one zero column.
///
/// In a Kronecker sum it repeats rows; developed, it is every level r times.
///
/// All of these must hold:
/// * r ≥ 1, s ≥ 2 (s need not divide r).
///
/// Guarantee: D(r, 1, s), all entries zero.
///
/// # Errors
/// [`ConstructError::Condition`] or [`ConstructError::Algebra`] when r or s is too small,
/// [`ConstructError::Array`] when the column does not fit into memory.
///
/// Cost: r entries. Reference: by the definition.
///
/// ```
/// use trysquare::construct::scheme::zero_column;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let d = zero_column(5, 3)?;
/// assert_eq!((d.rows(), d.columns(), d.order()), (5, 1, 3));
/// let judged = certify(&trysquare::construct::scheme::developed(&d)?, &Demand::strength(1))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn zero_column(r: usize, s: u16) -> Result<Scheme, ConstructError> {
    Scheme::from_fn(s, r, 1, |_, _, _| 0)
}
