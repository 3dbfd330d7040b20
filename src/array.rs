//! [`Array`]: N runs × k factors of symbols.

use rayon::prelude::*;
use thiserror::Error;

use crate::mix::{Mix, MixError};

/// N runs × k factors of symbols, with each factor's number of levels.
///
/// Conventions, stated here once:
///
/// * **Level base**: the symbols of a factor with s levels are `0..s`, 2 ≤ s ≤ 65,535. Every
///   symbol in an `Array` is below its factor's number of levels.
/// * **Storage order**: column by column (one factor's symbols are contiguous, runs in order), so
///   `cells[j * runs + i]` is the symbol of factor `j` in run `i`.
/// * **Shape**: at least one run and one factor; the number of cells fits `usize`.
/// * **Index λ**: for t given factors, N divided by the product of their levels: how often each
///   of their level combinations occurs when the array has strength t. λ belongs to a set of
///   factors, not to the array, as soon as the levels are mixed.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct Array {
    runs: usize,
    levels: Vec<u16>,
    cells: Vec<u16>,
}

/// What can be wrong with the parts of an [`Array`].
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[non_exhaustive]
pub enum ArrayError {
    /// No run.
    #[error("an array has at least one run")]
    NoRuns,
    /// No factor, or a number of levels out of range.
    #[error(transparent)]
    Levels(#[from] MixError),
    /// The cells do not fill runs × factors.
    #[error("{runs} runs × {factors} factors need {} cells, not {cells}", (*runs as u128) * (*factors as u128))]
    Shape {
        /// The number of runs.
        runs: usize,
        /// The number of factors.
        factors: usize,
        /// The number of cells given.
        cells: usize,
    },
    /// A symbol is not below its factor's number of levels.
    #[error("run {run}, factor {factor}: symbol {symbol} is not below {levels}")]
    Symbol {
        /// The run, from 0.
        run: usize,
        /// The factor, from 0.
        factor: usize,
        /// The symbol found.
        symbol: u16,
        /// The factor's number of levels.
        levels: u16,
    },
    /// The cells do not fit into memory.
    #[error("{runs} runs × {factors} factors do not fit into memory")]
    TooLarge {
        /// The number of runs.
        runs: usize,
        /// The number of factors.
        factors: usize,
    },
}

impl Array {
    /// An array from its cells, column by column.
    ///
    /// # Errors
    /// An [`ArrayError`] naming the first rule of the type that is broken.
    pub fn new(runs: usize, levels: Vec<u16>, cells: Vec<u16>) -> Result<Self, ArrayError> {
        if runs == 0 {
            return Err(ArrayError::NoRuns);
        }
        let levels = Mix::new(levels)?.levels().to_vec();
        if runs.checked_mul(levels.len()) != Some(cells.len()) {
            return Err(ArrayError::Shape { runs, factors: levels.len(), cells: cells.len() });
        }
        for (factor, &s) in levels.iter().enumerate() {
            let column = &cells[factor * runs..(factor + 1) * runs];
            if let Some(run) = column.iter().position(|&c| c >= s) {
                return Err(ArrayError::Symbol { run, factor, symbol: column[run], levels: s });
            }
        }
        Ok(Self { runs, levels, cells })
    }

    /// An array whose symbol of factor `j` in run `i` is `symbol(i, j)`; columns are filled in
    /// parallel.
    ///
    /// # Errors
    /// As [`Array::new`]; [`ArrayError::TooLarge`] when the memory cannot be had.
    pub fn from_fn(
        runs: usize,
        levels: Vec<u16>,
        symbol: impl Fn(usize, usize) -> u16 + Sync,
    ) -> Result<Self, ArrayError> {
        let too_large = ArrayError::TooLarge { runs, factors: levels.len() };
        let Some(size) = runs.checked_mul(levels.len()) else { return Err(too_large) };
        let mut cells = Vec::new();
        if cells.try_reserve_exact(size).is_err() {
            return Err(too_large);
        }
        cells.resize(size, 0);
        if runs > 0 {
            cells.par_chunks_mut(runs).enumerate().for_each(|(j, column)| {
                for (i, cell) in column.iter_mut().enumerate() {
                    *cell = symbol(i, j);
                }
            });
        }
        Self::new(runs, levels, cells)
    }

    /// An array from its columns, each with its number of levels.
    ///
    /// # Errors
    /// As [`Array::new`]; columns of unequal length are an [`ArrayError::Shape`].
    pub fn from_columns(columns: Vec<(u16, Vec<u16>)>) -> Result<Self, ArrayError> {
        let runs = columns.first().map_or(0, |(_, c)| c.len());
        let factors = columns.len();
        if let Some((_, odd)) = columns.iter().find(|(_, c)| c.len() != runs) {
            return Err(ArrayError::Shape { runs, factors, cells: odd.len() });
        }
        let mut levels = Vec::with_capacity(factors);
        let mut cells = Vec::with_capacity(runs.saturating_mul(factors));
        for (s, column) in columns {
            levels.push(s);
            cells.extend(column);
        }
        Self::new(runs, levels, cells)
    }

