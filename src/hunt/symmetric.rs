//! Arrays of strength 2 or 3 with a prescribed group of symmetries.
//!
//! The group acts freely on the runs and by translation on the levels, so a column is one symbol
//! per orbit. Columns with many levels are chosen first; each next one is *solved for*: it is
//! orthogonal to all columns that are there, found by backtracking over the orbits with counters.
//! Among the solutions of one kind a clique is grown greedily, at each step the one of a few that
//! leaves most of the others. For strength 3 the next column is orthogonal to the products of any
//! two that are there, a product being the column of the pairs of levels.

mod solver;

use std::time::Instant;

use rayon::prelude::*;

use self::solver::Solver;
use super::clique::Clique;
use super::random::Random;
use super::splits::{Orbit, Split};
use crate::construct::OrbitColumn;
use crate::floor::Effort;

/// The largest number of runs that is searched.
pub const MAX_RUNS: u32 = 128;

/// The usual number of steps for a solution.
pub const STEPS: u64 = 4000;

/// What is looked for.
#[derive(Clone, Debug)]
pub struct SymmetricHunt {
    /// The number of runs, at most [`MAX_RUNS`].
    pub runs: u32,
    /// The levels of the factors.
    pub levels: Vec<u16>,
    /// The strength: 2 or 3.
    pub strength: u32,
    /// The cyclic factors of the group; empty for none.
    pub group: Vec<u16>,
    /// Columns that must be in the array, in the symmetry of the group.
    pub fixed: Vec<OrbitColumn>,
    /// How the group moves the levels.
    pub motion: Motion,
    /// Whether p^e levels are the vectors over Z_p, written in base p, and not the numbers modulo
    /// p^e: another action of the group on them. The columns found then name the symbol of every
    /// run, as for the trivial group.
    pub elementary: bool,
    /// The seed of the random numbers.
    pub seed: u64,
    /// How many attempts are made at the most.
    pub attempts: u64,
    /// How many solutions are drawn for a kind of column before a clique is grown.
    pub pool: usize,
    /// How many steps a solution may take before it is given up.
    pub steps: u64,
    /// How many exchanges improve a clique of two- or three-level columns at strength 2; 0 for
    /// greedy cliques.
    pub exchanges: u64,
}

/// How the group moves the levels of the factors.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Motion {
    /// In any way.
    Any,
    /// Every generator moves them, where their number allows it.
    Every,
    /// For each number of levels and each attempt chosen at random: in any way, not at all, or with
    /// as few elements as possible that do not move them.
    Varied,
}

/// What a hunt came to.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Found {
    /// The columns: all that were asked for, or the most that were met.
    pub columns: Vec<OrbitColumn>,
    /// Whether they are all.
    pub complete: bool,
    /// The attempt that gave them, from 0.
    pub attempt: u64,
}

/// How many attempts are made between looks at the clock; fixed, so that the result does not
/// depend on the number of threads.
const ROUND: u64 = 4;

/// Runs the hunt until the columns are found, the attempts are used up or `deadline` has passed.
///
/// The same hunt gives the same columns for any number of threads, as long as the deadline does
/// not cut it short. `None` when the request makes no sense: runs that the group or a level does
/// not divide, or too many of them.
#[must_use]
pub fn hunt(hunt: &SymmetricHunt, deadline: Option<Instant>) -> Option<Found> {
    let setting = Setting::new(hunt)?;
    let mut best: Option<Found> = None;
    let mut first = 0;
    while first < hunt.attempts && deadline.is_none_or(|d| Instant::now() < d) {
        let round: Vec<Found> = (first..(first + ROUND).min(hunt.attempts))
            .into_par_iter()
            .map(|attempt| setting.attempt(hunt, attempt, &mut Effort::unlimited()))
            .collect();
        for found in round {
            if found.complete {
                return Some(found);
            }
            if best.as_ref().is_none_or(|b| b.columns.len() < found.columns.len()) {
                best = Some(found);
            }
        }
        first += ROUND;
    }
    best
}

