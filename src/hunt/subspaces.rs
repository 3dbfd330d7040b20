//! Sets of subspaces of GF(q)^n, any t of them independent, under a prescribed group.
//!
//! A regular mixed array of strength t is a set of subspaces of which any t are independent. The
//! search takes a random semilinear map of small order, keeps the orbits that are independent
//! among themselves, and fills: first so many subspaces of the largest dimension, then of the next,
//! at last points, as long as something fits. At each step the best of a few random orbits is
//! taken, the one that leaves the most. Nothing is proved when nothing is found.

use std::collections::{BTreeMap, HashSet};

use super::random::Random;
use crate::algebra::{AlgebraError, Field, divisors, dot, rank, vector};

/// No more points than this: the spaces of interest have at most 364 (PG(5, 3)).
const MAX_POINTS: usize = 384;

/// How many random orbits are compared at each step.
const SAMPLES: usize = 12;

/// A set of points.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Hash, PartialOrd, Ord)]
struct Points([u64; MAX_POINTS / 64]);

impl Points {
    fn insert(&mut self, point: usize) {
        self.0[point / 64] |= 1 << (point % 64);
    }

    fn meets(&self, other: &Self) -> bool {
        self.0.iter().zip(&other.0).any(|(a, b)| a & b != 0)
    }

    fn unite(&mut self, other: &Self) {
        self.0.iter_mut().zip(&other.0).for_each(|(a, b)| *a |= b);
    }

    fn iter(&self) -> impl Iterator<Item = usize> + '_ {
        self.0.iter().enumerate().flat_map(|(w, &bits)| {
            std::iter::successors(Some(bits), |b| Some(b & b.wrapping_sub(1)))
                .take_while(|&b| b != 0)
                .map(move |b| 64 * w + b.trailing_zeros() as usize)
        })
    }
}

/// A set of subspaces found.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Packing {
    /// How many subspaces there are of dimension 1, 2, ….
    pub counts: Vec<u32>,
    /// A basis of each subspace, largest dimension first; a vector is its number in base q, first
    /// coordinate least significant.
    pub bases: Vec<Vec<u16>>,
}

/// What to look for.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Wanted {
    /// The order of the field.
    pub q: u32,
    /// The dimension of the space.
    pub n: u32,
    /// Any so many subspaces are independent: at least 2.
    pub strength: usize,
    /// The largest dimension of a subspace.
    pub largest: u32,
    /// No more than so many subspaces of dimension 1, 2, …; dimensions beyond the list, and points,
    /// are limited at random or not at all.
    pub limits: Vec<u32>,
    /// The smallest and the largest order of the group.
    pub orders: (u32, u32),
    /// How many groups are tried.
    pub groups: u32,
    /// How many fillings are tried under each group.
    pub tries: u32,
    /// Where the random numbers start.
    pub seed: u64,
}

/// The best packings found: for every list of counts of dimensions 2 and up, one with the most
/// points.
///
/// The same request gives the same answer. `Ok(None)` when the space has more points than 384, or
/// the strength is below 2, or above 3 with subspaces that are not points.
///
/// # Errors
/// [`AlgebraError::NotAPrimePower`] when there is no field of order q.
///
/// ```
/// use trysquare::hunt::subspaces::{Wanted, packings};
/// let wanted = Wanted {
///     q: 2, n: 4, strength: 2, largest: 2, limits: vec![], orders: (1, 5), groups: 9, tries: 9, seed: 1,
/// };
/// let found = packings(&wanted)?.expect("a small space");
/// assert!(found.iter().any(|p| p.counts == [0, 5]), "the spread of PG(3, 2)");
/// # Ok::<(), trysquare::algebra::AlgebraError>(())
/// ```
pub fn packings(wanted: &Wanted) -> Result<Option<Vec<Packing>>, AlgebraError> {
    let field = Field::new(wanted.q)?;
    let small = wanted.q.checked_pow(wanted.n).is_some_and(|v| (v - 1) / (wanted.q - 1) <= MAX_POINTS as u32);
    let sensible = (1..=wanted.n).contains(&wanted.largest);
    if !small || !sensible || wanted.strength < 2 || (wanted.strength > 3 && wanted.largest > 1) {
        return Ok(None);
    }
    let space = Space::new(&field, wanted.n as usize);
    let subspaces = space.subspaces(wanted.largest as usize);
    let mut random = Random::new(wanted.seed);
    let mut best: BTreeMap<Vec<u32>, Packing> = BTreeMap::new();
    for _ in 0..wanted.groups {
        let Some(map) = space.map_of_order(&mut random, wanted.orders) else { continue };
        let orbits = orbits(&space, &subspaces, &map, wanted.strength);
        for _ in 0..wanted.tries {
            let found = fill(&space, &orbits, wanted, &mut random);
            let key = found.counts[1..].to_vec();
            if best.get(&key).is_none_or(|b| b.counts[0] < found.counts[0]) {
                best.insert(key, found);
            }
        }
    }
    Ok(Some(best.into_values().collect()))
}

