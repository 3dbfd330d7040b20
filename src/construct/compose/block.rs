//! [`DifferenceBlock`]: a difference scheme as the compositions see it.

use crate::algebra::AbelianGroup;
use crate::construct::ConstructError;
use crate::construct::scheme::Scheme;

const NAME: &str = "difference block";

/// A borrowed r × c matrix over an abelian group, meant to be a difference scheme D(r, c, s): the
/// difference of any two columns takes each of the s values r/s times.
///
/// The shape and the range of the entries are checked when it is made; that it *is* a difference
/// scheme is asked by [`DifferenceBlock::is_difference_scheme`] and taken for granted by the
/// constructions.
#[derive(Clone, Copy, Debug)]
pub struct DifferenceBlock<'a> {
    group: &'a AbelianGroup,
    order: u16,
    rows: usize,
    columns: usize,
    cells: &'a [u16],
}

impl<'a> DifferenceBlock<'a> {
    /// A block from its cells, column by column: the entry of row `i`, column `j` is
    /// `cells[j * rows + i]`.
    ///
    /// # Errors
    /// A [`ConstructError`] when there is no row or column, the cells do not fill rows × columns,
    /// or an entry is no element of the group.
    pub fn new(
        group: &'a AbelianGroup,
        rows: usize,
        columns: usize,
        cells: &'a [u16],
    ) -> Result<Self, ConstructError> {
        let fail = |needs| Err(ConstructError::condition(NAME, needs));
        if rows == 0 || columns == 0 {
            return fail(format!("at least one row and one column, not {rows} × {columns}"));
        }
        if rows.checked_mul(columns) != Some(cells.len()) {
            return fail(format!("{rows} × {columns} entries, not {}", cells.len()));
        }
        let order = u16::try_from(group.order()).expect("a group has at most 65,535 elements");
        if let Some(&odd) = cells.iter().find(|&&c| c >= order) {
            return fail(format!("entries below the group order {order}, not {odd}"));
        }
        Ok(Self { group, order, rows, columns, cells })
    }

    /// The view of a whole scheme.
    ///
    /// # Errors
    /// As [`DifferenceBlock::new`]; none in practice, since a [`Scheme`] keeps the same rules.
    pub fn of_scheme(scheme: &'a Scheme) -> Result<Self, ConstructError> {
        Self::new(scheme.group(), scheme.rows(), scheme.columns(), scheme.cells())
    }

    /// s, the order of the group.
    #[must_use]
    pub fn order(&self) -> u16 {
        self.order
    }

    /// The group.
    #[must_use]
    pub fn group(&self) -> &'a AbelianGroup {
        self.group
    }

    /// r, the number of rows.
    #[must_use]
    pub fn rows(&self) -> usize {
        self.rows
    }

    /// c, the number of columns.
    #[must_use]
    pub fn columns(&self) -> usize {
        self.columns
    }

    /// The entry of row `row`, column `column`.
    ///
    /// # Panics
    /// When there is no such row or column.
    #[must_use]
    pub fn get(&self, row: usize, column: usize) -> u16 {
        self.column(column)[row]
    }

    /// The entries of column `column`, in the order of the rows.
    ///
    /// # Panics
    /// When there is no such column.
    #[must_use]
    pub fn column(&self, column: usize) -> &'a [u16] {
        assert!(column < self.columns, "no column {column} among {}", self.columns);
        &self.cells[column * self.rows..(column + 1) * self.rows]
    }

    /// Whether the difference of any two columns takes each value equally often. Cost: O(r·c²).
    #[must_use]
    pub fn is_difference_scheme(&self) -> bool {
        (0..self.columns).all(|j| (0..j).all(|l| self.is_balanced_difference(j, l)))
    }

    /// Whether the difference of columns `j` and `l` takes each value equally often.
    pub(crate) fn is_balanced_difference(&self, j: usize, l: usize) -> bool {
        let mut counts = vec![0usize; usize::from(self.order)];
        for (&x, &y) in self.column(j).iter().zip(self.column(l)) {
            counts[usize::from(self.group.sub(x, y))] += 1;
        }
        counts.iter().all(|&n| n == counts[0])
    }
}

/// (s, c) of each block, as the `…_levels` functions take them.
pub(crate) fn shapes(blocks: &[DifferenceBlock<'_>]) -> Vec<(u16, usize)> {
    blocks.iter().map(|d| (d.order(), d.columns())).collect()
}

/// What the Kronecker sum and its refinement ask of their blocks: M rows each, one block per
/// number of levels, none without a factor to act on.
pub(crate) fn check_blocks(
    construction: &'static str,
    levels: &[u16],
    blocks: &[DifferenceBlock<'_>],
    rows: usize,
) -> Result<(), ConstructError> {
    for (i, d) in blocks.iter().enumerate() {
        let fail = |needs| Err(ConstructError::condition(construction, needs));
        if d.rows() != rows {
            return fail(format!("every block and B have M = {rows} rows, not {}", d.rows()));
        }
        if blocks[..i].iter().any(|e| e.order() == d.order()) {
            return fail(format!("one block per number of levels; two have order {}", d.order()));
        }
        if !levels.contains(&d.order()) {
            return fail(format!("A has no {}-level factor for the block of that order", d.order()));
        }
    }
    Ok(())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn knows_a_difference_scheme() {
        let z3 = AbelianGroup::cyclic(3).unwrap();
        let good = [0, 0, 0, 0, 1, 2, 0, 2, 1];
        let block = DifferenceBlock::new(&z3, 3, 3, &good).unwrap();
        assert!(block.is_difference_scheme());
        assert_eq!((block.get(1, 2), block.order(), block.group()), (2, 3, &z3));
        for at in 0..9 {
            for shift in 1..3 {
                let mut bad = good;
                bad[at] = (bad[at] + shift) % 3;
                assert!(!DifferenceBlock::new(&z3, 3, 3, &bad).unwrap().is_difference_scheme());
            }
        }
    }

    #[test]
    fn refuses_what_is_no_block() {
        let z3 = AbelianGroup::cyclic(3).unwrap();
        let reason = |r: usize, c: usize, cells: &[u16]| {
            DifferenceBlock::new(&z3, r, c, cells).map(|_| ()).unwrap_err().to_string()
        };
        assert!(reason(0, 1, &[]).contains("at least one row"));
        assert!(reason(1, 0, &[]).contains("at least one row"));
        assert!(reason(2, 2, &[0; 3]).contains("2 × 2 entries, not 3"));
        assert!(reason(usize::MAX, 2, &[0; 3]).contains("entries, not 3"));
        assert!(reason(1, 1, &[3]).contains("below the group order 3"));
    }
}
