//! Factor by factor onto columns, with all that cannot be better left out.

use rayon::prelude::*;

use super::state::{Column, State, dot};
use crate::array::Array;
use crate::hunt::Effort;
use crate::plan::effects::{Scale, contrasts};

/// What is better than this by less counts as equal.
const EQUAL: f64 = 1e-9;

/// One request, prepared.
pub(super) struct Search<'a> {
    pub(super) parent: &'a Array,
    pub(super) levels: &'a [u16],
    pub(super) wanted: &'a [[usize; 2]],
    pub(super) parameters: usize,
    /// The factors in the order in which they are placed.
    order: Vec<usize>,
    /// A factor placed before it that could change places with it: its column is lower.
    twin: Vec<Option<usize>>,
    /// The contrasts of each column of the parent.
    blocks: Vec<Vec<Column>>,
}

/// The best of some assignments, and whether all of them were considered.
pub(super) struct Found {
    pub(super) best: Option<(f64, Vec<usize>)>,
    pub(super) exhausted: bool,
    pub(super) halted: bool,
}

/// What one branch of the search holds.
struct Branch<'s, 'e> {
    effort: Effort<'e>,
    state: State,
    /// The column of each factor placed.
    columns: Vec<Option<usize>>,
    interactions: Vec<Vec<Column>>,
    orthogonal: bool,
    best: f64,
    found: Option<Vec<usize>>,
    search: &'s Search<'s>,
}

impl<'a> Search<'a> {
    pub(super) fn new(
        parent: &'a Array,
        levels: &'a [u16],
        wanted: &'a [[usize; 2]],
        parameters: usize,
    ) -> Self {
        let neighbours = |f: usize| wanted.iter().filter(move |w| w.contains(&f)).count();
        let mut order: Vec<usize> = Vec::new();
        // Most interactions first, then those with most partners placed.
        while order.len() < levels.len() {
            let placed = |f: usize| {
                wanted.iter().filter(|w| w.contains(&f) && w.iter().any(|g| order.contains(g))).count()
            };
            let next = (0..levels.len())
                .filter(|f| !order.contains(f))
                .max_by_key(|&f| (placed(f), neighbours(f), levels[f], std::cmp::Reverse(f)));
            order.extend(next);
        }
        let twins = |f: usize, g: usize| {
            let swapped = |x: usize| {
                if x == f {
                    g
                } else if x == g {
                    f
                } else {
                    x
                }
            };
            let kept = |w: &[usize; 2]| {
                let (a, b) = (swapped(w[0]), swapped(w[1]));
                wanted.contains(&[a, b]) || wanted.contains(&[b, a])
            };
            levels[f] == levels[g] && wanted.iter().all(kept)
        };
        let mut twin = vec![None; levels.len()];
        for (at, &f) in order.iter().enumerate() {
            twin[f] = order[..at].iter().rev().copied().find(|&g| twins(f, g));
        }
        let block = |column: usize| {
            let (s, symbols) = (parent.levels()[column], parent.column(column));
            let scaled = contrasts(s, &Scale::Words).scaled;
            let one = |(d, contrast): (usize, &Vec<f64>)| Column {
                values: symbols.iter().map(|&x| contrast[usize::from(x)]).collect(),
                marks: symbols.iter().map(|&x| usize::from(x) == d + 1).collect(),
            };
            scaled.iter().enumerate().map(one).collect()
        };
        // Columns with levels that nobody asks for stay empty.
        let used = |&c: &u16| levels.contains(&c);
        let blocks = (0..parent.factors())
            .map(|c| if used(&parent.levels()[c]) { block(c) } else { Vec::new() })
            .collect();
        Self { parent, levels, wanted, parameters, order, twin, blocks }
    }

    /// Whether the wanted interactions are orthogonal to everything else with these columns.
    pub(super) fn is_orthogonal(&self, columns: &[usize]) -> bool {
        let product = |w: &[usize; 2]| -> Vec<Column> {
            let (first, second) = (&self.blocks[columns[w[0]]], &self.blocks[columns[w[1]]]);
            first.iter().flat_map(|a| second.iter().map(|b| a.times(b))).collect()
        };
        let all: Vec<Vec<Column>> = self.wanted.iter().map(product).collect();
        let apart = |(i, block): (usize, &Vec<Column>)| {
            without_mean(block)
                && columns.iter().all(|&c| clear(&self.blocks[c], block))
                && all[..i].iter().all(|other| clear(other, block))
        };
        all.iter().enumerate().all(apart)
    }

