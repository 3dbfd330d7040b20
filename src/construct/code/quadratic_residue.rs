//! Quadratic residue codes.

use super::super::ConstructError;
use super::{LinearCode, dual_of_cyclic};
use crate::algebra::is_prime;

/// The dual of the quadratic residue code of prime length p over GF(q), or of the extended one.
///
/// # Parameters
/// `q` as for [`dual_of_cyclic`]; `p` is an odd prime of which q is a quadratic residue.
///
/// # Guarantee
/// The zeros are the nonzero squares modulo p: q^((p−1)/2) runs, p factors; extended
/// q^((p+1)/2) runs, p + 1 factors. The binary code of length 23 and the ternary one of length 11
/// are the Golay codes: strength 6 and 4, extended 7 and 5.
///
/// # Errors
/// As [`dual_of_cyclic`]; [`ConstructError::Condition`] when p is no odd prime or q no residue.
///
/// # Cost
/// As [`dual_of_cyclic`].
///
/// # Reference
/// MacWilliams & Sloane 1977, chapter 16 (number from memory); Golay 1949.
///
/// ```
/// let golay = trysquare::construct::code::quadratic_residue(2, 23, true)?;
/// assert_eq!((golay.length(), golay.dimension(), golay.dual_distance()?), (24, 12, 8));
/// # Ok::<(), trysquare::construct::ConstructError>(())
/// ```
pub fn quadratic_residue(q: u32, p: u32, extended: bool) -> Result<LinearCode, ConstructError> {
    let squares: std::collections::BTreeSet<u32> = match p {
        3..=65_521 if is_prime(p) => {
            (1..p).map(|x| (u64::from(x) * u64::from(x) % u64::from(p)) as u32).collect()
        }
        _ => Default::default(),
    };
    if p == 0 || !squares.contains(&(q % p)) {
        let needs = format!("an odd prime p of which q is a quadratic residue, not p = {p}, q = {q}");
        return Err(ConstructError::condition("quadratic residue code", needs));
    }
    dual_of_cyclic(q, p, &squares.into_iter().collect::<Vec<_>>(), extended)
}
