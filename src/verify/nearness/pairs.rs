//! All pairs of columns, one by one.

use std::collections::BTreeMap;

use num_bigint::{BigInt, BigUint};
use rayon::prelude::*;
use serde::{Deserialize, Serialize};

use super::contrasts::{MOST_LEVELS, contrasts};
use super::{ByPairs, fraction, level_counts, rounded};
use crate::array::Array;

/// The pairs are gone through one by one when this takes no more steps, some seconds.
pub const MOST_STEPS: u64 = 1 << 32;

/// The pair of columns whose counts deviate most.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct WorstPair {
    /// The columns, from 0, ascending.
    pub columns: [usize; 2],
    /// Σ (n_ab − N/(rs))² of this pair, exact.
    pub deviation: String,
    /// How often the rarest combination of levels occurs.
    pub smallest: u64,
    /// How often the most frequent one does.
    pub largest: u64,
}

/// The largest absolute correlation between contrasts of different factors.
///
/// Each factor has its orthogonal polynomial contrasts of equally spaced level scores; the
/// correlation is Pearson's over the runs, so each contrast is centred at its actual mean.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Correlation {
    /// Its square, exact, as `1` or `1/9`.
    pub squared: String,
    /// Its absolute value.
    pub value: f64,
    /// The columns, from 0, ascending; the first pair of several.
    pub columns: [usize; 2],
    /// The degrees of the contrasts: 1 linear, 2 quadratic, …
    pub degrees: [u32; 2],
}

/// Whether going through the pairs stays within [`MOST_STEPS`].
pub(super) fn affordable(array: &Array) -> bool {
    let groups: Vec<(u128, u128)> =
        array.mix().counts().iter().map(|(&s, &c)| (u128::from(s), c as u128)).collect();
    let mut steps = 0u128;
    for &(r, a) in &groups {
        for &(s, b) in &groups {
            // Both orders of a pair: half of it.
            let work = array.runs() as u128 + r * s * (1 + r.min(u128::from(MOST_LEVELS)));
            steps = steps.saturating_add(a.saturating_mul(b).saturating_mul(work) / 2);
        }
    }
    steps <= u128::from(MOST_STEPS)
}

/// Σ n_ab² over all pairs, and what they show one by one.
pub(super) fn go_through(array: &Array) -> (u128, ByPairs) {
    let coded = Coded::new(array);
    let of_column = |i: usize| {
        let mut found = Found::default();
        (i + 1..array.factors()).for_each(|j| found.look_at(array, coded.as_ref(), i, j));
        found
    };
    let all: Vec<Found> = (0..array.factors()).into_par_iter().map(of_column).collect();
    let mut total = Found::default();
    all.into_iter().for_each(|found| total.add(found));
    let worst = total.worst.map(|w| WorstPair {
        columns: w.columns,
        deviation: fraction(BigInt::from(w.numerator), BigInt::from(w.cells)),
        smallest: w.smallest,
        largest: w.largest,
    });
    let correlation = total.correlation.map(|c| Correlation {
        squared: fraction(BigInt::from(c.numerator), BigInt::from(c.denominator)),
        value: rounded(c.about.sqrt()),
        columns: c.columns,
        degrees: c.degrees,
    });
    (total.squares, ByPairs { uneven: total.uneven, worst, correlation })
}

#[derive(Default)]
struct Found {
    squares: u128,
    uneven: u64,
    worst: Option<Worst>,
    correlation: Option<Largest>,
}

/// A pair and its deviation `numerator / cells`, where cells = rs.
struct Worst {
    columns: [usize; 2],
    numerator: u128,
    cells: u128,
    smallest: u64,
    largest: u64,
}

/// A squared correlation as a fraction and as a float near it.
struct Largest {
    numerator: BigUint,
    denominator: BigUint,
    about: f64,
    columns: [usize; 2],
    degrees: [u32; 2],
}

impl Found {
    fn look_at(&mut self, array: &Array, coded: Option<&Coded>, i: usize, j: usize) {
        let (r, s) = (usize::from(array.levels()[i]), usize::from(array.levels()[j]));
        let mut counts = vec![0u64; r * s];
        for (&a, &b) in array.column(i).iter().zip(array.column(j)) {
            counts[usize::from(a) * s + usize::from(b)] += 1;
        }
        let squares: u128 = counts.iter().map(|&c| u128::from(c) * u128::from(c)).sum();
        let (smallest, largest) =
            counts.iter().fold((u64::MAX, 0), |(low, high), &c| (low.min(c), high.max(c)));
        self.squares += squares;
        self.uneven += u64::from(smallest != largest);
        let (cells, runs) = ((r * s) as u128, array.runs() as u128);
        let numerator = squares * cells - runs * runs;
        self.take_worst(Worst { columns: [i, j], numerator, cells, smallest, largest });
        if let Some(coded) = coded {
            coded.correlations(&counts, i, j, |largest| self.take_correlation(largest));
        }
    }

    fn take_worst(&mut self, other: Worst) {
        let larger = |w: &Worst| other.numerator * w.cells > w.numerator * other.cells;
        if self.worst.as_ref().is_none_or(larger) {
            self.worst = Some(other);
        }
    }

    fn take_correlation(&mut self, other: Largest) {
        // Floats decide what is clear, whole numbers the rest.
        let larger = |known: &Largest| {
            if (other.about - known.about).abs() > 1e-9 {
                return other.about > known.about;
            }
            let same = other.numerator == known.numerator && other.denominator == known.denominator;
            !same && &other.numerator * &known.denominator > &known.numerator * &other.denominator
        };
        if self.correlation.as_ref().is_none_or(larger) {
            self.correlation = Some(other);
        }
    }

