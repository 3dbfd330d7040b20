//! Putting smaller arrays together, and replacing columns of one array.
//!
//! Which one to take:
//!
//! * [`kronecker_sum`]: the work-horse at strength 2 whenever difference schemes over the level
//!   counts at hand exist. [`zero_column_refinement`] when one very large factor is wanted: it
//!   gives up a column of every block for a factor with as many levels as the small array has
//!   runs, which can then be [`split`].
//! * [`merging_product`]: many two-level columns beside one factor whose levels grow with the
//!   product (4·2^20 in 24 runs from 12, 8·2^40 in 48 from 24).
//! * [`juxtapose`]: numbers of runs that are no products; any strength.
//! * [`level_product`]: pairs of columns become one column with the product of their levels; with
//!   no pair at all it is the Cartesian product of two arrays, [`cartesian`]. Any strength, but
//!   expensive in runs.
//! * [`split`], [`group`], [`merge_levels`] keep the runs and change the mix: a large column into
//!   small ones, small ones into a large one (strength 2 only), fewer levels in one column.
//!
//! Every function is accompanied by a `…_levels` function that tells the levels of the result, in
//! column order, from the levels of the inputs, without building anything.

mod block;
mod group;
mod juxtapose;
mod kronecker_sum;
mod level_product;
mod merge_levels;
mod merging_product;
mod split;
#[cfg(test)]
pub(crate) mod testing;
mod zero_column_refinement;

pub use block::DifferenceBlock;
pub use group::{group, group_levels};
pub use juxtapose::{juxtapose, juxtapose_levels};
pub use kronecker_sum::{kronecker_sum, kronecker_sum_levels};
pub use level_product::{cartesian, cartesian_levels, level_product, level_product_levels};
pub use merge_levels::{merge_levels, merge_levels_levels};
pub use merging_product::{merging_product, merging_product_levels};
pub use split::{split, split_levels};
pub use zero_column_refinement::{zero_column_refinement, zero_column_refinement_levels};

use super::ConstructError;
use crate::mix::MAX_FACTORS;

/// A list of levels that is being written, within the number of factors an array may have.
pub(crate) struct Levels {
    construction: &'static str,
    levels: Vec<u16>,
}

impl Levels {
    pub(crate) fn new(construction: &'static str) -> Self {
        Self { construction, levels: Vec::new() }
    }

    /// `count` further factors of `s` levels; `None` stands for a number that overflowed.
    pub(crate) fn repeat(mut self, s: u16, count: Option<usize>) -> Result<Self, ConstructError> {
        let count = count.filter(|&k| k <= MAX_FACTORS - self.levels.len()).ok_or_else(|| {
            ConstructError::condition(self.construction, format!("at most {MAX_FACTORS} factors"))
        })?;
        self.levels.extend(std::iter::repeat_n(s, count));
        Ok(self)
    }

    /// One further factor for each of `levels`.
    pub(crate) fn all(self, levels: impl IntoIterator<Item = u16>) -> Result<Self, ConstructError> {
        levels.into_iter().try_fold(self, |so_far, s| so_far.repeat(s, Some(1)))
    }

    pub(crate) fn done(self) -> Vec<u16> {
        self.levels
    }
}

/// `n` as a number of levels; `None` stands for a number that overflowed.
pub(crate) fn as_levels(construction: &'static str, n: Option<usize>) -> Result<u16, ConstructError> {
    n.and_then(|n| u16::try_from(n).ok()).filter(|&s| s >= 2).ok_or_else(|| {
        let got = n.map_or("more".to_owned(), |n| n.to_string());
        ConstructError::condition(construction, format!("a factor has 2 to 65535 levels, not {got}"))
    })
}

/// `a · b` runs.
pub(crate) fn times(construction: &'static str, a: usize, b: usize) -> Result<usize, ConstructError> {
    a.checked_mul(b)
        .ok_or_else(|| ConstructError::condition(construction, format!("{a} · {b} runs are too many")))
}

/// An error unless `column` is one of the `factors` columns of the array called `array`.
pub(crate) fn has_column(
    construction: &'static str,
    array: &str,
    factors: usize,
    column: usize,
) -> Result<(), ConstructError> {
    if column < factors {
        return Ok(());
    }
    Err(ConstructError::condition(
        construction,
        format!("{array} has factors 0 to {}, not {column}", factors.saturating_sub(1)),
    ))
}

/// An error unless `columns` are distinct columns of the array called `array`.
pub(crate) fn has_columns(
    construction: &'static str,
    array: &str,
    factors: usize,
    columns: impl IntoIterator<Item = usize>,
) -> Result<Vec<bool>, ConstructError> {
    let mut used = vec![false; factors];
    for column in columns {
        has_column(construction, array, factors, column)?;
        if std::mem::replace(&mut used[column], true) {
            return Err(ConstructError::condition(
                construction,
                format!("factor {column} of {array} is named twice"),
            ));
        }
    }
    Ok(used)
}
