//! Arrays below one another, told apart by one factor.

use super::{as_levels, has_column};
use crate::array::Array;
use crate::construct::ConstructError;

const NAME: &str = "juxtaposition";

/// The runs of all parts one after the other, the level sets of one factor made disjoint.
///
/// # Parameters
/// `parts`: arrays of N_i runs, each with the index of its p_i-level column, or `None` when the
/// whole part is to be one level (p_i = 1). All of these must hold:
/// * at least two parts;
/// * without the p_i-level column, all parts have the same levels X in the same order;
/// * N_i / p_i is the same whole number for all parts;
/// * Σ p_i ≤ 65,535;
/// * all parts have strength t (not checked).
///
/// # Result
/// OA(Σ N_i, (Σ p_i)·X, t): t factors of X are even within each part; given the new factor, its
/// level says the part and, with t − 1 others, occurs N_i/(p_i ∏ s) times, the same for all parts.
/// Runs in the order of the parts. Columns: first the (Σ p_i)-level one, the levels of part i
/// following those of part i − 1; then X.
///
/// # Errors
/// [`ConstructError::Condition`] when a checked condition fails.
///
/// # Cost
/// O(cells of the result).
///
/// # Reference
/// A. S. Hedayat, N. J. A. Sloane & J. Stufken, *Orthogonal Arrays* (1999), chapter 9
/// (juxtaposition).
///
/// ```
/// use trysquare::array::Array;
/// use trysquare::construct::compose::juxtapose;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = Array::new(4, vec![2, 2, 2], vec![0, 0, 1, 1, 0, 1, 0, 1, 0, 1, 1, 0])?;
/// let array = juxtapose(&[(&a, Some(0)), (&a, Some(0)), (&a, Some(2))])?;
/// assert_eq!((array.runs(), array.levels()), (12, &[6, 2, 2][..]));
/// let judged = certify(&array, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn juxtapose(parts: &[(&Array, Option<usize>)]) -> Result<Array, ConstructError> {
    let shapes: Vec<_> = parts.iter().map(|&(a, column)| (a.levels(), column)).collect();
    let levels = juxtapose_levels(&shapes)?;
    let mut index = None;
    let mut columns: Vec<Vec<u16>> = vec![Vec::new(); levels.len()];
    let mut first = 0;
    for &(a, column) in parts {
        let p = column.map_or(1, |j| a.levels()[j]);
        let whole = a.runs().is_multiple_of(usize::from(p)).then(|| a.runs() / usize::from(p));
        if whole.is_none() || *index.get_or_insert(whole) != whole {
            let needs = format!("runs per level the same whole number in all parts, not {}/{p}", a.runs());
            return Err(ConstructError::condition(NAME, needs));
        }
        match column {
            Some(j) => columns[0].extend(a.column(j).iter().map(|&c| first + c)),
            None => columns[0].extend(std::iter::repeat_n(first, a.runs())),
        }
        let others = (0..a.factors()).filter(|&j| Some(j) != column);
        for (to, j) in columns[1..].iter_mut().zip(others) {
            to.extend_from_slice(a.column(j));
        }
        first = first.saturating_add(p);
    }
    Ok(Array::from_columns(levels.into_iter().zip(columns).collect())?)
}

/// The levels of [`juxtapose`], from the levels of each part and its column.
///
/// # Errors
/// [`ConstructError::Condition`] when there are fewer than two parts, a part has no such column,
/// the other levels differ, or the sum is no number of levels.
pub fn juxtapose_levels(parts: &[(&[u16], Option<usize>)]) -> Result<Vec<u16>, ConstructError> {
    if parts.len() < 2 {
        return Err(ConstructError::condition(NAME, format!("at least two parts, not {}", parts.len())));
    }
    let mut sum = Some(0usize);
    let mut shared: Option<Vec<u16>> = None;
    for &(levels, column) in parts {
        if let Some(j) = column {
            has_column(NAME, "a part", levels.len(), j)?;
        }
        sum = sum.and_then(|n| n.checked_add(column.map_or(1, |j| usize::from(levels[j]))));
        let others: Vec<u16> =
            levels.iter().enumerate().filter(|&(j, _)| Some(j) != column).map(|(_, &s)| s).collect();
        if shared.get_or_insert_with(|| others.clone()) != &others {
            let needs = format!("the same other levels in all parts, not {shared:?} and {others:?}");
            return Err(ConstructError::condition(NAME, needs));
        }
    }
    let mut levels = vec![as_levels(NAME, sum)?];
    levels.extend(shared.into_iter().flatten());
    Ok(levels)
}

