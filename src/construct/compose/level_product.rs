//! Products of two arrays: column by column, and Cartesian.

use super::{as_levels, has_columns, times};
use crate::array::Array;
use crate::construct::ConstructError;

const NAME: &str = "level product";

/// The product of two arrays in which chosen pairs of columns become one column.
///
/// # Parameters
/// `a`: N1 runs, levels s_i. `b`: N2 runs, levels s'_j. `pairs`: (i, j), a column of `a` and one of
/// `b`. All of these must hold:
/// * every named column exists and is named once (a column shared by two pairs would make them
///   depend on one another);
/// * s_i · s'_j ≤ 65,535 for every pair;
/// * `a` and `b` have strength t (not checked).
///
/// # Result
/// OA(N1·N2, ∏ over pairs s_i s'_j · the other levels of `a` · those of `b`, t), the index of any
/// factors being the product of their indices in `a` and `b`. Run (x, y) has the number
/// `x·N2 + y`. Columns: the pairs in the given order, symbol `a(x)·s'_j + b(y)`; then the unpaired
/// columns of `a`; then those of `b`.
///
/// # Errors
/// [`ConstructError::Condition`] when a checked condition fails, [`ConstructError::Array`] when
/// the result does not fit into memory.
///
/// # Cost
/// O(cells of the result).
///
/// # Reference
/// H. F. MacNeish, *Euler squares*, Annals of Mathematics 23 (1922) 221–227 (Latin squares);
/// K. A. Bush, *A generalization of a theorem due to MacNeish*, Annals of Mathematical Statistics
/// 23 (1952) 293–295 (any strength and index).
///
/// ```
/// use trysquare::array::Array;
/// use trysquare::construct::compose::level_product;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = Array::new(4, vec![2; 3], vec![0, 0, 1, 1, 0, 1, 0, 1, 0, 1, 1, 0])?;
/// let b = Array::new(9, vec![3; 2], vec![0, 0, 0, 1, 1, 1, 2, 2, 2, 0, 1, 2, 0, 1, 2, 0, 1, 2])?;
/// let array = level_product(&a, &b, &[(0, 0), (1, 1)])?;
/// assert_eq!((array.runs(), array.levels()), (36, &[6, 6, 2][..]));
/// let judged = certify(&array, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn level_product(a: &Array, b: &Array, pairs: &[(usize, usize)]) -> Result<Array, ConstructError> {
    let (left, right) = unpaired(a.factors(), b.factors(), pairs)?;
    let levels = level_product_levels(a.levels(), b.levels(), pairs)?;
    let runs = times(NAME, a.runs(), b.runs())?;
    Ok(Array::from_fn(runs, levels, |run, j| {
        let (x, y) = (run / b.runs(), run % b.runs());
        if let Some(&(p, q)) = pairs.get(j) {
            return a.get(x, p) * b.levels()[q] + b.get(y, q);
        }
        let j = j - pairs.len();
        left.get(j).map_or_else(|| b.get(y, right[j - left.len()]), |&p| a.get(x, p))
    })?)
}

/// The levels of [`level_product`], from those of A and B and the pairs.
///
/// # Errors
/// [`ConstructError::Condition`] when a column is missing or named twice, or a product is no
/// number of levels.
pub fn level_product_levels(
    a: &[u16],
    b: &[u16],
    pairs: &[(usize, usize)],
) -> Result<Vec<u16>, ConstructError> {
    let (left, right) = unpaired(a.len(), b.len(), pairs)?;
    let mut levels = pairs
        .iter()
        .map(|&(p, q)| as_levels(NAME, usize::from(a[p]).checked_mul(usize::from(b[q]))))
        .collect::<Result<Vec<u16>, _>>()?;
    levels.extend(left.iter().map(|&p| a[p]));
    levels.extend(right.iter().map(|&q| b[q]));
    Ok(levels)
}

