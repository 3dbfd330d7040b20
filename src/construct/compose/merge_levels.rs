//! Level merging.

use super::has_column;
use crate::array::Array;
use crate::construct::ConstructError;

const NAME: &str = "level merging";

/// The array in which one s-level column has r levels, neighbouring levels being merged.
///
/// # Parameters
/// `a`: N runs, s·X of strength t, its s-level column being `column`. Both must hold:
/// * `a` has that column;
/// * 2 ≤ r ≤ s and r divides s.
///
/// # Result
/// OA(N, r·X, t): symbol x becomes ⌊x / (s/r)⌋, so each new level is s/r old ones, neighbours in
/// the numbering. (Any other way of grouping s/r levels at a time would keep the strength as well.)
///
/// # Errors
/// [`ConstructError::Condition`] when a condition fails.
///
/// # Cost
/// O(cells of the result).
///
/// # Reference
/// S. Addelman, Technometrics 4 (1962) 21–46 (collapsing levels), for the case r | s in which
/// equal frequencies stay equal.
///
/// ```
/// use trysquare::array::Array;
/// use trysquare::construct::compose::merge_levels;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = Array::new(6, vec![6], vec![0, 1, 2, 3, 4, 5])?;
/// assert_eq!(merge_levels(&a, 0, 3)?.column(0), [0, 0, 1, 1, 2, 2]);
/// let judged = certify(&merge_levels(&a, 0, 3)?, &Demand::strength(1))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn merge_levels(a: &Array, column: usize, r: u16) -> Result<Array, ConstructError> {
    let levels = merge_levels_levels(a.levels(), column, r)?;
    let width = a.levels()[column] / r;
    Ok(Array::from_fn(a.runs(), levels, |i, j| if j == column { a.get(i, j) / width } else { a.get(i, j) })?)
}

/// The levels of [`merge_levels`], from those of A, the column and r.
///
/// # Errors
/// [`ConstructError::Condition`] when there is no such column, r is below 2, or r does not divide
/// its levels.
pub fn merge_levels_levels(a: &[u16], column: usize, r: u16) -> Result<Vec<u16>, ConstructError> {
    has_column(NAME, "A", a.len(), column)?;
    let s = a[column];
    if r < 2 || !s.is_multiple_of(r) {
        return Err(ConstructError::condition(NAME, format!("a divisor of {s} that is at least 2, not {r}")));
    }
    let mut levels = a.to_vec();
    levels[column] = r;
    Ok(levels)
}

#[cfg(test)]
mod tests {
    use super::super::testing::*;
    use super::*;

    #[test]
    fn every_divisor_of_every_small_number() {
        for s in 2..=24u16 {
            let a = full(&[s, 3, 2]);
            for r in (2..=s).filter(|r| s % r == 0) {
                let array = merge_levels(&a, 0, r).unwrap();
                assert_eq!(array.levels(), [r, 3, 2]);
                assert_eq!(array.levels(), merge_levels_levels(&[s, 3, 2], 0, r).unwrap());
                assert!(has_strength(&array, 3));
            }
        }
    }

    #[test]
    fn fours_to_twos_in_sixteen_runs() {
        let mut array = plane(4);
        for column in 0..5 {
            array = merge_levels(&array, column, 2).unwrap();
            assert!(has_strength(&array, 2));
        }
        assert_eq!(array.levels(), [2; 5]);
    }

    #[test]
    fn refuses_what_does_not_fit() {
        let a = full(&[6, 2]);
        refused(merge_levels(&a, 2, 2), "A has factors 0 to 1, not 2");
        for r in [0, 1, 4, 5, 7, 12] {
            refused(merge_levels(&a, 0, r), &format!("a divisor of 6 that is at least 2, not {r}"));
        }
    }
}