/// The points of PG(n − 1, q) and what is needed of them.
struct Space<'f> {
    field: &'f Field,
    n: usize,
    /// A vector of each point, first non-zero coordinate 1.
    vectors: Vec<usize>,
    /// The point of each vector by number; of no use for 0.
    point: Vec<usize>,
    /// The line through two points.
    lines: Vec<Points>,
}

impl<'f> Space<'f> {
    fn new(field: &'f Field, n: usize) -> Self {
        let size = (field.order() as usize).pow(n as u32);
        let mut point = vec![usize::MAX; size];
        let mut vectors = Vec::new();
        for v in 1..size {
            if point[v] == usize::MAX {
                let coordinates = vector(field, n, v);
                for c in 1..field.order() as u16 {
                    let multiple: Vec<u16> = coordinates.iter().map(|&x| field.mul(c, x)).collect();
                    point[number(field, &multiple)] = vectors.len();
                }
                vectors.push(v);
            }
        }
        let mut space = Self { field, n, vectors, point, lines: Vec::new() };
        let count = space.vectors.len();
        let mut lines = vec![Points::default(); count * count];
        for a in 0..count {
            for b in 0..count {
                let line = &mut lines[a * count + b];
                line.insert(a);
                line.insert(b);
                for c in (1..field.order() as u16).filter(|_| a != b) {
                    line.insert(space.point[space.combine(space.vectors[a], c, space.vectors[b])]);
                }
            }
        }
        space.lines = lines;
        space
    }

    /// a + c·b, vectors by number.
    fn combine(&self, a: usize, c: u16, b: usize) -> usize {
        let (a, b) = (vector(self.field, self.n, a), vector(self.field, self.n, b));
        let sum: Vec<u16> =
            a.iter().zip(&b).map(|(&x, &y)| self.field.add(x, self.field.mul(c, y))).collect();
        number(self.field, &sum)
    }

    fn sum(&self, a: &Points, b: &Points) -> Points {
        let mut all = *a;
        all.unite(b);
        for p in a.iter() {
            for r in b.iter() {
                all.unite(&self.lines[p * self.vectors.len() + r]);
            }
        }
        all
    }

    /// All subspaces of dimension 1 to `largest`, in ascending order within a dimension.
    fn subspaces(&self, largest: usize) -> Vec<Vec<Points>> {
        let points: Vec<Points> = (0..self.vectors.len())
            .map(|p| {
                let mut set = Points::default();
                set.insert(p);
                set
            })
            .collect();
        let mut all = vec![points];
        for e in 1..largest {
            let mut next = HashSet::new();
            for u in &all[e - 1] {
                for p in all[0].iter().filter(|p| !p.meets(u)) {
                    next.insert(self.sum(u, p));
                }
            }
            let mut next: Vec<Points> = next.into_iter().collect();
            next.sort_unstable();
            all.push(next);
        }
        all
    }

    /// A random semilinear map with an order in the range, as a permutation of the points: a power
    /// of a random matrix after a power of the Frobenius map.
    fn map_of_order(&self, random: &mut Random, orders: (u32, u32)) -> Option<Vec<usize>> {
        let q = self.field.order() as usize;
        for _ in 0..1000 {
            let rows: Vec<Vec<u16>> =
                (0..self.n).map(|_| (0..self.n).map(|_| random.modulo(q) as u16).collect()).collect();
            let power = self.field.characteristic().pow(random.modulo(self.field.degree() as usize) as u32);
            if rank(self.field, &rows) < self.n {
                continue;
            }
            let image = |&v: &usize| {
                let x: Vec<u16> =
                    vector(self.field, self.n, v).iter().map(|&c| self.field.pow(c, power)).collect();
                let y: Vec<u16> = rows.iter().map(|r| dot(self.field, r, &x)).collect();
                self.point[number(self.field, &y)]
            };
            let map: Vec<usize> = self.vectors.iter().map(image).collect();
            let order = order(&map);
            let fitting: Vec<u64> = divisors(order)
                .into_iter()
                .filter(|d| (u64::from(orders.0)..=u64::from(orders.1)).contains(d))
                .collect();
            if !fitting.is_empty() {
                let d = fitting[random.modulo(fitting.len())];
                return Some(power_of(&map, order / d));
            }
        }
        None
    }

