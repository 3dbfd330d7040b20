//! Homomorphic images of difference schemes.

use super::Scheme;
use super::group::{canonical_weights, digits, primes};
use crate::construct::ConstructError;

/// The image D(r, c, t) of a D(r, c, s) under the homomorphism onto the group of order t that
/// keeps, for each prime, the first digits of an element and drops the rest.
///
/// All of these must hold:
/// * t ≥ 2 divides s.
///
/// Guarantee: D(r, c, t); a zero row or column stays one.
///
/// # Errors
/// [`ConstructError::Condition`] when t does not divide s or is below 2.
///
/// Cost: one table look-up per entry. Reference: Hedayat, Sloane & Stufken 1999, Orthogonal Arrays,
/// chapter 6.
///
/// ```
/// use trysquare::construct::scheme::{field_table, image};
/// use trysquare::verify::{Demand, Verdict, certify};
/// let d = image(&field_table(2, 3, 3)?, 4)?;
/// assert_eq!((d.rows(), d.columns(), d.order()), (8, 8, 4));
/// assert!(d.is_difference_scheme());
/// let judged = certify(&trysquare::construct::scheme::developed(&d)?, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn image(scheme: &Scheme, t: u16) -> Result<Scheme, ConstructError> {
    let s = scheme.order();
    if t < 2 || !s.is_multiple_of(t) {
        let needs = format!("the order of the image is a divisor of {s} and at least 2, not {t}");
        return Err(ConstructError::condition("Homomorphic image", needs));
    }
    let factors = primes(s);
    let mut wanted = primes(t);
    let kept: Vec<bool> = factors
        .iter()
        .map(|p| wanted.iter().position(|w| w == p).map(|at| wanted.remove(at)).is_some())
        .collect();
    let weights = canonical_weights(&primes(t));
    let table: Vec<u16> = (0..s)
        .map(|a| {
            let kept_digits = digits(a, &factors).zip(&kept).filter_map(|(d, &keep)| keep.then_some(d));
            kept_digits.zip(&weights).map(|(d, w)| d * w).sum()
        })
        .collect();
    Scheme::from_fn(t, scheme.rows(), scheme.columns(), |_, i, j| table[scheme.entry(i, j) as usize])
}
