//! Copies of an array, told apart by a new factor or by new names for the levels of an old one.

use super::slices;
use crate::array::Array;
use crate::construct::ConstructError;
use crate::construct::compose::{as_levels, has_column, times};

const NAME: &str = "copies";

/// c copies of an array, told apart by a new c-level factor.
///
/// # Parameters
/// `a`: N runs, X, strength t (not checked). `c`: 2 ≤ c ≤ 65,535.
///
/// # Result
/// OA(cN, c·X, t): each copy has strength t, so the new factor is even beside any t factors of X
/// (one more than is needed). The first column is the new factor, runs in the order of the copies.
///
/// # Errors
/// [`ConstructError::Condition`] when c is out of range, [`ConstructError::Array`] when the result
/// does not fit into memory.
///
/// # Cost
/// O(cells of the result).
///
/// # Reference
/// The Cartesian product with the array of c runs and one factor; immediate from the definition.
///
/// ```
/// use trysquare::array::Array;
/// use trysquare::construct::strength3::copies;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = Array::new(2, vec![2], vec![0, 1])?;
/// assert_eq!(copies(&a, 3)?.levels(), [3, 2]);
/// let judged = certify(&copies(&a, 3)?, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn copies(a: &Array, c: u16) -> Result<Array, ConstructError> {
    copies_levels(a.levels(), c)?;
    slices(&vec![a; usize::from(c)])
}

/// The levels of [`copies`], from those of A and c.
///
/// # Errors
/// [`ConstructError::Condition`] when c is below 2.
pub fn copies_levels(a: &[u16], c: u16) -> Result<Vec<u16>, ConstructError> {
    let mut levels = vec![as_levels(NAME, Some(usize::from(c)))?];
    levels.extend_from_slice(a);
    Ok(levels)
}

/// c copies of an array in which the levels of one factor have a new name in every copy.
///
/// # Parameters
/// `a`: N runs, s·X of strength t (not checked), its s-level column being `column`. `c`: copies.
/// All of these must hold:
/// * `a` has that column;
/// * c ≥ 1 and c·s ≤ 65,535.
///
/// # Result
/// OA(cN, (c·s)·X, t): symbol x of copy k becomes `k·s + x`; columns in their old order, runs in
/// the order of the copies. A level of the new factor sees what symbol x of the old one sees in
/// `a`, an array of strength t − 1 in X, whichever copy it is; t factors of X are even in each copy.
///
/// # Errors
/// [`ConstructError::Condition`] when a checked condition fails, [`ConstructError::Array`] when
/// the result does not fit into memory.
///
/// # Cost
/// O(cells of the result).
///
/// # Reference
/// The juxtaposition of `a` with itself, see [`juxtapose`](crate::construct::compose::juxtapose).
///
/// ```
/// use trysquare::array::Array;
/// use trysquare::construct::strength3::copies_into;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = Array::new(4, vec![2, 2], vec![0, 0, 1, 1, 0, 1, 0, 1])?;
/// let array = copies_into(&a, 1, 3)?;
/// assert_eq!((array.runs(), array.levels()), (12, &[2, 6][..]));
/// let judged = certify(&array, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn copies_into(a: &Array, column: usize, c: u16) -> Result<Array, ConstructError> {
    let levels = copies_into_levels(a.levels(), column, c)?;
    let runs = times(NAME, usize::from(c), a.runs())?;
    let s = a.levels()[column];
    Ok(Array::from_fn(runs, levels, |run, j| {
        let x = a.get(run % a.runs(), j);
        // Below c·s, which is a number of levels.
        if j == column { (run / a.runs()) as u16 * s + x } else { x }
    })?)
}

/// The levels of [`copies_into`], from those of A, the column and c.
///
/// # Errors
/// [`ConstructError::Condition`] when there is no such column, or c·s is no number of levels.
pub fn copies_into_levels(a: &[u16], column: usize, c: u16) -> Result<Vec<u16>, ConstructError> {
    has_column(NAME, "A", a.len(), column)?;
    let mut levels = a.to_vec();
    levels[column] = as_levels(NAME, usize::from(a[column]).checked_mul(usize::from(c)))?;
    Ok(levels)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::construct::compose::testing::*;
    use crate::construct::strength3::foldover;

    #[test]
    fn copies_keep_every_strength() {
        for (a, t) in [(foldover(&twelve()).unwrap(), 3), (plane(3), 2), (full(&[2, 3, 2, 2]), 4)] {
            for c in 2..6u16 {
                let array = copies(&a, c).unwrap();
                assert_eq!(array.runs(), usize::from(c) * a.runs());
                assert_eq!(array.levels(), copies_levels(a.levels(), c).unwrap());
                assert!(has_strength(&array, t));
                for column in 0..a.factors() {
                    let array = copies_into(&a, column, c).unwrap();
                    assert_eq!(array.levels()[column], a.levels()[column] * c);
                    assert_eq!(array.levels(), copies_into_levels(a.levels(), column, c).unwrap());
                    assert!(has_strength(&array, t));
                }
            }
        }
        assert_eq!(copies_into(&plane(3), 0, 1).unwrap(), plane(3));
    }

    #[test]
    fn refuses_what_does_not_fit() {
        let a = plane(3);
        refused(copies(&a, 0), "2 to 65535 levels, not 0");
        refused(copies(&a, 1), "2 to 65535 levels, not 1");
        refused(copies_into(&a, 4, 2), "A has factors 0 to 3, not 4");
        refused(copies_into(&a, 0, 0), "2 to 65535 levels, not 0");
        refused(copies_into(&a, 0, 21_846), "2 to 65535 levels, not 65538");
    }
}
