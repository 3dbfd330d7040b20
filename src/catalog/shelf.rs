//! [`Shelf`]: for every number of runs the mixes that can be had.

use std::collections::HashMap;
use std::sync::{Arc, Mutex};

use super::arrange::arrange;
use super::bag::Bag;
use super::books::{HadamardBook, SchemeBook};
use super::candidates::Candidates;
use super::fit::{Host, Packer, Placement};
use super::latin_book::LatinBook;
use super::stored::StoredArrays;
use super::{strength_any, strength_three, strength_two};
use crate::recipe::Recipe;

/// Up to this number of runs the shelf is closed under all compositions; above it, families,
/// products and stored arrays stand on it.
pub const CLOSED: u64 = 144;

/// No more than this many splittings of the parents at one number of runs are used in
/// compositions (more do not occur up to [`CLOSED`] runs).
const MAX_VARIANTS: usize = 4096;

/// A mix that is not obtained from another one at the same number of runs by dropping, merging or
/// splitting columns, with its recipe.
#[derive(Clone, Debug, PartialEq)]
pub struct Parent {
    /// The levels of the columns as a multiset.
    pub bag: Bag,
    /// How the array is built.
    pub recipe: Arc<Recipe>,
    /// Where it comes from: a construction with its publication, or a stored starter.
    pub source: String,
}

/// An array obtained from a parent (or from the one column that numbers the runs) by splitting
/// columns only.
#[derive(Clone, Debug)]
pub struct Variant {
    /// The levels of the columns as a multiset.
    pub bag: Bag,
    runs: u64,
    parent: Option<Arc<Parent>>,
    placement: Placement,
}

impl Variant {
    /// How the array is built.
    #[must_use]
    pub fn recipe(&self) -> Arc<Recipe> {
        match &self.parent {
            Some(parent) => arrange(&parent.recipe, &self.placement, None),
            None => Arc::new(Recipe::FullFactorial {
                levels: vec![u16::try_from(self.runs).expect("made for at most 65535 runs only")],
            }),
        }
    }
}

/// Lists by (strength, runs).
type Memo<T> = Mutex<HashMap<(u32, u64), Arc<Vec<T>>>>;

/// What is on the shelf, worked out on demand and remembered.
///
/// The answer for a number of runs depends on nothing but the version of the crate: the shelf may
/// be shared between threads, and each sees the same parents in the same order.
#[derive(Debug)]
pub struct Shelf {
    /// The Hadamard matrices.
    pub hadamard: Arc<HadamardBook>,
    /// The difference schemes.
    pub schemes: SchemeBook,
    /// The mutually orthogonal Latin squares.
    pub latin: LatinBook,
    stored: StoredArrays,
    parents: Memo<Arc<Parent>>,
    variants: Memo<Variant>,
}

impl Default for Shelf {
    fn default() -> Self {
        Self::new()
    }
}

impl Shelf {
    /// The shelf with everything that is stored in the crate.
    #[must_use]
    pub fn new() -> Self {
        let hadamard = Arc::new(HadamardBook::new());
        Self {
            schemes: SchemeBook::new(Arc::clone(&hadamard)),
            hadamard,
            latin: LatinBook::new(),
            stored: StoredArrays::new(),
            parents: Mutex::default(),
            variants: Mutex::default(),
        }
    }

    /// The parents at `runs` runs and `strength`, largest first.
    ///
    /// Up to [`CLOSED`] runs the maximal mixes reached by families, stored arrays and their
    /// compositions; above, what families, stored arrays and products give, without the exact search
    /// for mixes that come from one another. An array of a single factor
    /// of `runs` levels is taken for granted and not listed. Cost: milliseconds for most numbers
    /// of runs, once.
    #[must_use]
    pub fn parents(&self, runs: u64, strength: u32) -> Arc<Vec<Arc<Parent>>> {
        let key = (strength, runs);
        if let Some(known) = lock(&self.parents).get(&key) {
            return Arc::clone(known);
        }
        let mut candidates = Candidates::default();
        match strength {
            0 | 1 => {}
            2 => strength_two::collect(self, runs, &mut candidates),
            3 => strength_three::collect(self, runs, &mut candidates),
            _ => strength_any::collect(self, runs, strength, &mut candidates),
        }
        self.stored.offer(runs, strength, &mut candidates);
        let found = Arc::new(if runs <= CLOSED {
            candidates.maximal(&Packer::new(self, strength))
        } else {
            candidates.not_contained()
        });
        lock(&self.parents).entry(key).or_insert(found).clone()
    }