    /// A basis of a subspace, the points of lowest number that are one.
    fn basis(&self, subspace: &Points) -> Vec<u16> {
        let mut span = Points::default();
        let mut basis = Vec::new();
        for p in subspace.iter() {
            let mut one = Points::default();
            one.insert(p);
            if !one.meets(&span) {
                span = self.sum(&span, &one);
                basis.push(self.vectors[p] as u16);
            }
        }
        basis
    }
}

fn number(field: &Field, v: &[u16]) -> usize {
    v.iter().rev().fold(0, |sum, &x| sum * field.order() as usize + usize::from(x))
}

fn order(map: &[usize]) -> u64 {
    let mut seen = vec![false; map.len()];
    let mut order = 1u64;
    for start in 0..map.len() {
        let (mut length, mut at) = (0u64, start);
        while !seen[at] {
            seen[at] = true;
            at = map[at];
            length += 1;
        }
        if length > 0 {
            order = num_integer::lcm(order, length);
        }
    }
    order
}

fn power_of(map: &[usize], mut e: u64) -> Vec<usize> {
    let (mut result, mut base): (Vec<usize>, Vec<usize>) = ((0..map.len()).collect(), map.to_vec());
    while e > 0 {
        if e % 2 == 1 {
            result = result.iter().map(|&x| base[x]).collect();
        }
        base = base.iter().map(|&x| base[x]).collect();
        e /= 2;
    }
    result
}

/// An orbit of subspaces of one dimension.
struct Orbit {
    members: Vec<Points>,
    all: Points,
}

/// The orbits, by dimension, that are independent among themselves.
fn orbits(space: &Space<'_>, subspaces: &[Vec<Points>], map: &[usize], strength: usize) -> Vec<Vec<Orbit>> {
    subspaces
        .iter()
        .map(|same| {
            let mut seen = HashSet::with_capacity(same.len());
            let mut kept = Vec::new();
            for &start in same {
                if seen.contains(&start) {
                    continue;
                }
                let (mut members, mut at, mut all) = (Vec::new(), start, Points::default());
                while seen.insert(at) {
                    members.push(at);
                    all.unite(&at);
                    let mut next = Points::default();
                    at.iter().for_each(|p| next.insert(map[p]));
                    at = next;
                }
                if State::default().add(space, &members, strength) {
                    kept.push(Orbit { members, all });
                }
            }
            kept
        })
        .collect()
}

/// The subspaces chosen and the points that no further one may have.
#[derive(Clone, Default)]
struct State {
    /// The sums of at most `i + 1` chosen subspaces, for i up to the strength − 2.
    sums: Vec<Vec<Points>>,
    covered: Points,
}

impl State {
    /// Adds all members if they are independent of what is there and of each other.
    fn add(&mut self, space: &Space<'_>, members: &[Points], strength: usize) -> bool {
        self.sums.resize(strength - 1, Vec::new());
        for member in members {
            if member.meets(&self.covered) {
                return false;
            }
            for i in (0..strength - 1).rev() {
                let new: Vec<Points> = match i {
                    0 => vec![*member],
                    _ => self.sums[i - 1].iter().map(|s| space.sum(s, member)).collect(),
                };
                new.iter().for_each(|s| self.covered.unite(s));
                // Sums of strength − 1 subspaces are never extended.
                if i + 2 < strength {
                    self.sums[i].extend(new);
                }
            }
        }
        true
    }
}

