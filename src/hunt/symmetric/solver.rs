//! The next column, solved for.

use super::{Setting, Test};
use crate::floor::Effort;
use crate::hunt::random::Random;

/// Backtracking over the orbits for one column orthogonal to all tests.
pub(super) struct Solver<'a> {
    setting: &'a Setting,
    chosen: &'a [Test],
    s: u16,
    /// For each chosen column how often each pair of levels may occur; `None` if it cannot be even.
    limits: Option<Vec<u16>>,
    /// Where the counters of each chosen column begin; the last ones count the new column alone.
    offsets: Vec<usize>,
    counters: Vec<u16>,
}

impl<'a> Solver<'a> {
    pub(super) fn new(setting: &'a Setting, chosen: &'a [Test], s: u16) -> Self {
        let runs = setting.runs;
        let (mut offsets, mut size) = (Vec::new(), 0);
        let mut limits = Some(Vec::new());
        for c in chosen {
            offsets.push(size);
            let pairs = usize::from(c.levels) * usize::from(s);
            size += pairs;
            match &mut limits {
                Some(l) if runs.is_multiple_of(pairs) => l.push((runs / pairs) as u16),
                other => *other = None,
            }
        }
        offsets.push(size);
        size += usize::from(s);
        if let Some(l) = &mut limits {
            l.push((runs / usize::from(s)) as u16);
        }
        Self { setting, chosen, s, limits, offsets, counters: vec![0; size] }
    }

    pub(super) fn solve(
        &mut self,
        shifts: &[u16],
        most: u64,
        random: &mut Random,
        effort: &mut Effort<'_>,
    ) -> Option<Vec<u16>> {
        let limits = self.limits.clone()?;
        self.counters.fill(0);
        let (orbits, s) = (self.setting.orbits, usize::from(self.s));
        // What each element of the group makes of each symbol.
        let shift = self.setting.shifts(shifts, self.s);
        let images: Vec<Vec<usize>> = (0..self.s)
            .map(|b| shift.iter().map(|&x| usize::from(self.setting.add(self.s, b, x))).collect())
            .collect();
        let mut order: Vec<usize> = (0..orbits).collect();
        random.shuffle(&mut order);
        // The untried symbols of each orbit on the way, and the one in place.
        let mut open: Vec<Vec<u16>> = vec![vec![0]];
        let mut base = vec![0u16; orbits];
        let mut steps = 0;
        let cost = (self.setting.order * (1 + self.chosen.len())) as u64;
        let mut depth = 0;
        loop {
            let o = order[depth];
            match open[depth].pop() {
                None => {
                    open.pop();
                    if depth == 0 {
                        return None;
                    }
                    depth -= 1;
                    self.count(order[depth], &images[usize::from(base[order[depth]])], false);
                }
                Some(b) => {
                    steps += 1;
                    if steps > most || !effort.spend(cost) {
                        return None;
                    }
                    base[o] = b;
                    let symbols = &images[usize::from(b)];
                    // Where every counter is full there is no need to count; with a single run in
                    // the orbit nothing else can go wrong.
                    if !self.within(o, symbols, &limits, 1) {
                        continue;
                    }
                    self.count(o, symbols, true);
                    if symbols.len() > 1 && !self.within(o, symbols, &limits, 0) {
                        self.count(o, symbols, false);
                        continue;
                    }
                    depth += 1;
                    if depth == orbits {
                        return Some(base);
                    }
                    let mut symbols: Vec<u16> = (0..s as u16).collect();
                    random.shuffle(&mut symbols);
                    open.push(symbols);
                }
            }
        }
    }

    /// Puts orbit `o` with the symbols of its runs into the counters or takes it out.
    fn count(&mut self, o: usize, symbols: &[usize], into: bool) {
        let s = usize::from(self.s);
        for (g, &symbol) in symbols.iter().enumerate() {
            let run = o * self.setting.order + g;
            for (c, &offset) in self.chosen.iter().zip(&self.offsets) {
                let at = offset + usize::from(c.symbols[run]) * s + symbol;
                self.counters[at] = if into { self.counters[at] + 1 } else { self.counters[at] - 1 };
            }
            let at = self.offsets[self.chosen.len()] + symbol;
            self.counters[at] = if into { self.counters[at] + 1 } else { self.counters[at] - 1 };
        }
    }

    /// Whether the counters that orbit `o` touches are within their limits and leave `room`.
    fn within(&self, o: usize, symbols: &[usize], limits: &[u16], room: u16) -> bool {
        let s = usize::from(self.s);
        symbols.iter().enumerate().all(|(g, &symbol)| {
            let run = o * self.setting.order + g;
            let alone = self.chosen.len();
            self.counters[self.offsets[alone] + symbol] + room <= limits[alone]
                && self.chosen.iter().zip(&self.offsets).zip(limits).all(|((c, &offset), &limit)| {
                    self.counters[offset + usize::from(c.symbols[run]) * s + symbol] + room <= limit
                })
        })
    }
}
