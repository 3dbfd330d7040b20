//! The full factorial.

use super::super::ConstructError;
use super::require;
use crate::array::Array;
use crate::mix::Mix;

const NAME: &str = "full factorial";

/// The full factorial: every combination of levels in exactly one run.
///
/// # Parameters
/// `levels`: the number of levels of each factor; all of these must hold:
/// * there is at least one factor and every factor has at least 2 levels;
/// * the product of the levels fits `usize` and the cells fit into memory.
///
/// # Guarantee
/// Strength k = number of factors, index 1; mix as asked, in the asked order; ∏ s_i runs, in mixed
/// radix with the *first factor fastest*.
///
/// # Errors
/// [`ConstructError::Array`] when the levels are no [`Mix`] or the cells do not fit into memory;
/// [`ConstructError::Condition`] when the number of runs does not fit.
///
/// # Cost
/// O(N·k).
///
/// # Reference
/// The definition.
///
/// ```
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = trysquare::construct::field::full_factorial(&[2, 3])?;
/// assert_eq!((a.runs(), a.mix().to_string()), (6, "2^1 3^1".to_owned()));
/// assert_eq!(a.row(1), [1, 0]);
/// let judged = certify(&a, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn full_factorial(levels: &[u16]) -> Result<Array, ConstructError> {
    let mix = Mix::new(levels.to_vec()).map_err(crate::array::ArrayError::from)?;
    let runs = mix.full_factorial().and_then(|n| usize::try_from(n).ok());
    require(NAME, runs.is_some(), || format!("the runs of {mix} are more than memory can hold"))?;
    let strides: Vec<usize> = levels
        .iter()
        .scan(1usize, |stride, &s| Some(std::mem::replace(stride, stride.saturating_mul(usize::from(s)))))
        .collect();
    Ok(Array::from_fn(runs.unwrap_or(0), levels.to_vec(), |i, j| {
        (i / strides[j] % usize::from(levels[j])) as u16
    })?)
}