fn fill(space: &Space<'_>, orbits: &[Vec<Orbit>], wanted: &Wanted, random: &mut Random) -> Packing {
    let mut state = State::default();
    let mut chosen: Vec<Vec<Points>> = vec![Vec::new(); orbits.len()];
    let mut alive: Vec<Vec<&Orbit>> = orbits.iter().map(|o| o.iter().collect()).collect();
    for e in (0..orbits.len()).rev() {
        let vectors = (wanted.q as usize).pow(wanted.n) - 1;
        let room = vectors / ((wanted.q as usize).pow(e as u32 + 1) - 1);
        // Half of the time as many as fit.
        let limit = match (e, wanted.limits.get(e), random.modulo(2)) {
            (0, _, _) | (_, None, 0) => usize::MAX,
            (_, Some(&limit), _) => limit as usize,
            _ => random.modulo(room.min(20) + 1),
        };
        while chosen[e].len() < limit {
            let fits: Vec<&Orbit> =
                alive[e].iter().copied().filter(|o| chosen[e].len() + o.members.len() <= limit).collect();
            let mut best: Option<(f64, State, &Orbit, Vec<Vec<&Orbit>>)> = None;
            let samples = if fits.len() <= 1 { 1 } else { SAMPLES };
            for _ in 0..samples.min(4 * fits.len()) {
                let orbit = fits[random.modulo(fits.len())];
                let mut next = state.clone();
                if !next.add(space, &orbit.members, wanted.strength) {
                    alive[e].retain(|o| !std::ptr::eq(*o, orbit));
                    continue;
                }
                let left: Vec<Vec<&Orbit>> = alive[..=e]
                    .iter()
                    .map(|same| same.iter().copied().filter(|o| !o.all.meets(&next.covered)).collect())
                    .collect();
                let score: f64 =
                    left.iter().zip(orbits).map(|(l, o)| l.len() as f64 / o.len().max(1) as f64).sum::<f64>()
                        + random.modulo(1000) as f64 * 1e-6;
                if best.as_ref().is_none_or(|b| score > b.0) {
                    best = Some((score, next, orbit, left));
                }
            }
            let Some((_, next, orbit, left)) = best else {
                if fits.is_empty() || samples == 1 {
                    break;
                }
                continue;
            };
            state = next;
            chosen[e].extend(&orbit.members);
            alive = left;
        }
    }
    Packing {
        counts: chosen.iter().map(|c| c.len() as u32).collect(),
        bases: chosen.iter().rev().flatten().map(|s| space.basis(s)).collect(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::algebra::first_dependent;

    fn wanted(q: u32, n: u32, strength: usize, largest: u32) -> Wanted {
        Wanted { q, n, strength, largest, limits: vec![], orders: (1, 8), groups: 12, tries: 12, seed: 1 }
    }

    #[test]
    fn what_is_found_is_independent() {
        for (q, n, strength, largest) in
            [(2, 4, 2, 3), (2, 5, 3, 3), (2, 6, 2, 3), (3, 3, 2, 2), (3, 4, 3, 2), (4, 3, 3, 1), (2, 6, 4, 1)]
        {
            let request = wanted(q, n, strength, largest);
            let found = packings(&request).unwrap().unwrap();
            assert_eq!(Some(&found), packings(&request).unwrap().as_ref(), "the same again");
            let field = Field::new(q).unwrap();
            for p in found {
                let bases: Vec<Vec<Vec<u16>>> = p
                    .bases
                    .iter()
                    .map(|b| b.iter().map(|&v| vector(&field, n as usize, usize::from(v))).collect())
                    .collect();
                assert_eq!(first_dependent(&field, &bases, strength), None);
                for (e, &count) in p.counts.iter().enumerate() {
                    assert_eq!(bases.iter().filter(|b| b.len() == e + 1).count(), count as usize);
                }
            }
        }
    }

    #[test]
    fn limits_are_kept_and_nonsense_is_refused() {
        let request = Wanted { limits: vec![0, 7, 2], ..wanted(2, 6, 2, 3) };
        assert!(packings(&request).unwrap().unwrap().iter().all(|p| p.counts[1] <= 7 && p.counts[2] <= 2));
        assert_eq!(packings(&wanted(2, 9, 2, 1)), Ok(None));
        assert_eq!(packings(&wanted(2, 4, 1, 1)), Ok(None));
        assert_eq!(packings(&wanted(2, 4, 4, 2)), Ok(None));
        assert_eq!(packings(&wanted(2, 4, 2, 5)), Ok(None));
        assert!(packings(&wanted(6, 2, 2, 1)).is_err());
    }
}