fn unpaired(
    left: usize,
    right: usize,
    pairs: &[(usize, usize)],
) -> Result<(Vec<usize>, Vec<usize>), ConstructError> {
    let rest = |used: Vec<bool>| (0..used.len()).filter(|&j| !used[j]).collect();
    Ok((
        rest(has_columns(NAME, "A", left, pairs.iter().map(|&(p, _)| p))?),
        rest(has_columns(NAME, "B", right, pairs.iter().map(|&(_, q)| q))?),
    ))
}

/// Every run of `a` beside every run of `b`: OA(N1, X, t) × OA(N2, Y, t) → OA(N1·N2, X·Y, t).
///
/// Run (x, y) has the number `x·N2 + y`; the columns of `a` come first. Any factors of `a` and of
/// `b` are independent of one another. This is [`level_product`] without a pair, with the same cost.
///
/// # Errors
/// As [`level_product`].
///
/// ```
/// use trysquare::array::Array;
/// use trysquare::construct::compose::cartesian;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = Array::new(2, vec![2], vec![0, 1])?;
/// let b = Array::new(3, vec![3], vec![0, 1, 2])?;
/// assert_eq!(cartesian(&a, &b)?.row(4), [1, 1]);
/// let judged = certify(&cartesian(&a, &b)?, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn cartesian(a: &Array, b: &Array) -> Result<Array, ConstructError> {
    level_product(a, b, &[])
}

/// The levels of [`cartesian`]: those of A, then those of B.
///
/// # Errors
/// As [`level_product_levels`].
pub fn cartesian_levels(a: &[u16], b: &[u16]) -> Result<Vec<u16>, ConstructError> {
    level_product_levels(a, b, &[])
}

#[cfg(test)]
mod tests {
    use super::super::testing::*;
    use super::*;

    #[test]
    fn every_pairing_of_two_small_arrays() {
        let (a, b) = (plane(2), plane(3));
        let all: [&[(usize, usize)]; 5] =
            [&[], &[(0, 3)], &[(2, 0), (0, 1)], &[(0, 0), (1, 1), (2, 2)], &[(1, 3), (0, 2), (2, 0)]];
        for pairs in all {
            let array = level_product(&a, &b, pairs).unwrap();
            assert_eq!(array.runs(), 36);
            assert_eq!(array.levels(), level_product_levels(a.levels(), b.levels(), pairs).unwrap());
            assert_eq!(array.factors(), 7 - pairs.len());
            assert!(has_strength(&array, 2));
        }
    }

    #[test]
    fn twelve_levels_twice_over() {
        // MacNeish 1922: N(12) ≥ min(N(3), N(4)) = 2, so 12^4 in 144 runs, and 4 beside it.
        let pairs: Vec<_> = (0..4).map(|j| (j, j)).collect();
        let array = level_product(&plane(3), &plane(4), &pairs).unwrap();
        assert_eq!((array.runs(), array.levels()), (144, &[12, 12, 12, 12, 4][..]));
        assert!(has_strength(&array, 2));
    }

    #[test]
    fn higher_strength_is_kept() {
        let array = level_product(&full(&[2, 2, 2]), &full(&[3, 2, 2]), &[(0, 0)]).unwrap();
        assert_eq!(array.levels(), [6, 2, 2, 2, 2]);
        assert!(has_strength(&array, 5));
        let array = cartesian(&sylvester(2), &plane(3)).unwrap();
        assert_eq!(array.levels(), cartesian_levels(&[2; 3], &[3; 4]).unwrap());
        assert!(has_strength(&array, 2) && !has_strength(&array, 3));
    }

    #[test]
    fn refuses_what_does_not_fit() {
        let (a, b) = (plane(2), plane(3));
        refused(level_product(&a, &b, &[(3, 0)]), "A has factors 0 to 2, not 3");
        refused(level_product(&a, &b, &[(0, 4)]), "B has factors 0 to 3, not 4");
        refused(level_product(&a, &b, &[(0, 0), (0, 1)]), "factor 0 of A is named twice");
        refused(level_product(&a, &b, &[(0, 1), (1, 1)]), "factor 1 of B is named twice");
        let many = full(&[256]);
        refused(level_product(&many, &many, &[(0, 0)]), "not 65536");
    }
}
