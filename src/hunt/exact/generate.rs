//! All columns of one kind that are orthogonal to given partitions of the runs.

use super::action::{Action, Kind};
use super::meter::Meter;

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

/// Backtracking over the orbits with a counter for each part and level.
///
/// Columns are shown up to renaming of levels: a coset of levels is entered at its offset 0, the
/// cosets in the order of their numbers. Every column can be renamed so, in one way, because the
/// renamings that keep the action are the permutations of the cosets and the translations of
/// each.
pub(super) struct Generator<'a> {
    kind: &'a Kind,
    /// The counters that each orbit and base symbol (by code) adds one to.
    cells: Vec<Vec<u32>>,
    left: Vec<u16>,
    codes: Vec<usize>,
    /// For each orbit whether it can be exchanged with the one before; then its code is not lower.
    tied: Vec<bool>,
}

impl<'a> Generator<'a> {
    /// `given`: partitions of the runs into parts of equal size, at least one. `None` when the
    /// levels do not divide the parts. With `classes`, orbits of the same class are exchangeable
    /// and only columns that ascend in each class are shown: among them is the smallest one of
    /// everything that renaming and exchanging make of a column.
    pub(super) fn new(
        action: &Action,
        kind: &'a Kind,
        given: &[Vec<u128>],
        classes: Option<&[usize]>,
    ) -> Option<Self> {
        let s = kind.levels;
        let mut left = Vec::new();
        let mut cells = vec![Vec::new(); action.orbits * s];
        for parts in given {
            if !action.runs.is_multiple_of(parts.len() * s) {
                return None;
            }
            let first = left.len();
            left.resize(first + parts.len() * s, (action.runs / (parts.len() * s)) as u16);
            for o in 0..action.orbits {
                for (g, &v) in kind.values.iter().enumerate() {
                    let run = o * action.order + g;
                    let part = parts.iter().position(|p| p >> run & 1 == 1)?;
                    for code in 0..s {
                        let level = (kind.symbol(code) + v) % s;
                        cells[o * s + code].push((first + part * s + level) as u32);
                    }
                }
            }
        }
        let tied = (0..action.orbits).map(|o| o > 0 && classes.is_some_and(|c| c[o] == c[o - 1])).collect();
        Some(Self { kind, cells, left, codes: vec![0; action.orbits], tied })
    }

    /// Shows the base symbols of every column until `visit` says false.
    pub(super) fn run(&mut self, meter: &mut Meter, visit: &mut impl FnMut(&[u8]) -> bool) -> End {
        self.orbit(0, 0, meter, visit)
    }

    fn orbit(
        &mut self,
        o: usize,
        used: usize,
        meter: &mut Meter,
        visit: &mut impl FnMut(&[u8]) -> bool,
    ) -> End {
        if o == self.codes.len() {
            let base: Vec<u8> = self.codes.iter().map(|&c| self.kind.symbol(c) as u8).collect();
            return if visit(&base) { End::Complete } else { End::Stopped };
        }
        if !meter.spend(1) {
            return End::UsedUp;
        }
        let open = used < self.kind.cosets;
        let to = used * self.kind.image + usize::from(open);
        let from = if self.tied[o] { self.codes[o - 1] } else { 0 };
        for code in from..to {
            let at = o * self.kind.levels + code;
            let taken = self.take(at);
            if taken == self.cells[at].len() {
                self.codes[o] = code;
                let end = self.orbit(o + 1, used.max(code / self.kind.image + 1), meter, visit);
                if end != End::Complete {
                    return end;
                }
            }
            for i in 0..taken {
                self.left[self.cells[at][i] as usize] += 1;
            }
        }
        End::Complete
    }

    /// Counts down the cells until one is empty; how many were counted down.
    fn take(&mut self, at: usize) -> usize {
        for (i, &cell) in self.cells[at].iter().enumerate() {
            match self.left[cell as usize].checked_sub(1) {
                Some(less) => self.left[cell as usize] = less,
                None => return i,
            }
        }
        self.cells[at].len()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::hunt::Effort;

    fn count(runs: u32, group: &[u16], s: u16, given: &[Vec<u128>]) -> usize {
        let action = Action::new(runs, group).unwrap();
        let mut count = 0;
        for kind in action.kinds(s) {
            let mut generator = Generator::new(&action, &kind, given, None).unwrap();
            let end = generator.run(&mut Meter::new(&mut Effort::unlimited(), u64::MAX), &mut |_| {
                count += 1;
                true
            });
            assert_eq!(end, End::Complete);
        }
        count
    }

    #[test]
    fn the_numbers_of_columns_are_those_of_the_formulas() {
        assert_eq!(count(20, &[], 2, &[vec![(1 << 20) - 1]]), 92_378);
        let fives: Vec<u128> = (0..5).map(|b| 0b1111 << (4 * b)).collect();
        assert_eq!(count(20, &[], 2, &[fives]), 3888);
        // Six orbits of Z3: 6!/(2!^3·3!) with the trivial character, 3^5 with the other.
        assert_eq!(count(18, &[3], 3, &[vec![(1 << 18) - 1]]), 15 + 243);
    }
}
