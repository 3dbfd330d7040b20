//! Column splitting (expansive replacement).

use super::has_column;
use crate::array::Array;
use crate::construct::ConstructError;

const NAME: &str = "column splitting";

/// The array in which an s-level column is replaced by the columns of an array with s runs.
///
/// # Parameters
/// `a`: N runs, s·X, its s-level column being `column`. `by`: s runs, levels Y. Both must hold:
/// * `a` has that column, and `by` has as many runs as it has levels;
/// * `a` has strength t, and every min(t, factors) columns of `by` are even, that is, `by` has
///   strength t or is a full factorial, or copies of one, in fewer than t factors (not checked).
///
/// # Result
/// OA(N, X·Y, t): symbol x of the column becomes run x of `by`; the new columns stand where the old
/// one stood. Any u of them, 1 ≤ u ≤ t, are a function of the old column, which is even beside any
/// t − u of X. At strength 3 that takes an OA(s, Y, 3), or two columns whose levels multiply to s
/// (6·2^3 → 3·2^4 in 24 runs).
///
/// # Errors
/// [`ConstructError::Condition`] when a checked condition fails, [`ConstructError::Array`] when
/// the result does not fit into memory.
///
/// # Cost
/// O(cells of the result).
///
/// # Reference
/// S. Addelman, *Orthogonal main-effect plans for asymmetrical factorial experiments*,
/// Technometrics 4 (1962) 21–46; as "expansive replacement" in A. S. Hedayat, N. J. A. Sloane &
/// J. Stufken, *Orthogonal Arrays* (1999), chapter 9.
///
/// ```
/// use trysquare::array::Array;
/// use trysquare::construct::compose::split;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = Array::new(4, vec![4], vec![0, 1, 2, 3])?;
/// let by = Array::new(4, vec![2; 3], vec![0, 0, 1, 1, 0, 1, 0, 1, 0, 1, 1, 0])?;
/// assert_eq!(split(&a, 0, &by)?, by);
/// let judged = certify(&split(&a, 0, &by)?, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn split(a: &Array, column: usize, by: &Array) -> Result<Array, ConstructError> {
    has_column(NAME, "A", a.factors(), column)?;
    let s = usize::from(a.levels()[column]);
    if by.runs() != s {
        let needs = format!("as many runs as the column has levels, {s}, not {}", by.runs());
        return Err(ConstructError::condition(NAME, needs));
    }
    let levels = split_levels(a.levels(), column, by.levels())?;
    Ok(Array::from_fn(a.runs(), levels, |i, j| match j {
        _ if j < column => a.get(i, j),
        _ if j < column + by.factors() => by.get(usize::from(a.get(i, column)), j - column),
        _ => a.get(i, j + 1 - by.factors()),
    })?)
}

/// The levels of [`split`], from those of A, the column, and those of the array it is split by.
///
/// # Errors
/// [`ConstructError::Condition`] when there is no such column.
pub fn split_levels(a: &[u16], column: usize, by: &[u16]) -> Result<Vec<u16>, ConstructError> {
    has_column(NAME, "A", a.len(), column)?;
    Ok([&a[..column], by, &a[column + 1..]].concat())
}

#[cfg(test)]
mod tests {
    use super::super::testing::*;
    use super::*;
    use crate::construct::strength3::even_level;

    #[test]
    fn every_column_of_sixteen_runs() {
        for column in 0..5 {
            let array = split(&plane(4), column, &sylvester(2)).unwrap();
            let mut levels = vec![4; 5];
            levels.splice(column..=column, [2, 2, 2]);
            assert_eq!(array.levels(), levels);
            assert_eq!(array.levels(), split_levels(&[4; 5], column, &[2; 3]).unwrap());
            assert!(has_strength(&array, 2));
        }
    }

    #[test]
    fn six_levels_at_strength_three() {
        let six = even_level(6, &sylvester(2)).unwrap();
        assert_eq!((six.runs(), six.levels()), (24, &[6, 2, 2, 2][..]));
        let array = split(&six, 0, &full(&[3, 2])).unwrap();
        assert_eq!((array.runs(), array.levels()), (24, &[3, 2, 2, 2, 2][..]));
        assert!(has_strength(&array, 3));
    }

    #[test]
    fn strength_three_needs_strength_three() {
        let a = even_level(4, &sylvester(2)).unwrap();
        let array = split(&a, 0, &sylvester(2)).unwrap();
        assert!(has_strength(&array, 2) && !has_strength(&array, 3));
        let eight = full(&[8, 2, 2]);
        let by = crate::construct::strength3::foldover(&sylvester(2)).unwrap();
        assert!(has_strength(&split(&eight, 0, &by).unwrap(), 3));
    }

    #[test]
    fn refuses_what_does_not_fit() {
        refused(split(&plane(4), 5, &sylvester(2)), "A has factors 0 to 4, not 5");
        refused(split(&plane(3), 0, &sylvester(2)), "as many runs as the column has levels, 3, not 4");
    }
}
