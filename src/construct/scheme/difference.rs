//! The type [`Scheme`].

use rayon::prelude::*;

use super::group::canonical_group;
use crate::algebra::AbelianGroup;
use crate::array::ArrayError;
use crate::construct::ConstructError;

const NAME: &str = "difference scheme";

/// A difference scheme D(r, c, s): an r × c array over an abelian group of order s in which the
/// difference of any two columns takes every group value r/s times.
///
/// Every value of this type is one, either by the theorem behind the construction that made it or
/// because [`Scheme::new`] or [`from_starter`](super::from_starter) checked it;
/// [`Scheme::is_difference_scheme`] checks again.
///
/// * Group: always [`canonical_group`]`(s)`, so the order determines it.
/// * Storage: column by column.
/// * Shape: at least one row and one column. A single column is a scheme whatever r and s are;
///   with two or more, s divides r and c ≤ r.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct Scheme {
    group: AbelianGroup,
    s: u16,
    rows: usize,
    columns: usize,
    cells: Vec<u16>,
}

impl Scheme {
    /// The scheme with entry `entry(i, j)` in row `i` and column `j`. The caller owes the proof,
    /// and entries below `s`.
    pub(super) fn from_fn(
        s: u16,
        rows: usize,
        columns: usize,
        entry: impl Fn(&AbelianGroup, usize, usize) -> u16 + Sync,
    ) -> Result<Self, ConstructError> {
        let group = canonical_group(s)?;
        if rows == 0 || columns == 0 {
            return Err(ConstructError::condition(NAME, "at least one row and one column"));
        }
        let too_large = ArrayError::TooLarge { runs: rows, factors: columns };
        let Some(size) = rows.checked_mul(columns) else { return Err(too_large.into()) };
        let mut cells = Vec::new();
        if cells.try_reserve_exact(size).is_err() {
            return Err(too_large.into());
        }
        cells.resize(size, 0);
        cells.par_chunks_mut(rows).enumerate().for_each(|(j, column)| {
            for (i, cell) in column.iter_mut().enumerate() {
                *cell = entry(&group, i, j);
            }
        });
        Ok(Self { group, s, rows, columns, cells })
    }

    /// The scheme over [`canonical_group`]`(s)` with the given columns.
    ///
    /// Cost: c²r group operations for the check.
    ///
    /// # Errors
    /// [`ConstructError::Algebra`] when s is below 2; [`ConstructError::Condition`] when there is no
    /// column, the columns are empty or differ in length, an entry is not below `s`, or the
    /// difference of two columns is not uniform.
    pub fn new<C: AsRef<[u16]> + Sync>(s: u16, columns: &[C]) -> Result<Self, ConstructError> {
        let rows = columns.first().map_or(0, |c| c.as_ref().len());
        for (j, column) in columns.iter().enumerate() {
            let column = column.as_ref();
            if column.len() != rows {
                let needs = format!("column 0 has {rows} entries, but column {j} has {}", column.len());
                return Err(ConstructError::condition(NAME, needs));
            }
            if let Some(i) = column.iter().position(|&e| e >= s) {
                let needs = format!("entries are below {s}, but row {i}, column {j} is {}", column[i]);
                return Err(ConstructError::condition(NAME, needs));
            }
        }
        let scheme = Self::from_fn(s, rows, columns.len(), |_, i, j| columns[j].as_ref()[i])?;
        match scheme.first_defect() {
            None => Ok(scheme),
            Some((j, k)) => Err(ConstructError::condition(
                NAME,
                format!("the difference of columns {j} and {k} takes every value equally often"),
            )),
        }
    }

    /// The group, [`canonical_group`]`(s)`.
    #[must_use]
    pub fn group(&self) -> &AbelianGroup {
        &self.group
    }

    /// s, the order of the group.
    #[must_use]
    pub fn order(&self) -> u16 {
        self.s
    }

    /// r, the number of rows.
    #[must_use]
    pub fn rows(&self) -> usize {
        self.rows
    }

