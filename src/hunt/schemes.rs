//! Difference schemes with a prescribed automorphism.

use super::Random;
use crate::algebra::AbelianGroup;
use crate::construct::ConstructError;

const NAME: &str = "hunt for a difference scheme";

/// A symmetry: row i goes to row `rows[i]`, and the entry v there becomes `values[v]`, an
/// automorphism of the group.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Symmetry {
    /// A permutation of the rows.
    pub rows: Vec<usize>,
    /// An automorphism of the group.
    pub values: Vec<u16>,
}

impl Symmetry {
    /// The symmetry that moves the places 0 … n − 1 of each block of rows from x to `times`·x +
    /// `plus` modulo the length n of the block, then the block to the next `turn`-th among those
    /// of its length; `values` is kept as it is. Blocks for which `times` is no unit stay in place.
    #[must_use]
    pub fn of_blocks(blocks: &[usize], times: usize, plus: usize, turn: usize, values: &[u16]) -> Self {
        let starts: Vec<usize> =
            blocks.iter().scan(0, |at, &n| Some(std::mem::replace(at, *at + n))).collect();
        let mut rows = Vec::new();
        for (b, &n) in blocks.iter().enumerate() {
            let alike: Vec<usize> = (0..blocks.len()).filter(|&k| blocks[k] == n).collect();
            let at = alike.iter().position(|&k| k == b).unwrap_or(0);
            let to = starts[alike[(at + turn) % alike.len()]];
            let unit = num_integer::gcd(times, n) == 1;
            rows.extend((0..n).map(|x| to + (if unit { times * x } else { x } + plus) % n));
        }
        Self { rows, values: values.to_vec() }
    }

    fn is_automorphism(&self, group: &AbelianGroup, rows: usize) -> bool {
        let bijective = |image: &mut Vec<usize>, n: usize| {
            image.sort_unstable();
            image.iter().copied().eq(0..n)
        };
        let s = group.order() as usize;
        self.values.len() == s
            && bijective(&mut self.rows.clone(), rows)
            && bijective(&mut self.values.iter().map(|&v| usize::from(v)).collect(), s)
            && (0..s as u16).all(|a| {
                (0..s as u16).all(|b| {
                    self.values[usize::from(group.add(a, b))]
                        == group.add(self.values[usize::from(a)], self.values[usize::from(b)])
                })
            })
    }

    fn apply(&self, column: &[u16]) -> Vec<u16> {
        let mut out = vec![0; column.len()];
        for (i, &v) in column.iter().enumerate() {
            out[self.rows[i]] = self.values[usize::from(v)];
        }
        out
    }

    fn then(&self, next: &Self) -> Self {
        Self {
            rows: self.rows.iter().map(|&i| next.rows[i]).collect(),
            values: self.values.iter().map(|&v| next.values[usize::from(v)]).collect(),
        }
    }
}

/// A hunt for a difference scheme D(r, c, s) whose columns are permuted by a symmetry.
///
/// The columns come in whole orbits under the powers of `moves`. Each orbit is *solved for*: a depth-first
/// walk through the rows with random choices, in which the differences to all columns there are
/// and to the column's own images are counted and never exceed r/s. Where a walk takes more than
/// `nodes` steps, the orbit found last is dropped, after several such failures more of them. The
/// first column is zero, the next `fixed` are their own images.
///
/// Columns of the orbits may be asked to be their own images under `fixes`, a symmetry that
/// normalises the powers of `moves`.
#[derive(Clone, Debug)]
pub struct SchemeHunt {
    /// The cyclic factors of the group.
    pub group: Vec<u16>,
    /// What permutes the columns.
    pub moves: Symmetry,
    /// What leaves every column as it is; `None` for nothing.
    pub fixes: Option<Symmetry>,
    /// How many columns after the zero column are their own images under `moves`.
    pub fixed: usize,
    /// Whether the zero column is one of them; without it the orbits come first.
    pub zero: bool,
    /// The number of columns wanted.
    pub columns: usize,
    /// The seed of the random numbers.
    pub seed: u64,
    /// Steps per orbit.
    pub nodes: u64,
    /// Orbits tried in all.
    pub tries: u64,
}

