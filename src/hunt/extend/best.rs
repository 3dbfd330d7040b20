//! The best set out of listed columns.

use super::super::exact::{Answer, Column, Meter, Search, fits, joint};

/// The budget of the attempt to get all that is wanted at once.
const AT_ONCE: u64 = 1 << 28;

/// Lists of candidates beside given columns, and how many of each are wanted.
pub(super) struct Best<'a> {
    pub(super) search: Search<'a>,
    pub(super) given: &'a [Column],
    /// How many of each list at the most.
    pub(super) most: &'a [Option<usize>],
    /// Whether the floors let so many of each join.
    pub(super) allowed: &'a dyn Fn(&[usize]) -> bool,
}

/// Columns that were chosen, each with the number of its list.
pub(super) type Chosen = Vec<(usize, Column)>;

impl Best<'_> {
    /// As many as possible of the first list, with those as many as possible of the second, and
    /// so on; and whether that is proved. In any case no column of the lists can be added, unless
    /// enough of its list are there.
    pub(super) fn run(&self, meter: &mut Meter) -> (Chosen, bool) {
        let lists = self.most.len();
        let wanted: Option<Vec<usize>> = self.most.iter().copied().collect();
        if let Some(all) = wanted.filter(|all| (self.allowed)(all))
            && let (Answer::Found, columns) = self.decide(&all, &mut meter.part(AT_ONCE))
        {
            return (columns, true);
        }
        let mut best: Chosen = Vec::new();
        let mut proved = true;
        for j in 0..lists {
            loop {
                while self.greedy(j, &mut best) {}
                let mut counts = self.counts(&best);
                counts[j] += 1;
                if self.most[j].is_some_and(|most| counts[j] > most) || !(self.allowed)(&counts) {
                    break;
                }
                match self.decide(&counts, meter) {
                    (Answer::Found, columns) => best = columns,
                    (Answer::None, _) => break,
                    (Answer::UsedUp, _) => {
                        proved = false;
                        break;
                    }
                }
            }
        }
        (best, proved)
    }

    fn counts(&self, chosen: &Chosen) -> Vec<usize> {
        (0..self.most.len()).map(|j| chosen.iter().filter(|(k, _)| *k == j).count()).collect()
    }

    /// Adds the first column of list j that fits; false when there is none or enough are there.
    fn greedy(&self, j: usize, best: &mut Chosen) -> bool {
        if self.most[j].is_some_and(|most| self.counts(best)[j] >= most) {
            return false;
        }
        let mut all = self.given.to_vec();
        let mut parts = Vec::new();
        for (_, column) in best.iter() {
            parts.extend(joint(self.search.strength, &all, column));
            all.push(column.clone());
        }
        let (store, runs) = (&self.search.stores[j], self.search.action.runs());
        let fitting = |&i: &u32| parts.iter().all(|p| fits(p, store.masks(i), runs));
        let Some(i) = (0..store.len() as u32).find(fitting) else { return false };
        best.push((j, store.column(self.search.action, i)));
        true
    }

    fn decide(&self, counts: &[usize], meter: &mut Meter) -> (Answer, Chosen) {
        let lists: Vec<Vec<u32>> = self.search.stores.iter().map(|s| (0..s.len() as u32).collect()).collect();
        let mut chosen = self.given.to_vec();
        let answer = self.search.node(&mut chosen, &lists, &mut counts.to_vec(), meter);
        let numbers = counts.iter().enumerate().flat_map(|(j, &c)| std::iter::repeat_n(j, c));
        (answer, numbers.zip(chosen.drain(self.given.len()..)).collect())
    }
}
