//! Two factors with many levels as a grid, beside factors from two difference schemes.

use super::all_two;
use crate::algebra::AbelianGroup;
use crate::array::Array;
use crate::construct::ConstructError;
use crate::construct::compose::{DifferenceBlock, Levels, as_levels, times};

const NAME: &str = "grids";

/// Two factors as a grid of cells, every cell visited once per element of a group.
///
/// # Parameters
/// `u`: s1 rows, `v`: s2 rows, both over the same group of order g; m is the smaller of their
/// numbers of columns, and only the first m columns of each are used. All of these must hold:
/// * the groups are the same and 2 ≤ s1, s2 ≤ 65,535;
/// * the first m columns of `u` are a difference scheme, and so are those of `v`;
/// * if g > 2 and m > 2, then for any three columns k, l, p the pair of differences
///   (M_k − M_l, M_k − M_p) takes each of its g² values equally often over the grid, where
///   M_k(i, j) = u_k(i) + v_k(j). (It suffices that this holds in `u`, or in `v`, alone: a
///   difference scheme of strength 3. For g = 2 it follows from the second condition.)
///
/// # Result
/// OA(g·s1·s2, s1·s2·g^m, 3). Run (i, j, ε) has the number `(i·s2 + j)·g + ε`; its symbols are i,
/// j, and ε + M_k(i, j) for k = 1..m. Within a row of the grid, M_k − M_l is a difference of two
/// columns of `v` plus a constant, within a column one of `u`, so both are even.
///
/// # Errors
/// [`ConstructError::Condition`] when a condition fails, [`ConstructError::Array`] when the result
/// does not fit into memory.
///
/// # Cost
/// O(m²(s1 + s2)) for the schemes, O(m³ s1 s2) for the triples when g > 2, and the cells of the
/// result.
///
/// # Reference
/// Proved above.
///
/// ```
/// use trysquare::algebra::AbelianGroup;
/// use trysquare::construct::compose::DifferenceBlock;
/// use trysquare::construct::strength3::grids;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let z3 = AbelianGroup::cyclic(3)?;
/// let u = DifferenceBlock::new(&z3, 6, 2, &[0, 0, 0, 0, 0, 0, 0, 1, 2, 0, 1, 2])?;
/// let v = DifferenceBlock::new(&z3, 3, 2, &[0, 0, 0, 0, 1, 2])?;
/// let array = grids(&u, &v)?;
/// assert_eq!((array.runs(), array.levels()), (54, &[6, 3, 3, 3][..]));
/// let judged = certify(&array, &Demand::strength(3))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn grids(u: &DifferenceBlock<'_>, v: &DifferenceBlock<'_>) -> Result<Array, ConstructError> {
    let fail = |needs: String| Err(ConstructError::condition(NAME, needs));
    if u.group() != v.group() {
        return fail(format!("both schemes over one group, not {} and {}", u.group(), v.group()));
    }
    let (s1, s2, m) = (u.rows(), v.rows(), u.columns().min(v.columns()));
    let levels = grids_levels(s1, s2, u.order(), m)?;
    for (name, scheme) in [("u", u), ("v", v)] {
        for k in 0..m {
            if let Some(l) = (0..k).find(|&l| !scheme.is_balanced_difference(k, l)) {
                return fail(format!("the difference of columns {l} and {k} of {name} is even"));
            }
        }
    }
    if u.order() > 2 {
        check_triples(u, v, m)?;
    }
    let g = usize::from(u.order());
    let runs = times(NAME, times(NAME, s1, s2)?, g)?;
    Ok(Array::from_fn(runs, levels, |run, column| {
        // All three are below a number of levels.
        let (i, j, e) = (run / g / s2, run / g % s2, (run % g) as u16);
        match column {
            0 => i as u16,
            1 => j as u16,
            _ => u.group().add(e, cell(u, v, column - 2, i, j)),
        }
    })?)
}

/// M_k(i, j).
fn cell(u: &DifferenceBlock<'_>, v: &DifferenceBlock<'_>, k: usize, i: usize, j: usize) -> u16 {
    u.group().add(u.get(i, k), v.get(j, k))
}

