//! One attempt: build a plan column by column, then make its columns again.

use super::exchange::improve;
use super::plain::balanced_column;
use super::table::Table;
use crate::array::Array;
use crate::hunt::{Effort, Random};

/// A new column is tried so often.
const TRIES: usize = 4;

/// After so many rounds over all columns without improvement, some columns are thrown away.
const PATIENCE: usize = 4;

/// A whole plan and its score (see [`Table::score`]), the largest number where it was not worked out.
pub(super) struct Climbed {
    pub(super) columns: Vec<Vec<u16>>,
    pub(super) score: u64,
}

/// What an attempt is for.
pub(super) struct Climb<'a> {
    pub(super) levels: &'a [u16],
    pub(super) runs: usize,
    pub(super) kept: Option<&'a Array>,
    /// The score that cannot be improved.
    pub(super) goal: u64,
}

impl Climb<'_> {
    fn fresh(&self, j: usize, random: &mut Random) -> Vec<u16> {
        balanced_column(self.levels[j], self.runs, self.kept.map_or(&[], |k| k.column(j)), random)
    }

    /// Fills the empty places of `given` at random.
    pub(super) fn fill(&self, given: Vec<Option<Vec<u16>>>, random: &mut Random) -> Climbed {
        let fill = |(j, column): (usize, Option<Vec<u16>>)| column.unwrap_or_else(|| self.fresh(j, random));
        Climbed { columns: given.into_iter().enumerate().map(fill).collect(), score: u64::MAX }
    }

    /// A table of the given columns and of good ones in the empty places; the columns there are when
    /// the effort does not suffice.
    fn build(
        &self,
        given: Vec<Option<Vec<u16>>>,
        random: &mut Random,
        effort: &mut Effort<'_>,
    ) -> Result<Table, Vec<Option<Vec<u16>>>> {
        let look = (self.runs * self.runs) as u64;
        let mut table = Table::new(self.runs, self.kept.map_or(0, Array::runs), self.levels.len());
        let mut order: Vec<usize> = (0..self.levels.len()).collect();
        random.shuffle(&mut order);
        order.sort_by_key(|&j| given[j].is_none());
        let mut given = given;
        for &j in &order {
            if !effort.spend(look) {
                given.iter_mut().zip(table.columns).for_each(|(g, made)| *g = g.take().or(made));
                return Err(given);
            }
            let column = given[j].take().unwrap_or_else(|| self.best_of(&table, j, random, effort));
            table.put(j, column);
        }
        Ok(table)
    }

    /// The best of some random columns, each improved.
    fn best_of(&self, table: &Table, j: usize, random: &mut Random, effort: &mut Effort<'_>) -> Vec<u16> {
        let mut best: Option<(i64, Vec<u16>)> = None;
        for _ in 0..TRIES {
            let start = self.fresh(j, random);
            if best.is_some() && !effort.goes_on() {
                break;
            }
            let column = improve(table, self.levels[j], start, effort);
            let cost = table.cost(&column);
            if best.as_ref().is_none_or(|(known, _)| cost < *known) {
                best = Some((cost, column));
            }
        }
        best.map(|(_, column)| column).unwrap_or_default()
    }

    /// Completes the given columns and improves all of them until the score is the goal or the effort
    /// is spent; hands out the best plan seen.
    ///
    /// A column is taken out, made again from a random start or from itself with a few exchanges,
    /// and put back if it is no worse. After a few idle rounds some columns are thrown away.
    pub(super) fn run(
        &self,
        given: Vec<Option<Vec<u16>>>,
        random: &mut Random,
        effort: &mut Effort<'_>,
    ) -> Climbed {
        let mut table = match self.build(given, random, effort) {
            Ok(table) => table,
            Err(given) => return self.fill(given, random),
        };
        let mut order: Vec<usize> = (0..self.levels.len()).collect();
        let mut score = table.score();
        let mut best = Climbed { columns: whole(&table), score };
        let mut idle = 0;
        while score > self.goal && effort.goes_on() {
            random.shuffle(&mut order);
            let before = score;
            for &j in &order {
                score = score.saturating_sub(self.redo(&mut table, j, random, effort));
            }
            if score < best.score {
                best = Climbed { columns: whole(&table), score };
            }
            idle = if score < before { 0 } else { idle + 1 };
            if idle >= PATIENCE && effort.goes_on() {
                idle = 0;
                self.throw_away(&mut table, &order[..order.len().min(2 + random.below(3))], random, effort);
                score = table.score();
            }
        }
        if score < best.score {
            best = Climbed { columns: whole(&table), score };
        }
        best
    }

    /// Makes a column again; returns by how much the score fell.
    fn redo(&self, table: &mut Table, j: usize, random: &mut Random, effort: &mut Effort<'_>) -> u64 {
        if !effort.spend(3 * (self.runs * self.runs) as u64) {
            return 0;
        }
        let old = table.take(j);
        let start = if random.below(2) == 0 { self.fresh(j, random) } else { shaken(table, &old, random) };
        let new = improve(table, self.levels[j], start, effort);
        let gain = table.cost(&old) - table.cost(&new);
        table.put(j, if gain >= 0 { new } else { old });
        2 * gain.max(0) as u64
    }

    fn throw_away(&self, table: &mut Table, columns: &[usize], random: &mut Random, effort: &mut Effort<'_>) {
        for &j in columns {
            table.take(j);
        }
        for &j in columns {
            let start = self.fresh(j, random);
            let column = improve(table, self.levels[j], start, effort);
            table.put(j, column);
        }
    }
}

fn whole(table: &Table) -> Vec<Vec<u16>> {
    table.columns.iter().map(|c| c.clone().unwrap_or_default()).collect()
}

/// A column with a few random exchanges.
fn shaken(table: &Table, column: &[u16], random: &mut Random) -> Vec<u16> {
    let mut column = column.to_vec();
    let free = table.runs - table.fixed;
    for _ in 0..1 + random.below(3) {
        let (a, b) = (table.fixed + random.below(free), table.fixed + random.below(free));
        if free > 0 {
            column.swap(a, b);
        }
    }
    column
}

#[cfg(test)]
mod tests {
    use super::*;

    fn climb<'a>(levels: &'a [u16]) -> Climb<'a> {
        Climb { levels, runs: 8, kept: None, goal: 0 }
    }

    #[test]
    fn the_score_is_that_of_the_columns_handed_out() {
        let levels = [2, 2, 3, 4, 2, 2];
        for (steps, known) in [(100_000, true), (20_000, true), (500, false), (64, false), (0, false)] {
            let mut effort = Effort::new(steps, &|| false);
            let found = climb(&levels).run(vec![None; 6], &mut Random::new(3), &mut effort);
            let mut table = Table::new(8, 0, 6);
            (0..6).for_each(|j| table.put(j, found.columns[j].clone()));
            assert_eq!(found.score, if known { table.score() } else { u64::MAX }, "{steps} steps");
        }
    }

    #[test]
    fn an_orthogonal_array_is_found_from_nothing() {
        let levels = [2; 7];
        // Any two of the 8 runs agree in 3 of 7 factors.
        let climb = Climb { goal: 28 * 6, ..climb(&levels) };
        let found = climb.run(vec![None; 7], &mut Random::new(1), &mut Effort::new(1 << 22, &|| false));
        assert_eq!(found.score, climb.goal);
    }
}
