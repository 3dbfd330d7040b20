//! The plain judge: count every level combination of every t columns.
//!
//! Strength is judged from 1 upwards, so when t is reached, strength t − 1 is known. Two things
//! follow. The product of the levels of any t − 1 columns divides N, so no table is ever larger
//! than N. And the deviations from λ of t columns add up to zero along every column, so they all
//! vanish when those of the combinations without a symbol 0 vanish: s − 1 indicators per column
//! are enough.

use std::collections::HashMap;
use std::ops::Range;
use std::sync::OnceLock;

use bitvec::prelude::{BitVec, Lsb0};
use rayon::prelude::*;

use super::JudgeError;
use super::evidence::{Ratio, Witness, count_runs};
use crate::array::Array;

/// Columns with more levels are counted by histogram only, which keeps the indicators smaller
/// than the array itself: 8 indicators of N bits are N bytes, a column is 2N.
pub(super) const SLICED_LEVELS: u16 = 9;

/// With more combinations than bits in a word, one pass over the runs is cheaper than slices.
const SLICED_COMBINATIONS: usize = 64;

type Bits = BitVec<u64, Lsb0>;

/// The witness that `array` does not have strength `strength`, `None` when it has.
///
/// The witness shows the smallest strength that fails; among its column sets the
/// lexicographically first, among the combinations again the first. It does not depend on the
/// number of threads.
///
/// Cost: C(k,t) column sets of N/64 · ∏(s−1) word operations (few levels) or N (many levels);
/// memory is proportional to the array.
///
/// # Errors
/// [`JudgeError::Strength`] unless 1 ≤ `strength` ≤ k.
///
/// ```
/// use trysquare::{array::Array, verify::counting};
/// let array = Array::from_rows(vec![2, 2, 2], &[[0, 0, 0], [0, 1, 1], [1, 0, 1], [1, 1, 0]])?;
/// assert_eq!(counting::find_violation(&array, 2).unwrap(), None);
/// let witness = counting::find_violation(&array, 3).unwrap().unwrap();
/// assert_eq!((witness.combination, witness.count), (vec![0, 0, 0], 1));
/// assert_eq!(witness.expected.to_string(), "1/2");
/// # Ok::<(), trysquare::array::ArrayError>(())
/// ```
pub fn find_violation(array: &Array, strength: usize) -> Result<Option<Witness>, JudgeError> {
    JudgeError::check_strength(array, strength)?;
    let slices = Slices::new(array);
    Ok((1..=strength).find_map(|t| slices.violation(t)))
}

/// As [`find_violation`], by the definition and nothing else: the oracle of the tests, slow.
///
/// # Errors
/// As [`find_violation`].
pub fn by_definition(array: &Array, strength: usize) -> Result<Option<Witness>, JudgeError> {
    JudgeError::check_strength(array, strength)?;
    for t in 1..=strength {
        let mut columns: Vec<usize> = (0..t).collect();
        loop {
            if let Some(witness) = uneven_combination(array, &columns) {
                return Ok(Some(witness));
            }
            let k = array.factors();
            let Some(i) = (0..t).rev().find(|&i| columns[i] < k - t + i) else { break };
            columns[i] += 1;
            for j in i + 1..t {
                columns[j] = columns[j - 1] + 1;
            }
        }
    }
    Ok(None)
}

/// The first combination of `columns` whose count is not N / ∏ levels.
fn uneven_combination(array: &Array, columns: &[usize]) -> Option<Witness> {
    let mut counts: HashMap<Vec<u16>, u64> = HashMap::new();
    for row in array.rows() {
        *counts.entry(columns.iter().map(|&c| row[c]).collect()).or_insert(0) += 1;
    }
    let levels: Vec<u16> = columns.iter().map(|&c| array.levels()[c]).collect();
    let expected = Ratio::new(array.runs() as u64, levels.iter().map(|&s| u128::from(s)).product());
    let mut combination = vec![0u16; columns.len()];
    loop {
        let count = counts.get(&combination).copied().unwrap_or(0);
        if Ratio::new(count, 1) != expected {
            return Some(Witness { columns: columns.to_vec(), combination, count, expected });
        }
        let i = (0..levels.len()).rev().find(|&i| combination[i] + 1 < levels[i])?;
        combination[i] += 1;
        combination[i + 1..].fill(0);
    }
}

/// The array with the indicators of its columns of few levels.
pub(super) struct Slices<'a> {
    array: &'a Array,
    /// `indicators[j][a - 1]`: the runs in which column `j` shows `a`; nothing for many levels.
    indicators: Vec<Vec<Bits>>,
}

/// The first columns of a set, with what the last one is counted against.
struct Prefix {
    columns: Vec<usize>,
    /// The product of their levels.
    product: usize,
    /// The runs of every combination without a symbol 0, while these are few.
    slices: Option<Vec<Bits>>,
    /// The number of the combination in each run.
    keys: OnceLock<Vec<usize>>,
}

impl<'a> Slices<'a> {
    pub(super) fn new(array: &'a Array) -> Self {
        let indicators = (0..array.factors())
            .into_par_iter()
            .map(|j| {
                let s = array.levels()[j];
                if s > SLICED_LEVELS {
                    return Vec::new();
                }
                let mut slices: Vec<Bits> = (1..s).map(|_| BitVec::repeat(false, array.runs())).collect();
                for (run, &symbol) in array.column(j).iter().enumerate() {
                    if symbol > 0 {
                        slices[usize::from(symbol) - 1].set(run, true);
                    }
                }
                slices.iter_mut().for_each(|b| b.set_uninitialized(false));
                slices
            })
            .collect();
        Self { array, indicators }
    }

