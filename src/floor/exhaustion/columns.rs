use super::sketch::Sketch;

/// What a list of columns is: all of them, or the search was stopped.
pub(super) enum Columns {
    /// All the columns, or the first one when only one was wanted.
    All(Vec<Box<[u8]>>),
    /// More than [`MOST_COLUMNS`], or no budget left.
    Stopped,
}

/// The most columns that are listed for one array.
pub(super) const MOST_COLUMNS: usize = 2_000_000;

/// All columns of `levels` levels that extend an array to one more column of the same strength.
///
/// # Parameters
/// * `sketch`: an array of the strength, or of full strength when it has fewer columns;
/// * `first_only`: stop at the first;
/// * `spend`: asked once for every choice.
///
/// # Result
/// `split[r * levels + l]` = how many of the runs `r` get the level `l`. Equal runs are not told
/// apart; of the namings of the levels the one is taken whose levels, as vectors over the runs,
/// do not increase lexicographically.
///
/// # Cost
/// A backtracking over the distinct runs; a level may not occur more often in a cell of t − 1
/// columns than its share.
pub(super) fn columns(
    sketch: &Sketch,
    strength: u32,
    levels: u16,
    first_only: bool,
    spend: &mut dyn FnMut(u64) -> bool,
) -> Columns {
    let s = usize::from(levels);
    let Some((cells, left)) = cells(sketch, strength, s) else { return Columns::All(Vec::new()) };
    let rows = sketch.rows.len();
    let tied = vec![true; (rows + 1) * s];
    let split = vec![0u8; rows * s];
    let mut search = Search {
        weights: &sketch.weights,
        s,
        cells,
        left,
        tied,
        split,
        found: Vec::new(),
        first_only,
        spend,
    };
    if search.run(0, 0, sketch.weights[0] as u8) { Columns::All(search.found) } else { Columns::Stopped }
}

/// For every run its cells (one for every set of t − 1 columns), and for every cell how often each
/// level must still occur; `None` when a share is not whole.
fn cells(sketch: &Sketch, strength: u32, s: usize) -> Option<(Vec<Vec<u32>>, Vec<u8>)> {
    let runs = sketch.runs();
    let of_columns = sketch.levels.len().min(strength as usize - 1);
    let mut cells = vec![Vec::new(); sketch.rows.len()];
    let mut left = Vec::new();
    let mut number = 0usize;
    for set in subsets(sketch.levels.len(), of_columns) {
        let size = set.iter().map(|&j| usize::from(sketch.levels[j])).product::<usize>();
        if !runs.is_multiple_of(size * s) {
            return None;
        }
        for (row, own) in sketch.rows.iter().zip(&mut cells) {
            let at = set.iter().fold(0, |at, &j| at * usize::from(sketch.levels[j]) + usize::from(row[j]));
            own.push((number + at) as u32);
        }
        number += size;
        left.resize(number * s, (runs / (size * s)) as u8);
    }
    Some((cells, left))
}

/// The subsets of `k` of `0..n`, ascending.
pub(super) fn subsets(n: usize, k: usize) -> Vec<Vec<usize>> {
    let mut all = vec![Vec::new()];
    for _ in 0..k {
        all = all
            .into_iter()
            .flat_map(|set: Vec<usize>| {
                let from = set.last().map_or(0, |&last| last + 1);
                (from..n).map(move |j| set.iter().copied().chain([j]).collect())
            })
            .collect();
    }
    all
}

struct Search<'a> {
    weights: &'a [u16],
    s: usize,
    cells: Vec<Vec<u32>>,
    left: Vec<u8>,
    /// `tied[r * s + l]`: before the run `r`, the levels l − 1 and l have occurred alike.
    tied: Vec<bool>,
    split: Vec<u8>,
    found: Vec<Box<[u8]>>,
    first_only: bool,
    spend: &'a mut dyn FnMut(u64) -> bool,
}

impl Search<'_> {
    /// Chooses how many of the runs `r` get the level `l`, `open` of them being without one; false
    /// when stopped.
    fn run(&mut self, r: usize, l: usize, open: u8) -> bool {
        let s = self.s;
        let own = self.cells[r].iter().map(|&c| self.left[c as usize * s + l]).min().unwrap_or(0);
        let mut most = own.min(open);
        let tied = l > 0 && self.tied[r * s + l];
        if tied {
            most = most.min(self.split[r * s + l - 1]);
        }
        let least = if l + 1 == s { open } else { 0 };
        for count in (least..=most).rev() {
            if !(self.spend)(1) {
                return false;
            }
            self.take(r, l, count, true);
            self.split[r * s + l] = count;
            self.tied[(r + 1) * s + l] = tied && count == self.split[r * s + l - 1];
            let goes_on = if l + 1 < s {
                self.run(r, l + 1, open - count)
            } else if r + 1 < self.weights.len() {
                self.run(r + 1, 0, self.weights[r + 1] as u8)
            } else {
                self.found.push(self.split.clone().into_boxed_slice());
                self.found.len() <= MOST_COLUMNS
            };
            self.take(r, l, count, false);
            if !goes_on {
                return false;
            }
            if self.first_only && !self.found.is_empty() {
                return true;
            }
        }
        true
    }

    fn take(&mut self, r: usize, l: usize, count: u8, away: bool) {
        for &c in &self.cells[r] {
            let left = &mut self.left[c as usize * self.s + l];
            *left = if away { *left - count } else { *left + count };
        }
    }
}
