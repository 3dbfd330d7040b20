//! The largest set of further columns.

use super::super::Effort;
use super::super::exact::{Action, Column, Kind, Meter, Search, Store, joint};
use super::best::Best;
use super::candidates::{Candidates, Joining, One};
use super::{Extension, Standing};
use crate::floor::floor;
use crate::mix::Mix;

/// What was added, in the order of the request.
pub(super) struct Grown {
    pub(super) columns: Vec<(u16, Vec<u16>)>,
    /// Whether it is proved that nothing can be added.
    pub(super) none: bool,
    pub(super) standing: Standing,
}

pub(super) fn grow(request: &Extension, effort: &mut Effort) -> Grown {
    let runs = request.array.runs();
    let action = Action::new(runs as u32, &[]).expect("the number of runs was checked");
    let mut growth = Growth::new(request, &action);
    let mut meter = Meter::new(effort, u64::MAX);
    let proved = growth.run(&mut meter);
    growth.result(proved)
}

/// What is known when the search ends.
enum Proved {
    /// No better set exists.
    Maximum,
    /// No further column fits.
    Maximal,
    Nothing,
}

struct Growth<'a> {
    request: &'a Extension,
    action: &'a Action,
    /// The kinds of columns; `None` when the levels do not divide the runs.
    kinds: Vec<Option<Kind>>,
    /// The given columns and those that were added.
    chosen: Vec<Column>,
    /// Which kind each added column is of.
    added: Vec<usize>,
    /// Kinds of which no more columns are looked for.
    closed: Vec<bool>,
    /// Kinds of which not even one fits beside the given columns.
    never: Vec<bool>,
}

impl<'a> Growth<'a> {
    fn new(request: &'a Extension, action: &'a Action) -> Self {
        let column = |(&s, symbols): (&u16, &[u16])| {
            let kind = action.kinds(s).remove(0);
            action.column(&kind, symbols.iter().map(|&x| x as u8).collect())
        };
        let chosen = request.array.levels().iter().zip(request.array.columns()).map(column).collect();
        let kinds: Vec<Option<Kind>> =
            request.wanted.iter().map(|w| action.kinds(w.levels).into_iter().next()).collect();
        let never: Vec<bool> = kinds.iter().map(Option::is_none).collect();
        Self { request, action, kinds, chosen, added: Vec::new(), closed: never.clone(), never }
    }

    fn strength(&self) -> usize {
        self.request.strength as usize
    }

    fn count(&self, j: usize) -> usize {
        self.added.iter().filter(|&&k| k == j).count()
    }

    fn enough(&self, j: usize, count: usize) -> bool {
        self.request.wanted[j].most.is_some_and(|most| count >= most)
    }

    /// Whether the floors let these many columns of each kind join the given ones.
    fn allowed(&self, counts: &[usize]) -> bool {
        let mut levels = self.request.array.levels().to_vec();
        for (wanted, &count) in self.request.wanted.iter().zip(counts) {
            levels.extend(std::iter::repeat_n(wanted.levels, count));
        }
        let strength = self.strength().min(levels.len()) as u32;
        let Ok(mix) = Mix::new(levels) else { return true };
        floor(&mix, strength).is_ok_and(|proof| proof.runs <= self.request.array.runs() as u64)
    }

    fn counts(&self) -> Vec<usize> {
        (0..self.kinds.len()).map(|j| self.count(j)).collect()
    }

    /// The candidates of a kind that is open, which may close it; `None` when the effort is used
    /// up, `Some(None)` when they are too many.
    #[expect(clippy::option_option, reason = "two different reasons to have no list")]
    fn list(&mut self, j: usize, meter: &mut Meter) -> Option<Option<Store>> {
        let kind = self.kinds[j].clone()?;
        let mut store = Store::new(self.action, kind);
        let mut one_more = self.counts();
        one_more[j] += 1;
        let joining = self.joining(j).filter(|_| self.allowed(&one_more));
        let all = joining.map(|joining| joining.all(self.request.most_candidates, meter));
        match all {
            None => {}
            Some(Candidates::All(columns)) => columns.iter().for_each(|c| store.push(self.action, c)),
            Some(Candidates::Many) => return Some(None),
            Some(Candidates::UsedUp) => return None,
        }
        self.closed[j] |= store.len() == 0;
        self.never[j] |= self.closed[j] && self.added.is_empty();
        Some(Some(store))
    }

