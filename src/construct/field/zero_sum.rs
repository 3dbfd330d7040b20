//! Index 1 with one factor more than the strength, for any number of levels.

use super::super::ConstructError;
use super::{power, require};
use crate::array::Array;

const NAME: &str = "zero-sum array";

/// OA(s^t, t + 1, s, t) for any number s of levels: t free factors and their sum modulo s.
///
/// # Parameters
/// All of these must hold:
/// * `s` ≥ 2, not necessarily a prime power;
/// * `t` ≥ 1.
///
/// # Guarantee
/// Strength t, index 1, mix s^(t+1). For s ≤ t no array of index 1 has more factors.
///
/// # Errors
/// [`ConstructError::Condition`] when s or t is out of range or s^t does not fit,
/// [`ConstructError::Array`] when memory does not suffice.
///
/// # Cost
/// O(s^t · t²).
///
/// # Reference
/// Bush 1952, *Orthogonal arrays of index unity* (also for the bound, s ≤ t).
///
/// ```
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = trysquare::construct::field::zero_sum(6, 2)?;
/// assert_eq!((a.runs(), a.mix().to_string()), (36, "6^3".to_owned()));
/// let judged = certify(&a, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn zero_sum(s: u16, t: u32) -> Result<Array, ConstructError> {
    require(NAME, s >= 2 && t >= 1, || format!("s ≥ 2 and t ≥ 1, not s = {s}, t = {t}"))?;
    let runs = power(NAME, u32::from(s), t)?;
    let (s, t) = (usize::from(s), t as usize);
    let strides: Vec<usize> = (0..t as u32).map(|j| s.pow(j)).collect();
    Ok(Array::from_fn(runs, vec![s as u16; t + 1], |i, j| {
        let digit = |stride: &usize| i / stride % s;
        strides.get(j).map_or_else(|| strides.iter().map(digit).sum::<usize>() % s, digit) as u16
    })?)
}
