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

/// A whole plan and its score (see [`Table::score`]).
pub(super) struct Climbed {
    pub(super) columns: Vec<Vec<u16>>,
    pub(super) score: u64,
}

/// Fills the empty places of `table` and improves its columns until the score is `goal` or the effort
/// is spent; hands out the best plan seen.
///
/// A column is taken out, made again from a random start or from itself with a few exchanges, and
/// put back if it is no worse.
pub(super) fn climb(
    mut table: Table,
    kept: Option<&Array>,
    goal: u64,
    random: &mut Random,
    effort: &mut Effort<'_>,
) -> Climbed {
    let fresh = |table: &Table, j: usize, random: &mut Random| {
        balanced_column(table.levels[j], table.runs, kept.map_or(&[], |k| k.column(j)), random)
    };
    let mut order: Vec<usize> = (0..table.levels.len()).collect();
    random.shuffle(&mut order);
    for &j in &order {
        if table.columns[j].is_none() {
            let column = best_of(&table, j, random, effort, &fresh);
            table.put(j, column);
        }
    }
    let mut score = table.score();
    let mut best = Climbed { columns: whole(&table), score };
    let mut idle = 0;
    while score > goal && effort.goes_on() {
        random.shuffle(&mut order);
        let before = score;
        for &j in &order {
            if !effort.spend((3 * table.runs * table.runs) as u64) {
                break;
            }
            let old = table.take(j);
            let start =
                if random.below(2) == 0 { fresh(&table, j, random) } else { shaken(&table, &old, random) };
            let new = improve(&table, table.levels[j], start, effort);
            let (old_cost, new_cost) = (table.cost(&old), table.cost(&new));
            if new_cost <= old_cost {
                score = score.saturating_add_signed(2 * (new_cost - old_cost));
            }
            table.put(j, if new_cost <= old_cost { new } else { old });
        }
        if score < best.score {
            best = Climbed { columns: whole(&table), score };
        }
        idle = if score < before { 0 } else { idle + 1 };
        if idle >= PATIENCE && effort.goes_on() {
            idle = 0;
            let many = 2 + random.below(3);
            for &j in order.iter().take(many) {
                table.take(j);
            }
            for &j in order.iter().take(many) {
                let start = fresh(&table, j, random);
                let column = improve(&table, table.levels[j], start, effort);
                table.put(j, column);
            }
            score = table.score();
        }
    }
    if score < best.score {
        best = Climbed { columns: whole(&table), score };
    }
    best
}

fn whole(table: &Table) -> Vec<Vec<u16>> {
    table.columns.iter().map(|c| c.clone().unwrap_or_default()).collect()
}

/// The best of some random columns, each improved.
fn best_of(
    table: &Table,
    j: usize,
    random: &mut Random,
    effort: &mut Effort<'_>,
    fresh: &impl Fn(&Table, usize, &mut Random) -> Vec<u16>,
) -> Vec<u16> {
    let mut best: Option<(i64, Vec<u16>)> = None;
    for _ in 0..TRIES {
        let start = fresh(table, j, random);
        if best.is_some() && !effort.goes_on() {
            break;
        }
        let column = improve(table, table.levels[j], start, effort);
        let cost = table.cost(&column);
        if best.as_ref().is_none_or(|(known, _)| cost < *known) {
            best = Some((cost, column));
        }
        if cost == 0 {
            break;
        }
    }
    best.map(|(_, column)| column).unwrap_or_default()
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