    fn joining(&self, j: usize) -> Option<Joining> {
        let given: Vec<Vec<u128>> = (0..self.chosen.len())
            .flat_map(|i| joint(self.strength(), &self.chosen[..i], &self.chosen[i]))
            .collect();
        Joining::new(self.request.array.runs(), usize::from(self.request.wanted[j].levels), &given)
    }

    fn run(&mut self, meter: &mut Meter) -> Proved {
        let mut listed_all = true;
        loop {
            let mut stores = Vec::new();
            for j in 0..self.kinds.len() {
                self.closed[j] |= self.enough(j, self.count(j));
                if self.closed[j] {
                    stores.push(None);
                    continue;
                }
                let Some(store) = self.list(j, meter) else { return Proved::Nothing };
                stores.push(store);
            }
            let Some(first) = self.closed.iter().position(|&c| !c) else {
                return if listed_all { Proved::Maximum } else { Proved::Maximal };
            };
            if stores.iter().zip(&self.closed).all(|(s, closed)| *closed || s.is_some()) {
                let proved = self.best(stores, meter);
                return if proved && listed_all { Proved::Maximum } else { Proved::Maximal };
            }
            listed_all = false;
            if let Some(store) = stores.swap_remove(first) {
                let mut alone: Vec<Option<Store>> = self.kinds.iter().map(|_| None).collect();
                alone[first] = Some(store);
                self.best(alone, meter);
                self.closed[first] = true;
                continue;
            }
            match self.joining(first).map(|joining| joining.one(meter)) {
                Some(One::Column(base)) => self.add(first, &base),
                Some(One::None) | None => self.closed[first] = true,
                Some(One::UsedUp) => return Proved::Nothing,
            }
        }
    }

    fn add(&mut self, j: usize, base: &[u8]) {
        let kind = self.kinds[j].as_ref().expect("only kinds that divide the runs are listed");
        self.chosen.push(self.action.column(kind, base.to_vec()));
        self.added.push(j);
    }

    /// Adds the best set out of the lists; whether it is proved to be the best.
    fn best(&mut self, stores: Vec<Option<Store>>, meter: &mut Meter) -> bool {
        let before = self.counts();
        let (numbers, stores): (Vec<usize>, Vec<Store>) =
            stores.into_iter().enumerate().filter_map(|(j, s)| Some((j, s?))).unzip();
        let most: Vec<Option<usize>> =
            numbers.iter().map(|&j| self.request.wanted[j].most.map(|m| m - before[j])).collect();
        let allowed = |counts: &[usize]| {
            let mut all = before.clone();
            numbers.iter().zip(counts).for_each(|(&j, count)| all[j] += count);
            self.allowed(&all)
        };
        let search = Search { action: self.action, strength: self.strength(), stores: &stores };
        let best = Best { search, given: &self.chosen, most: &most, allowed: &allowed };
        let (columns, proved) = best.run(meter);
        for (j, column) in columns {
            self.chosen.push(column);
            self.added.push(numbers[j]);
        }
        proved
    }

    fn result(mut self, proved: Proved) -> Grown {
        let given = self.request.array.factors();
        let mut columns: Vec<(usize, Column)> =
            self.added.iter().copied().zip(self.chosen.drain(given..)).collect();
        columns.sort_by_key(|(j, _)| *j);
        let complete = (0..self.kinds.len()).all(|j| self.request.wanted[j].most == Some(self.count(j)));
        let full = (0..self.kinds.len()).all(|j| self.never[j] || self.enough(j, self.count(j)));
        let standing = match proved {
            _ if complete => Standing::Complete,
            _ if full => Standing::Maximum,
            Proved::Maximum => Standing::Maximum,
            Proved::Maximal => Standing::Maximal,
            Proved::Nothing => Standing::Met,
        };
        let symbols = |c: &Column| c.base.iter().map(|&b| u16::from(b)).collect();
        let none = columns.is_empty() && !matches!(proved, Proved::Nothing);
        Grown {
            columns: columns.iter().map(|(_, c)| (c.levels as u16, symbols(c))).collect(),
            none,
            standing,
        }
    }
}
