//! The sets of runs that can be one level of a further column.

use super::super::exact::Meter;

/// How an enumeration ended.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub(super) enum End {
    /// Everything was shown.
    Complete,
    /// The visitor wanted no more.
    Stopped,
    /// The effort was used up.
    UsedUp,
}

/// Sets of runs that hold the same share of every cell.
pub(super) struct LevelSets<'a> {
    /// The parts of the partitions that the column must fit.
    cells: &'a [u128],
    /// How many runs of each cell a level has.
    need: &'a [u32],
}

impl<'a> LevelSets<'a> {
    pub(super) fn new(cells: &'a [u128], need: &'a [u32]) -> Self {
        Self { cells, need }
    }

    /// Shows every set that contains `must` and lies within `may`, until `visit` says false.
    pub(super) fn run(
        &self,
        must: u128,
        may: u128,
        meter: &mut Meter,
        visit: &mut dyn FnMut(u128, &mut Meter) -> bool,
    ) -> End {
        self.node(must, may & !must, meter, visit)
    }

    /// `set`: what is in, `open`: what is not decided.
    fn node(
        &self,
        mut set: u128,
        mut open: u128,
        meter: &mut Meter,
        visit: &mut dyn FnMut(u128, &mut Meter) -> bool,
    ) -> End {
        if !meter.spend(1 + self.cells.len() as u64 / 4) {
            return End::UsedUp;
        }
        let tightest = loop {
            let (before, mut tightest) = (open, (u32::MAX, 0u128));
            for (&cell, &need) in self.cells.iter().zip(self.need) {
                let (has, free) = ((set & cell).count_ones(), (open & cell).count_ones());
                if has > need || has + free < need {
                    return End::Complete;
                }
                if free > 0 && has == need {
                    open &= !cell;
                } else if free > 0 && has + free == need {
                    set |= open & cell;
                    open &= !cell;
                } else if free > 0 {
                    let missing = need - has;
                    let ways = missing.min(free - missing) * 256 + free;
                    tightest = tightest.min((ways, cell));
                }
            }
            if open == before {
                break tightest;
            }
        };
        if open == 0 {
            return if visit(set, meter) { End::Complete } else { End::Stopped };
        }
        let run = 1u128 << (open & tightest.1).trailing_zeros();
        for within in [set | run, set] {
            let end = self.node(within, open & !run, meter, visit);
            if end != End::Complete {
                return end;
            }
        }
        End::Complete
    }
}