fn check_triples(u: &DifferenceBlock<'_>, v: &DifferenceBlock<'_>, m: usize) -> Result<(), ConstructError> {
    let pairs = u64::from(u.order()).pow(2);
    for k in 0..m {
        for (l, p) in (0..k).flat_map(|p| (0..p).map(move |l| (l, p))) {
            let mut counts = std::collections::HashMap::new();
            for (i, j) in (0..u.rows()).flat_map(|i| (0..v.rows()).map(move |j| (i, j))) {
                let [x, y, z] = [k, l, p].map(|c| cell(u, v, c, i, j));
                *counts.entry((u.group().sub(x, y), u.group().sub(x, z))).or_insert(0u64) += 1;
            }
            // At most 65,535 rows each.
            let cells = u.rows() as u64 * v.rows() as u64;
            if counts.values().any(|&n| n != cells / pairs) {
                let needs = format!("the differences of columns {l}, {p} and {k} are even over the grid");
                return Err(ConstructError::condition(NAME, needs));
            }
        }
    }
    Ok(())
}

/// The levels of [`grids`], from the rows of both schemes, the order of the group, and the smaller
/// number m of columns.
///
/// # Errors
/// [`ConstructError::Condition`] when s1, s2 or g is no number of levels, or the factors are too
/// many.
pub fn grids_levels(s1: usize, s2: usize, g: u16, m: usize) -> Result<Vec<u16>, ConstructError> {
    let grid = Levels::new(NAME).all([as_levels(NAME, Some(s1))?, as_levels(NAME, Some(s2))?])?;
    Ok(grid.repeat(as_levels(NAME, Some(usize::from(g)))?, Some(m))?.done())
}

/// Two factors as a grid beside two-level ones: [`grids`] over the group of order 2.
///
/// # Parameters
/// `u`: s1 runs, `v`: s2 runs, two-level columns read as vectors of ±1 (the constant one may be
/// among them); m is the smaller of their numbers of columns. Both must hold:
/// * all levels are 2, and 2 ≤ s1, s2 ≤ 65,535;
/// * the first m columns of `u` are mutually orthogonal, and so are those of `v`.
///
/// # Result
/// OA(2·s1·s2, s1·s2·2^m, 3), runs and columns as in [`grids`]. Such an array in 2·s1·s2 runs is
/// the same as m matrices s1 × s2 of ±1 whose pairwise products have zero row and column sums; a
/// row of each gives m mutually orthogonal vectors of length s2, a column m of length s1. So m is
/// at most s1 and s2, at most 2 if one of them is 2 modulo 4, and at most 1 if one is odd: with all
/// columns of Hadamard matrices, or two orthogonal vectors of even length, no other matrices would
/// do better.
///
/// # Errors
/// As [`grids`].
///
/// # Cost
/// O(m²(s1 + s2) + cells of the result).
///
/// # Reference
/// Proved above.
///
/// ```
/// use trysquare::array::Array;
/// use trysquare::construct::strength3::two_grids;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let u = Array::new(6, vec![2; 2], vec![0, 0, 0, 0, 0, 0, 0, 0, 0, 1, 1, 1])?;
/// let v = Array::new(4, vec![2; 2], vec![0, 0, 0, 0, 0, 0, 1, 1])?;
/// let array = two_grids(&u, &v)?;
/// assert_eq!((array.runs(), array.levels()), (48, &[6, 4, 2, 2][..]));
/// let judged = certify(&array, &Demand::strength(3))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn two_grids(u: &Array, v: &Array) -> Result<Array, ConstructError> {
    all_two(NAME, "u", u.levels())?;
    all_two(NAME, "v", v.levels())?;
    let z2 = AbelianGroup::cyclic(2)?;
    let [x, y] = [u, v].map(|a| a.columns().flatten().copied().collect::<Vec<u16>>());
    grids(
        &DifferenceBlock::new(&z2, u.runs(), u.factors(), &x)?,
        &DifferenceBlock::new(&z2, v.runs(), v.factors(), &y)?,
    )
}

