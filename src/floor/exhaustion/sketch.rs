use std::collections::BTreeMap;

use crate::array::Array;
use crate::verify::counting::find_violation;

/// The most runs the engine takes.
pub const MAX_RUNS: usize = 128;

/// The most levels of a factor the engine takes: one character of text for each.
pub const MAX_LEVELS: u16 = 36;

/// An array as the multiset of its runs: the distinct ones in ascending order, each with how often
/// it occurs. Two arrays that differ by the order of their runs have the same sketch.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) struct Sketch {
    /// The number of levels of each column.
    pub(super) levels: Vec<u16>,
    /// The distinct runs, ascending.
    pub(super) rows: Vec<Vec<u8>>,
    /// How often each occurs.
    pub(super) weights: Vec<u16>,
}

impl Sketch {
    /// One column of `runs` runs, balanced; `levels` divides `runs`.
    pub(super) fn one_column(levels: u16, runs: usize) -> Self {
        let each = runs / usize::from(levels);
        Self {
            levels: vec![levels],
            rows: (0..levels).map(|l| vec![l as u8]).collect(),
            weights: vec![each as u16; usize::from(levels)],
        }
    }

    /// From runs that may repeat, with how often each occurs.
    pub(super) fn from_rows(levels: Vec<u16>, rows: impl IntoIterator<Item = (Vec<u8>, u16)>) -> Self {
        let mut counts: BTreeMap<Vec<u8>, u16> = BTreeMap::new();
        for (row, weight) in rows {
            if weight > 0 {
                *counts.entry(row).or_insert(0) += weight;
            }
        }
        let (rows, weights) = counts.into_iter().unzip();
        Self { levels, rows, weights }
    }

    /// The number of runs, repeated ones counted.
    pub(super) fn runs(&self) -> usize {
        self.weights.iter().map(|&w| usize::from(w)).sum()
    }

    /// The array with one more column: `split[r * levels + l]` of the runs `r` get the level `l`.
    pub(super) fn with_column(&self, levels: u16, split: &[u8]) -> Self {
        let s = usize::from(levels);
        let mut all = self.levels.clone();
        all.push(levels);
        let rows = self.rows.iter().enumerate().flat_map(|(r, row)| {
            (0..s).map(move |l| {
                let longer = row.iter().copied().chain([l as u8]).collect();
                (longer, u16::from(split[r * s + l]))
            })
        });
        Self::from_rows(all, rows)
    }

    /// The array, runs ascending.
    pub(super) fn array(&self) -> Array {
        let rows: Vec<Vec<u16>> = self
            .rows
            .iter()
            .zip(&self.weights)
            .flat_map(|(row, &w)| {
                let row: Vec<u16> = row.iter().map(|&x| u16::from(x)).collect();
                std::iter::repeat_n(row, usize::from(w))
            })
            .collect();
        Array::from_rows(self.levels.clone(), &rows).expect("symbols are below the levels")
    }

    /// Whether the array has the strength, or full strength when it has fewer columns.
    pub(super) fn has_strength(&self, strength: u32) -> bool {
        let strength = self.levels.len().min(strength as usize);
        matches!(find_violation(&self.array(), strength), Ok(None))
    }
}
