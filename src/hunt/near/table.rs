//! A plan in the making, with the number of factors in which any two runs agree.

/// Some columns of a plan and δ_ij, the number of them in which runs i and j agree.
#[derive(Clone)]
pub(super) struct Table {
    pub(super) runs: usize,
    /// The runs that come first and may not change.
    pub(super) fixed: usize,
    pub(super) columns: Vec<Option<Vec<u16>>>,
    /// δ_ij at i · runs + j, zero for i = j.
    pub(super) agree: Vec<i32>,
}

impl Table {
    /// A table with places for so many columns, all empty.
    pub(super) fn new(runs: usize, fixed: usize, factors: usize) -> Self {
        Self { runs, fixed, columns: vec![None; factors], agree: vec![0; runs * runs] }
    }

    /// Σ_{i<j} δ_ij(δ_ij − 1): Σ n_ab² over the pairs of columns less N·k(k − 1)/2.
    pub(super) fn score(&self) -> u64 {
        let twice: u64 = self.agree.iter().map(|&d| d as u64).map(|d| d * d.saturating_sub(1)).sum();
        twice / 2
    }

    /// Puts a column in its empty place.
    pub(super) fn put(&mut self, factor: usize, column: Vec<u16>) {
        self.add(&column, 1);
        self.columns[factor] = Some(column);
    }

    /// Takes a column out of its place.
    pub(super) fn take(&mut self, factor: usize) -> Vec<u16> {
        let column = self.columns[factor].take().unwrap_or_default();
        self.add(&column, -1);
        column
    }

    fn add(&mut self, column: &[u16], amount: i32) {
        for (i, (row, &own)) in self.agree.chunks_exact_mut(self.runs).zip(column).enumerate() {
            for (d, &other) in row.iter_mut().zip(column) {
                *d += if other == own { amount } else { 0 };
            }
            row[i] = 0;
        }
    }

    /// Σ δ_ij over the pairs of runs that agree in `column`, which is not in the table: half of what
    /// it adds to the score.
    pub(super) fn cost(&self, column: &[u16]) -> i64 {
        let of_row = |(row, &own): (&[i32], &u16)| -> i64 {
            row.iter().zip(column).map(|(&d, &other)| if other == own { i64::from(d) } else { 0 }).sum()
        };
        self.agree.chunks_exact(self.runs).zip(column).map(of_row).sum::<i64>() / 2
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_score_is_that_of_the_pair_counts() {
        let columns = [vec![0u16, 1, 0, 1, 0], vec![0, 1, 2, 2, 0], vec![1, 1, 0, 0, 1]];
        let mut table = Table::new(5, 0, 3);
        for (j, column) in columns.iter().enumerate() {
            let (before, cost) = (table.score(), table.cost(column));
            table.put(j, column.clone());
            assert_eq!(table.score() as i64, before as i64 + 2 * cost);
        }
        let mut squares = 0;
        for (i, a) in columns.iter().enumerate() {
            for b in &columns[..i] {
                for x in 0..3 {
                    for y in 0..3 {
                        let n = a.iter().zip(b).filter(|&(&p, &q)| (p, q) == (x, y)).count() as u64;
                        squares += n * n;
                    }
                }
            }
        }
        assert_eq!(table.score() + 5 * 3, squares);
        assert_eq!(table.take(1), columns[1]);
        table.take(0);
        table.take(2);
        assert_eq!(table.score(), 0);
    }
}
