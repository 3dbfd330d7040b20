//! Bose and Bush's arrays of index λ.

use super::{developed_with_rows, field_table};
use crate::algebra::prime_power;
use crate::array::Array;
use crate::construct::ConstructError;

/// The array OA(λs², s^{λs+1}, 2) for powers λ and s of one prime.
///
/// The difference scheme D(λs, λs, s) of a field is developed with its rows, and the λs-level
/// factor, which stands last, is merged to s levels (level modulo s).
///
/// All of these must hold:
/// * s is a prime power, λ is 1 or a power of the same prime,
/// * λs is at most 65,535.
///
/// Guarantee: OA(λs², s^{λs+1}, 2), index λ; saturated for λ = 1 only. For a saturated array of the
/// same number of runs see the Rao–Hamming arrays, which have λs + (λs − 1)/(s − 1) factors when λ
/// is a power of s: this one serves where λ is not.
///
/// # Errors
/// [`ConstructError::Condition`] when λ and s are not as above.
///
/// Cost: λs² (λs + 1) group additions. Reference: Bose & Bush 1952, Annals of Mathematical
/// Statistics 23, 508–524 (arrays of index λ from difference schemes).
///
/// ```
/// use trysquare::construct::scheme::bose_bush;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = bose_bush(2, 4)?;
/// assert_eq!((a.runs(), a.mix().to_string().as_str()), (32, "4^9"));
/// let judged = certify(&a, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn bose_bush(lambda: u16, s: u16) -> Result<Array, ConstructError> {
    let parameters = prime_power(u32::from(s)).and_then(|(p, b)| {
        let rows = lambda.checked_mul(s)?;
        let (base, a) = prime_power(u32::from(rows))?;
        (base == p).then_some((u16::try_from(p).ok()?, a, b))
    });
    let Some((p, a, b)) = parameters else {
        let needs =
            format!("lambda and s are powers of one prime with lambda s at most 65535, not {lambda} and {s}");
        return Err(ConstructError::condition("Bose-Bush", needs));
    };
    let wide = developed_with_rows(&field_table(p, a, b)?)?;
    let last = wide.factors() - 1;
    Ok(Array::from_fn(wide.runs(), vec![s; wide.factors()], |run, j| {
        let level = wide.get(run, j);
        if j == last { level % s } else { level }
    })?)
}
