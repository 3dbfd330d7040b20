//! The generalised Kronecker sum of Wang & Wu.

use super::block::{check_blocks, shapes};
use super::{DifferenceBlock, Levels, times};
use crate::array::Array;
use crate::construct::ConstructError;

const NAME: &str = "generalised Kronecker sum";

/// Where a column of the result comes from.
#[derive(Clone, Copy)]
enum Source {
    /// Column of A plus column of a block.
    Sum { a: usize, block: usize, column: usize },
    /// Column of A plus zero.
    Plain { a: usize },
    /// Zero plus column of B.
    Right { b: usize },
}

/// The generalised Kronecker sum `[A_1 ⊕ D_1, …, A_v ⊕ D_v, 0 ⊕ B]`.
///
/// Here `A_i` are the columns of `a` with s_i levels, their symbols read as the elements of the
/// block's group, and `A_i ⊕ D_i` holds, for every column of `A_i` and every column of `D_i`, all
/// sums of their entries.
///
/// # Parameters
/// `a`: N1 runs, ∏ s_i^{k_i}. `blocks`: `D_i`, M rows × c_i columns over a group of order s_i.
/// `b`: M runs, any levels. All of these must hold:
/// * at least one block or `b` is given, and all of them have the same number M of rows;
/// * no two blocks have groups of the same order, and every order is the number of levels of some
///   factor of `a`; a number of levels without a block takes the zero column (c_i = 1);
/// * `a` and `b` have strength 2 and the blocks are difference schemes (not checked).
///
/// # Result
/// OA(N1·M, ∏ s_i^{k_i c_i} × levels of `b`, 2). Run (i, m) of run i of `a` and row m has the
/// number `i·M + m`. Columns: for each column of `a` in order its c_i columns, then those of `b`.
///
/// # Errors
/// [`ConstructError::Condition`] when a checked condition fails, [`ConstructError::Array`] when
/// the result does not fit into memory.
///
/// # Cost
/// O(cells of the result).
///
/// # Reference
/// J. C. Wang & C. F. J. Wu, *An approach to the construction of asymmetrical orthogonal arrays*,
/// Journal of the American Statistical Association 86 (1991) 450–456. With one block and B, it is
/// the construction of R. C. Bose & K. A. Bush, Annals of Mathematical Statistics 23 (1952).
///
/// ```
/// use trysquare::algebra::AbelianGroup;
/// use trysquare::array::Array;
/// use trysquare::construct::compose::{DifferenceBlock, kronecker_sum};
/// use trysquare::verify::{Demand, Verdict, certify};
/// // 3^3 · 3 in 9 runs from one three-level factor, D(3,3,3) and one more.
/// let a = Array::new(3, vec![3], vec![0, 1, 2])?;
/// let z3 = AbelianGroup::cyclic(3)?;
/// let d = DifferenceBlock::new(&z3, 3, 3, &[0, 0, 0, 0, 1, 2, 0, 2, 1])?;
/// let array = kronecker_sum(&a, &[d], Some(&a))?;
/// assert_eq!((array.runs(), array.levels()), (9, &[3, 3, 3, 3][..]));
/// let judged = certify(&array, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn kronecker_sum(
    a: &Array,
    blocks: &[DifferenceBlock<'_>],
    b: Option<&Array>,
) -> Result<Array, ConstructError> {
    let rows = b
        .map(Array::runs)
        .or_else(|| blocks.first().map(DifferenceBlock::rows))
        .ok_or_else(|| ConstructError::condition(NAME, "at least one block or B"))?;
    check_blocks(NAME, a.levels(), blocks, rows)?;
    let runs = times(NAME, a.runs(), rows)?;
    let levels = kronecker_sum_levels(a.levels(), &shapes(blocks), b.map_or(&[], Array::levels))?;
    let mut sources = Vec::with_capacity(levels.len());
    for (j, &s) in a.levels().iter().enumerate() {
        match blocks.iter().position(|d| d.order() == s) {
            Some(block) => {
                sources.extend((0..blocks[block].columns()).map(|column| Source::Sum {
                    a: j,
                    block,
                    column,
                }));
            }
            None => sources.push(Source::Plain { a: j }),
        }
    }
    sources.extend((0..b.map_or(0, Array::factors)).map(|j| Source::Right { b: j }));
    Ok(Array::from_fn(runs, levels, |run, j| {
        let (i, m) = (run / rows, run % rows);
        match (sources[j], b) {
            (Source::Sum { a: j, block, column }, _) => {
                let d = &blocks[block];
                d.group().add(a.get(i, j), d.get(m, column))
            }
            (Source::Plain { a: j }, _) => a.get(i, j),
            (Source::Right { b: j }, Some(b)) => b.get(m, j),
            (Source::Right { .. }, None) => unreachable!("columns of B are listed when it is given"),
        }
    })?)
}

