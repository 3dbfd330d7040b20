use super::FloorError;
use super::proof::{Bound, bose_bush_allows, bush_limit};

/// The bound of Bose & Bush 1952 for k factors of s levels at strength 2 or 3: the least N = λ s^t
/// for which their limit on the number of factors is not exceeded.
///
/// At other strengths, and where it says no more than Rao's bound could (s = 2), there is none.
///
/// Reference: Bose & Bush 1952, Theorems 2A and 2B; Hedayat, Sloane & Stufken 1999, Theorems 2.8
/// and 2.11 (numbers from memory; the statement is in [`bose_bush_allows`]).
///
/// # Errors
/// [`FloorError::TooLarge`] when the bound does not fit 64 bits.
pub fn bose_bush(s: u16, k: u64, strength: u32) -> Result<Option<Bound>, FloorError> {
    if s < 3 || !(2..=3).contains(&strength) || k < u64::from(strength) {
        return Ok(None);
    }
    let power = u64::from(s).pow(strength);
    let mut index = 1u64;
    while !bose_bush_allows(s, k, strength, index) {
        index += 1;
    }
    let least = power.checked_mul(index).ok_or(FloorError::TooLarge)?;
    Ok(Some(Bound::BoseBush { levels: s, factors: k, least }))
}

/// Bush's bound at index 1: when k factors of s levels are too many for s^t runs, N ≥ 2 s^t.
///
/// Reference: Bush 1952; Hedayat, Sloane & Stufken 1999, Theorem 2.19 (number from memory).
///
/// # Errors
/// [`FloorError::TooLarge`] when the bound does not fit 64 bits.
pub fn bush(s: u16, k: u64, strength: u32) -> Result<Option<Bound>, FloorError> {
    if strength < 2 || k <= bush_limit(s, strength) {
        return Ok(None);
    }
    let least =
        u64::from(s).checked_pow(strength).and_then(|n| n.checked_mul(2)).ok_or(FloorError::TooLarge)?;
    Ok(Some(Bound::Bush { levels: s, factors: k, least }))
}
