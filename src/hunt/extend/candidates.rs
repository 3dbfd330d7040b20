//! The columns of a number of levels that can join given ones.

use super::super::exact::Meter;
use super::level_sets::{End, LevelSets};

/// The most sets of runs that are listed.
const MOST_SETS: usize = 1 << 21;

/// What is known of the columns that can join.
pub(super) enum Candidates {
    /// All of them, up to renaming of levels.
    All(Vec<Vec<u8>>),
    /// Too many to be listed.
    Many,
    /// The effort was used up.
    UsedUp,
}

/// What one column more was looked for with.
pub(super) enum One {
    /// This one can join.
    Column(Vec<u8>),
    /// None can.
    None,
    /// The effort was used up.
    UsedUp,
}

/// A column of `levels` levels as the cells it must fit.
pub(super) struct Joining {
    runs: usize,
    levels: usize,
    cells: Vec<u128>,
    need: Vec<u32>,
}

impl Joining {
    /// `given`: partitions of the runs that the column must fit. `None` when their parts cannot be
    /// shared out among the levels.
    pub(super) fn new(runs: usize, levels: usize, given: &[Vec<u128>]) -> Option<Self> {
        if given.iter().any(|parts| !runs.is_multiple_of(parts.len() * levels)) {
            return None;
        }
        let cells: Vec<u128> = given.iter().flatten().copied().collect();
        let need = cells.iter().map(|c| c.count_ones() / levels as u32).collect();
        Some(Self { runs, levels, cells, need })
    }

    fn everything(&self) -> u128 {
        u128::MAX >> (128 - self.runs)
    }

    /// All columns, by exact cover: first every set of runs that can be a level, then all ways
    /// to cover the runs by them, a set for the first run that is not covered at a time.
    pub(super) fn all(&self, most: usize, meter: &mut Meter) -> Candidates {
        let mut by_first: Vec<Vec<u128>> = vec![Vec::new(); self.runs];
        let mut count = 0;
        // Of two levels, the second is what the first leaves.
        let must = u128::from(self.levels == 2);
        let sets = LevelSets::new(&self.cells, &self.need);
        let end = sets.run(must, self.everything(), meter, &mut |set, _| {
            by_first[set.trailing_zeros() as usize].push(set);
            count += 1;
            count <= MOST_SETS
        });
        let mut columns = Vec::new();
        let covered = by_first.iter().flatten().fold(0, |c, s| c | s);
        let end = match end {
            End::Complete if self.levels > 2 && covered != self.everything() => End::Complete,
            End::Complete => self.cover(&by_first, 0, &mut Vec::new(), meter, &mut |levels, last| {
                columns.push(symbols(self.runs, levels, last));
                columns.len() <= most
            }),
            end => end,
        };
        match end {
            End::Complete => Candidates::All(columns),
            End::Stopped => Candidates::Many,
            End::UsedUp => Candidates::UsedUp,
        }
    }

    fn cover(
        &self,
        by_first: &[Vec<u128>],
        covered: u128,
        levels: &mut Vec<u128>,
        meter: &mut Meter,
        visit: &mut impl FnMut(&[u128], u128) -> bool,
    ) -> End {
        let rest = self.everything() & !covered;
        if levels.len() + 1 == self.levels {
            return if visit(levels, rest) { End::Complete } else { End::Stopped };
        }
        let list = &by_first[rest.trailing_zeros() as usize];
        if !meter.spend(1 + list.len() as u64 / 4) {
            return End::UsedUp;
        }
        for &set in list.iter().filter(|&s| s & covered == 0) {
            levels.push(set);
            let end = self.cover(by_first, covered | set, levels, meter, visit);
            levels.pop();
            if end != End::Complete {
                return end;
            }
        }
        End::Complete
    }

    /// The first column, level by level, without listing anything.
    pub(super) fn one(&self, meter: &mut Meter) -> One {
        let mut found = None;
        match self.level(0, &mut Vec::new(), meter, &mut found) {
            End::UsedUp => One::UsedUp,
            End::Stopped | End::Complete => found.map_or(One::None, One::Column),
        }
    }