    /// The witness that strength `t` fails. Needs `1 <= t <= k` and strength t − 1.
    pub(super) fn violation(&self, t: usize) -> Option<Witness> {
        self.first_uneven(&self.empty_prefix(), t).map(|columns| self.witness(columns))
    }

    /// As [`Slices::violation`], of the column sets that begin with `first`.
    pub(super) fn violation_beginning(&self, first: usize, t: usize) -> Option<Witness> {
        let empty = self.empty_prefix();
        let columns = if t == 1 {
            self.step(&empty, first, 1)?
        } else {
            self.first_uneven(&self.extend(&empty, first)?, t - 1)?
        };
        Some(self.witness(columns))
    }

    fn empty_prefix(&self) -> Prefix {
        let all = BitVec::repeat(true, self.array.runs());
        Prefix { columns: Vec::new(), product: 1, slices: Some(vec![all]), keys: OnceLock::new() }
    }

    /// The first uneven column set that begins with `prefix` and has `missing` columns more.
    fn first_uneven(&self, prefix: &Prefix, missing: usize) -> Option<Vec<usize>> {
        let next = self.next_columns(prefix, missing).into_par_iter();
        next.find_map_first(|column| self.step(prefix, column, missing))
    }

    /// As [`Slices::first_uneven`], where `column` comes next.
    fn step(&self, prefix: &Prefix, column: usize, missing: usize) -> Option<Vec<usize>> {
        if missing == 1 {
            return self.is_uneven(prefix, column).then(|| [&prefix.columns[..], &[column]].concat());
        }
        let longer = self.extend(prefix, column)?;
        self.next_columns(&longer, missing - 1).find_map(|next| self.step(&longer, next, missing - 1))
    }

    fn next_columns(&self, prefix: &Prefix, missing: usize) -> Range<usize> {
        let next = prefix.columns.last().map_or(0, |&c| c + 1);
        next..(self.array.factors() + 1).saturating_sub(missing)
    }

    /// `None` only when the product of levels is beyond `usize`, which strength t − 1 excludes.
    fn extend(&self, prefix: &Prefix, column: usize) -> Option<Prefix> {
        let indicators = &self.indicators[column];
        let slices = prefix.slices.as_ref().filter(|slices| {
            !indicators.is_empty() && slices.len() * indicators.len() <= SLICED_COMBINATIONS
        });
        Some(Prefix {
            columns: [&prefix.columns[..], &[column]].concat(),
            product: prefix.product.checked_mul(usize::from(self.array.levels()[column]))?,
            slices: slices.map(|slices| {
                let both = |a: &Bits| indicators.iter().map(|b| a.clone() & b).collect::<Vec<_>>();
                slices.iter().flat_map(both).collect()
            }),
            keys: OnceLock::new(),
        })
    }

    fn is_uneven(&self, prefix: &Prefix, column: usize) -> bool {
        let runs = self.array.runs();
        let product = prefix.product.checked_mul(usize::from(self.array.levels()[column]));
        let Some(product) = product.filter(|&p| runs.is_multiple_of(p)) else { return true };
        let index = (runs / product) as u64;
        let indicators = &self.indicators[column];
        match &prefix.slices {
            Some(slices)
                if !indicators.is_empty() && slices.len() * indicators.len() <= SLICED_COMBINATIONS =>
            {
                slices.iter().any(|a| indicators.iter().any(|b| common(a, b) != index))
            }
            _ => self.histogram(prefix, column, product).iter().any(|&n| n != index),
        }
    }

    /// How often every combination of `prefix` and `column` occurs, in lexicographic order.
    fn histogram(&self, prefix: &Prefix, column: usize, product: usize) -> Vec<u64> {
        let keys = prefix.keys.get_or_init(|| {
            let mut keys = vec![0usize; self.array.runs()];
            for &c in &prefix.columns {
                let s = usize::from(self.array.levels()[c]);
                for (key, &symbol) in keys.iter_mut().zip(self.array.column(c)) {
                    *key = *key * s + usize::from(symbol);
                }
            }
            keys
        });
        let s = usize::from(self.array.levels()[column]);
        let mut counts = vec![0u64; product];
        for (&key, &symbol) in keys.iter().zip(self.array.column(column)) {
            counts[key * s + usize::from(symbol)] += 1;
        }
        counts
    }

    /// The first combination of an uneven column set.
    fn witness(&self, columns: Vec<usize>) -> Witness {
        let levels: Vec<u16> = columns.iter().map(|&c| self.array.levels()[c]).collect();
        let product: u128 = levels.iter().map(|&s| u128::from(s)).product();
        let runs = self.array.runs();
        let expected = Ratio::new(runs as u64, product);
        let mut combination = vec![0u16; columns.len()];
        // An expectation that is no whole number is missed by every combination.
        if expected.denominator() == 1 {
            let (&last, first) = columns.split_last().expect("a witness has columns");
            let prefix = Prefix { columns: first.to_vec(), product: 1, slices: None, keys: OnceLock::new() };
            let counts = self.histogram(&prefix, last, product as usize);
            let mut at = counts.iter().position(|&n| n != expected.numerator()).unwrap_or(0);
            for (symbol, &s) in combination.iter_mut().zip(&levels).rev() {
                *symbol = (at % usize::from(s)) as u16;
                at /= usize::from(s);
            }
        }
        let count = count_runs(self.array, &columns, &combination);
        Witness { columns, combination, count, expected }
    }
}

/// The number of runs in both.
fn common(a: &Bits, b: &Bits) -> u64 {
    let words = a.as_raw_slice().iter().zip(b.as_raw_slice());
    words.map(|(x, y)| u64::from((x & y).count_ones())).sum()
}
