//! Difference schemes over direct sums of groups.

use super::Scheme;
use super::group::{canonical_weights, digits, primes};
use crate::array::ArrayError;
use crate::construct::ConstructError;

/// The difference scheme D(r1·r2, min(c1, c2), s1·s2) whose entry in row i·r2 + i′ and column j is
/// the pair (A\[i\]\[j\], B\[i′\]\[j\]) in the direct sum of the two groups.
///
/// The pair is written in the canonical group of order s1·s2; where a prime divides both orders,
/// the digits of A come first.
///
/// All of these must hold:
/// * s1·s2 is at most 65,535.
///
/// Guarantee: D(r1·r2, min(c1, c2), s1·s2); a column that is zero in both is zero.
///
/// # Errors
/// [`ConstructError::Condition`] when the group is too large, [`ConstructError::Array`] when the
/// result does not fit into memory.
///
/// Cost: one addition per entry. Reference: Buratti 1998, Journal of Combinatorial Designs 6, 165–182
/// (products of difference matrices; from memory).
///
/// ```
/// use trysquare::construct::scheme::{direct_sum, field_table};
/// use trysquare::verify::{Demand, Verdict, certify};
/// let d = direct_sum(&field_table(2, 1, 1)?, &field_table(3, 1, 1)?)?;
/// assert_eq!((d.rows(), d.columns(), d.order()), (6, 2, 6));
/// assert!(d.is_difference_scheme());
/// let judged = certify(&trysquare::construct::scheme::developed(&d)?, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn direct_sum(a: &Scheme, b: &Scheme) -> Result<Scheme, ConstructError> {
    let s = a.order().checked_mul(b.order()).ok_or_else(|| {
        let needs = format!("s1 s2 is at most 65535, not {} x {}", a.order(), b.order());
        ConstructError::condition("Direct sum", needs)
    })?;
    let columns = a.columns().min(b.columns());
    let rows =
        a.rows().checked_mul(b.rows()).ok_or(ArrayError::TooLarge { runs: a.rows(), factors: columns })?;
    let (of_a, of_b) = (primes(a.order()), primes(b.order()));
    let weights = canonical_weights(&[of_a.clone(), of_b.clone()].concat());
    let table = |order: u16, factors: &[u16], weights: &[u16]| -> Vec<u16> {
        (0..order).map(|e| digits(e, factors).zip(weights).map(|(d, w)| d * w).sum()).collect()
    };
    let (first, second) = weights.split_at(of_a.len());
    let (from_a, from_b) = (table(a.order(), &of_a, first), table(b.order(), &of_b, second));
    Scheme::from_fn(s, rows, columns, |_, i, j| {
        from_a[a.entry(i / b.rows(), j) as usize] + from_b[b.entry(i % b.rows(), j) as usize]
    })
}
