//! Many two-level columns beside one p-level column in 4p runs: vectors of block types under a
//! group that moves the blocks and turns the types.
//!
//! The p-level column cuts the runs into p blocks of four; a two-level column splits each of them
//! evenly, in one of three ways up to complement. So it is a vector over ±1, ±2, ±3, see
//! [`block_types`](crate::construct::block_types), and two columns are orthogonal exactly when
//! their vectors are. Every permutation of the blocks and every signed permutation of the three
//! types, in each block its own, keeps that. Orbits under a group of such moves that are
//! orthogonal inside are listed, and a clique of orbits is looked for.

use std::collections::HashSet;

use rayon::prelude::*;

use super::clique::Clique;
use super::random::Random;
use super::splits::{Orbit, Split};
use crate::construct::OrbitColumn;

/// A move of the vectors: the entry at block j goes to block `positions[j]`, its type turned.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Turn {
    /// The image of every block.
    pub positions: Vec<u16>,
    /// For every block the images of the types 1, 2, 3: a signed permutation.
    pub types: Vec<[i8; 3]>,
}

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

/// An entry: twice the type (from 0), plus one when negative.
type Word = [u8; 32];

/// An element of the group.
#[derive(Clone, PartialEq, Eq)]
struct Element {
    to: Vec<u8>,
    turn: Vec<[u8; 6]>,
}

/// The most entries of a sorted half.
const MOST: u64 = 1 << 21;
/// The most entries of the other half that are looked up.
const DRAWN: u64 = 1 << 24;
/// The most orbits that are kept.
const POOL: usize = 400_000;
/// The largest group.
const GROUP: usize = 1024;
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

/// All elements, the identity first.
fn group(p: usize, generators: &[Turn]) -> Option<Vec<Element>> {
    let generators: Vec<Element> = generators.iter().map(|t| element(p, t)).collect::<Option<_>>()?;
    let one = Element { to: (0..p as u8).collect(), turn: vec![[0, 1, 2, 3, 4, 5]; p] };
    let mut elements = vec![one];
    let mut at = 0;
    while at < elements.len() {
        for g in &generators {
            let next = product(&elements[at], g);
            if !elements.contains(&next) {
                elements.push(next);
            }
        }
        if elements.len() > GROUP {
            return None;
        }
        at += 1;
    }
    Some(elements)
}

fn element(p: usize, turn: &Turn) -> Option<Element> {
    let mut sorted = turn.positions.clone();
    sorted.sort_unstable();
    if sorted != (0..p as u16).collect::<Vec<_>>() || turn.types.len() != p {
        return None;
    }
    let table = |images: &[i8; 3]| {
        let mut known = images.map(i8::unsigned_abs);
        known.sort_unstable();
        let code = |c: u8| {
            let image = images[usize::from(c / 2)];
            2 * (image.unsigned_abs() - 1) + (u8::from(image < 0) ^ (c & 1))
        };
        (known == [1, 2, 3]).then(|| [0, 1, 2, 3, 4, 5].map(code))
    };
    let turns = turn.types.iter().map(table).collect::<Option<_>>()?;
    Some(Element { to: turn.positions.iter().map(|&x| x as u8).collect(), turn: turns })
}

/// First a, then b.
fn product(a: &Element, b: &Element) -> Element {
    let to: Vec<u8> = a.to.iter().map(|&j| b.to[usize::from(j)]).collect();
    let turn = a.turn.iter().zip(&a.to).map(|(t, &j)| t.map(|c| b.turn[usize::from(j)][usize::from(c)]));
    Element { turn: turn.collect(), to }
}

