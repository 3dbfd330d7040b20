//! Difference schemes that somebody found, over any direct sum of cyclic groups of squarefree order.

use super::Scheme;
use super::group::{canonical_weights, digits};
use crate::algebra::{AbelianGroup, factorise};
use crate::construct::ConstructError;

const NAME: &str = "Starter of a difference scheme";

/// The difference scheme with the given columns over the group Z_{n1} × Z_{n2} × …, written over the
/// canonical group.
///
/// `factors` holds n1, n2, …; `columns` the columns, each entry an element of the group in the
/// encoding of [`AbelianGroup`] (first factor least significant: (a, b) in Z6 × Z2 is a + 6b). By
/// the Chinese remainder theorem Z_n is the direct sum of Z_p over its primes when n is
/// squarefree; the digits are then sorted by prime, those of one prime in the order of the factors.
///
/// All of these must hold:
/// * every factor is at least 2 and squarefree (a Sylow subgroup such as Z4 is not elementary
///   abelian), their product is at most 65,535,
/// * the columns have one length r ≥ 1, every entry is an element of the group,
/// * the difference of any two columns takes every value r/s times.
///
/// Guarantee: D(r, c, s) with as many columns as were given, in their order.
///
/// # Errors
/// [`ConstructError::Algebra`] when the factors make no group, [`ConstructError::Condition`] naming
/// what else does not hold.
///
/// Cost: c²r group operations. Reference: by the definition.
///
/// ```
/// use trysquare::construct::scheme::from_starter;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let columns = [[0, 0, 0, 0, 0, 0], [0, 1, 2, 3, 4, 5]];
/// let d = from_starter(&[6], &columns)?;
/// assert_eq!(d.group().factors(), [2, 3]);
/// assert_eq!(d.column(1), [0, 3, 4, 1, 2, 5]); // 1 is (1, 1), that is 1 + 2·1
/// let judged = certify(&trysquare::construct::scheme::developed(&d)?, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn from_starter<C: AsRef<[u16]> + Sync>(
    factors: &[u16],
    columns: &[C],
) -> Result<Scheme, ConstructError> {
    let group = AbelianGroup::new(factors)?;
    let s = u16::try_from(group.order()).expect("groups have at most 65,535 elements");
    let mut parts: Vec<(usize, u16)> = Vec::new();
    for (k, &n) in factors.iter().enumerate() {
        for (p, e) in factorise(u64::from(n)) {
            if e > 1 {
                let needs = format!("every cyclic factor is squarefree, but {n} is not");
                return Err(ConstructError::condition(NAME, needs));
            }
            parts.push((k, u16::try_from(p).expect("a divisor of a u16")));
        }
    }
    let flat: Vec<u16> = parts.iter().map(|&(_, p)| p).collect();
    let weights = canonical_weights(&flat);
    let canonical = |element: u16| -> u16 {
        let components: Vec<u16> = digits(element, factors).collect();
        parts.iter().zip(&weights).map(|(&(k, p), w)| components[k] % p * w).sum()
    };
    let mut converted = Vec::with_capacity(columns.len());
    for (j, column) in columns.iter().enumerate() {
        let column = column.as_ref();
        if let Some(i) = column.iter().position(|&e| e >= s) {
            let needs = format!("entries are below {s}, but row {i}, column {j} is {}", column[i]);
            return Err(ConstructError::condition(NAME, needs));
        }
        converted.push(column.iter().map(|&e| canonical(e)).collect::<Vec<u16>>());
    }
    Scheme::new(s, &converted)
}
