//! How evenly every pair of factors shows its combinations, counted by the definition.

use rayon::prelude::*;

use crate::array::Array;

/// Pairs are counted when this takes no more steps, about a second.
const MOST_STEPS: u128 = 1 << 30;
/// Pairs with more combinations than this are not counted.
const MOST_COMBINATIONS: u128 = 1 << 22;
/// So many of the worst pairs are kept.
pub(super) const WORST: usize = 10;

/// How evenly combinations occur.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(super) enum Evenness {
    /// All equally often.
    Even,
    /// Some once more than others, since the runs cannot be shared out.
    AsEvenAsCanBe,
    /// Some more often than need be.
    Uneven,
    /// Some not at all, though there are runs enough for every one.
    Missing,
}

/// The counts of two factors, or of one with itself.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) struct Pair {
    pub(super) columns: [usize; 2],
    /// The number of combinations.
    pub(super) cells: u64,
    /// How often the rarest occurs, and the first that occurs so rarely.
    pub(super) rarest: (u64, [u16; 2]),
    /// The same for the most frequent.
    pub(super) commonest: (u64, [u16; 2]),
    pub(super) evenness: Evenness,
    /// The largest |n − N/cells|, times `cells`.
    pub(super) deviation: u128,
}

impl Pair {
    /// The largest deviation in a few characters.
    pub(super) fn deviation_text(&self) -> String {
        let cells = u128::from(self.cells.max(1));
        if self.deviation.is_multiple_of(cells) {
            return capped(self.deviation / cells);
        }
        match (self.deviation * 10 + cells / 2) / cells {
            0 => "<0.1".into(),
            tenths if tenths < 100 => format!("{}.{}", tenths / 10, tenths % 10),
            tenths => capped((tenths + 5) / 10),
        }
    }

    /// Whether this pair is worse than another, which comes first in the array.
    fn worse_than(&self, other: &Self) -> bool {
        let size = |a: &Self, b: &Self| a.deviation * u128::from(b.cells);
        (self.evenness, size(self, other)) > (other.evenness, size(other, self))
    }
}

fn capped(n: u128) -> String {
    if n > 9999 { ">9999".into() } else { n.to_string() }
}

/// All pairs of an array.
#[derive(Default)]
pub(super) struct Balance {
    /// How many pairs are even, as even as can be, uneven, with missing combinations.
    pub(super) tally: [u64; 4],
    /// The worst pairs that are not even, the worst first, in the order of the columns where equal.
    pub(super) worst: Vec<Pair>,
    /// Row i has the pairs of column i with columns 0 to i, the last its own levels; empty unless
    /// asked for.
    pub(super) grid: Vec<Vec<Pair>>,
}

impl Balance {
    /// Counts every pair; `None` when that takes too long.
    pub(super) fn count(array: &Array, with_grid: bool) -> Option<Self> {
        if !affordable(array) {
            return None;
        }
        let rows: Vec<Self> =
            (0..array.factors()).into_par_iter().map(|i| row(array, i, with_grid)).collect();
        let mut all = Self::default();
        for row in rows {
            all.tally.iter_mut().zip(row.tally).for_each(|(sum, n)| *sum += n);
            row.worst.into_iter().for_each(|pair| all.keep(pair));
            all.grid.extend(row.grid);
        }
        Some(all)
    }

    fn keep(&mut self, pair: Pair) {
        if pair.evenness == Evenness::Even {
            return;
        }
        let at = self.worst.iter().position(|known| pair.worse_than(known)).unwrap_or(self.worst.len());
        self.worst.insert(at, pair);
        self.worst.truncate(WORST);
    }
}

fn affordable(array: &Array) -> bool {
    let (runs, k) = (array.runs() as u128, array.factors() as u128);
    let mut largest: Vec<u128> = array.levels().iter().map(|&s| u128::from(s)).collect();
    let sum: u128 = largest.iter().sum();
    largest.sort_unstable_by(|a, b| b.cmp(a));
    let product: u128 = largest.iter().take(2).product();
    let squares: u128 = largest.iter().map(|s| s * s).sum();
    let steps = (k * (k + 1) / 2).saturating_mul(runs).saturating_add((sum * sum - squares) / 2 + sum);
    product <= MOST_COMBINATIONS && steps <= MOST_STEPS
}