    /// The best assignment, among the orthogonal ones or among all. The first branch is searched alone,
    /// then the others beside one another, each against what the first found.
    pub(super) fn best(&self, orthogonal: bool, steps: u64, halt: &(dyn Fn() -> bool + Sync)) -> Found {
        let first = self.order[0];
        let fits = |c: &usize| self.parent.levels()[*c] == self.levels[first];
        let starts: Vec<usize> = (0..self.parent.factors()).filter(fits).collect();
        let share = (steps / starts.len().max(1) as u64).max(1);
        let run = |&start: &usize, best: f64| {
            let mut branch = Branch {
                effort: Effort::new(share, halt),
                state: State::new(self.parameters),
                columns: vec![None; self.levels.len()],
                interactions: Vec::new(),
                orthogonal,
                best,
                found: None,
                search: self,
            };
            let one = Column { values: vec![1.0; self.parent.runs()], marks: vec![true; self.parent.runs()] };
            branch.state.push(&one);
            branch.try_column(0, start);
            branch
        };
        let mut total = Found { best: None, exhausted: true, halted: false };
        let Some((alone, others)) = starts.split_first() else { return total };
        let mut take = |branch: Branch<'_, '_>| {
            total.exhausted &= branch.effort.goes_on();
            total.halted |= branch.effort.halted();
            if let Some(columns) = branch.found
                && total.best.as_ref().is_none_or(|(known, _)| branch.best > known + EQUAL)
            {
                total.best = Some((branch.best, columns));
            }
        };
        let branch = run(alone, f64::NEG_INFINITY);
        let known = branch.best;
        take(branch);
        if known < -EQUAL {
            let all: Vec<Branch<'_, '_>> = others.par_iter().map(|start| run(start, known)).collect();
            all.into_iter().for_each(take);
        }
        if total.best.as_ref().is_some_and(|(value, _)| *value >= -EQUAL) {
            total.exhausted = true;
        }
        total
    }
}

impl Branch<'_, '_> {
    fn descend(&mut self, depth: usize) {
        let search = self.search;
        let Some(&factor) = search.order.get(depth) else {
            self.best = self.state.logarithm();
            self.found = self.columns.iter().copied().collect();
            return;
        };
        let from = search.twin[factor].and_then(|t| self.columns[t]).map_or(0, |c| c + 1);
        for column in from..search.parent.factors() {
            let fits = search.parent.levels()[column] == search.levels[factor];
            if fits && !self.columns.contains(&Some(column)) {
                self.try_column(depth, column);
            }
            // Nothing is above 1: the contrasts of a factor, or their products, have mean square 1 on
            // average in every run, so each block has a determinant of at most 1.
            if self.best >= -EQUAL || !self.effort.goes_on() {
                return;
            }
        }
    }

    fn try_column(&mut self, depth: usize, column: usize) {
        let factor = self.search.order[depth];
        if !self.effort.spend(1) {
            return;
        }
        let (columns, interactions) = (self.state.len(), self.interactions.len());
        self.columns[factor] = Some(column);
        if self.extend(factor, column) && self.state.logarithm() > self.best + EQUAL {
            self.descend(depth + 1);
        }
        self.columns[factor] = None;
        self.state.truncate(columns);
        self.interactions.truncate(interactions);
    }

    /// Adds the main effect and the wanted interactions with factors placed before; false when they
    /// cannot be estimated, or are not orthogonal although they should be.
    fn extend(&mut self, factor: usize, column: usize) -> bool {
        let search = self.search;
        let own = &search.blocks[column];
        if self.orthogonal && !self.interactions.iter().all(|other| clear(own, other)) {
            return false;
        }
        if !own.iter().all(|c| self.state.push(c)) {
            return false;
        }
        for w in search.wanted.iter().filter(|w| w.contains(&factor)) {
            let partner = if w[0] == factor { w[1] } else { w[0] };
            let Some(other) = self.columns[partner] else { continue };
            let block: Vec<Column> =
                own.iter().flat_map(|a| search.blocks[other].iter().map(|b| a.times(b))).collect();
            if (self.orthogonal && !self.is_clear(&block)) || !block.iter().all(|c| self.state.push(c)) {
                return false;
            }
            self.interactions.push(block);
        }
        true
    }

    fn is_clear(&self, block: &[Column]) -> bool {
        let mut placed = self.columns.iter().flatten();
        without_mean(block)
            && placed.all(|&c| clear(&self.search.blocks[c], block))
            && self.interactions.iter().all(|other| clear(other, block))
    }
}

fn without_mean(block: &[Column]) -> bool {
    block.iter().map(|c| c.values.iter().sum::<f64>().powi(2)).sum::<f64>() < 0.5
}

/// Whether two blocks are orthogonal. The sum of squared products is a whole number, the sum over pairs
/// of runs of products of (s if they agree, else 0) − 1; so floats decide exactly.
pub(super) fn clear(a: &[Column], b: &[Column]) -> bool {
    let squares = |x: &Column| b.iter().map(|y| dot(&x.values, &y.values).powi(2)).sum::<f64>();
    a.iter().map(squares).sum::<f64>() < 0.5
}
