//! Many two-level columns beside one p-level column in 4p runs: vectors of block types under a
//! group that moves the blocks and turns the types.
//!
//! The p-level column cuts the runs into p blocks of four; a two-level column splits each of them
//! evenly, in one of three ways up to complement. So it is a vector over ±1, ±2, ±3, see
//! [`block_types`](crate::construct::block_types), and two columns are orthogonal exactly when
//! their vectors are. Every permutation of the blocks and every signed permutation of the three
//! types, in each block its own, keeps that. Orbits under a group of such moves that are
//! orthogonal inside are listed, and a clique of orbits is looked for.

mod group;
mod words;

use std::collections::HashSet;

use rayon::prelude::*;

pub use group::Turn;

use self::group::{Element, classes, group};
use self::words::{Word, visit};
use super::clique::Clique;
use super::random::Random;
use super::splits::{Orbit, Split};
use crate::construct::OrbitColumn;
use crate::floor::Effort;

/// What is looked for.
#[derive(Clone, Debug)]
pub struct TypesHunt {
    /// The number of blocks p, from 2 to 32.
    pub blocks: u16,
    /// Generators of the group; at most 1024 elements.
    pub symmetry: Vec<Turn>,
    /// How many two-level columns are wanted.
    pub wanted: usize,
    /// The seed of the random numbers.
    pub seed: u64,
    /// How many attempts are made at the most.
    pub attempts: u64,
    /// How many candidates are looked at for each list.
    pub looks: u64,
    /// After about so many columns in all, chosen greedily, the candidates are listed again, now
    /// orthogonal to those; ascending, may be empty.
    pub stages: Vec<usize>,
    /// How many exchanges are made in an attempt after the last list.
    pub steps: u64,
}

/// What a hunt came to.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Types {
    /// The p-level column, then the two-level columns.
    pub columns: Vec<OrbitColumn>,
    /// How many two-level columns there are.
    pub beside: usize,
    /// Whether they are as many as wanted.
    pub complete: bool,
    /// The attempt that gave them, from 0.
    pub attempt: u64,
    /// The number of orbits in the last list of that attempt.
    pub pool: usize,
}

/// The most orbits that are kept.
const POOL: usize = 400_000;
/// Attempts between comparisons; fixed, so that the result does not depend on the threads.
const ROUND: u64 = 4;

struct Setting<'a> {
    request: &'a TypesHunt,
    p: usize,
    elements: Vec<Element>,
    /// One element of each class of conjugates.
    classes: Vec<usize>,
}

/// Runs the hunt until as many columns as wanted are found or the attempts are used up; the best
/// that was met. `None` when the request makes no sense: block numbers outside 2..=32, moves that
/// are no permutations, a group of more than 1024 elements.
///
/// The same hunt gives the same columns for any number of threads.
///
/// ```
/// use trysquare::hunt::types::{TypesHunt, hunt_types};
/// let request = TypesHunt {
///     blocks: 3, symmetry: vec![], wanted: 4, seed: 1, attempts: 4, looks: 1000, stages: vec![], steps: 100,
/// };
/// let found = hunt_types(&request).expect("the request makes sense");
/// assert!(found.complete && found.columns.len() == 5);
/// ```
#[must_use]
pub fn hunt_types(request: &TypesHunt) -> Option<Types> {
    let p = usize::from(request.blocks);
    if !(2..=32).contains(&p) {
        return None;
    }
    let elements = group(p, &request.symmetry)?;
    let classes = classes(&elements);
    let setting = Setting { request, p, elements, classes };
    let mut best: Option<Types> = None;
    let mut first = 0;
    while first < request.attempts {
        let round: Vec<Types> = (first..(first + ROUND).min(request.attempts))
            .into_par_iter()
            .map(|attempt| setting.attempt(attempt))
            .collect();
        for found in round {
            if best.as_ref().is_none_or(|b| b.beside < found.beside) {
                best = Some(found);
            }
        }
        if best.as_ref().is_some_and(|b| b.complete) {
            break;
        }
        first += ROUND;
    }
    best
}

