use std::collections::HashMap;

use super::refine::Refiner;
use super::sketch::Sketch;

/// The canonical form of an array, and permutations of its distinct runs that generate a group of
/// automorphisms (not always all of them).
#[derive(Clone, Debug)]
pub(super) struct Canonical {
    /// The columns one after the other, most levels first, every run; equal for two arrays exactly
    /// when they are isomorphic.
    pub(super) form: Vec<u8>,
    /// `generator[r]` is where the distinct run `r` goes.
    pub(super) generators: Vec<Vec<u8>>,
}

/// The canonical form under permutations of the runs, of columns with equal levels, and of the
/// levels within each column; `None` when `spend` says no (it is asked once for every node of the
/// search, with its cost).
///
/// # Parameters
/// `sketch`: at most [`MAX_RUNS`](super::MAX_RUNS) runs.
///
/// # Guarantee
/// Equal for two arrays exactly when they are isomorphic.
///
/// # Cost
/// Exponential at worst; some hundred nodes of runs × factors steps for the arrays met here.
///
/// # Reference
/// Individualisation and refinement with pruning by automorphisms: McKay 1981, 'Practical graph
/// isomorphism'. Only runs are individualised: when they all differ in colour, writing the columns
/// with their levels in the order of first occurrence, and sorting them, leaves no choice.
pub(super) fn canonical(sketch: &Sketch, spend: &mut dyn FnMut(u64) -> bool) -> Option<Canonical> {
    let kinds: Vec<u64> = sketch.levels.iter().map(|&s| u64::from(s)).collect();
    canonical_of_kinds(sketch, &kinds, spend)
}

/// As [`canonical`], where only columns of one kind may change places; larger kinds stand first.
pub(super) fn canonical_of_kinds(
    sketch: &Sketch,
    kinds: &[u64],
    spend: &mut dyn FnMut(u64) -> bool,
) -> Option<Canonical> {
    let mut refiner = Refiner::new(sketch, kinds);
    let (colours, trace) = refiner.begin();
    let mut search = Search {
        sketch,
        kinds,
        refiner,
        path: Vec::new(),
        best: None,
        traces: Vec::new(),
        leaves: HashMap::new(),
        generators: Vec::new(),
        spend,
    };
    search.visit(colours, trace)?;
    let form = search.best?;
    Some(Canonical { form, generators: search.generators })
}

/// How many leaves are kept to find automorphisms.
const MOST_LEAVES: usize = 256;

struct Search<'a, 'b> {
    sketch: &'a Sketch,
    kinds: &'a [u64],
    refiner: Refiner<'a>,
    /// The runs individualised so far.
    path: Vec<u8>,
    /// The smallest form among the leaves with the smallest traces.
    best: Option<Vec<u8>>,
    /// The traces on the way to the best leaf, each with the number of classes, so that of two
    /// equal ones both are leaves or neither is.
    traces: Vec<(u64, usize)>,
    /// Forms seen, with the runs in order and the path.
    leaves: HashMap<Vec<u8>, (Vec<u8>, Vec<u8>)>,
    generators: Vec<Vec<u8>>,
    spend: &'b mut dyn FnMut(u64) -> bool,
}

impl Search<'_, '_> {
    /// Searches below a refined colouring. Returns the depth to which to go back: its own, or less
    /// after an automorphism has shown that the rest is a copy of what has been searched.
    fn visit(&mut self, colours: Vec<u8>, trace: u64) -> Option<usize> {
        let depth = self.path.len();
        let cost = self.sketch.rows.len() * self.kinds.len();
        if !(self.spend)(cost as u64) {
            return None;
        }
        let cells = Cells::of(&colours);
        let own = (trace, cells.number);
        match self.traces.get(depth) {
            Some(&least) if own > least => return Some(depth),
            Some(&least) if own == least => {}
            _ => {
                self.traces.truncate(depth);
                self.traces.push(own);
                self.best = None;
            }
        }
        let Some(cell) = cells.smallest else { return Some(self.leaf(&colours)) };
        let mut done: Vec<u8> = Vec::new();
        for &run in &cell {
            if self.is_copy(run, &done) {
                continue;
            }
            done.push(run);
            let mut finer = colours.clone();
            for &other in &cell {
                if other != run {
                    finer[usize::from(other)] += 1;
                }
            }
            let trace = self.refiner.refine(&mut finer);
            self.path.push(run);
            let back = self.visit(finer, trace)?;
            self.path.pop();
            if back < depth {
                return Some(back);
            }
        }
        Some(depth)
    }

