//! BCH codes.

use super::super::ConstructError;
use super::{LinearCode, dual_of_cyclic};

/// The dual of the BCH code of length n with the zeros β, β², …, β^t.
///
/// # Parameters
/// `q`, `n`, `extended` as for [`dual_of_cyclic`]; 1 ≤ `t` < n.
///
/// # Guarantee
/// Strength at least t by the BCH bound, and at least t + 1 when extended and q = 2. For q = 2,
/// n = 2^m − 1 and small even t: 2^n in 2^(mt/2) runs; extended 2^(n+1) in twice as many.
///
/// # Errors
/// As [`dual_of_cyclic`]; [`ConstructError::Condition`] when t is out of range.
///
/// # Cost
/// As [`dual_of_cyclic`].
///
/// # Reference
/// Hocquenghem 1959; Bose & Ray-Chaudhuri 1960.
///
/// ```
/// let code = trysquare::construct::code::bch(2, 15, 6, true)?;
/// assert_eq!((code.length(), code.dimension(), code.dual_distance()?), (16, 11, 8));
/// # Ok::<(), trysquare::construct::ConstructError>(())
/// ```
pub fn bch(q: u32, n: u32, t: u32, extended: bool) -> Result<LinearCode, ConstructError> {
    if t == 0 || t >= n {
        return Err(ConstructError::condition("BCH code", format!("1 ≤ t < n, not t = {t}, n = {n}")));
    }
    dual_of_cyclic(q, n, &(1..=t).collect::<Vec<_>>(), extended)
}
