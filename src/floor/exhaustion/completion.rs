use std::collections::BTreeMap;

use super::columns::{Columns, columns, subsets};
use super::sketch::Sketch;

/// What an array can become.
#[derive(Debug, PartialEq, Eq)]
pub(super) enum Completion {
    /// It can be completed: to this one.
    To(Sketch),
    /// It cannot.
    Never,
    /// Cliques do not decide it.
    Open,
    /// The search was stopped.
    Stopped,
}

/// Whether an array can be extended by `more` columns of `levels` levels each: by cliques among
/// the columns that extend it by one, two of them joined when they may stand together. When runs
/// repeat, a column is only known up to the order of equal runs, and from strength 3 on three new
/// columns may not fit although any two do; then a clique says nothing, but no clique still means
/// that there is no completion.
///
/// # Parameters
/// `sketch`: of the strength, which is 2 or more; `more`: at least 1; `spend`: asked for every
/// row of comparisons and every node, with its cost.
///
/// # Cost
/// Exponential at worst in the number of columns that extend the array.
///
/// # Reference
/// Branch and bound with colour classes: Tomita & Seki 2003, 'An efficient branch-and-bound
/// algorithm for finding a maximum clique'.
pub(super) fn completion(
    sketch: &Sketch,
    strength: u32,
    levels: u16,
    more: usize,
    spend: &mut dyn FnMut(u64) -> bool,
) -> Completion {
    let s = usize::from(levels);
    let Columns::All(all) = columns(sketch, strength, levels, false, spend) else {
        return Completion::Stopped;
    };
    if all.is_empty() {
        return Completion::Never;
    }
    let Some(meeting) = Meeting::new(sketch, strength, s) else { return Completion::Never };
    let candidates: Vec<Candidate<'_>> = all.iter().map(|split| meeting.candidate(split)).collect();
    if candidates.iter().any(|one| meeting.allows(one, one)) {
        // One vertex would stand for several columns.
        return Completion::Open;
    }
    let mut next = vec![vec![0u64; all.len().div_ceil(64)]; all.len()];
    for i in 0..all.len() {
        if !spend(i as u64) {
            return Completion::Stopped;
        }
        for j in (0..i).filter(|&j| meeting.allows(&candidates[i], &candidates[j])) {
            next[i][j / 64] |= 1 << (j % 64);
            next[j][i / 64] |= 1 << (i % 64);
        }
    }
    let mut search = Cliques { next: &next, wanted: more, chosen: Vec::new(), spend };
    match search.expand(core(&next, more)) {
        None => Completion::Stopped,
        Some(false) => Completion::Never,
        Some(true) if sketch.weights.iter().any(|&w| w > 1) => Completion::Open,
        Some(true) => {
            let rows = sketch.rows.iter().enumerate().map(|(r, row)| {
                let level = |&c: &usize| (0..s).find(|l| all[c][r * s + l] == 1).unwrap_or(0) as u8;
                (row.iter().copied().chain(search.chosen.iter().map(level)).collect(), 1)
            });
            let mut longer = sketch.levels.clone();
            longer.extend(std::iter::repeat_n(levels, more));
            let whole = Sketch::from_rows(longer, rows);
            if whole.has_strength(strength) { Completion::To(whole) } else { Completion::Open }
        }
    }
}

/// A new column, and for every level the set of the runs that occur once and have it.
struct Candidate<'a> {
    split: &'a [u8],
    masks: Vec<u128>,
}

/// How two new columns of s levels must meet: in every cell of t − 2 old columns each pair of
/// levels has its share of the runs.
struct Meeting<'a> {
    weights: &'a [u16],
    s: usize,
    cells: Vec<Cell>,
}

#[derive(Default)]
struct Cell {
    /// The runs that occur once.
    single: u128,
    /// The others.
    repeated: Vec<usize>,
    /// How many runs of the cell each pair of levels has.
    share: u32,
}

impl<'a> Meeting<'a> {
    /// `None` when a share is not whole: no two new columns can stand together.
    fn new(sketch: &'a Sketch, strength: u32, s: usize) -> Option<Self> {
        let mut cells = Vec::new();
        for set in subsets(sketch.levels.len(), strength as usize - 2) {
            let mut by_levels: BTreeMap<Vec<u8>, (Cell, usize)> = BTreeMap::new();
            for (r, row) in sketch.rows.iter().enumerate() {
                let (cell, size) = by_levels.entry(set.iter().map(|&j| row[j]).collect()).or_default();
                *size += usize::from(sketch.weights[r]);
                if sketch.weights[r] == 1 { cell.single |= 1 << r } else { cell.repeated.push(r) }
            }
            for (mut cell, size) in by_levels.into_values() {
                if !size.is_multiple_of(s * s) {
                    return None;
                }
                cell.share = (size / (s * s)) as u32;
                cells.push(cell);
            }
        }
        Some(Self { weights: &sketch.weights, s, cells })
    }

    fn candidate<'b>(&self, split: &'b [u8]) -> Candidate<'b> {
        let mut masks = vec![0; self.s];
        for (i, &n) in split.iter().enumerate() {
            if n == 1 && self.weights[i / self.s] == 1 {
                masks[i % self.s] |= 1 << (i / self.s);
            }
        }
        Candidate { split, masks }
    }

    /// Whether two columns may stand together: of w equal runs, x with the one level and y with
    /// the other, from x + y − w to the smaller of x and y have both.
    fn allows(&self, a: &Candidate<'_>, b: &Candidate<'_>) -> bool {
        let s = self.s;
        self.cells.iter().all(|cell| {
            (0..s * s).all(|pair| {
                let (i, j) = (pair / s, pair % s);
                let sure = (a.masks[i] & b.masks[j] & cell.single).count_ones();
                let (mut least, mut most) = (sure, sure);
                for &r in &cell.repeated {
                    let (x, y) = (u32::from(a.split[r * s + i]), u32::from(b.split[r * s + j]));
                    least += (x + y).saturating_sub(u32::from(self.weights[r]));
                    most += x.min(y);
                }
                (least..=most).contains(&cell.share)
            })
        })
    }
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
