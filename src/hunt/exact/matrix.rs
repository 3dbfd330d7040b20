//! Cliques with a wanted number of vertices of each kind, on bit sets.

use super::action::{Column, fits};
use super::classes::Classes;
use super::meter::Meter;
use super::search::{Answer, Search};

/// Which candidates are orthogonal. The vertices of a kind fill whole words.
pub(super) struct Matrix<'a> {
    search: &'a Search<'a>,
    words: usize,
    /// The words of each kind.
    spans: Vec<std::ops::Range<usize>>,
    /// The candidate behind each vertex.
    ids: Vec<u32>,
    rows: Vec<u64>,
    all: Vec<u64>,
}

impl<'a> Matrix<'a> {
    pub(super) fn new(search: &'a Search<'a>, lists: &[Vec<u32>], missing: &[usize]) -> Self {
        let (mut spans, mut ids, mut kinds) = (Vec::new(), Vec::new(), Vec::new());
        for (k, list) in lists.iter().enumerate() {
            let from = ids.len() / 64;
            if missing[k] > 0 {
                ids.extend_from_slice(list);
                ids.resize(ids.len().next_multiple_of(64), u32::MAX);
            }
            kinds.resize(ids.len(), k);
            spans.push(from..ids.len() / 64);
        }
        let words = ids.len() / 64;
        let mut matrix = Self { search, words, spans, ids, rows: Vec::new(), all: vec![0; words] };
        matrix.rows = vec![0; words * matrix.ids.len()];
        for v in 0..matrix.ids.len() {
            if matrix.ids[v] != u32::MAX {
                set(&mut matrix.all, v);
                matrix.connect(v, &kinds);
            }
        }
        matrix
    }

    fn connect(&mut self, v: usize, kinds: &[usize]) {
        let (stores, runs) = (self.search.stores, self.search.action.runs);
        let masks = stores[kinds[v]].masks(self.ids[v]);
        for w in 0..v {
            if self.ids[w] != u32::MAX && fits(masks, stores[kinds[w]].masks(self.ids[w]), runs) {
                let (a, b) = (v * self.words, w * self.words);
                set(&mut self.rows[a..a + self.words], w);
                set(&mut self.rows[b..b + self.words], v);
            }
        }
    }

    /// Decides whether the wanted clique is there; the columns are added to the chosen ones.
    pub(super) fn decide(
        &self,
        chosen: &mut Vec<Column>,
        missing: &mut [usize],
        meter: &mut Meter,
    ) -> Answer {
        if !meter.spend((self.ids.len() as u64).pow(2) / 8) {
            return Answer::UsedUp;
        }
        let mut open = self.all.clone();
        self.node(&mut open, chosen, missing, meter)
    }

    fn row(&self, v: usize) -> &[u64] {
        &self.rows[v * self.words..][..self.words]
    }

    /// `open`: the vertices joined to all chosen ones; it is used up.
    fn node(
        &self,
        open: &mut [u64],
        chosen: &mut Vec<Column>,
        missing: &mut [usize],
        meter: &mut Meter,
    ) -> Answer {
        let Some(k) = missing.iter().position(|&m| m > 0) else { return Answer::Found };
        if !meter.spend(1 + self.words as u64) {
            return Answer::UsedUp;
        }
        if !self.enough(open, missing) {
            return Answer::None;
        }
        let classes = Classes::new(self.search.action, chosen);
        if classes.any() {
            return self.by_orbits(k, &classes, open, chosen, missing, meter);
        }
        for v in self.by_colours(k, missing[k], open, meter) {
            match self.branch(k, v, open, chosen, missing, meter) {
                Answer::None => clear(open, v),
                answer => return answer,
            }
        }
        Answer::None
    }