/// The attempts of a hunt one after the other, on one thread, until one finds all columns or the
/// effort is used up; the best that was met, `None` when the request makes no sense.
///
/// A step of the effort is a count of one run against one column.
#[must_use]
pub fn attempts(hunt: &SymmetricHunt, effort: &mut Effort<'_>) -> Option<Found> {
    let setting = Setting::new(hunt)?;
    let mut best: Option<Found> = None;
    for attempt in 0..hunt.attempts {
        if !effort.spend(1) {
            break;
        }
        let found = setting.attempt(hunt, attempt, effort);
        if best.as_ref().is_none_or(|b| b.columns.len() < found.columns.len() || found.complete) {
            best = Some(found);
        }
        if best.as_ref().is_some_and(|b| b.complete) {
            break;
        }
    }
    best
}

/// A column with the runs of each level as a bit set.
#[derive(Clone)]
struct Column {
    stored: OrbitColumn,
    test: Test,
}

/// What a column must be orthogonal to: a column, or the product of two.
#[derive(Clone)]
struct Test {
    levels: u16,
    masks: Vec<u128>,
    symbols: Vec<u8>,
}

impl Test {
    /// The column of the pairs of levels; `None` when there are too many of them for the runs.
    fn product(&self, other: &Self) -> Option<Self> {
        let levels = self.levels.checked_mul(other.levels).filter(|&l| l < 256)?;
        let masks = self.masks.iter().flat_map(|a| other.masks.iter().map(move |b| a & b)).collect();
        let pair = |(&a, &b): (&u8, &u8)| (u16::from(a) * other.levels + u16::from(b)) as u8;
        Some(Self { levels, masks, symbols: self.symbols.iter().zip(&other.symbols).map(pair).collect() })
    }
}

/// The columns that are there, and what a further one must be orthogonal to.
#[derive(Default)]
struct Partial {
    columns: Vec<Column>,
    tests: Vec<Test>,
}

impl Partial {
    /// What a column must be orthogonal to when `column` has come too; `None` when no array of the
    /// strength can go on from there.
    fn tests_of(&self, column: &Column, strength: u32) -> Option<Vec<Test>> {
        if strength < 3 || self.columns.is_empty() {
            return Some(vec![column.test.clone()]);
        }
        self.columns.iter().map(|c| column.test.product(&c.test)).collect()
    }

    fn push(&mut self, column: Column, tests: Vec<Test>) {
        if self.columns.len() == 1 && tests.iter().all(|t| t.levels > column.test.levels) {
            // A pair makes the test against the first column alone superfluous.
            self.tests.clear();
        }
        self.tests.extend(tests);
        self.columns.push(column);
    }
}

struct Setting {
    runs: usize,
    order: usize,
    orbits: usize,
    /// For each element of the group how often each generator is applied.
    elements: Vec<Vec<u32>>,
    /// The kinds of columns, most levels first, with their number.
    kinds: Vec<(u16, usize)>,
    elementary: bool,
}

impl Setting {
    fn new(hunt: &SymmetricHunt) -> Option<Self> {
        let order = hunt.group.iter().try_fold(1u32, |n, &g| n.checked_mul(u32::from(g)))?;
        let divides = |s: u16| s > 1 && s < 256 && hunt.runs.is_multiple_of(u32::from(s));
        if hunt.runs == 0
            || hunt.runs > MAX_RUNS
            || order == 0
            || !(2..=3).contains(&hunt.strength)
            || !hunt.runs.is_multiple_of(order)
            || !hunt.levels.iter().all(|&s| divides(s))
        {
            return None;
        }
        let mut kinds: Vec<(u16, usize)> = crate::mix::counts_of(&hunt.levels).into_iter().rev().collect();
        for c in &hunt.fixed {
            let kind = kinds.iter_mut().find(|k| k.0 == c.levels && k.1 > 0)?;
            kind.1 -= 1;
        }
        let elements = (0..order)
            .map(|mut g| {
                hunt.group
                    .iter()
                    .map(|&n| {
                        let digit = g % u32::from(n);
                        g /= u32::from(n);
                        digit
                    })
                    .collect()
            })
            .collect();
        let (runs, order) = (hunt.runs as usize, order as usize);
        Some(Self { runs, order, orbits: runs / order, elements, kinds, elementary: hunt.elementary })
    }

