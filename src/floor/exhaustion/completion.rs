use super::columns::{Columns, columns};
use super::sketch::Sketch;

/// What an array can become.
#[derive(Debug, PartialEq, Eq)]
pub(super) enum Completion {
    /// It can be completed: to this one.
    To(Sketch),
    /// It cannot.
    Never,
    /// The search was stopped.
    Stopped,
}

/// Whether an array of strength 2 without repeated runs can be extended by `more` columns of
/// `levels` levels each: by cliques among the columns that extend it by one.
///
/// # Parameters
/// `sketch`: of strength 2, every run once; `more`: at least 1; `spend`: asked for every node.
///
/// # Cost
/// Exponential at worst in the number of columns that extend the array.
///
/// # Reference
/// Branch and bound with colour classes: Tomita & Seki 2003, 'An efficient branch-and-bound
/// algorithm for finding a maximum clique'.
pub(super) fn completion(
    sketch: &Sketch,
    levels: u16,
    more: usize,
    spend: &mut dyn FnMut(u64) -> bool,
) -> Completion {
    let Columns::All(all) = columns(sketch, 2, levels, false, spend) else { return Completion::Stopped };
    if all.len() < more {
        return Completion::Never;
    }
    let s = usize::from(levels);
    let masks: Vec<Vec<u128>> = all.iter().map(|split| masks(split, s)).collect();
    let share = (sketch.runs() / (s * s)) as u32;
    let whole = sketch.runs().is_multiple_of(s * s);
    let meet =
        |a: &[u128], b: &[u128]| whole && a.iter().all(|x| b.iter().all(|y| (x & y).count_ones() == share));
    let words = all.len().div_ceil(64);
    let mut next = vec![vec![0u64; words]; all.len()];
    for i in 0..all.len() {
        if !spend(i as u64) {
            return Completion::Stopped;
        }
        for j in 0..i {
            if meet(&masks[i], &masks[j]) {
                next[i][j / 64] |= 1 << (j % 64);
                next[j][i / 64] |= 1 << (i % 64);
            }
        }
    }
    let mut search = Cliques { next: &next, wanted: more, chosen: Vec::new(), spend };
    match search.expand(core(&next, more)) {
        None => Completion::Stopped,
        Some(false) => Completion::Never,
        Some(true) => {
            // Every run occurs once, so its place names it; the columns are put on all at once.
            let rows = sketch.rows.iter().enumerate().map(|(r, row)| {
                let level = |&c: &usize| masks[c].iter().position(|m| m >> r & 1 == 1).unwrap_or(0) as u8;
                (row.iter().copied().chain(search.chosen.iter().map(level)).collect(), 1)
            });
            let mut longer = sketch.levels.clone();
            longer.extend(std::iter::repeat_n(levels, more));
            Completion::To(Sketch::from_rows(longer, rows))
        }
    }
}

/// For every level the set of its runs.
fn masks(split: &[u8], s: usize) -> Vec<u128> {
    let mut masks = vec![0; s];
    for (i, _) in split.iter().enumerate().filter(|&(_, &n)| n > 0) {
        masks[i % s] |= 1 << (i / s);
    }
    masks
}

/// The vertices that are left when those with fewer than `wanted` − 1 neighbours left are taken
/// away again and again.
fn core(next: &[Vec<u64>], wanted: usize) -> Vec<u64> {
    let mut alive = vec![0u64; next.first().map_or(0, Vec::len)];
    (0..next.len()).for_each(|v| alive[v / 64] |= 1 << (v % 64));
    loop {
        let weak: Vec<usize> = members(&alive).filter(|&v| shared(&next[v], &alive) + 1 < wanted).collect();
        if weak.is_empty() {
            return alive;
        }
        weak.iter().for_each(|&v| alive[v / 64] &= !(1 << (v % 64)));
    }
}

fn members(set: &[u64]) -> impl Iterator<Item = usize> + '_ {
    set.iter().enumerate().flat_map(|(i, &word)| {
        std::iter::successors(Some(word), |w| Some(w & w.wrapping_sub(1)))
            .take_while(|&w| w != 0)
            .map(move |w| i * 64 + w.trailing_zeros() as usize)
    })
}

fn first(set: &[u64]) -> Option<usize> {
    members(set).next()
}

fn shared(a: &[u64], b: &[u64]) -> usize {
    a.iter().zip(b).map(|(x, y)| (x & y).count_ones() as usize).sum()
}

struct Cliques<'a> {
    next: &'a [Vec<u64>],
    wanted: usize,
    chosen: Vec<usize>,
    spend: &'a mut dyn FnMut(u64) -> bool,
}

impl Cliques<'_> {
    /// Whether the chosen vertices and some of `open` make a clique of the wanted size; they are
    /// then in `chosen`.
    fn expand(&mut self, mut open: Vec<u64>) -> Option<bool> {
        let need = self.wanted - self.chosen.len();
        if need == 0 {
            return Some(true);
        }
        if !(self.spend)(open.len() as u64 + 1) {
            return None;
        }
        let coloured = self.colour(&open);
        for &(colours, v) in coloured.iter().rev() {
            if colours < need {
                return Some(false);
            }
            self.chosen.push(v);
            let fewer = open.iter().zip(&self.next[v]).map(|(a, b)| a & b).collect();
            if self.expand(fewer)? {
                return Some(true);
            }
            self.chosen.pop();
            open[v / 64] &= !(1 << (v % 64));
        }
        Some(false)
    }

    /// The vertices in the order of a greedy colouring, each with the number of colours so far.
    fn colour(&self, open: &[u64]) -> Vec<(usize, usize)> {
        let mut left = open.to_vec();
        let mut coloured = Vec::new();
        let mut colours = 0;
        while left.iter().any(|&w| w != 0) {
            colours += 1;
            let mut class = left.clone();
            while let Some(v) = first(&class) {
                class[v / 64] &= !(1 << (v % 64));
                class.iter_mut().zip(&self.next[v]).for_each(|(a, b)| *a &= !b);
                left[v / 64] &= !(1 << (v % 64));
                coloured.push((colours, v));
            }
        }
        coloured
    }
}