/// The first element of each class of conjugates, the identity left out.
fn classes(elements: &[Element]) -> Vec<usize> {
    let mut firsts = Vec::new();
    let mut met = vec![false; elements.len()];
    for i in 1..elements.len() {
        if met[i] {
            continue;
        }
        firsts.push(i);
        // k is a conjugate of i when i·h = h·k for some h.
        for h in elements {
            let image = product(&elements[i], h);
            for (k, e) in elements.iter().enumerate() {
                if !met[k] && product(h, e) == image {
                    met[k] = true;
                }
            }
        }
    }
    firsts
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
        self.words(given, random, &mut keep);
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

    /// Shows words orthogonal to the given ones, all of them or `looks` many: meet in the middle.
    fn words(&self, given: &[Word], random: &mut Random, keep: &mut impl FnMut(&Word) -> bool) {
        let keys: Vec<[u64; 6]> = self.keys(given, random);
        let middle = self.p / 2;
        let left = Half::new(&keys[..middle], true, random);
        let right = Half::new(&keys[middle..], false, random);
        if given.is_empty() {
            let all = left.size.saturating_mul(right.size);
            for n in 0..all.min(self.request.looks) {
                let (a, b) = if all <= self.request.looks {
                    (n / right.size, n % right.size)
                } else {
                    (random.bits() % left.size, random.bits() % right.size)
                };
                let mut word = [0; 32];
                left.write(a, &mut word[..middle]);
                right.write(b, &mut word[middle..self.p]);
                if keep(&word) {
                    return;
                }
            }
            return;
        }
        let mut sorted: Vec<(u64, u64)> = (0..left.size.min(MOST))
            .map(|i| left.scrambled(i))
            .map(|i| (left.key(i).wrapping_neg(), i))
            .collect();
        sorted.sort_unstable();
        let index = Index::new(&sorted);
        let mut looks = 0;
        for i in 0..right.size.min(DRAWN) {
            let b = right.scrambled(i);
            for &(_, a) in index.find(&sorted, right.key(b)) {
                let mut word = [0; 32];
                left.write(a, &mut word[..middle]);
                right.write(b, &mut word[middle..self.p]);
                looks += 1;
                if keep(&word) || looks >= self.request.looks {
                    return;
                }
            }
        }
    }

    /// A weight for each position and entry, so that the sum over a word is zero when it is
    /// orthogonal to all given words, and otherwise hardly ever.
    fn keys(&self, given: &[Word], random: &mut Random) -> Vec<[u64; 6]> {
        let mut keys = vec![[0u64; 6]; self.p];
        for word in given {
            let weight = random.bits();
            for (key, &c) in keys.iter_mut().zip(&word[..self.p]) {
                key[usize::from(c)] = key[usize::from(c)].wrapping_add(weight);
                key[usize::from(c ^ 1)] = key[usize::from(c ^ 1)].wrapping_sub(weight);
            }
        }
        keys
    }

    fn attempt(&self, attempt: u64) -> Types {
        let mut random = Random::new(self.request.seed ^ attempt.wrapping_mul(0xD1B5_4A32_D192_ED03));
        let mut chosen: Vec<Word> = Vec::new();
        let wanted = self.request.wanted;
        let mut pool = self.pool(&[], &mut random);
        for &stage in &self.request.stages {
            let splits = self.splits(&pool);
            let left = wanted.saturating_sub(chosen.len());
            let clique = Clique { runs: 4 * self.p as u32, pool: &splits, wanted: [left, 0] };
            for v in clique.greedy(stage.saturating_sub(chosen.len()), &mut random) {
                chosen.extend(pool[v].iter().copied());
            }
            pool = self.pool(&chosen, &mut random);
        }
        let splits = self.splits(&pool);
        let left = wanted.saturating_sub(chosen.len());
        let clique = Clique { runs: 4 * self.p as u32, pool: &splits, wanted: [left, 0] };
        for v in clique.search(self.request.steps, &mut random) {
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

/// The words on some positions, by number.
struct Half<'a> {
    keys: &'a [[u64; 6]],
    /// Whether the first entry is positive.
    positive: bool,
    size: u64,
    step: u64,
    from: u64,
}

impl<'a> Half<'a> {
    fn new(keys: &'a [[u64; 6]], positive: bool, random: &mut Random) -> Self {
        let size = 6u64.pow(keys.len() as u32) / if positive { 2 } else { 1 };
        // Prime to 6.
        let step = (random.bits() % size / 6) * 6 + 1;
        Self { keys, positive, size, step, from: random.bits() % size }
    }

    /// Each number once, in an order that depends on the seed.
    fn scrambled(&self, i: u64) -> u64 {
        let product = u128::from(i) * u128::from(self.step) + u128::from(self.from);
        (product % u128::from(self.size)) as u64
    }

    fn entries(&self, number: u64) -> impl Iterator<Item = u8> {
        let mut rest = number;
        let positive = self.positive;
        (0..self.keys.len()).map(move |j| {
            let base = if positive && j == 0 { 3 } else { 6 };
            let digit = (rest % base) as u8;
            rest /= base;
            if base == 3 { 2 * digit } else { digit }
        })
    }

    fn key(&self, number: u64) -> u64 {
        self.entries(number)
            .zip(self.keys)
            .fold(0, |sum, (code, key)| sum.wrapping_add(key[usize::from(code)]))
    }

    fn write(&self, number: u64, word: &mut [u8]) {
        for (code, place) in self.entries(number).zip(word) {
            *place = code;
        }
    }
}

/// Where the keys that begin with given bits start in a sorted list.
struct Index {
    starts: Vec<u32>,
}

impl Index {
    const BITS: u32 = 20;

    fn new(sorted: &[(u64, u64)]) -> Self {
        let mut starts = vec![0u32; (1 << Self::BITS) + 1];
        for (key, _) in sorted {
            starts[(key >> (64 - Self::BITS)) as usize + 1] += 1;
        }
        for i in 1..starts.len() {
            starts[i] += starts[i - 1];
        }
        Self { starts }
    }

    fn find<'a>(&self, sorted: &'a [(u64, u64)], key: u64) -> &'a [(u64, u64)] {
        let bucket = (key >> (64 - Self::BITS)) as usize;
        let among = &sorted[self.starts[bucket] as usize..self.starts[bucket + 1] as usize];
        let begin = among.partition_point(|x| x.0 < key);
        let end = among[begin..].partition_point(|x| x.0 == key);
        &among[begin..begin + end]
    }
}