#[cfg(test)]
mod tests {
    use super::super::testing::*;
    use super::*;

    #[test]
    fn eight_and_twelve_runs_make_twenty() {
        // 4·2^2 in 8 runs and 6·2^2 in 12: 10·2^2 in 20.
        let six = juxtapose(&[(&sylvester(2), Some(0)); 3]).unwrap();
        assert_eq!((six.runs(), six.levels()), (12, &[6, 2, 2][..]));
        let four = juxtapose(&[(&sylvester(2), Some(1)); 2]).unwrap();
        let ten = juxtapose(&[(&four, Some(0)), (&six, Some(0))]).unwrap();
        assert_eq!((ten.runs(), ten.levels()), (20, &[10, 2, 2][..]));
        assert_eq!(ten.levels(), juxtapose_levels(&[(&[4, 2, 2], Some(0)), (&[6, 2, 2], Some(0))]).unwrap());
        for a in [&six, &four, &ten] {
            assert!(has_strength(a, 2));
        }
    }

    #[test]
    fn a_whole_part_as_one_level() {
        let a = plane(3);
        let array = juxtapose(&[(&a, None), (&full(&[2, 3, 3, 3]).select(&[1, 2, 3, 0]).unwrap(), None)]);
        refused(array, "the same other levels");
        // 9 runs as one level, 27 as three.
        let three = full(&[3, 3, 3]);
        let array = juxtapose(&[(&a.select(&[0, 1]).unwrap(), None), (&three, Some(1))]).unwrap();
        assert_eq!((array.runs(), array.levels()), (36, &[4, 3, 3][..]));
        assert!(has_strength(&array, 2));
        assert!(has_strength(&array, 3));
    }

    #[test]
    fn strength_three_is_kept() {
        let a = full(&[2, 2, 2]);
        let even =
            Array::from_fn(
                8,
                vec![2; 4],
                |i, j| if j < 3 { a.get(i, j) } else { a.row(i).iter().sum::<u16>() % 2 },
            );
        let even = even.unwrap();
        let array = juxtapose(&[(&even, Some(3)), (&even, Some(0)), (&even, Some(1))]).unwrap();
        assert_eq!((array.runs(), array.levels()), (24, &[6, 2, 2, 2][..]));
        assert!(has_strength(&array, 3));
    }

    #[test]
    fn refuses_what_does_not_fit() {
        let a = sylvester(2);
        refused(juxtapose(&[]), "at least two parts, not 0");
        refused(juxtapose(&[(&a, Some(0))]), "at least two parts, not 1");
        refused(juxtapose(&[(&a, Some(0)), (&a, Some(3))]), "a part has factors 0 to 2, not 3");
        refused(juxtapose(&[(&a, Some(0)), (&plane(3), Some(0))]), "the same other levels");
        refused(juxtapose(&[(&a, Some(0)), (&full(&[2, 2, 2]), Some(0))]), "the same whole number");
        let uneven = Array::new(3, vec![2, 2, 2], vec![0; 9]).unwrap();
        refused(juxtapose(&[(&uneven, Some(0)), (&uneven, Some(0))]), "not 3/2");
        let many = Array::new(40_000, vec![40_000], (0..40_000).collect()).unwrap();
        refused(juxtapose(&[(&many, Some(0)), (&many, Some(0))]), "not 80000");
    }
}