    fn add(&mut self, other: Self) {
        self.squares += other.squares;
        self.uneven += other.uneven;
        other.worst.into_iter().for_each(|w| self.take_worst(w));
        other.correlation.into_iter().for_each(|c| self.take_correlation(c));
    }
}

/// The contrasts of all factors, with N Σx² − (Σx)² and Σx for each contrast of each column.
struct Coded {
    runs: i128,
    by_levels: BTreeMap<u16, Vec<Vec<i64>>>,
    levels: Vec<u16>,
    sums: Vec<Vec<(i128, i128)>>,
}

impl Coded {
    /// `None` when the whole numbers would be too large.
    fn new(array: &Array) -> Option<Self> {
        let counts = array.mix().counts();
        if counts.keys().any(|&s| s > MOST_LEVELS) {
            return None;
        }
        let by_levels: BTreeMap<u16, Vec<Vec<i64>>> = counts.keys().map(|&s| (s, contrasts(s))).collect();
        let largest = by_levels.values().flatten().flatten().map(|v| v.unsigned_abs()).max()?;
        let most = (largest as u128 * array.runs() as u128).checked_pow(2).filter(|m| *m < 1 << 125);
        most?;
        let runs = array.runs() as i128;
        let sums = array.columns().zip(array.levels()).map(|(column, &s)| {
            let counts = level_counts(column, s);
            let sum = |c: &Vec<i64>, power: u32| -> i128 {
                c.iter().zip(&counts).map(|(&v, &n)| i128::from(v).pow(power) * i128::from(n)).sum()
            };
            by_levels[&s].iter().map(|c| (sum(c, 1), runs * sum(c, 2) - sum(c, 1).pow(2))).collect()
        });
        let sums = sums.collect();
        Some(Self { runs, by_levels, levels: array.levels().to_vec(), sums })
    }

    /// The squared correlations of the contrasts of two columns with these counts; a contrast that
    /// does not vary has none.
    fn correlations(&self, counts: &[u64], i: usize, j: usize, mut take: impl FnMut(Largest)) {
        let (first, second) = (&self.by_levels[&self.levels[i]], &self.by_levels[&self.levels[j]]);
        let s = usize::from(self.levels[j]);
        let mut best = 0.0f64;
        for (d, (x, &(sum_x, spread_x))) in first.iter().zip(&self.sums[i]).enumerate() {
            let weighted: Vec<i128> = (0..s).map(|b| weigh(x, counts[b..].iter().step_by(s))).collect();
            for (e, (y, &(sum_y, spread_y))) in second.iter().zip(&self.sums[j]).enumerate() {
                if spread_x == 0 || spread_y == 0 {
                    continue;
                }
                let products: i128 = weighted.iter().zip(y).map(|(&w, &v)| w * i128::from(v)).sum();
                let together = (self.runs * products - sum_x * sum_y).unsigned_abs();
                let about = (together as f64 / spread_x as f64) * (together as f64 / spread_y as f64);
                if about < best - 1e-9 {
                    continue;
                }
                best = best.max(about);
                take(Largest {
                    numerator: BigUint::from(together).pow(2),
                    denominator: BigUint::from(spread_x.unsigned_abs())
                        * BigUint::from(spread_y.unsigned_abs()),
                    about,
                    columns: [i, j],
                    degrees: [d as u32 + 1, e as u32 + 1],
                });
            }
        }
    }
}

/// Σ v·n.
fn weigh<'a>(values: &[i64], counts: impl Iterator<Item = &'a u64>) -> i128 {
    values.iter().zip(counts).map(|(&v, &n)| i128::from(v) * i128::from(n)).sum()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn pairs(levels: Vec<u16>, rows: &[&[u16]]) -> ByPairs {
        go_through(&Array::from_rows(levels, rows).unwrap()).1
    }

    /// By hand: 2 × 3 levels in 4 runs (0,0) (0,1) (1,1) (1,2). Linear contrasts −1 −1 1 1 and
    /// −1 0 0 1: correlation 2/√8. Quadratic 1 −2 −2 1: 0.
    #[test]
    fn a_case_by_hand() {
        let found = pairs(vec![2, 3], &[&[0, 0], &[0, 1], &[1, 1], &[1, 2]]);
        let correlation = found.correlation.unwrap();
        assert_eq!((correlation.squared.as_str(), correlation.degrees), ("1/2", [1, 1]));
        let worst = found.worst.unwrap();
        // Four combinations once, two never; N/(rs) = 2/3: 4 − 16/6.
        assert_eq!((worst.deviation.as_str(), worst.smallest, worst.largest), ("4/3", 0, 1));
    }

    #[test]
    fn the_worst_pair_is_found() {
        let rows: &[&[u16]] = &[&[0, 0, 0], &[0, 1, 1], &[1, 0, 0], &[1, 1, 1]];
        let found = pairs(vec![2; 3], rows);
        assert_eq!(found.uneven, 1);
        assert_eq!(found.worst.unwrap().columns, [1, 2]);
        let correlation = found.correlation.unwrap();
        assert_eq!((correlation.columns, correlation.squared.as_str()), ([1, 2], "1"));
    }

    #[test]
    fn a_column_that_does_not_vary_has_no_correlation() {
        let found = pairs(vec![2, 2], &[&[0, 0], &[0, 1]]);
        assert_eq!(found.correlation, None);
        assert_eq!(found.worst.unwrap().deviation, "1");
    }

    #[test]
    fn what_is_too_large_is_not_gone_through() {
        let small = |levels: Vec<u16>| Array::from_fn(2, levels, |_, _| 0).unwrap();
        assert!(affordable(&small(vec![2; 100])));
        assert!(!affordable(&small(vec![65_535; 2])));
        assert_eq!(go_through(&small(vec![33, 2])).1.correlation, None);
    }
}
