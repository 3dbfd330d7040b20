//! A Kronecker sum whose columns `A ⊕ 0` make way for one large factor.

use super::block::{check_blocks, shapes};
use super::{DifferenceBlock, Levels, as_levels, times};
use crate::array::Array;
use crate::construct::ConstructError;

const NAME: &str = "zero-column refinement";

/// The Kronecker sum `A_i ⊕ D_i` without the columns `A_i ⊕ 0`, with one N1-level and one M-level
/// factor instead.
///
/// # Parameters
/// `a`: N1 runs, ∏ s_i^{k_i}. `blocks`: `D_i`, M rows × c_i columns over a group of order s_i. All
/// of these must hold:
/// * at least one block is given, and all have the same number M ≥ 2 of rows;
/// * no two blocks have groups of the same order, and every order is the number of levels of some
///   factor of `a`; factors of `a` without a block leave no column behind;
/// * the first column of every block is zero;
/// * 2 ≤ N1 ≤ 65,535 and M ≤ 65,535;
/// * `a` has strength 2 and the blocks are difference schemes (not checked).
///
/// # Result
/// OA(N1·M, ∏ s_i^{k_i(c_i−1)} · N1 · M, 2). Run (i, m) has the number `i·M + m`. Columns: for each
/// column of `a` in order its c_i − 1, then the N1-level one (symbol i), then the M-level one
/// (symbol m). Given i, the sum a_i + d_m runs through all levels evenly because a column that
/// differs evenly from the zero column is balanced; given m, because a_i does.
///
/// # Errors
/// [`ConstructError::Condition`] when a checked condition fails, [`ConstructError::Array`] when
/// the result does not fit into memory.
///
/// # Cost
/// O(cells of the result).
///
/// # Reference
/// J. C. Wang & C. F. J. Wu, Journal of the American Statistical Association 86 (1991) 450–456, on
/// replacing the columns `A ⊕ 0` by any array of N1 runs, with the finest such array.
///
/// ```
/// use trysquare::algebra::AbelianGroup;
/// use trysquare::array::Array;
/// use trysquare::construct::compose::{DifferenceBlock, zero_column_refinement};
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = Array::new(3, vec![3], vec![0, 1, 2])?;
/// let z3 = AbelianGroup::cyclic(3)?;
/// let cells = [0, 0, 0, 0, 0, 0, 0, 1, 2, 0, 1, 2, 0, 2, 1, 0, 2, 1];
/// let d = DifferenceBlock::new(&z3, 6, 3, &cells)?;
/// let array = zero_column_refinement(&a, &[d])?;
/// assert_eq!((array.runs(), array.levels()), (18, &[3, 3, 3, 6][..]));
/// let judged = certify(&array, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn zero_column_refinement(a: &Array, blocks: &[DifferenceBlock<'_>]) -> Result<Array, ConstructError> {
    let rows = blocks
        .first()
        .map(DifferenceBlock::rows)
        .ok_or_else(|| ConstructError::condition(NAME, "at least one block"))?;
    check_blocks(NAME, a.levels(), blocks, rows)?;
    if let Some(d) = blocks.iter().find(|d| d.column(0).iter().any(|&c| c != 0)) {
        let needs = format!("the first column of the block of order {} is zero", d.order());
        return Err(ConstructError::condition(NAME, needs));
    }
    let levels = zero_column_refinement_levels(a.runs(), a.levels(), &shapes(blocks), rows)?;
    let runs = times(NAME, a.runs(), rows)?;
    let mut sources = Vec::with_capacity(levels.len());
    for (j, &s) in a.levels().iter().enumerate() {
        for (index, d) in blocks.iter().enumerate().filter(|(_, d)| d.order() == s) {
            sources.extend((1..d.columns()).map(|column| (j, index, column)));
        }
    }
    Ok(Array::from_fn(runs, levels, |run, j| {
        let (i, m) = (run / rows, run % rows);
        match sources.get(j) {
            Some(&(j, index, column)) => blocks[index].group().add(a.get(i, j), blocks[index].get(m, column)),
            // Both are below a number of levels that was checked.
            None if j == sources.len() => i as u16,
            None => m as u16,
        }
    })?)
}