struct Walk<'a> {
    s: usize,
    index: u16,
    minus: &'a [u16],
    /// The columns there are.
    columns: &'a [Vec<u16>],
    /// Rows set together: the first, then the others with the automorphism that gives their value.
    units: &'a [Vec<(usize, Vec<u16>)>],
    /// The powers of the symmetry up to the half: images of rows, preimages, values.
    powers: &'a [(Vec<usize>, Vec<usize>, Vec<u16>)],
    column: Vec<Option<u16>>,
    counts: Vec<u16>,
    own: Vec<u16>,
    left: u64,
}

impl SchemeHunt {
    /// Runs the hunt and returns the most columns found, at most as many as wanted.
    ///
    /// Cost: at most tries · nodes steps of c counts each.
    ///
    /// # Errors
    /// [`ConstructError`] when the group is none, a symmetry is none, or s does not divide r.
    ///
    /// ```
    /// use trysquare::hunt::{SchemeHunt, Symmetry};
    /// let moves = Symmetry::of_blocks(&[5, 1], 1, 1, 0, &[0, 1, 2]);
    /// let hunt = SchemeHunt {
    ///     group: vec![3], moves, fixes: None, fixed: 0, zero: true, columns: 6, seed: 1,
    ///     nodes: 1000, tries: 100,
    /// };
    /// assert_eq!(hunt.run()?.len(), 6);
    /// # Ok::<(), trysquare::construct::ConstructError>(())
    /// ```
    pub fn run(&self) -> Result<Vec<Vec<u16>>, ConstructError> {
        let group = AbelianGroup::new(&self.group)?;
        let (r, s) = (self.moves.rows.len(), group.order() as usize);
        let symmetries = std::iter::once(&self.moves).chain(&self.fixes);
        if r == 0 || !r.is_multiple_of(s) || symmetries.into_iter().any(|x| !x.is_automorphism(&group, r)) {
            return Err(ConstructError::condition(
                NAME,
                "s divides r, the symmetries permute the r rows and are automorphisms of the group",
            ));
        }
        let minus: Vec<u16> = (0..s * s).map(|at| group.sub((at / s) as u16, (at % s) as u16)).collect();
        let identity = Symmetry { rows: (0..r).collect(), values: (0..s as u16).collect() };
        let mut images = vec![identity.clone()];
        loop {
            let next = images[images.len() - 1].then(&self.moves);
            if next == identity {
                break;
            }
            images.push(next);
        }
        let powers: Vec<_> = images[1..=images.len() / 2]
            .iter()
            .map(|x| {
                let mut back = vec![0; r];
                x.rows.iter().enumerate().for_each(|(i, &j)| back[j] = i);
                (x.rows.clone(), back, x.values.clone())
            })
            .collect();
        let mut random = Random::new(self.seed);
        let mut search =
            Search { hunt: self, r, s, minus, images, powers, best: Vec::new(), orbits: Vec::new() };
        search.run(&mut random);
        Ok(search.best)
    }
}

struct Search<'a> {
    hunt: &'a SchemeHunt,
    r: usize,
    s: usize,
    minus: Vec<u16>,
    images: Vec<Symmetry>,
    powers: Vec<(Vec<usize>, Vec<usize>, Vec<u16>)>,
    best: Vec<Vec<u16>>,
    orbits: Vec<Vec<Vec<u16>>>,
}