/// Column `i` with itself and all before it.
fn row(array: &Array, i: usize, with_grid: bool) -> Balance {
    let mut found = Balance::default();
    let mut pairs = Vec::new();
    for j in 0..=i {
        let pair = pair(array, j, i);
        if j < i {
            found.tally[pair.evenness as usize] += 1;
            found.keep(pair.clone());
        }
        if with_grid {
            pairs.push(pair);
        }
    }
    if with_grid {
        found.grid.push(pairs);
    }
    found
}

/// How often each combination of two columns occurs, by the symbol of the first, then the second.
pub(super) fn counts(array: &Array, i: usize, j: usize) -> Vec<u64> {
    let (r, s) = (usize::from(array.levels()[i]), usize::from(array.levels()[j]));
    let mut counts = vec![0u64; r * s];
    for (&a, &b) in array.column(i).iter().zip(array.column(j)) {
        counts[usize::from(a) * s + usize::from(b)] += 1;
    }
    counts
}

/// How often each level of a column occurs.
fn own_counts(array: &Array, i: usize) -> Vec<u64> {
    let mut counts = vec![0u64; usize::from(array.levels()[i])];
    for &a in array.column(i) {
        counts[usize::from(a)] += 1;
    }
    counts
}

/// The pair of columns i and j; with i = j the levels of one column.
fn pair(array: &Array, i: usize, j: usize) -> Pair {
    let s = usize::from(array.levels()[j]);
    let all = if i == j { own_counts(array, i) } else { counts(array, i, j) };
    let symbols = |at: usize| if i == j { [at as u16; 2] } else { [(at / s) as u16, (at % s) as u16] };
    let (mut low, mut high) = (0, 0);
    for (at, &n) in all.iter().enumerate() {
        low = if n < all[low] { at } else { low };
        high = if n > all[high] { at } else { high };
    }
    let (rarest, commonest) = ((all[low], symbols(low)), (all[high], symbols(high)));
    let (runs, cells) = (array.runs() as u128, all.len() as u128);
    let evenness = match commonest.0 - rarest.0 {
        0 => Evenness::Even,
        1 => Evenness::AsEvenAsCanBe,
        _ if rarest.0 == 0 && runs >= cells => Evenness::Missing,
        _ => Evenness::Uneven,
    };
    let over = (u128::from(commonest.0) * cells).saturating_sub(runs);
    let under = runs.saturating_sub(u128::from(rarest.0) * cells);
    Pair { columns: [i, j], cells: cells as u64, rarest, commonest, evenness, deviation: over.max(under) }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::verify::nearness;

    /// By hand: columns 1 and 2 are equal, so two of their four combinations are missing.
    #[test]
    fn a_case_by_hand() {
        let rows: &[[u16; 3]] = &[[0, 0, 0], [0, 1, 1], [1, 0, 0], [1, 1, 1]];
        let found = Balance::count(&Array::from_rows(vec![2; 3], rows).unwrap(), true).unwrap();
        assert_eq!(found.tally, [2, 0, 0, 1]);
        let worst = &found.worst[0];
        assert_eq!((worst.columns, worst.rarest, worst.commonest), ([1, 2], (0, [0, 1]), (2, [0, 0])));
        assert_eq!(worst.deviation_text(), "1");
        assert_eq!(found.grid.iter().map(Vec::len).collect::<Vec<_>>(), [1, 2, 3]);
    }

    #[test]
    fn agrees_with_the_criteria_of_the_judges() {
        for (runs, levels) in [(7, vec![2, 3, 4, 2]), (12, vec![3, 2, 2, 5]), (4, vec![6, 7])] {
            let array = Array::from_fn(runs, levels.clone(), |i, j| {
                ((i * i * (j + 3) + i / (j + 1)) % usize::from(levels[j])) as u16
            });
            let array = array.unwrap();
            let (found, near) = (Balance::count(&array, false).unwrap(), nearness(&array));
            assert_eq!(found.tally[1..].iter().sum::<u64>(), near.by_pairs.unwrap().uneven);
            assert_eq!(found.tally.iter().sum::<u64>(), near.pairs);
        }
    }

    #[test]
    fn too_much_is_not_counted() {
        let array = |runs, levels: Vec<u16>| Array::from_fn(runs, levels, |_, _| 0).unwrap();
        assert!(Balance::count(&array(2, vec![65_535; 2]), true).is_none());
        assert!(Balance::count(&array(1, vec![2; 50_000]), false).is_none());
        assert!(Balance::count(&array(1000, vec![2; 300]), false).is_some());
        assert!(Balance::count(&array(2, vec![65_535]), true).is_some());
    }
}