    /// All mixes obtained at `runs` runs by splitting columns only, the one `runs`-level column
    /// first; above [`CLOSED`] runs that column and the parents, unsplit. Empty above 65,535 runs.
    #[must_use]
    pub fn variants(&self, runs: u64, strength: u32) -> Arc<Vec<Variant>> {
        let key = (strength, runs);
        if let Some(known) = lock(&self.variants).get(&key) {
            return Arc::clone(known);
        }
        let found = Arc::new(self.find_variants(runs, strength));
        lock(&self.variants).entry(key).or_insert(found).clone()
    }

    fn find_variants(&self, runs: u64, strength: u32) -> Vec<Variant> {
        let Ok(levels) = u16::try_from(runs) else { return Vec::new() };
        if levels < 2 {
            return Vec::new();
        }
        let mut found = vec![Variant {
            bag: Bag::from_pairs([(levels, 1)]),
            runs,
            parent: None,
            placement: vec![(levels, Host::As(levels))],
        }];
        let mut seen = std::collections::HashSet::new();
        for parent in self.parents(runs, strength).iter() {
            let mut partial: Vec<(Bag, Placement)> = vec![Default::default()];
            for &(s, count) in parent.bag.entries() {
                let choices = if runs <= CLOSED { self.splittings(s, strength) } else { Vec::new() };
                partial = spread(&partial, s, count, &choices);
                partial.truncate(MAX_VARIANTS);
            }
            for (bag, placement) in partial {
                if found.len() < MAX_VARIANTS && seen.insert(bag.clone()) {
                    found.push(Variant { bag, runs, parent: Some(Arc::clone(parent)), placement });
                }
            }
        }
        found
    }

    /// What one column of `s` levels can be split into, itself first.
    fn splittings(&self, s: u16, strength: u32) -> Vec<(Bag, Host)> {
        let variants = self.variants(u64::from(s), strength);
        let mut out = Vec::with_capacity(variants.len());
        for v in variants.iter() {
            let host = match &v.parent {
                None => Host::As(s),
                Some(by) => Host::Split { by: Arc::clone(by), hosts: v.placement.clone() },
            };
            out.push((v.bag.clone(), host));
        }
        out
    }
}

/// Every way to give each of `count` columns of `s` levels one of the choices, on top of every
/// partial result.
fn spread(
    partial: &[(Bag, Placement)],
    s: u16,
    count: u32,
    choices: &[(Bag, Host)],
) -> Vec<(Bag, Placement)> {
    if choices.len() < 2 {
        let host = choices.first().map_or(Host::As(s), |c| c.1.clone());
        return partial
            .iter()
            .map(|(bag, placement)| {
                let mut bag = bag.clone();
                bag.add(s, count);
                let mut placement = placement.clone();
                placement.extend(std::iter::repeat_n((s, host.clone()), count as usize));
                (bag, placement)
            })
            .collect();
    }
    let mut out = Vec::new();
    let mut counts = vec![0u32; choices.len()];
    counts[0] = count;
    loop {
        for (bag, placement) in partial {
            let (mut bag, mut placement) = (bag.clone(), placement.clone());
            for (n, (piece, host)) in counts.iter().zip(choices) {
                for &(r, k) in piece.entries() {
                    bag.add(r, k * n);
                }
                placement.extend(std::iter::repeat_n((s, host.clone()), *n as usize));
            }
            out.push((bag, placement));
            if out.len() >= MAX_VARIANTS {
                return out;
            }
        }
        if !next_composition(&mut counts) {
            return out;
        }
    }
}

/// The next way to write the same sum as an ordered list of non-negative numbers, from
/// (n, 0, …, 0) to (0, …, 0, n).
fn next_composition(counts: &mut [u32]) -> bool {
    let last = counts.len() - 1;
    let Some(i) = counts[..last].iter().rposition(|&c| c > 0) else { return false };
    let tail = std::mem::take(&mut counts[last]);
    counts[i] -= 1;
    counts[i + 1] = tail + 1;
    true
}

fn lock<T>(mutex: &Mutex<T>) -> std::sync::MutexGuard<'_, T> {
    mutex.lock().unwrap_or_else(std::sync::PoisonError::into_inner)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn compositions_are_complete() {
        let mut counts = vec![3, 0, 0];
        let mut all = std::collections::HashSet::from([counts.clone()]);
        while next_composition(&mut counts) {
            assert_eq!(counts.iter().sum::<u32>(), 3);
            assert!(all.insert(counts.clone()));
        }
        assert_eq!(all.len(), 10);
    }
}