    fn by_orbits(
        &self,
        k: usize,
        classes: &Classes,
        open: &mut [u64],
        chosen: &mut Vec<Column>,
        missing: &mut [usize],
        meter: &mut Meter,
    ) -> Answer {
        let vertices: Vec<usize> = self.members(k, open).collect();
        let list: Vec<u32> = vertices.iter().map(|&v| self.ids[v]).collect();
        if !meter.spend(16 * list.len() as u64) {
            return Answer::UsedUp;
        }
        for orbit in self.search.orbits(classes, k, &list) {
            if !self.enough(open, missing) {
                return Answer::None;
            }
            let at = |i: &u32| vertices[list.binary_search(i).expect("the lists ascend")];
            match self.branch(k, at(&orbit[0]), open, chosen, missing, meter) {
                Answer::None => orbit.iter().for_each(|i| clear(open, at(i))),
                answer => return answer,
            }
        }
        Answer::None
    }

    fn branch(
        &self,
        k: usize,
        v: usize,
        open: &[u64],
        chosen: &mut Vec<Column>,
        missing: &mut [usize],
        meter: &mut Meter,
    ) -> Answer {
        let mut child: Vec<u64> = open.iter().zip(self.row(v)).map(|(a, b)| a & b).collect();
        chosen.push(self.search.stores[k].column(self.search.action, self.ids[v]));
        missing[k] -= 1;
        let answer = self.node(&mut child, chosen, missing, meter);
        if answer == Answer::None {
            chosen.pop();
            missing[k] += 1;
        }
        answer
    }

    fn members(&self, k: usize, open: &[u64]) -> impl Iterator<Item = usize> {
        let span = self.spans[k].clone();
        members(span.start, open[span].to_vec())
    }

    /// Whether no kind lacks vertices: of those missing no two may lie in one colour, a set of
    /// vertices that are pairwise not joined.
    fn enough(&self, open: &[u64], missing: &[usize]) -> bool {
        missing.iter().enumerate().all(|(k, &m)| m == 0 || self.colours(k, m, open, |_, _| {}) >= m)
    }

    /// Colours the open vertices of a kind greedily and shows each with its colour from 1;
    /// how many colours there are, or `stop` when there are as many.
    fn colours(&self, k: usize, stop: usize, open: &[u64], mut show: impl FnMut(usize, usize)) -> usize {
        let span = self.spans[k].clone();
        let mut left = open[span.clone()].to_vec();
        let mut colour = 0;
        while colour < stop && left.iter().any(|&w| w != 0) {
            colour += 1;
            let mut free = left.clone();
            while let Some(i) = free.iter().position(|&w| w != 0) {
                let v = (span.start + i) * 64 + free[i].trailing_zeros() as usize;
                let row = &self.row(v)[span.clone()];
                free.iter_mut().zip(row).for_each(|(f, r)| *f &= !r);
                free[i] &= !(1 << (v % 64));
                left[i] &= !(1 << (v % 64));
                show(v, colour);
            }
        }
        colour
    }

    /// The vertices to branch on, in this order: those of the first `missing − 1` colours can
    /// make no clique alone, the others follow from the last colour down.
    fn by_colours(&self, k: usize, missing: usize, open: &[u64], meter: &mut Meter) -> Vec<usize> {
        let mut order = Vec::new();
        let mut steps = 0;
        self.colours(k, usize::MAX, open, |v, colour| {
            steps += 1;
            if colour >= missing {
                order.push(v);
            }
        });
        meter.spend(steps);
        order.reverse();
        order
    }
}

fn set(bits: &mut [u64], v: usize) {
    bits[v / 64] |= 1 << (v % 64);
}

fn clear(bits: &mut [u64], v: usize) {
    bits[v / 64] &= !(1 << (v % 64));
}

fn members(start: usize, words: Vec<u64>) -> impl Iterator<Item = usize> {
    words.into_iter().enumerate().flat_map(move |(i, mut word)| {
        std::iter::from_fn(move || {
            let bit = (word != 0).then(|| word.trailing_zeros() as usize)?;
            word &= word - 1;
            Some((start + i) * 64 + bit)
        })
    })
}