/// The levels of [`kronecker_sum`], from those of A, the (s_i, c_i) of the blocks, and those of B
/// (empty when it is left out).
///
/// # Errors
/// [`ConstructError::Condition`] when the factors are too many.
pub fn kronecker_sum_levels(
    a: &[u16],
    blocks: &[(u16, usize)],
    b: &[u16],
) -> Result<Vec<u16>, ConstructError> {
    let width = |s: u16| blocks.iter().find(|&&(order, _)| order == s).map_or(1, |&(_, c)| c);
    let sums = a.iter().try_fold(Levels::new(NAME), |so_far, &s| so_far.repeat(s, Some(width(s))))?;
    Ok(sums.all(b.iter().copied())?.done())
}

#[cfg(test)]
mod tests {
    use super::super::testing::*;
    use super::*;
    use crate::algebra::AbelianGroup;

    #[test]
    fn four_runs_times_twelve() {
        // 2^3 in 4 runs, a 12 × 12 sign matrix as D(12,12,2), and 2^11: 2^36 · 2^11.
        let (a, h, b) = (sylvester(2), twelve_signs(), twelve());
        let z2 = AbelianGroup::cyclic(2).unwrap();
        let d = block_of(&z2, &h);
        assert!(d.is_difference_scheme());
        let array = kronecker_sum(&a, &[d], Some(&b)).unwrap();
        assert_eq!((array.runs(), array.levels()), (48, &[2; 47][..]));
        assert!(has_strength(&array, 2));
        let without = kronecker_sum(&a, &[d], None).unwrap();
        assert_eq!(without.levels(), kronecker_sum_levels(&[2; 3], &[(2, 12)], &[]).unwrap());
        assert_eq!(without, array.select(&(0..36).collect::<Vec<_>>()).unwrap());
    }

    #[test]
    fn mixed_levels_with_and_without_blocks() {
        // A = 2·3 full factorial; only the three-level factor has a block, over D(3,3,3).
        let a = full(&[2, 3]);
        let z3 = AbelianGroup::cyclic(3).unwrap();
        let d = DifferenceBlock::new(&z3, 3, 3, &[0, 0, 0, 0, 1, 2, 0, 2, 1]).unwrap();
        let b = full(&[3]);
        let array = kronecker_sum(&a, &[d], Some(&b)).unwrap();
        assert_eq!((array.runs(), array.levels()), (18, &[2, 3, 3, 3, 3][..]));
        assert_eq!(array.levels(), kronecker_sum_levels(&[2, 3], &[(3, 3)], &[3]).unwrap());
        assert!(has_strength(&array, 2));
        assert_eq!(array.row(4), [0, 1, 2, 0, 1]); // i = 1: (0, 1); m = 1: 0 1 2
        let only_b = kronecker_sum(&a, &[], Some(&b)).unwrap();
        assert_eq!((only_b.runs(), only_b.levels()), (18, &[2, 3, 3][..]));
        assert!(has_strength(&only_b, 3));
    }

    #[test]
    fn both_blocks_at_once() {
        // A = 2·3; D(6,2,2), and D(3,3,3) twice as D(6,3,3).
        let (z2, z3) = (AbelianGroup::cyclic(2).unwrap(), AbelianGroup::cyclic(3).unwrap());
        let d2 = DifferenceBlock::new(&z2, 6, 2, &[0, 0, 0, 0, 0, 0, 0, 0, 0, 1, 1, 1]).unwrap();
        let d3 = [0, 0, 0, 0, 0, 0, 0, 1, 2, 0, 1, 2, 0, 2, 1, 0, 2, 1];
        let d3 = DifferenceBlock::new(&z3, 6, 3, &d3).unwrap();
        let b = full(&[2, 3]);
        let array = kronecker_sum(&full(&[2, 3]), &[d3, d2], Some(&b)).unwrap();
        assert_eq!((array.runs(), array.levels()), (36, &[2, 2, 3, 3, 3, 2, 3][..]));
        assert!(has_strength(&array, 2));
    }

    #[test]
    fn refuses_what_does_not_fit() {
        let z2 = AbelianGroup::cyclic(2).unwrap();
        let z3 = AbelianGroup::cyclic(3).unwrap();
        let d = DifferenceBlock::new(&z2, 2, 2, &[0, 0, 0, 1]).unwrap();
        let e = DifferenceBlock::new(&z3, 2, 1, &[0, 0]).unwrap();
        let a = full(&[2, 2]);
        refused(kronecker_sum(&a, &[], None), "at least one block or B");
        refused(kronecker_sum(&a, &[d], Some(&a)), "M = 4 rows, not 2");
        refused(kronecker_sum(&a, &[d, d], None), "two have order 2");
        refused(kronecker_sum(&a, &[d, e], None), "no 3-level factor");
        for c in [usize::MAX, crate::mix::MAX_FACTORS] {
            let error = kronecker_sum_levels(&[2, 2], &[(2, c)], &[]).unwrap_err();
            assert!(error.to_string().contains("at most 16777216 factors"));
        }
    }
}