    fn attempt(&self, hunt: &SymmetricHunt, attempt: u64, effort: &mut Effort<'_>) -> Found {
        let mut random = Random::new(hunt.seed ^ attempt.wrapping_mul(0xD1B5_4A32_D192_ED03));
        let mut partial = Partial::default();
        for stored in &hunt.fixed {
            let Some(column) = self.column(stored.clone()) else { break };
            let Some(tests) = partial.tests_of(&column, hunt.strength) else { break };
            if !partial.tests.iter().all(|t| orthogonal(&column.test, t)) {
                break;
            }
            partial.push(column, tests);
        }
        let mut complete = partial.columns.len() == hunt.fixed.len();
        for &(s, count) in &self.kinds {
            complete &= self.extend(hunt, &mut partial, s, count, &mut random, effort);
            if !complete {
                break;
            }
        }
        Found { columns: partial.columns.into_iter().map(|c| c.stored).collect(), complete, attempt }
    }

    /// Adds `count` columns of `s` levels; false when that many were not met.
    fn extend(
        &self,
        hunt: &SymmetricHunt,
        partial: &mut Partial,
        s: u16,
        count: usize,
        random: &mut Random,
        effort: &mut Effort<'_>,
    ) -> bool {
        let mut missing = count;
        let mut pool: Vec<Column> = Vec::new();
        let characters = self.characters(hunt, s, random);
        while missing > 0 {
            if pool.len() < missing {
                self.draw((hunt.pool, hunt.steps), &partial.tests, s, &characters, &mut pool, random, effort);
                if pool.is_empty() || !effort.goes_on() {
                    return false;
                }
            }
            if hunt.exchanges > 0 && hunt.strength == 2 && s <= 3 {
                let chosen = self.exchange(&pool, s, missing, hunt.exchanges, random, effort);
                missing -= chosen.len().min(missing);
                for i in chosen {
                    let tests = vec![pool[i].test.clone()];
                    partial.push(pool[i].clone(), tests);
                }
                return missing == 0;
            }
            let mut choice: Option<(usize, Vec<Test>, usize)> = None;
            for _ in 0..12.min(pool.len()) {
                let i = random.below(pool.len());
                let Some(tests) = partial.tests_of(&pool[i], hunt.strength) else { return false };
                let left = pool.iter().filter(|c| tests.iter().all(|t| orthogonal(&c.test, t))).count();
                if choice.as_ref().is_none_or(|&(_, _, most)| left > most) {
                    choice = Some((i, tests, left));
                }
                effort.spend((pool.len() * usize::from(s)) as u64);
            }
            let Some((i, tests, _)) = choice else { return false };
            let column = pool.swap_remove(i);
            pool.retain(|c| tests.iter().all(|t| orthogonal(&c.test, t)));
            partial.push(column, tests);
            missing -= 1;
        }
        true
    }

    /// A clique of at most `missing` columns of the pool, by exchanges.
    fn exchange(
        &self,
        pool: &[Column],
        s: u16,
        missing: usize,
        exchanges: u64,
        random: &mut Random,
        effort: &mut Effort<'_>,
    ) -> Vec<usize> {
        let split = |c: &Column| {
            let second = if s == 3 { c.test.masks[1] } else { 0 };
            vec![Split { masks: [c.test.masks[0], second], levels: s as u8 }]
        };
        let orbits: Vec<Orbit> = pool.iter().map(split).collect();
        let wanted = if s == 2 { [missing, 0] } else { [0, missing] };
        let mut chosen =
            Clique { runs: self.runs as u32, pool: &orbits, wanted }.search(exchanges, random, effort);
        chosen.truncate(missing);
        chosen
    }

    /// Fills the pool with columns that pass all tests.
    #[allow(clippy::too_many_arguments)]
    fn draw(
        &self,
        (size, steps): (usize, u64),
        tests: &[Test],
        s: u16,
        characters: &[Vec<u16>],
        pool: &mut Vec<Column>,
        random: &mut Random,
        effort: &mut Effort<'_>,
    ) {
        let mut dry = 0;
        let mut seen: std::collections::HashSet<Vec<u128>> =
            pool.iter().map(|c| canonical(&c.test.masks)).collect();
        let mut solver = Solver::new(self, tests, s);
        while pool.len() < size && dry < 40 + size / 4 && effort.goes_on() {
            let shifts = &characters[random.below(characters.len())];
            dry += 1;
            let Some(base) = solver.solve(shifts, steps, random, effort) else { continue };
            let Some(column) = self.column(OrbitColumn { levels: s, shifts: shifts.clone(), base }) else {
                continue;
            };
            if seen.insert(canonical(&column.test.masks)) {
                pool.push(column);
                dry = 0;
            }
        }
    }