impl Search<'_> {
    fn run(&mut self, random: &mut Random) {
        let identity = &self.images[0];
        let free = self.units(self.hunt.fixes.as_ref().unwrap_or(identity));
        let still = self.units(&self.hunt.moves);
        let first = usize::from(self.hunt.zero);
        if self.hunt.zero {
            self.orbits.push(vec![vec![0; self.r]]);
        }
        let mut failures = 0;
        for _ in 0..self.hunt.tries {
            let invariant = self.orbits.len() < first + self.hunt.fixed;
            let columns: Vec<Vec<u16>> = self.orbits.iter().flatten().cloned().collect();
            match self.column(&columns, if invariant { &still } else { &free }, !invariant, random) {
                Some(column) => {
                    let count = if invariant { 1 } else { self.images.len() };
                    let orbit: Vec<Vec<u16>> =
                        self.images[..count].iter().map(|x| x.apply(&column)).collect();
                    self.orbits.push(orbit);
                    let total: usize = self.orbits.iter().map(Vec::len).sum();
                    if total > self.best.len() {
                        self.best = self.orbits.iter().flatten().cloned().collect();
                        self.best.truncate(self.hunt.columns);
                    }
                    if total >= self.hunt.columns {
                        return;
                    }
                    failures = 0;
                }
                None => {
                    failures += 1;
                    // The longer nothing fits, the further back.
                    let drop = 1 + random.below(1 + failures);
                    let keep = self.orbits.len().saturating_sub(drop).max(first);
                    self.orbits.truncate(keep);
                }
            }
        }
    }

    /// The rows that `symmetry` links, with the automorphism from the first to each.
    fn units(&self, symmetry: &Symmetry) -> Vec<Vec<(usize, Vec<u16>)>> {
        let mut seen = vec![false; self.r];
        let mut units = Vec::new();
        for start in 0..self.r {
            let (mut i, mut values, mut unit) = (start, (0..self.s as u16).collect::<Vec<_>>(), Vec::new());
            while !seen[i] {
                seen[i] = true;
                unit.push((i, values.clone()));
                i = symmetry.rows[i];
                values = values.iter().map(|&v| symmetry.values[usize::from(v)]).collect();
            }
            if !unit.is_empty() {
                units.push(unit);
            }
        }
        units
    }

    fn column(
        &self,
        columns: &[Vec<u16>],
        units: &[Vec<(usize, Vec<u16>)>],
        moving: bool,
        random: &mut Random,
    ) -> Option<Vec<u16>> {
        let mut order: Vec<usize> = (0..units.len()).collect();
        if moving {
            random.shuffle(&mut order);
        }
        let units: Vec<_> = order.iter().map(|&k| units[k].clone()).collect();
        let powers: &[_] = if moving { &self.powers } else { &[] };
        let mut walk = Walk {
            s: self.s,
            index: (self.r / self.s) as u16,
            minus: &self.minus,
            columns,
            units: &units,
            powers,
            column: vec![None; self.r],
            counts: vec![0; columns.len() * self.s],
            own: vec![0; powers.len() * self.s],
            left: self.hunt.nodes,
        };
        let found = walk.step(0, random);
        let column: Option<Vec<u16>> = walk.column.iter().copied().collect();
        column.filter(|c| found && (columns.is_empty() || !columns.contains(c)))
    }
}

