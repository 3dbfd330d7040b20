//! What stays the same between the attempts of a search for a quasi-difference matrix.

use std::collections::{BTreeMap, BTreeSet};

use super::{QuasiDifferenceSearch, Symmetry};

/// A column; `None` is an empty place.
pub(super) type Column = Vec<Option<u16>>;

/// A column fixed by some symmetry, with the orbits of differences that its images cover.
pub(super) struct Short {
    pub(super) column: Column,
    pub(super) covers: Vec<usize>,
    pub(super) images: usize,
}

/// Everything that does not change between attempts.
pub(super) struct Space<'s> {
    pub(super) search: &'s QuasiDifferenceSearch,
    pub(super) n: usize,
    pub(super) k: usize,
    pub(super) symmetries: Vec<Symmetry>,
    minus: Vec<u16>,
    /// The orbit of the difference d of rows i and j at (i·k + j)·n + d.
    orbit: Vec<u32>,
    /// The members (i, j, d), i < j, of each orbit.
    pub(super) members: Vec<Vec<(usize, usize, u16)>>,
    pub(super) shorts: Vec<Short>,
    /// The first row of each orbit of rows, and the length of the orbit.
    pub(super) row_orbits: Vec<(usize, usize)>,
}

impl<'s> Space<'s> {
    pub(super) fn new(search: &'s QuasiDifferenceSearch) -> Option<Self> {
        let (group, k) = (&search.group, search.rows);
        let n = group.order() as usize;
        let shaped = |s: &Symmetry| s.rows.len() == k && s.multiplier.len() == n;
        if !(2..=32).contains(&k) || n > 256 || !search.symmetries.iter().all(shaped) {
            return None;
        }
        let symmetries = Symmetry::closure(group, k, &search.symmetries)?;
        let minus = (0..n * n).map(|x| group.sub((x / n) as u16, (x % n) as u16)).collect();
        let mut space = Self {
            search,
            n,
            k,
            symmetries,
            minus,
            orbit: vec![u32::MAX; k * k * n],
            members: Vec::new(),
            shorts: Vec::new(),
            row_orbits: Vec::new(),
        };
        space.list_orbits();
        space.list_row_orbits();
        space.list_shorts();
        Some(space)
    }

    fn list_orbits(&mut self) {
        let (k, n, group) = (self.k, self.n, &self.search.group);
        let place = |i: usize, j: usize, d: u16| (i * k + j) * n + usize::from(d);
        for (i, j) in (0..k).flat_map(|i| (i + 1..k).map(move |j| (i, j))) {
            for d in 0..n as u16 {
                if self.orbit[place(i, j, d)] != u32::MAX {
                    continue;
                }
                let mut members = BTreeSet::new();
                for s in &self.symmetries {
                    let (a, b) = (s.rows[i], s.rows[j]);
                    let moved = group.sub(s.shift[a], s.shift[b]);
                    let e = group.add(s.multiplier[usize::from(d)], moved);
                    members.insert(if a < b { (a, b, e) } else { (b, a, group.neg(e)) });
                }
                let id = self.members.len() as u32;
                for &(a, b, e) in &members {
                    self.orbit[place(a, b, e)] = id;
                    self.orbit[place(b, a, group.neg(e))] = id;
                }
                self.members.push(members.into_iter().collect());
            }
        }
    }

    fn list_row_orbits(&mut self) {
        for r in 0..self.k {
            let images: BTreeSet<usize> = self.symmetries.iter().map(|s| s.rows[r]).collect();
            if images.first() == Some(&r) {
                self.row_orbits.push((r, images.len()));
            }
        }
    }

    pub(super) fn of(&self, i: usize, j: usize, a: u16, b: u16) -> usize {
        let d = self.minus[usize::from(a) * self.n + usize::from(b)];
        self.orbit[(i * self.k + j) * self.n + usize::from(d)] as usize
    }