/// The levels of [`two_grids`], from the runs of both arrays and the smaller number m of columns.
///
/// # Errors
/// [`ConstructError::Condition`] when s1 or s2 is no number of levels.
pub fn two_grids_levels(s1: usize, s2: usize, m: usize) -> Result<Vec<u16>, ConstructError> {
    grids_levels(s1, s2, 2, m)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::algebra::Field;
    use crate::construct::compose::testing::*;

    /// The best sign vectors of a small length.
    fn signs(s: usize) -> Array {
        match s {
            2 | 4 | 8 => sylvester_signs(s.ilog2()),
            12 => twelve_signs(),
            _ if s.is_multiple_of(2) => {
                Array::from_fn(s, vec![2; 2], |i, j| u16::from(j == 1 && i < s / 2)).unwrap()
            }
            _ => Array::from_fn(s, vec![2], |_, _| 0).unwrap(),
        }
    }

    #[test]
    fn every_small_pair() {
        for s1 in [2, 3, 4, 5, 6, 8, 10, 12] {
            for s2 in [2, 3, 4, 6, 8, 12] {
                let (u, v) = (signs(s1), signs(s2));
                let m = u.factors().min(v.factors());
                let array = two_grids(&u, &v).unwrap();
                assert_eq!(array.runs(), 2 * s1 * s2);
                assert_eq!(array.levels(), two_grids_levels(s1, s2, m).unwrap());
                assert_eq!(array.factors(), 2 + m);
                assert!(has_strength(&array, 3));
            }
        }
    }

    #[test]
    fn three_levels_beside_six_and_six() {
        let z3 = AbelianGroup::cyclic(3).unwrap();
        let u = DifferenceBlock::new(&z3, 6, 2, &[0, 0, 0, 0, 0, 0, 0, 1, 2, 0, 1, 2]).unwrap();
        let array = grids(&u, &u).unwrap();
        assert_eq!((array.runs(), array.levels()), (108, &[6, 6, 3, 3][..]));
        assert!(has_strength(&array, 3));
    }

    #[test]
    fn six_four_level_factors_in_sixty_four_runs() {
        // u_k(i) = k·i and v_k(j) = k²·j over GF(4): no ratio of differences of three k is its
        // own square, so the triples are even.
        let (f, group) = (Field::new(4).unwrap(), AbelianGroup::elementary(2, 2).unwrap());
        let x: Vec<u16> = (0..16).map(|c| f.mul(c / 4, c % 4)).collect();
        let y: Vec<u16> = (0..16).map(|c| f.mul(f.pow(c / 4, 2), c % 4)).collect();
        let u = DifferenceBlock::new(&group, 4, 4, &x).unwrap();
        let v = DifferenceBlock::new(&group, 4, 4, &y).unwrap();
        let array = grids(&u, &v).unwrap();
        assert_eq!((array.runs(), array.levels()), (64, &[4; 6][..]));
        assert_eq!(array.levels(), grids_levels(4, 4, 4, 4).unwrap());
        assert!(has_strength(&array, 3));
        refused(grids(&u, &u), "the differences of columns 0, 1 and 2 are even over the grid");
    }

    #[test]
    fn refuses_what_does_not_fit() {
        let (z2, z3) = (AbelianGroup::cyclic(2).unwrap(), AbelianGroup::cyclic(3).unwrap());
        let u = DifferenceBlock::new(&z2, 2, 2, &[0, 0, 0, 1]).unwrap();
        let w = DifferenceBlock::new(&z3, 2, 1, &[0, 0]).unwrap();
        let same = DifferenceBlock::new(&z2, 2, 2, &[0, 0, 0, 0]).unwrap();
        let row = DifferenceBlock::new(&z2, 1, 1, &[0]).unwrap();
        refused(grids(&u, &w), "both schemes over one group, not Z2 and Z3");
        refused(grids(&same, &u), "the difference of columns 0 and 1 of u is even");
        refused(grids(&u, &same), "the difference of columns 0 and 1 of v is even");
        refused(grids(&row, &u), "2 to 65535 levels, not 1");
        refused(grids(&u, &row), "2 to 65535 levels, not 1");
        assert!(grids_levels(4, 4, 1, 1).unwrap_err().to_string().contains("65535 levels, not 1"));
        assert!(grids_levels(4, 4, 2, 1 << 24).unwrap_err().to_string().contains("at most 16777216 factors"));
        refused(two_grids(&full(&[3]), &full(&[2])), "all levels of u are 2, not 3");
        refused(two_grids(&full(&[2]), &full(&[2, 4])), "all levels of v are 2, not 4");
    }
}
