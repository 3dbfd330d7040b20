//! Grouping columns (contractive replacement).

use std::collections::BTreeMap;

use super::{as_levels, has_columns};
use crate::array::Array;
use crate::construct::ConstructError;

const NAME: &str = "grouping columns";

/// The array in which columns that form copies of a saturated array are one column.
///
/// # Parameters
/// `a`: N runs. `columns`: columns of `a` with levels s_1, …, s_c; s = 1 + Σ(s_i − 1). All of these
/// must hold:
/// * at least one column is named, all exist, none is named twice;
/// * their rows show exactly s different patterns, each N/s times;
/// * the s patterns are an OA(s, ∏ s_i, 2), which is then saturated;
/// * s ≤ 65,535;
/// * `a` has strength 2 (not checked).
///
/// # Result
/// OA(N, s·X, 2): the s-level column stands where the leftmost grouped one stood, its symbol being
/// the rank of the pattern in lexicographic order (columns compared in the order in which they are
/// named); X are the columns that are left. The level indicators of the grouped columns span all
/// functions of the pattern, so whatever is orthogonal to each of them is orthogonal to it.
/// **Strength 3 is not kept**: products of two grouped columns are not controlled.
///
/// # Errors
/// [`ConstructError::Condition`] when a checked condition fails.
///
/// # Cost
/// O(N·c·log s + s·c²) and the cells of the result.
///
/// # Reference
/// S. Addelman, Technometrics 4 (1962) 21–46 (three two-level columns to one of four levels); as
/// "contractive replacement" in A. S. Hedayat, N. J. A. Sloane & J. Stufken, *Orthogonal Arrays*
/// (1999), chapter 9.
///
/// ```
/// use trysquare::array::Array;
/// use trysquare::construct::compose::group;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = Array::new(4, vec![2; 3], vec![0, 0, 1, 1, 0, 1, 0, 1, 0, 1, 1, 0])?;
/// assert_eq!(group(&a, &[0, 1, 2])?, Array::new(4, vec![4], vec![0, 1, 2, 3])?);
/// let judged = certify(&group(&a, &[0, 1, 2])?, &Demand::strength(1))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn group(a: &Array, columns: &[usize]) -> Result<Array, ConstructError> {
    let fail = |needs: String| Err(ConstructError::condition(NAME, needs));
    let levels = group_levels(a.levels(), columns)?;
    let grouped = has_columns(NAME, "A", a.factors(), columns.iter().copied())?;
    let first = grouped.iter().position(|&g| g).unwrap_or(0);
    let s = usize::from(levels[first]);
    let pattern = |i: usize| columns.iter().map(|&j| a.get(i, j)).collect::<Vec<u16>>();
    let mut counts: BTreeMap<Vec<u16>, usize> = BTreeMap::new();
    for i in 0..a.runs() {
        *counts.entry(pattern(i)).or_default() += 1;
    }
    if counts.len() != s {
        return fail(format!("as many patterns as a saturated array has runs, {s}, not {}", counts.len()));
    }
    if counts.values().any(|&n| n != a.runs() / s) {
        return fail(format!("every pattern occurs {}/{s} times", a.runs()));
    }
    let patterns: Vec<&[u16]> = counts.keys().map(Vec::as_slice).collect();
    let sizes: Vec<usize> = columns.iter().map(|&j| usize::from(a.levels()[j])).collect();
    for p in 0..sizes.len() {
        if let Some(q) = (0..p).find(|&q| !even(&patterns, (q, sizes[q]), (p, sizes[p]))) {
            return fail(format!("factors {} and {} are orthogonal in the patterns", columns[q], columns[p]));
        }
    }
    let ranks: BTreeMap<&[u16], u16> = patterns.into_iter().zip(0..).collect();
    let symbols: Vec<u16> = (0..a.runs()).map(|i| ranks[pattern(i).as_slice()]).collect();
    let kept: Vec<usize> = (0..a.factors()).filter(|&j| j == first || !grouped[j]).collect();
    Ok(Array::from_fn(a.runs(), levels, |i, j| if j == first { symbols[i] } else { a.get(i, kept[j]) })?)
}

/// Whether all pairs of symbols of two columns occur equally often. (When all that occur do so as
/// often as the whole quotient says, none is missing.)
fn even(rows: &[&[u16]], (p, sp): (usize, usize), (q, sq): (usize, usize)) -> bool {
    let mut counts: BTreeMap<(u16, u16), usize> = BTreeMap::new();
    for row in rows {
        *counts.entry((row[p], row[q])).or_default() += 1;
    }
    counts.values().all(|&n| n == rows.len() / (sp * sq))
}

