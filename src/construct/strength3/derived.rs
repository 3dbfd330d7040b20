//! Derived arrays: one level of one factor.

use crate::array::Array;
use crate::construct::ConstructError;
use crate::construct::compose::has_column;

const NAME: &str = "derived array";

/// The runs in which one factor has a given level, without that factor.
///
/// # Parameters
/// `a`: N runs, s·X, its s-level column being `column`. All of these must hold:
/// * `a` has that column and at least one other, and `symbol` < s;
/// * the symbol occurs N/s times;
/// * `a` has strength t (not checked).
///
/// # Result
/// OA(N/s, X, t − 1), runs and columns in their old order.
///
/// # Errors
/// [`ConstructError::Condition`] when a checked condition fails.
///
/// # Cost
/// O(N + cells of the result).
///
/// # Reference
/// Immediate from the definition; E. Seiden & R. Zemach, Annals of Mathematical Statistics 37
/// (1966) 1355–1370, use it as the converse of [`foldover`](super::foldover).
///
/// ```
/// use trysquare::array::Array;
/// use trysquare::construct::strength3::derived;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = Array::new(6, vec![3, 2], vec![0, 0, 1, 1, 2, 2, 0, 1, 0, 1, 0, 1])?;
/// assert_eq!(derived(&a, 0, 2)?, Array::new(2, vec![2], vec![0, 1])?);
/// let judged = certify(&derived(&a, 0, 2)?, &Demand::strength(1))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn derived(a: &Array, column: usize, symbol: u16) -> Result<Array, ConstructError> {
    let levels = derived_levels(a.levels(), column)?;
    let s = a.levels()[column];
    if symbol >= s {
        return Err(ConstructError::condition(NAME, format!("a symbol below {s}, not {symbol}")));
    }
    let runs: Vec<usize> = (0..a.runs()).filter(|&i| a.get(i, column) == symbol).collect();
    if runs.len().checked_mul(usize::from(s)) != Some(a.runs()) {
        let needs = format!("symbol {symbol} occurs {}/{s} times, not {}", a.runs(), runs.len());
        return Err(ConstructError::condition(NAME, needs));
    }
    Ok(Array::from_fn(runs.len(), levels, |i, j| a.get(runs[i], if j < column { j } else { j + 1 }))?)
}

/// The levels of [`derived`], from those of A and the column.
///
/// # Errors
/// [`ConstructError::Condition`] when there is no such column or no other.
pub fn derived_levels(a: &[u16], column: usize) -> Result<Vec<u16>, ConstructError> {
    has_column(NAME, "A", a.len(), column)?;
    if a.len() == 1 {
        return Err(ConstructError::condition(NAME, "at least two factors"));
    }
    Ok([&a[..column], &a[column + 1..]].concat())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::construct::compose::testing::*;
    use crate::construct::strength3::{even_level, foldover};

    #[test]
    fn every_level_of_every_factor() {
        for a in [foldover(&twelve()).unwrap(), even_level(6, &sylvester(3)).unwrap(), full(&[2, 3, 4])] {
            for column in 0..a.factors() {
                for symbol in 0..a.levels()[column] {
                    let array = derived(&a, column, symbol).unwrap();
                    assert_eq!(array.runs() * usize::from(a.levels()[column]), a.runs());
                    assert_eq!(array.levels(), derived_levels(a.levels(), column).unwrap());
                    assert!(has_strength(&array, 2));
                }
            }
        }
    }

    #[test]
    fn refuses_what_does_not_fit() {
        let a = full(&[3, 2]);
        refused(derived(&a, 2, 0), "A has factors 0 to 1, not 2");
        refused(derived(&a, 0, 3), "a symbol below 3, not 3");
        refused(derived(&full(&[3]), 0, 0), "at least two factors");
        let uneven = Array::new(3, vec![3, 2], vec![0, 0, 1, 0, 1, 0]).unwrap();
        refused(derived(&uneven, 0, 0), "symbol 0 occurs 3/3 times, not 2");
        refused(derived(&uneven, 0, 2), "symbol 2 occurs 3/3 times, not 0");
    }
}