/// The levels of [`zero_column_refinement`], from N1 and the levels of A, the (s_i, c_i) of the
/// blocks, and M.
///
/// # Errors
/// [`ConstructError::Condition`] when N1 or M is no number of levels, or the factors are too
/// many.
pub fn zero_column_refinement_levels(
    n1: usize,
    a: &[u16],
    blocks: &[(u16, usize)],
    m: usize,
) -> Result<Vec<u16>, ConstructError> {
    let width =
        |s: u16| blocks.iter().find(|&&(order, _)| order == s).map_or(0, |&(_, c)| c.saturating_sub(1));
    let sums = a.iter().try_fold(Levels::new(NAME), |so_far, &s| so_far.repeat(s, Some(width(s))))?;
    Ok(sums.all([as_levels(NAME, Some(n1))?, as_levels(NAME, Some(m))?])?.done())
}

#[cfg(test)]
mod tests {
    use super::super::testing::*;
    use super::*;
    use crate::algebra::AbelianGroup;

    #[test]
    fn nine_runs_times_three() {
        let z3 = AbelianGroup::cyclic(3).unwrap();
        let d = DifferenceBlock::new(&z3, 3, 3, &[0, 0, 0, 0, 1, 2, 0, 2, 1]).unwrap();
        let array = zero_column_refinement(&plane(3), &[d]).unwrap();
        assert_eq!((array.runs(), array.levels()), (27, &[3, 3, 3, 3, 3, 3, 3, 3, 9, 3][..]));
        assert_eq!(array.levels(), zero_column_refinement_levels(9, &[3; 4], &[(3, 3)], 3).unwrap());
        assert!(has_strength(&array, 2));
    }

    #[test]
    fn sixteen_levels_and_twelve() {
        let z2 = AbelianGroup::cyclic(2).unwrap();
        let signs = twelve_signs();
        let array = zero_column_refinement(&sylvester(2), &[block_of(&z2, &signs)]).unwrap();
        let mut levels = vec![2; 33];
        levels.extend([4, 12]);
        assert_eq!((array.runs(), array.levels()), (48, &levels[..]));
        assert!(has_strength(&array, 2));
    }

    #[test]
    fn factors_without_a_block_vanish() {
        let z3 = AbelianGroup::cyclic(3).unwrap();
        let d = DifferenceBlock::new(&z3, 3, 3, &[0, 0, 0, 0, 1, 2, 0, 2, 1]).unwrap();
        let array = zero_column_refinement(&full(&[2, 3]), &[d]).unwrap();
        assert_eq!((array.runs(), array.levels()), (18, &[3, 3, 6, 3][..]));
        assert!(has_strength(&array, 2));
    }

    #[test]
    fn refuses_what_does_not_fit() {
        let (z2, z3) = (AbelianGroup::cyclic(2).unwrap(), AbelianGroup::cyclic(3).unwrap());
        let d = DifferenceBlock::new(&z2, 2, 2, &[0, 0, 0, 1]).unwrap();
        let skew = DifferenceBlock::new(&z2, 2, 2, &[0, 1, 0, 0]).unwrap();
        let e = DifferenceBlock::new(&z3, 2, 1, &[0, 0]).unwrap();
        let long = DifferenceBlock::new(&z3, 3, 1, &[0, 0, 0]).unwrap();
        let a = full(&[2, 3]);
        refused(zero_column_refinement(&a, &[]), "at least one block");
        refused(zero_column_refinement(&a, &[d, long]), "M = 2 rows, not 3");
        refused(zero_column_refinement(&a, &[d, d]), "two have order 2");
        refused(zero_column_refinement(&full(&[2]), &[d, e]), "no 3-level factor");
        refused(zero_column_refinement(&a, &[skew]), "the first column of the block of order 2 is zero");
        let one_row = DifferenceBlock::new(&z2, 1, 1, &[0]).unwrap();
        refused(zero_column_refinement(&a, &[one_row]), "2 to 65535 levels, not 1");
        let tall = Array::new(65_536, vec![2], (0..65_536u32).map(|i| (i % 2) as u16).collect()).unwrap();
        refused(zero_column_refinement(&tall, &[d]), "2 to 65535 levels, not 65536");
        let error = zero_column_refinement_levels(4, &[2, 2], &[(2, usize::MAX)], 2).unwrap_err();
        assert!(error.to_string().contains("at most 16777216 factors"));
    }
}