    /// An array from its runs.
    ///
    /// # Errors
    /// As [`Array::new`]; a run of the wrong length is an [`ArrayError::Shape`].
    pub fn from_rows<R: AsRef<[u16]> + Sync>(levels: Vec<u16>, rows: &[R]) -> Result<Self, ArrayError> {
        let factors = levels.len();
        if let Some(odd) = rows.iter().find(|r| r.as_ref().len() != factors) {
            return Err(ArrayError::Shape { runs: rows.len(), factors, cells: odd.as_ref().len() });
        }
        Self::from_fn(rows.len(), levels, |i, j| rows[i].as_ref()[j])
    }

    /// N, the number of runs.
    #[must_use]
    pub fn runs(&self) -> usize {
        self.runs
    }

    /// k, the number of factors.
    #[must_use]
    pub fn factors(&self) -> usize {
        self.levels.len()
    }

    /// The number of levels of each factor.
    #[must_use]
    pub fn levels(&self) -> &[u16] {
        &self.levels
    }

    /// The levels as a [`Mix`], in column order.
    #[must_use]
    pub fn mix(&self) -> Mix {
        Mix::new(self.levels.clone()).expect("checked when the array was made")
    }

    /// The symbols of factor `factor`, one per run.
    ///
    /// # Panics
    /// When there is no such factor.
    #[must_use]
    pub fn column(&self, factor: usize) -> &[u16] {
        assert!(factor < self.factors(), "no factor {factor} among {}", self.factors());
        &self.cells[factor * self.runs..(factor + 1) * self.runs]
    }

    /// The columns in order.
    pub fn columns(&self) -> impl ExactSizeIterator<Item = &[u16]> + DoubleEndedIterator {
        self.cells.chunks_exact(self.runs)
    }

    /// The symbol of factor `factor` in run `run`.
    ///
    /// # Panics
    /// When there is no such run or factor.
    #[must_use]
    pub fn get(&self, run: usize, factor: usize) -> u16 {
        self.column(factor)[run]
    }

    /// The symbols of run `run`, one per factor.
    ///
    /// # Panics
    /// When there is no such run.
    #[must_use]
    pub fn row(&self, run: usize) -> Vec<u16> {
        self.columns().map(|c| c[run]).collect()
    }

    /// The runs in order.
    pub fn rows(&self) -> impl ExactSizeIterator<Item = Vec<u16>> + '_ {
        (0..self.runs).map(|i| self.row(i))
    }

    /// The array of the given columns, in that order; a column may be named more than once.
    ///
    /// # Errors
    /// An [`ArrayError`] when no column is named.
    ///
    /// # Panics
    /// When a column does not exist.
    pub fn select(&self, factors: &[usize]) -> Result<Self, ArrayError> {
        Self::from_columns(factors.iter().map(|&j| (self.levels[j], self.column(j).to_vec())).collect())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn keeps_its_conventions() {
        let a = Array::from_rows(vec![2, 3], &[[0, 0], [1, 2], [0, 1]]).unwrap();
        assert_eq!((a.runs(), a.factors()), (3, 2));
        assert_eq!(a.column(1), [0, 2, 1]);
        assert_eq!(a.row(1), [1, 2]);
        assert_eq!(a, Array::new(3, vec![2, 3], vec![0, 1, 0, 0, 2, 1]).unwrap());
        assert_eq!(a.select(&[1, 0]).unwrap().levels(), [3, 2]);
        assert_eq!(a.rows().len(), 3);
    }

    #[test]
    fn refuses_what_breaks_them() {
        assert_eq!(Array::new(0, vec![2], vec![]), Err(ArrayError::NoRuns));
        assert!(matches!(Array::new(1, vec![], vec![]), Err(ArrayError::Levels(_))));
        assert!(matches!(Array::new(1, vec![1], vec![0]), Err(ArrayError::Levels(_))));
        assert!(matches!(Array::new(2, vec![2], vec![0]), Err(ArrayError::Shape { .. })));
        assert_eq!(
            Array::new(2, vec![2], vec![0, 2]),
            Err(ArrayError::Symbol { run: 1, factor: 0, symbol: 2, levels: 2 })
        );
        assert!(matches!(Array::from_fn(usize::MAX, vec![2, 2], |_, _| 0), Err(ArrayError::TooLarge { .. })));
        assert!(matches!(Array::from_fn(1 << 60, vec![2], |_, _| 0), Err(ArrayError::TooLarge { .. })));
        assert!(Array::from_rows(vec![2, 2], &[vec![0, 0], vec![0]]).is_err());
        assert!(Array::from_columns(vec![(2, vec![0, 1]), (2, vec![0])]).is_err());
    }
}