    /// The column minus its first entry.
    pub(super) fn normalised(&self, column: &Column) -> Column {
        let first = column.iter().flatten().next().copied().unwrap_or(0);
        column.iter().map(|e| e.map(|e| self.search.group.sub(e, first))).collect()
    }

    /// The image of a column, its first entry made zero.
    pub(super) fn image(&self, s: &Symmetry, column: &Column) -> Column {
        self.normalised(&s.apply(&self.search.group, column))
    }

    /// The images of a column, up to constants.
    pub(super) fn orbit(&self, column: &Column) -> BTreeSet<Column> {
        self.symmetries.iter().map(|s| self.image(s, column)).collect()
    }

    /// The orbits of differences that the images of a column cover, or `None` when one is covered
    /// more than once or in part.
    fn covers(&self, column: &Column, images: usize) -> Option<Vec<usize>> {
        let mut hits: BTreeMap<usize, usize> = BTreeMap::new();
        for (i, a) in column.iter().enumerate() {
            for (j, b) in column.iter().enumerate().skip(i + 1) {
                if let (Some(a), Some(b)) = (a, b) {
                    *hits.entry(self.of(i, j, *a, *b)).or_default() += 1;
                }
            }
        }
        let exact = hits.iter().all(|(&o, &h)| h * images == self.members[o].len());
        exact.then(|| hits.into_keys().collect())
    }

    fn list_shorts(&mut self) {
        let mut seen: BTreeSet<Column> = BTreeSet::new();
        let empties: Vec<Option<usize>> = if self.search.empty == 0 {
            vec![None]
        } else {
            std::iter::once(None).chain((0..self.k).map(Some)).collect()
        };
        let mut shorts = Vec::new();
        for s in &self.symmetries[1..] {
            for &empty in empties.iter().filter(|e| e.is_none_or(|e| s.rows[e] == e)) {
                for g in 0..self.n as u16 {
                    self.fixed(s, empty, g, &mut |column| {
                        let images = self.orbit(&column);
                        let least = images.first().expect("the identity gives one").clone();
                        if seen.insert(least.clone())
                            && let Some(covers) = self.covers(&least, images.len())
                        {
                            shorts.push(Short { column: least, covers, images: images.len() });
                        }
                    });
                }
            }
        }
        self.shorts = shorts;
    }

    /// Calls `with` for every column that `s` maps to itself plus `g`, its first entry zero.
    fn fixed(&self, s: &Symmetry, empty: Option<usize>, g: u16, with: &mut impl FnMut(Column)) {
        let group = &self.search.group;
        let next = |r: usize, e: u16| {
            let to = s.rows[r];
            (to, group.sub(group.add(s.multiplier[usize::from(e)], s.shift[to]), g))
        };
        let mut cycles: Vec<Vec<Vec<(usize, u16)>>> = Vec::new();
        let mut done = vec![false; self.k];
        for r in 0..self.k {
            if done[r] || Some(r) == empty {
                continue;
            }
            let mut choices = Vec::new();
            let leads = cycles.is_empty();
            for e in 0..if leads { 1 } else { self.n as u16 } {
                let mut cycle = vec![(r, e)];
                loop {
                    let &(at, value) = cycle.last().expect("not empty");
                    done[at] = true;
                    let (to, value) = next(at, value);
                    if to == r {
                        if value == e {
                            choices.push(cycle);
                        }
                        break;
                    }
                    cycle.push((to, value));
                }
            }
            cycles.push(choices);
        }
        let mut column = vec![None; self.k];
        product(&cycles, &mut column, with);
    }
}

fn product(cycles: &[Vec<Vec<(usize, u16)>>], column: &mut Column, with: &mut impl FnMut(Column)) {
    let Some((first, rest)) = cycles.split_first() else { return with(column.clone()) };
    for cycle in first {
        for &(r, e) in cycle {
            column[r] = Some(e);
        }
        product(rest, column, with);
    }
}