/// The levels of [`group`], from those of A and the grouped columns.
///
/// # Errors
/// [`ConstructError::Condition`] when no column is named, one is missing or named twice, or
/// 1 + Σ(s_i − 1) is no number of levels.
pub fn group_levels(a: &[u16], columns: &[usize]) -> Result<Vec<u16>, ConstructError> {
    let grouped = has_columns(NAME, "A", a.len(), columns.iter().copied())?;
    let Some(first) = grouped.iter().position(|&g| g) else {
        return Err(ConstructError::condition(NAME, "at least one column is named"));
    };
    let freedom = columns.iter().try_fold(1usize, |n, &j| n.checked_add(usize::from(a[j]) - 1));
    let s = as_levels(NAME, freedom)?;
    Ok((0..a.len())
        .filter(|&j| j == first || !grouped[j])
        .map(|j| if j == first { s } else { a[j] })
        .collect())
}

#[cfg(test)]
mod tests {
    use super::super::testing::*;
    use super::*;
    use crate::construct::compose::split;

    #[test]
    fn every_line_of_sixteen_runs() {
        let a = sylvester(4);
        let mut lines = 0;
        for x in 1..16usize {
            for y in x + 1..16 {
                let z = x ^ y;
                if z < y {
                    continue;
                }
                lines += 1;
                let array = group(&a, &[z - 1, x - 1, y - 1]).unwrap();
                assert_eq!(array.levels()[x - 1], 4);
                assert_eq!(array.levels(), group_levels(&[2; 15], &[z - 1, x - 1, y - 1]).unwrap());
                assert!(has_strength(&array, 2));
            }
        }
        assert_eq!(lines, 35);
    }

    #[test]
    fn undoes_a_splitting_up_to_names() {
        for (q, by) in [(4, sylvester(2)), (9, plane(3))] {
            let a = plane(q);
            let parts: Vec<usize> = (1..1 + by.factors()).collect();
            let array = group(&split(&a, 1, &by).unwrap(), &parts).unwrap();
            assert_eq!(array.levels(), a.levels());
            let mut names = std::collections::BTreeSet::new();
            names.extend(a.column(1).iter().zip(array.column(1)));
            assert_eq!(names.len(), q as usize);
        }
    }

    #[test]
    fn one_column_stays_itself() {
        let a = plane(3);
        assert_eq!(group(&a, &[2]).unwrap(), a);
    }

    #[test]
    fn refuses_what_does_not_fit() {
        let a = sylvester(3);
        refused(group(&a, &[]), "at least one column");
        refused(group(&a, &[0, 7]), "A has factors 0 to 6, not 7");
        refused(group(&a, &[0, 0]), "named twice");
        refused(group(&a, &[0, 1]), "as many patterns as a saturated array has runs, 3, not 4");
        refused(group(&a, &[0, 1, 3]), "4, not 8");
        let skew = Array::new(8, vec![2; 3], [0, 0, 0, 0, 1, 1, 1, 1].repeat(3)).unwrap();
        refused(group(&skew, &[0, 1, 2]), "4, not 2");
        let uneven = sylvester(2).select(&[0, 1, 2]).unwrap();
        let rows: Vec<Vec<u16>> = (0..8).map(|i| uneven.row([0, 0, 1, 1, 2, 2, 3, 0][i])).collect();
        let uneven = Array::from_rows(vec![2; 3], &rows).unwrap();
        refused(group(&uneven, &[0, 1, 2]), "every pattern occurs 8/4 times");
        let rows = [[0, 0, 0], [0, 0, 1], [1, 1, 0], [1, 1, 1]];
        let dependent = Array::from_rows(vec![2; 3], &rows).unwrap();
        refused(group(&dependent, &[0, 1, 2]), "factors 0 and 1 are orthogonal");
        // All pairs occur in these five patterns, (1, 1) twice.
        let rows = [[0, 0, 0, 0], [0, 1, 1, 1], [1, 0, 1, 1], [1, 1, 0, 1], [1, 1, 1, 0]];
        let covering = Array::from_rows(vec![2; 4], &rows).unwrap();
        refused(group(&covering, &[0, 1, 2, 3]), "factors 0 and 1 are orthogonal");
        let big = Array::new(2, vec![40_000; 2], vec![0, 1, 0, 1]).unwrap();
        refused(group(&big, &[0, 1]), "not 79999");
    }
}
