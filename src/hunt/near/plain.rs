//! Plans that are even in each column, and random otherwise.

use std::cmp::Reverse;
use std::collections::BinaryHeap;

use crate::array::{Array, ArrayError};
use crate::hunt::Random;

/// A random plan of `runs` runs whose level counts are as even as can be: in each column they differ
/// by at most one, or as little as the `kept` runs allow, which come first.
///
/// All of these must hold: `kept` has these levels and at most `runs` runs.
///
/// # Errors
/// An [`ArrayError`] when there are no runs, or the levels are out of range.
///
/// ```
/// use trysquare::hunt::{Random, near::random_balanced};
/// use trysquare::verify::nearness;
/// let plan = random_balanced(&[2, 3, 3], 7, None, &mut Random::new(1))?;
/// assert_eq!(nearness(&plan).level_differences, [1, 1, 1]);
/// # Ok::<(), trysquare::array::ArrayError>(())
/// ```
pub fn random_balanced(
    levels: &[u16],
    runs: usize,
    kept: Option<&Array>,
    random: &mut Random,
) -> Result<Array, ArrayError> {
    let kept_of = |j: usize| kept.map_or(&[][..], |kept| kept.column(j));
    let columns = levels.iter().enumerate().map(|(j, &s)| (s, balanced_column(s, runs, kept_of(j), random)));
    Array::from_columns(columns.collect())
}

/// A random column that begins with `kept` and has level counts as even as that allows.
pub(super) fn balanced_column(levels: u16, runs: usize, kept: &[u16], random: &mut Random) -> Vec<u16> {
    let mut order: Vec<u16> = (0..levels).collect();
    random.shuffle(&mut order);
    let mut column = kept.to_vec();
    column.extend(filling(&order, runs, kept));
    random.shuffle(&mut column[kept.len()..]);
    column
}

/// The symbols that make `kept` a column of `runs` runs, as even as can be; of several levels that are
/// equally rare, the first in `order` gets the next run.
fn filling(order: &[u16], runs: usize, kept: &[u16]) -> Vec<u16> {
    let mut counts = vec![0usize; order.len()];
    kept.iter().for_each(|&symbol| counts[usize::from(symbol)] += 1);
    let mut rarest: BinaryHeap<Reverse<(usize, usize)>> =
        order.iter().enumerate().map(|(place, &s)| Reverse((counts[usize::from(s)], place))).collect();
    let mut filling = Vec::with_capacity(runs.saturating_sub(kept.len()));
    while kept.len() + filling.len() < runs {
        let Some(Reverse((count, place))) = rarest.pop() else { break };
        filling.push(order[place]);
        rarest.push(Reverse((count + 1, place)));
    }
    filling
}

/// Changes as few symbols from place `fixed` on as it takes to make the level counts as even as the
/// symbols before allow.
pub(super) fn repair(column: &mut [u16], levels: u16, fixed: usize, random: &mut Random) {
    let mut missing = vec![0i64; usize::from(levels)];
    column.iter().for_each(|&symbol| missing[usize::from(symbol)] -= 1);
    let mut order: Vec<u16> = (0..levels).collect();
    random.shuffle(&mut order);
    // What is frequent may stay so.
    order.sort_by_key(|&s| missing[usize::from(s)]);
    let filling = filling(&order, column.len(), &column[..fixed]);
    column[..fixed].iter().chain(&filling).for_each(|&symbol| missing[usize::from(symbol)] += 1);
    let mut lacking: Vec<u16> =
        (0..levels).flat_map(|s| (0..missing[usize::from(s)].max(0)).map(move |_| s)).collect();
    random.shuffle(&mut lacking);
    let mut places: Vec<usize> = (fixed..column.len()).collect();
    random.shuffle(&mut places);
    for place in places {
        let symbol = usize::from(column[place]);
        if missing[symbol] < 0 {
            let Some(other) = lacking.pop() else { return };
            missing[symbol] += 1;
            column[place] = other;
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn counts(column: &[u16], levels: u16) -> Vec<usize> {
        (0..levels).map(|s| column.iter().filter(|&&c| c == s).count()).collect()
    }

    #[test]
    fn columns_are_even_as_far_as_the_kept_runs_allow() {
        let mut random = Random::new(1);
        for (levels, runs, kept) in [(3, 7, &[][..]), (3, 7, &[0, 0]), (5, 3, &[4]), (2, 6, &[1, 1, 1, 1, 1])]
        {
            let column = balanced_column(levels, runs, kept, &mut random);
            assert_eq!((column.len(), &column[..kept.len()]), (runs, kept));
            let c = counts(&column, levels);
            let spread = c.iter().max().unwrap() - c.iter().min().unwrap();
            assert_eq!(spread, if kept.len() == 5 { 4 } else { 1 });
            let mut other = kept.to_vec();
            other.extend((kept.len()..runs).map(|_| 0));
            repair(&mut other, levels, kept.len(), &mut random);
            let mut repaired = counts(&other, levels);
            let mut c = c;
            repaired.sort_unstable();
            c.sort_unstable();
            assert_eq!((repaired, &other[..kept.len()]), (c, kept));
        }
    }
}
