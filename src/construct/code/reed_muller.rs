//! Reed–Muller codes.

use super::super::ConstructError;
use super::LinearCode;
use crate::algebra::Field;

/// The binary Reed–Muller code of order r and length 2^m.
///
/// # Parameters
/// 0 ≤ `r` ≤ `m` ≤ 16.
///
/// # Guarantee
/// The polynomials of degree at most r on F_2^m; 2^m factors, 2^k runs with k = Σ_{i ≤ r} C(m, i).
/// The dual is the code of order m − r − 1: strength 2^(r+1) − 1.
///
/// # Errors
/// [`ConstructError::Condition`] when r or m is out of range.
///
/// # Cost
/// O(k² · 2^m), for the rank.
///
/// # Reference
/// Muller 1954; Reed 1954; MacWilliams & Sloane 1977, chapter 13.
///
/// ```
/// let code = trysquare::construct::code::reed_muller(2, 4)?;
/// assert_eq!((code.length(), code.dimension(), code.dual_distance()?), (16, 11, 8));
/// # Ok::<(), trysquare::construct::ConstructError>(())
/// ```
pub fn reed_muller(r: u32, m: u32) -> Result<LinearCode, ConstructError> {
    if r > m || m > 16 {
        let needs = format!("0 ≤ r ≤ m ≤ 16, not r = {r}, m = {m}");
        return Err(ConstructError::condition("Reed–Muller code", needs));
    }
    let monomials = (0..1u32 << m).filter(|s| s.count_ones() <= r);
    let rows = monomials.map(|s| (0..1u32 << m).map(|x| u16::from(x & s == s)).collect()).collect();
    LinearCode::new(Field::new(2)?, rows)
}
