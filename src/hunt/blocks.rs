//! Orthogonal vectors of block types under a multiplier group: two-level factors beside one
//! p-level factor in 4p runs.

use super::random::Random;
use crate::construct::block_product;

/// What is looked for.
#[derive(Clone, Copy, Debug)]
pub struct BlockSearch {
    /// The number of blocks, at least 2.
    pub p: u16,
    /// The positions are multiplied by this unit modulo p; 1 for no symmetry.
    pub multiplier: u16,
    /// The number of vectors wanted.
    pub wanted: usize,
    /// The seed of the random numbers.
    pub seed: u64,
    /// How many orbits of vectors are drawn for each try.
    pub pool: usize,
    /// How many tries are made.
    pub tries: usize,
}

/// Mutually orthogonal vectors over ±1, ±2, ±3 of length p, see
/// [`block_types`](crate::construct::block_types): as many as wanted, or the most that were met.
///
/// A pool of orbits under the multiplier whose vectors are orthogonal among themselves is drawn at
/// random; cliques of orbits are grown greedily, at each step the one of 12 candidates that keeps
/// most of the pool. Deterministic: the same search gives the same vectors.
///
/// Cost: tries · pool · p · (length of an orbit) times the number of steps.
#[must_use]
pub fn blocks(search: &BlockSearch) -> Vec<Vec<i8>> {
    let mut random = Random::new(search.seed);
    let mut best: Vec<Vec<i8>> = Vec::new();
    for _ in 0..search.tries {
        let pool = draw(search, &mut random);
        for _ in 0..8 {
            let found = grow(&pool, search.wanted, &mut random);
            if found.len() > best.len() {
                best = found;
            }
            if best.len() >= search.wanted {
                best.truncate(search.wanted);
                return best;
            }
        }
    }
    best
}

type Orbit = Vec<Vec<i8>>;

fn draw(search: &BlockSearch, random: &mut Random) -> Vec<Orbit> {
    let p = usize::from(search.p);
    let mut pool = Vec::new();
    for _ in 0..search.pool {
        // Now and then a vector that is constant on the orbits of positions: it is an orbit alone.
        let constant = random.below(16) == 0;
        let mut first: Vec<i8> = (0..p).map(|_| entry(random)).collect();
        if constant {
            for j in 0..p {
                let least = positions(search, j).min().unwrap_or(j);
                first[j] = first[least];
            }
        }
        if let Some(orbit) = orbit(search, first) {
            pool.push(orbit);
        }
    }
    pool
}

fn entry(random: &mut Random) -> i8 {
    [1, -1, 2, -2, 3, -3][random.below(6)]
}

fn positions(search: &BlockSearch, j: usize) -> impl Iterator<Item = usize> {
    let (p, m) = (usize::from(search.p), usize::from(search.multiplier));
    let mut at = j;
    std::iter::once(j).chain(std::iter::from_fn(move || {
        at = at * m % p;
        (at != j).then_some(at)
    }))
}

/// The orbit of a vector, if its vectors are orthogonal among themselves.
fn orbit(search: &BlockSearch, first: Vec<i8>) -> Option<Orbit> {
    let (p, m) = (usize::from(search.p), usize::from(search.multiplier));
    let mut orbit = vec![first];
    loop {
        let last = orbit.last()?;
        let next: Vec<i8> = (0..p).map(|j| last[j * m % p]).collect();
        if next == orbit[0] {
            return Some(orbit);
        }
        if block_product(&orbit[0], &next) != 0 {
            return None;
        }
        orbit.push(next);
    }
}

fn grow(pool: &[Orbit], wanted: usize, random: &mut Random) -> Vec<Vec<i8>> {
    let mut open: Vec<usize> = (0..pool.len()).collect();
    let mut found: Vec<Vec<i8>> = Vec::new();
    while !open.is_empty() && found.len() < wanted {
        let mut choice: Option<(usize, Vec<usize>)> = None;
        for _ in 0..12 {
            let i = open[random.below(open.len())];
            let left: Vec<usize> = open.iter().copied().filter(|&j| joined(&pool[i], &pool[j])).collect();
            if choice.as_ref().is_none_or(|(_, known)| left.len() > known.len()) {
                choice = Some((i, left));
            }
        }
        let Some((i, left)) = choice else { break };
        found.extend(pool[i].iter().cloned());
        open = left;
    }
    found
}

/// Whether all vectors of one orbit are orthogonal to all of the other: by symmetry the first of
/// the shorter one is enough.
fn joined(a: &Orbit, b: &Orbit) -> bool {
    let (short, long) = if a.len() <= b.len() { (a, b) } else { (b, a) };
    long.iter().all(|w| block_product(&short[0], w) == 0)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::construct::block_types;

    #[test]
    fn finds_the_known_maxima_for_three_and_five() {
        for (p, multiplier, wanted) in [(3, 1, 4), (5, 1, 8)] {
            let search = BlockSearch { p, multiplier, wanted, seed: 1, pool: 5000, tries: 10 };
            let vectors = blocks(&search);
            assert_eq!(vectors.len(), wanted, "p = {p}");
            assert_eq!(block_types(&vectors).unwrap().factors(), wanted + 1);
            assert_eq!(blocks(&search), vectors);
        }
    }
}