impl Walk<'_> {
    fn step(&mut self, at: usize, random: &mut Random) -> bool {
        let units = self.units;
        let Some(unit) = units.get(at) else { return true };
        let start = random.below(self.s);
        for k in 0..self.s {
            if self.left == 0 {
                return false;
            }
            self.left -= 1;
            let value = (start + k) % self.s;
            let mut set = 0;
            let mut good = true;
            for (row, values) in unit {
                good &= self.put(*row, values[value]);
                set += 1;
                if !good {
                    break;
                }
            }
            if good && self.step(at + 1, random) {
                return true;
            }
            for (row, _) in unit[..set].iter().rev() {
                self.take(*row);
            }
        }
        false
    }

    /// Sets a row and counts; false when a count is exceeded.
    fn put(&mut self, row: usize, value: u16) -> bool {
        self.column[row] = Some(value);
        let mut good = true;
        for (k, column) in self.columns.iter().enumerate() {
            let d = self.minus[usize::from(value) * self.s + usize::from(column[row])];
            let count = &mut self.counts[k * self.s + usize::from(d)];
            *count += 1;
            good &= *count <= self.index;
        }
        self.differences(row, value, |count, index| {
            *count += 1;
            *count <= index
        }) && good
    }

    fn take(&mut self, row: usize) {
        let Some(value) = self.column[row] else { return };
        for (k, column) in self.columns.iter().enumerate() {
            let d = self.minus[usize::from(value) * self.s + usize::from(column[row])];
            self.counts[k * self.s + usize::from(d)] -= 1;
        }
        self.differences(row, value, |count, _| {
            *count -= 1;
            true
        });
        self.column[row] = None;
    }

    /// Visits the counts of the differences between the column and its images that `row` decides.
    fn differences(&mut self, row: usize, value: u16, mut visit: impl FnMut(&mut u16, u16) -> bool) -> bool {
        let mut good = true;
        for (k, (to, from, values)) in self.powers.iter().enumerate() {
            let mut see = |a: u16, b: u16| {
                let d = self.minus[usize::from(a) * self.s + usize::from(b)];
                good &= visit(&mut self.own[k * self.s + usize::from(d)], self.index);
            };
            if let Some(before) = self.column[from[row]] {
                see(value, values[usize::from(before)]);
            }
            if to[row] != row
                && let Some(after) = self.column[to[row]]
            {
                see(after, values[usize::from(value)]);
            }
        }
        good
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::construct::scheme::from_starter;

    fn hunt(group: &[u16], blocks: &[usize], zero: bool, columns: usize) -> SchemeHunt {
        let order: u16 = group.iter().product();
        let moves = Symmetry::of_blocks(blocks, 1, 1, 0, &(0..order).collect::<Vec<_>>());
        let group = group.to_vec();
        SchemeHunt { group, moves, fixes: None, fixed: 0, zero, columns, seed: 1, nodes: 100_000, tries: 100 }
    }

    #[test]
    fn finds_what_the_definition_accepts() {
        for (group, blocks, zero, c) in [
            (&[3][..], &[5, 1][..], true, 6),
            (&[3], &[10, 10, 1], true, 21),
            (&[2, 2], &[5, 5, 5, 5], false, 10),
            (&[2, 2, 5], &[5, 5, 5, 5], false, 5),
        ] {
            let mut request = hunt(group, blocks, zero, c);
            request.nodes = 1_000_000;
            let columns = request.run().unwrap();
            assert_eq!(columns.len(), c, "{group:?} {blocks:?}");
            assert!(from_starter(group, &columns).unwrap().is_difference_scheme());
            assert_eq!(request.run().unwrap(), columns, "the same again");
        }
    }

    #[test]
    fn columns_fixed_by_a_symmetry() {
        let mut request = hunt(&[3], &[3, 3, 3], true, 5);
        request.fixed = 2;
        let columns = request.run().unwrap();
        assert!(columns.len() >= 3);
        for column in &columns[..3] {
            assert_eq!(&request.moves.apply(column), column);
        }
        let mut request = hunt(&[3], &[7, 7, 7, 1, 1, 1], true, 2);
        request.fixes = Some(Symmetry::of_blocks(&[7, 7, 7, 1, 1, 1], 2, 0, 0, &[0, 1, 2]));
        if let Some(column) = request.run().unwrap().get(1) {
            assert_eq!(&request.fixes.unwrap().apply(column), column);
        }
    }

    #[test]
    fn refuses_what_is_no_symmetry() {
        let good = hunt(&[3], &[5, 1], true, 6);
        let with = |moves: Symmetry| SchemeHunt { moves, ..good.clone() }.run();
        assert!(with(Symmetry { rows: vec![0, 0, 1, 2, 3, 4], ..good.moves.clone() }).is_err());
        assert!(with(Symmetry { values: vec![1, 2, 0], ..good.moves.clone() }).is_err());
        assert!(with(Symmetry { values: vec![0, 1], ..good.moves.clone() }).is_err());
        assert!(with(Symmetry { rows: vec![1, 0, 2, 3], ..good.moves.clone() }).is_err());
        assert!(SchemeHunt { group: vec![1], ..good.clone() }.run().is_err());
        let fixes = Some(Symmetry { rows: vec![0], values: vec![0, 1, 2] });
        assert!(SchemeHunt { fixes, ..good.clone() }.run().is_err());
    }
}