    /// Whether an automorphism that fixes the path takes a run of `done` to `run`.
    fn is_copy(&self, run: u8, done: &[u8]) -> bool {
        if done.is_empty() {
            return false;
        }
        let fixing: Vec<&Vec<u8>> =
            self.generators.iter().filter(|g| self.path.iter().all(|&p| g[usize::from(p)] == p)).collect();
        let mut reached = vec![false; self.sketch.rows.len()];
        let mut open = vec![run];
        reached[usize::from(run)] = true;
        while let Some(at) = open.pop() {
            if done.contains(&at) {
                return true;
            }
            for g in &fixing {
                let to = g[usize::from(at)];
                if !std::mem::replace(&mut reached[usize::from(to)], true) {
                    open.push(to);
                }
            }
        }
        false
    }

    /// Compares a leaf with those before it; returns the depth to go back to.
    fn leaf(&mut self, colours: &[u8]) -> usize {
        let mut runs = vec![0u8; colours.len()];
        for (r, &c) in colours.iter().enumerate() {
            runs[usize::from(c)] = r as u8;
        }
        let form = self.form(&runs);
        if self.best.as_ref().is_none_or(|best| form < *best) {
            self.best = Some(form.clone());
        }
        let depth = self.path.len();
        let Some((earlier, path)) = self.leaves.get(&form) else {
            if self.leaves.len() < MOST_LEAVES {
                self.leaves.insert(form, (runs, self.path.clone()));
            }
            return depth;
        };
        let mut generator = vec![0u8; runs.len()];
        for (&from, &to) in earlier.iter().zip(&runs) {
            generator[usize::from(from)] = to;
        }
        let same_way =
            path.len() == depth && path.iter().zip(&self.path).all(|(&a, &b)| generator[usize::from(a)] == b);
        let shared = path.iter().zip(&self.path).take_while(|(a, b)| a == b).count();
        self.generators.push(generator);
        if same_way { shared } else { depth }
    }

    /// The array with its distinct runs in the given order, as a form.
    fn form(&self, runs: &[u8]) -> Vec<u8> {
        let mut columns: Vec<(u64, Vec<u8>)> = (0..self.kinds.len())
            .map(|j| {
                let mut names = [u8::MAX; 256];
                let mut next = 0;
                let mut column = Vec::with_capacity(self.sketch.runs());
                for &r in runs {
                    let name = &mut names[usize::from(self.sketch.rows[usize::from(r)][j])];
                    if *name == u8::MAX {
                        *name = next;
                        next += 1;
                    }
                    let weight = usize::from(self.sketch.weights[usize::from(r)]);
                    column.extend(std::iter::repeat_n(*name, weight));
                }
                (u64::MAX - self.kinds[j], column)
            })
            .collect();
        columns.sort();
        columns.into_iter().flat_map(|(_, column)| column).collect()
    }
}

/// The classes of a colouring.
struct Cells {
    /// How many there are.
    number: usize,
    /// The runs of the first smallest one of two or more.
    smallest: Option<Vec<u8>>,
}

impl Cells {
    fn of(colours: &[u8]) -> Self {
        let mut sizes = vec![0usize; colours.len()];
        for &c in colours {
            sizes[usize::from(c)] += 1;
        }
        let number = sizes.iter().filter(|&&n| n > 0).count();
        let least = sizes.iter().enumerate().filter(|&(_, &n)| n > 1).map(|(c, &n)| (n, c)).min();
        let smallest = least.map(|(_, colour)| {
            let of_colour = |&r: &u8| usize::from(colours[usize::from(r)]) == colour;
            (0..colours.len()).map(|r| r as u8).filter(of_colour).collect()
        });
        Self { number, smallest }
    }
}