impl Setting<'_> {
    /// The image of a word under an element, its first entry positive.
    fn image(&self, word: &Word, e: &Element) -> Word {
        let mut out = [0; 32];
        for j in 0..self.p {
            out[usize::from(e.to[j])] = e.turn[j][usize::from(word[j])];
        }
        self.positive(out)
    }

    fn positive(&self, mut word: Word) -> Word {
        if word[0] & 1 == 1 {
            word[..self.p].iter_mut().for_each(|c| *c ^= 1);
        }
        word
    }

    fn dot(&self, a: &Word, b: &Word) -> i32 {
        let mut sum = 0;
        for j in 0..self.p {
            let differ = a[j] ^ b[j];
            sum += if differ > 1 { 0 } else { 1 - 2 * i32::from(differ) };
        }
        sum
    }

    /// The orbit of a word, the smallest first; `None` when it is not orthogonal inside.
    fn orbit(&self, word: &Word) -> Option<Vec<Word>> {
        let first = self.positive(*word);
        let mut orbit = vec![first];
        for e in &self.elements[1..] {
            let image = self.image(&first, e);
            if image == first {
                continue;
            }
            if self.dot(&first, &image) != 0 {
                return None;
            }
            orbit.push(image);
        }
        orbit.sort_unstable();
        orbit.dedup();
        Some(orbit)
    }

    fn split(&self, word: &Word) -> Split {
        let mut mask = 0u128;
        for (j, &c) in word[..self.p].iter().enumerate() {
            let half: u128 = [0b0011, 0b1100, 0b0101, 0b1010, 0b1001, 0b0110][usize::from(c)];
            mask |= half << (4 * j);
        }
        Split { masks: [mask, 0], levels: 2 }
    }

    /// The orbits orthogonal to given words.
    fn pool(&self, given: &[Word], random: &mut Random) -> Vec<Vec<Word>> {
        let mut pool = Vec::new();
        let mut seen: HashSet<Word> = HashSet::new();
        let mut keep = |word: &Word| {
            if given.iter().all(|g| self.dot(g, word) == 0)
                && let Some(orbit) = self.orbit(word)
                && seen.insert(orbit[0])
            {
                pool.push(orbit);
            }
            pool.len() >= POOL
        };
        for &class in &self.classes {
            for sign in [0, 1] {
                self.fixed(&self.elements[class], sign, random, &mut keep);
            }
        }
        visit(self.p, given, self.request.looks, random, &mut keep);
        pool
    }

    /// Shows the words that an element takes to themselves (sign 0) or to their negatives, or when
    /// they are more than `looks` that many.
    fn fixed(&self, e: &Element, sign: u8, random: &mut Random, keep: &mut impl FnMut(&Word) -> bool) {
        let mut cycles: Vec<Vec<Vec<(u8, u8)>>> = Vec::new();
        let mut met = [false; 32];
        for j in 0..self.p {
            if met[j] {
                continue;
            }
            let mut ways = Vec::new();
            for start in 0..6 {
                let (mut at, mut code, mut way) = (j, start, Vec::new());
                loop {
                    met[at] = true;
                    way.push((at as u8, code));
                    code = e.turn[at][usize::from(code)] ^ sign;
                    at = usize::from(e.to[at]);
                    if at == j {
                        break;
                    }
                }
                if code == start && (j > 0 || start & 1 == 0) {
                    ways.push(way);
                }
            }
            cycles.push(ways);
        }
        let total = cycles.iter().fold(1u64, |n, ways| n.saturating_mul(ways.len() as u64));
        let mut word = [0; 32];
        for i in 0..total.min(self.request.looks) {
            let mut rest = i;
            for ways in &cycles {
                let k = if total <= self.request.looks {
                    let k = rest % ways.len() as u64;
                    rest /= ways.len() as u64;
                    k as usize
                } else {
                    random.below(ways.len())
                };
                for &(at, code) in &ways[k] {
                    word[usize::from(at)] = code;
                }
            }
            if keep(&word) {
                return;
            }
        }
    }

    fn attempt(&self, attempt: u64) -> Types {
        let mut random = Random::new(self.request.seed ^ attempt.wrapping_mul(0xD1B5_4A32_D192_ED03));
        let mut effort = Effort::unlimited();
        let mut chosen: Vec<Word> = Vec::new();
        let wanted = self.request.wanted;
        let mut pool = self.pool(&[], &mut random);
        for &stage in &self.request.stages {
            let splits = self.splits(&pool);
            let left = wanted.saturating_sub(chosen.len());
            let clique = Clique { runs: 4 * self.p as u32, pool: &splits, wanted: [left, 0] };
            for v in clique.greedy(stage.saturating_sub(chosen.len()), &mut random, &mut effort) {
                chosen.extend(pool[v].iter().copied());
            }
            pool = self.pool(&chosen, &mut random);
        }
        let splits = self.splits(&pool);
        let left = wanted.saturating_sub(chosen.len());
        let clique = Clique { runs: 4 * self.p as u32, pool: &splits, wanted: [left, 0] };
        for v in clique.search(self.request.steps, &mut random, &mut effort) {
            chosen.extend(pool[v].iter().copied());
        }
        chosen.truncate(wanted);
        let runs = 4 * self.p;
        let column = |levels, base| OrbitColumn { levels, shifts: vec![], base };
        let mut columns = vec![column(self.request.blocks, (0..runs).map(|r| (r / 4) as u16).collect())];
        columns.extend(chosen.iter().map(|w| column(2, self.split(w).symbols(runs))));
        Types { columns, beside: chosen.len(), complete: chosen.len() == wanted, attempt, pool: pool.len() }
    }

    fn splits(&self, pool: &[Vec<Word>]) -> Vec<Orbit> {
        pool.iter().map(|orbit| orbit.iter().map(|w| self.split(w)).collect()).collect()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::construct::orbit_array;
    use crate::verify::{Demand, Verdict, certify};

    /// The cyclic group of order 2(p − 1): blocks 1 … p − 1 in a circle, where the types 1 and 2 change
    /// places and type 3 its sign once around; 1 and 2 change places in block 0.
    fn circle(p: u16) -> Turn {
        let positions = (0..p).map(|j| if j == 0 { 0 } else { j % (p - 1) + 1 }).collect();
        let mut types = vec![[1, 2, 3]; usize::from(p)];
        types[0] = [2, 1, 3];
        types[usize::from(p) - 1] = [2, 1, -3];
        Turn { positions, types }
    }

    fn request(p: u16, wanted: usize) -> TypesHunt {
        TypesHunt {
            blocks: p,
            symmetry: vec![circle(p)],
            wanted,
            seed: 1,
            attempts: 1,
            looks: 200_000,
            stages: vec![],
            steps: 60,
        }
    }

    fn judged(found: &Types) -> bool {
        let array = orbit_array(&[], &found.columns).unwrap();
        certify(&array, &Demand::strength(2)).unwrap().verdict == Verdict::Orthogonal
    }

    #[test]
    fn one_orbit_of_a_cyclic_group() {
        for (p, wanted) in [(3, 4), (5, 8), (7, 12)] {
            let found = hunt_types(&request(p, wanted)).unwrap();
            assert!(found.complete && found.beside == wanted && judged(&found), "{p}");
        }
    }

    #[test]
    #[ignore = "ten million vectors"]
    fn sixteen_beside_nine_levels() {
        let found = hunt_types(&TypesHunt { looks: 6_000_000, ..request(9, 16) }).unwrap();
        assert!(found.complete && judged(&found));
    }

    #[test]
    fn listed_again_and_the_same_for_any_number_of_threads() {
        // 30 are too many: every attempt is made. Positions times 2 modulo 7.
        let positions: Vec<u16> = (0..7).map(|j| 2 * j % 7).collect();
        let request = TypesHunt {
            symmetry: vec![Turn { positions, types: vec![[2, 3, 1]; 7] }],
            attempts: 6,
            looks: 5000,
            stages: vec![3],
            steps: 40,
            ..request(7, 30)
        };
        let on = |threads| {
            let pool = rayon::ThreadPoolBuilder::new().num_threads(threads).build().unwrap();
            pool.install(|| hunt_types(&request)).unwrap()
        };
        let found = on(1);
        assert!(!found.complete && found.beside >= 6 && judged(&found));
        assert_eq!(on(3), found);
    }

    /// The words that an element fixes up to sign, by trying all of them.
    #[test]
    fn fixed_words_are_listed() {
        let turn =
            Turn { positions: vec![1, 2, 0, 3], types: vec![[2, 1, 3], [1, 2, 3], [1, 2, -3], [1, -2, 3]] };
        let hunt = TypesHunt { symmetry: vec![turn], ..request(4, 1) };
        let elements = group(4, &hunt.symmetry).unwrap();
        let setting = Setting { request: &hunt, p: 4, classes: vec![1], elements };
        let mut listed = HashSet::new();
        for sign in [0, 1] {
            setting.fixed(&setting.elements[1], sign, &mut Random::new(1), &mut |w| !listed.insert(*w));
        }
        let mut all = HashSet::new();
        visit(4, &[], u64::MAX, &mut Random::new(1), |w| !all.insert(*w));
        assert_eq!(all.len(), 648);
        all.retain(|w| setting.image(w, &setting.elements[1]) == *w);
        assert!(!all.is_empty() && all == listed);
    }

    #[test]
    fn requests_that_make_no_sense() {
        let good = request(5, 8);
        let turn = |positions: Vec<u16>, types| vec![Turn { positions, types }];
        for bad in [
            TypesHunt { blocks: 1, ..good.clone() },
            TypesHunt { blocks: 33, ..good.clone() },
            TypesHunt { blocks: 6, ..good.clone() },
            TypesHunt { symmetry: turn(vec![0, 1, 2, 3, 3], vec![[1, 2, 3]; 5]), ..good.clone() },
            TypesHunt { symmetry: turn(vec![0, 1, 2, 3, 4], vec![[1, 2, 3]; 4]), ..good.clone() },
            TypesHunt { symmetry: turn(vec![0, 1, 2, 3, 4], vec![[1, 2, 2]; 5]), ..good.clone() },
            TypesHunt { symmetry: turn(vec![0, 1, 2, 3, 4], vec![[0, 2, 3]; 5]), ..good },
        ] {
            assert!(hunt_types(&bad).is_none(), "{bad:?}");
        }
    }
}