    fn level(
        &self,
        covered: u128,
        levels: &mut Vec<u128>,
        meter: &mut Meter,
        found: &mut Option<Vec<u8>>,
    ) -> End {
        let rest = self.everything() & !covered;
        if levels.len() + 1 == self.levels {
            *found = Some(symbols(self.runs, levels, rest));
            return End::Stopped;
        }
        let first = 1u128 << rest.trailing_zeros();
        let mut used_up = false;
        let end = LevelSets::new(&self.cells, &self.need).run(first, rest, meter, &mut |set, meter| {
            levels.push(set);
            let end = self.level(covered | set, levels, meter, found);
            levels.pop();
            used_up |= end == End::UsedUp;
            end == End::Complete
        });
        if used_up { End::UsedUp } else { end }
    }
}

fn symbols(runs: usize, levels: &[u128], last: u128) -> Vec<u8> {
    let level = |run: usize| levels.iter().position(|l| l >> run & 1 == 1).unwrap_or(levels.len());
    debug_assert!((0..runs).all(|r| last >> r & 1 == u128::from(level(r) == levels.len())));
    (0..runs).map(|run| level(run) as u8).collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::hunt::Effort;

    fn square(table: impl Fn(usize, usize) -> usize, n: usize) -> Vec<Vec<u128>> {
        let by = |f: &dyn Fn(usize, usize) -> usize| {
            let mut parts = vec![0u128; n];
            (0..n * n).for_each(|r| parts[f(r / n, r % n)] |= 1 << r);
            parts
        };
        vec![by(&|r, _| r), by(&|_, c| c), by(&|r, c| table(r, c))]
    }

    fn level_sets(given: &[Vec<u128>], n: usize) -> usize {
        let joining = Joining::new(n * n, n, given).unwrap();
        let (mut count, mut effort) = (0, Effort::unlimited());
        let mut meter = Meter::new(&mut effort, u64::MAX);
        LevelSets::new(&joining.cells, &joining.need).run(
            0,
            joining.everything(),
            &mut meter,
            &mut |_, _| {
                count += 1;
                true
            },
        );
        count
    }

    /// The cyclic squares of order 3, 5, 7 have 3, 15, 133 transversals and those of even order
    /// none (OEIS A006717 \[memory\]; Euler 1782).
    #[test]
    fn transversals_of_cyclic_squares() {
        for (n, count) in [(3, 3), (4, 0), (5, 15), (6, 0), (7, 133)] {
            assert_eq!(level_sets(&square(|r, c| (r + c) % n, n), n), count, "order {n}");
        }
        // The square of Z2×Z2 has eight.
        assert_eq!(level_sets(&square(|r, c| r ^ c, 4), 4), 8);
    }

    /// The 148,600 two-level columns beside two crossed six-level ones (half of OEIS A058527
    /// \[memory\]), and the three ways to split a cyclic square of order 5 into transversals.
    #[test]
    fn columns_are_counted() {
        let mut effort = Effort::unlimited();
        let mut meter = Meter::new(&mut effort, u64::MAX);
        let grid = &square(|r, _| r, 6)[..2];
        let Candidates::All(columns) = Joining::new(36, 2, grid).unwrap().all(1 << 20, &mut meter) else {
            panic!("they can be listed")
        };
        assert_eq!(columns.len(), 148_600);
        let cyclic = square(|r, c| (r + c) % 5, 5);
        let joining = Joining::new(25, 5, &cyclic).unwrap();
        let Candidates::All(mates) = joining.all(1 << 20, &mut meter) else { panic!("they can be listed") };
        assert_eq!(mates.len(), 3);
        assert!(matches!(joining.all(2, &mut meter), Candidates::Many));
        assert!(matches!(joining.one(&mut meter), One::Column(c) if mates.contains(&c)));
        let mut little = Effort::new(3, &|| false);
        assert!(matches!(joining.all(9, &mut Meter::new(&mut little, u64::MAX)), Candidates::UsedUp));
    }
}