    /// The entries, column by column.
    #[must_use]
    pub fn cells(&self) -> &[u16] {
        &self.cells
    }

    /// c, the number of columns.
    #[must_use]
    pub fn columns(&self) -> usize {
        self.columns
    }

    /// The entries of column `j`.
    ///
    /// # Panics
    /// When there is no such column.
    #[must_use]
    pub fn column(&self, j: usize) -> &[u16] {
        assert!(j < self.columns, "no column {j} among {}", self.columns);
        &self.cells[j * self.rows..(j + 1) * self.rows]
    }

    /// The entry in row `i` and column `j`.
    ///
    /// # Panics
    /// When there is no such row or column.
    #[must_use]
    pub fn entry(&self, i: usize, j: usize) -> u16 {
        self.column(j)[i]
    }

    /// Whether the difference of any two columns takes every group value r/s times, checked
    /// exactly. Cost: c²r group operations.
    #[must_use]
    pub fn is_difference_scheme(&self) -> bool {
        self.first_defect().is_none()
    }

    /// The first two columns whose difference is not uniform.
    fn first_defect(&self) -> Option<(usize, usize)> {
        let s = usize::from(self.s);
        if self.columns > 1 && !self.rows.is_multiple_of(s) {
            return Some((0, 1));
        }
        (0..self.columns).into_par_iter().find_map_first(|j| {
            let mut count = vec![0usize; s];
            (j + 1..self.columns)
                .find(|&k| {
                    count.fill(0);
                    for (&a, &b) in self.column(j).iter().zip(self.column(k)) {
                        count[self.group.sub(a, b) as usize] += 1;
                    }
                    count.iter().any(|&n| n * s != self.rows)
                })
                .map(|k| (j, k))
        })
    }

    /// The equivalent scheme whose first column and first row are zero: each row is shifted by
    /// its first entry, then each column by its own.
    #[must_use]
    pub fn normalised(&self) -> Self {
        let corner = self.entry(0, 0);
        Self::from_fn(self.s, self.rows, self.columns, |g, i, j| {
            let across = g.sub(self.entry(i, j), self.entry(i, 0));
            g.sub(across, g.sub(self.entry(0, j), corner))
        })
        .expect("the shape was admitted before")
    }

    /// Whether one column is zero throughout, as the zero-column refinement wants.
    #[must_use]
    pub fn has_zero_column(&self) -> bool {
        (0..self.columns).any(|j| self.column(j).iter().all(|&e| e == 0))
    }

    /// The scheme of the given columns, in that order.
    ///
    /// # Errors
    /// [`ConstructError::Condition`] when no column is named or one is named twice (its difference
    /// with itself is zero).
    ///
    /// # Panics
    /// When a column does not exist.
    pub fn select(&self, columns: &[usize]) -> Result<Self, ConstructError> {
        let mut sorted = columns.to_vec();
        sorted.sort_unstable();
        if let Some(twice) = sorted.windows(2).find(|w| w[0] == w[1]) {
            let needs = format!("every column is named once, but column {} is named twice", twice[0]);
            return Err(ConstructError::condition(NAME, needs));
        }
        for &j in columns {
            let _ = self.column(j);
        }
        Self::from_fn(self.s, self.rows, columns.len(), |_, i, j| self.entry(i, columns[j]))
    }

    /// The transpose of a square scheme, a difference scheme as well: over an abelian group the
    /// transpose of a generalised Hadamard matrix is one (Jungnickel 1979, Mathematische
    /// Zeitschrift 167, 49–60).
    ///
    /// # Errors
    /// [`ConstructError::Condition`] when the scheme is not square.
    pub fn transposed(&self) -> Result<Self, ConstructError> {
        if self.rows != self.columns {
            let needs = format!("the transpose needs r = c, not {} and {}", self.rows, self.columns);
            return Err(ConstructError::condition(NAME, needs));
        }
        Self::from_fn(self.s, self.rows, self.columns, |_, i, j| self.entry(j, i))
    }
}
