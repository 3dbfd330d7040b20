//! Cliques of orbits: greedy start, then exchanges with a tabu list.

use super::random::Random;
use super::splits::{Orbit, joined};
use crate::floor::Effort;

/// Orbits of columns among which those that go together are looked for.
pub(super) struct Clique<'a> {
    pub(super) runs: u32,
    pub(super) pool: &'a [Orbit],
    /// How many columns of two and of three levels are wanted.
    pub(super) wanted: [usize; 2],
}

/// What is chosen, and how many of the chosen orbits each orbit of the pool does not go with.
struct State {
    chosen: Vec<usize>,
    clashes: Vec<u16>,
    held: Vec<u64>,
    columns: [usize; 2],
}

impl Clique<'_> {
    /// How many orbits are compared before one is chosen.
    const SAMPLES: usize = 12;
    /// Among how many others at most they are compared.
    const AMONG: usize = 400;

    fn kind(&self, v: usize) -> usize {
        usize::from(self.pool[v][0].levels) - 2
    }

    fn room(&self, columns: [usize; 2], v: usize) -> bool {
        columns[self.kind(v)] < self.wanted[self.kind(v)]
    }

    /// Columns that count towards what is wanted.
    fn score(&self, columns: [usize; 2]) -> usize {
        columns[0].min(self.wanted[0]) + columns[1].min(self.wanted[1])
    }

    /// The best clique met in `steps` moves, at once when it is complete.
    pub(super) fn search(&self, steps: u64, random: &mut Random, effort: &mut Effort<'_>) -> Vec<usize> {
        let goal = self.wanted[0] + self.wanted[1];
        let (mut best, mut most) = (Vec::new(), 0);
        let mut state = State {
            chosen: Vec::new(),
            clashes: vec![0; self.pool.len()],
            held: vec![0; self.pool.len()],
            columns: [0; 2],
        };
        let (mut since, mut high) = (0u64, 0);
        for step in 1..=steps {
            if !self.advance(&mut state, step, random) || since > 200 + 4 * state.chosen.len() as u64 {
                // Nothing moves any more: half of it goes.
                for _ in 0..state.chosen.len().div_ceil(2) {
                    let v = state.chosen[random.below(state.chosen.len())];
                    self.toggle(&mut state, v, false);
                    state.held[v] = step + 10;
                }
                (since, high) = (0, 0);
            }
            let score = self.score(state.columns);
            since = if score > high { 0 } else { since + 1 };
            high = high.max(score);
            if score > most {
                (best, most) = (state.chosen.clone(), score);
            }
            if most >= goal || self.pool.is_empty() || !effort.spend(4 * self.pool.len() as u64) {
                break;
            }
        }
        best
    }

    /// The greedy start alone: orbits until at least `columns` columns are chosen or none is left.
    pub(super) fn greedy(&self, columns: usize, random: &mut Random, effort: &mut Effort<'_>) -> Vec<usize> {
        let mut open: Vec<usize> = (0..self.pool.len()).collect();
        let (mut chosen, mut count) = (Vec::new(), 0);
        while count < columns && !open.is_empty() && effort.spend(2 * open.len() as u64) {
            let v = self.pick(&open, random);
            chosen.push(v);
            count += self.pool[v].len();
            open.retain(|&w| joined(&self.pool[v], &self.pool[w], self.runs));
        }
        chosen
    }

    /// The one of a few that goes with most others.
    fn pick(&self, open: &[usize], random: &mut Random) -> usize {
        let among: Vec<usize> = if open.len() <= Self::AMONG {
            open.to_vec()
        } else {
            (0..Self::AMONG).map(|_| open[random.below(open.len())]).collect()
        };
        let mut choice = (open[0], 0);
        for k in 0..Self::SAMPLES.min(open.len()) {
            let v = open[random.below(open.len())];
            let with = among.iter().filter(|&&w| joined(&self.pool[v], &self.pool[w], self.runs)).count();
            if k == 0 || with > choice.1 {
                choice = (v, with);
            }
        }
        choice.0
    }

    /// One move: an orbit that goes with all is added, or one that clashes with a single orbit
    /// takes its place. False when there is none.
    fn advance(&self, state: &mut State, step: u64, random: &mut Random) -> bool {
        let free = |v: usize, clashes: u16| state.clashes[v] == clashes && state.held[v] < step;
        let open: Vec<usize> =
            (0..self.pool.len()).filter(|&v| free(v, 0) && self.room(state.columns, v)).collect();
        if !open.is_empty() {
            let v = self.pick(&open, random);
            self.toggle(state, v, true);
            return true;
        }
        let near: Vec<usize> = (0..self.pool.len()).filter(|&v| free(v, 1)).collect();
        for _ in 0..near.len().min(20) {
            let v = near[random.below(near.len())];
            let Some(&out) = state.chosen.iter().find(|&&w| !joined(&self.pool[v], &self.pool[w], self.runs))
            else {
                continue;
            };
            let mut columns = state.columns;
            columns[self.kind(out)] -= self.pool[out].len();
            if out == v || !self.room(columns, v) {
                continue;
            }
            self.toggle(state, out, false);
            self.toggle(state, v, true);
            state.held[out] = step + 5 + random.below(10) as u64;
            return true;
        }
        false
    }

    fn toggle(&self, state: &mut State, v: usize, into: bool) {
        if into {
            state.chosen.push(v);
            state.columns[self.kind(v)] += self.pool[v].len();
        } else {
            state.chosen.retain(|&w| w != v);
            state.columns[self.kind(v)] -= self.pool[v].len();
        }
        for (clashes, w) in state.clashes.iter_mut().zip(self.pool) {
            if !joined(&self.pool[v], w, self.runs) {
                *clashes = if into { *clashes + 1 } else { *clashes - 1 };
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::hunt::splits::Split;

    /// The 35 even splits of 8 runs: the largest orthogonal sets have seven.
    #[test]
    fn the_columns_of_a_hadamard_matrix_are_found() {
        let split = |mask: u128| vec![Split { masks: [mask, 0], levels: 2 }];
        let pool: Vec<Orbit> =
            (0..256u128).filter(|m| m & 1 == 1 && m.count_ones() == 4).map(split).collect();
        assert_eq!(pool.len(), 35);
        let clique = |wanted| Clique { runs: 8, pool: &pool, wanted: [wanted, 0] };
        let found = clique(8).search(500, &mut Random::new(1), &mut Effort::unlimited());
        assert_eq!(found.len(), 7);
        for (i, &v) in found.iter().enumerate() {
            assert!(found[..i].iter().all(|&w| joined(&pool[v], &pool[w], 8)));
        }
        assert_eq!(clique(8).greedy(3, &mut Random::new(1), &mut Effort::unlimited()).len(), 3);
        let none = Clique { runs: 8, pool: &[], wanted: [1, 0] };
        assert!(none.search(10, &mut Random::new(1), &mut Effort::unlimited()).is_empty());
    }
}
