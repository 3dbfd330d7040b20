//! Exchanges within one column.

use super::table::Table;
use crate::hunt::Effort;

/// A column beside a table, with what each run would add at each level.
struct Column<'a> {
    table: &'a Table,
    symbols: Vec<u16>,
    counts: Vec<usize>,
    /// Σ δ_ij over the runs j with level v, at v · runs + i.
    at_level: Vec<i32>,
    /// The same for each run's own level.
    own: Vec<i32>,
}

/// Improves a column that is not in `table` by exchanges of two of its symbols, and by changes of one
/// symbol that leave the level counts as even as they are, until none makes Σ δ_ij over the pairs of
/// runs that agree in it smaller, or the effort is spent.
///
/// For each run the best exchange is made at once. Reference: H. Xu, *Technometrics* 44 (2002),
/// 356–368, section 3; N.-K. Nguyen, *Technometrics* 38 (1996), 69–73. Cost: N² steps for each
/// round, few rounds.
pub(super) fn improve(table: &Table, levels: u16, symbols: Vec<u16>, effort: &mut Effort<'_>) -> Vec<u16> {
    let runs = table.runs;
    if !effort.spend((runs * runs) as u64) {
        return symbols;
    }
    let mut column = Column::new(table, levels, symbols);
    loop {
        let mut better = false;
        for a in table.fixed..runs {
            if !effort.spend(runs as u64) {
                return column.symbols;
            }
            better |= column.improve_run(a);
        }
        if !better {
            return column.symbols;
        }
    }
}

enum Step {
    Swap(usize),
    Change(u16),
}

impl<'a> Column<'a> {
    fn new(table: &'a Table, levels: u16, symbols: Vec<u16>) -> Self {
        let runs = table.runs;
        let mut counts = vec![0; usize::from(levels)];
        let mut at_level = vec![0i32; usize::from(levels) * runs];
        for (row, &symbol) in table.agree.chunks_exact(runs).zip(&symbols) {
            counts[usize::from(symbol)] += 1;
            let start = usize::from(symbol) * runs;
            at_level[start..start + runs].iter_mut().zip(row).for_each(|(sum, d)| *sum += d);
        }
        let own = symbols.iter().enumerate().map(|(i, &s)| at_level[usize::from(s) * runs + i]).collect();
        Self { table, symbols, counts, at_level, own }
    }

    /// Makes the best exchange or change for run `a`; whether there was one.
    fn improve_run(&mut self, a: usize) -> bool {
        let (runs, u) = (self.table.runs, self.symbols[a]);
        let row = &self.table.agree[a * runs..(a + 1) * runs];
        let with_u = &self.at_level[usize::from(u) * runs..(usize::from(u) + 1) * runs];
        let (mut least, mut step) = (0, None);
        for b in self.table.fixed..runs {
            let v = self.symbols[b];
            let here = self.at_level[usize::from(v) * runs + a] - self.own[a];
            let change = here + with_u[b] - self.own[b] - 2 * row[b];
            if change < least && v != u {
                (least, step) = (change, Some(Step::Swap(b)));
            }
        }
        for (v, &count) in (0u16..).zip(&self.counts) {
            let change = self.at_level[usize::from(v) * runs + a] - self.own[a];
            if change < least && count + 1 == self.counts[usize::from(u)] {
                (least, step) = (change, Some(Step::Change(v)));
            }
        }
        match step {
            None => return false,
            Some(Step::Change(v)) => self.set(a, v),
            Some(Step::Swap(b)) => {
                let v = self.symbols[b];
                self.set(a, v);
                self.set(b, u);
            }
        }
        true
    }

    fn set(&mut self, a: usize, v: u16) {
        let runs = self.table.runs;
        let u = std::mem::replace(&mut self.symbols[a], v);
        self.counts[usize::from(u)] -= 1;
        self.counts[usize::from(v)] += 1;
        let row = &self.table.agree[a * runs..(a + 1) * runs];
        for (level, sign) in [(u, -1), (v, 1)] {
            let start = usize::from(level) * runs;
            self.at_level[start..start + runs].iter_mut().zip(row).for_each(|(sum, d)| *sum += sign * d);
        }
        for (i, (own, &symbol)) in self.own.iter_mut().zip(&self.symbols).enumerate() {
            *own = self.at_level[usize::from(symbol) * runs + i];
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::hunt::Random;
    use crate::hunt::near::plain::balanced_column;

    /// After an improvement no exchange of two symbols helps, by the plain definition.
    #[test]
    fn ends_where_no_exchange_helps() {
        let mut random = Random::new(5);
        for (runs, fixed) in [(8, 0), (11, 3), (5, 5)] {
            let levels = [2, 3, 4, 3, 2];
            let mut table = Table::new(runs, fixed, levels.len());
            let kept = vec![0; fixed];
            for (j, &s) in levels.iter().enumerate().skip(1) {
                table.put(j, balanced_column(s, runs, &kept, &mut random));
            }
            for s in [2, 3, 5] {
                let start = balanced_column(s, runs, &kept, &mut random);
                let before = table.cost(&start);
                let better = improve(&table, s, start.clone(), &mut Effort::unlimited());
                let least = table.cost(&better);
                assert!(least <= before && better[..fixed] == start[..fixed]);
                for a in fixed..runs {
                    for b in fixed..a {
                        let mut other = better.clone();
                        other.swap(a, b);
                        assert!(table.cost(&other) >= least);
                    }
                }
                let halted = improve(&table, s, start.clone(), &mut Effort::new(1, &|| false));
                assert_eq!(halted, start);
            }
        }
    }
}