    /// The homomorphisms from the group to the translations of `s` levels.
    fn characters(&self, hunt: &SymmetricHunt, s: u16, random: &mut Random) -> Vec<Vec<u16>> {
        let mut all: Vec<Vec<u16>> = vec![Vec::new()];
        for &n in &hunt.group {
            let times = |x: u16| (0..n).fold(0, |sum, _| self.add(s, sum, x));
            let mut steps: Vec<u16> = (0..s).filter(|&x| times(x) == 0).collect();
            if hunt.motion == Motion::Every && steps.len() > 1 {
                steps.remove(0);
            }
            all = all
                .iter()
                .flat_map(|c| steps.iter().map(|&x| c.iter().copied().chain([x]).collect()))
                .collect();
        }
        if hunt.motion == Motion::Varied {
            let still = |c: &Vec<u16>| self.shifts(c, s).iter().filter(|&&x| x == 0).count();
            match random.below(3) {
                0 => {}
                1 => all.truncate(1),
                _ => {
                    let least = all.iter().map(still).min().unwrap_or(0);
                    all.retain(|c| still(c) == least);
                }
            }
        }
        all
    }

    /// The sum of two levels.
    fn add(&self, s: u16, a: u16, b: u16) -> u16 {
        let p = if self.elementary { prime_base(s) } else { s };
        let (mut sum, mut weight, mut a, mut b) = (0, 1, a, b);
        while weight < s {
            sum += (a % p + b % p) % p * weight;
            (a, b, weight) = (a / p, b / p, weight * p);
        }
        sum
    }

    /// For each element of the group what it adds to a level.
    fn shifts(&self, shifts: &[u16], s: u16) -> Vec<u16> {
        let along = |element: &Vec<u32>| {
            element
                .iter()
                .zip(shifts)
                .fold(0, |sum, (&times, &x)| (0..times).fold(sum, |sum, _| self.add(s, sum, x)))
        };
        self.elements.iter().map(along).collect()
    }

    /// `None` when the column does not fit the setting.
    fn column(&self, stored: OrbitColumn) -> Option<Column> {
        let s = stored.levels;
        if stored.base.len() != self.orbits || s < 2 || stored.base.iter().any(|&b| b >= s) {
            return None;
        }
        let shifts = self.shifts(&stored.shifts, s);
        let (mut masks, mut symbols) = (vec![0u128; usize::from(s)], vec![0u8; self.runs]);
        for (o, &b) in stored.base.iter().enumerate() {
            for (g, &shift) in shifts.iter().enumerate() {
                let symbol = self.add(s, b, shift);
                masks[usize::from(symbol)] |= 1 << (o * self.order + g);
                symbols[o * self.order + g] = symbol as u8;
            }
        }
        let stored = if self.elementary {
            let base = symbols.iter().map(|&x| u16::from(x)).collect();
            OrbitColumn { levels: s, shifts: Vec::new(), base }
        } else {
            stored
        };
        Some(Column { stored, test: Test { levels: s, masks, symbols } })
    }
}

/// The prime of which `s` is a power, `s` itself when it is none.
fn prime_base(s: u16) -> u16 {
    let p = (2..=s).find(|p| s.is_multiple_of(*p)).unwrap_or(s);
    let mut rest = s;
    while rest.is_multiple_of(p) && rest > 1 {
        rest /= p;
    }
    if rest == 1 { p } else { s }
}

/// The masks in an order that does not depend on the names of the levels.
fn canonical(masks: &[u128]) -> Vec<u128> {
    let mut masks = masks.to_vec();
    masks.sort_unstable();
    masks
}

fn orthogonal(a: &Test, b: &Test) -> bool {
    let runs = a.symbols.len() as u32;
    let product = u32::from(a.levels) * u32::from(b.levels);
    runs.is_multiple_of(product)
        && a.masks.iter().all(|x| b.masks.iter().all(|y| (x & y).count_ones() == runs / product))
}

#[cfg(test)]
mod tests;
