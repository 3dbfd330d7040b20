//! Compositions that keep any strength.

use std::sync::Arc;

use super::arrange::arrange;
use super::bag::Bag;
use super::candidates::Candidates;
use super::fit::Host;
use super::shelf::{CLOSED, Shelf, Variant};
use crate::algebra::divisors;
use crate::recipe::{Part, Recipe};

/// Above [`CLOSED`] runs one factor of a product has at most so many runs, and of each factor only
/// so many parents, and of each pair only so many pairings, are used.
const FEW: usize = 4;

/// Column-by-column products of all pairs of arrays whose numbers of runs multiply to `runs`.
///
/// A column of s·s' levels can be split into s and s' at any strength, so as many columns as
/// possible are paired.
pub(super) fn level_products<'a>(shelf: &'a Shelf, runs: u64, t: u32, candidates: &mut Candidates<'a>) {
    for n1 in divisors(runs).into_iter().filter(|&n1| n1 > 1 && n1 * n1 <= runs && n1 <= CLOSED) {
        let (left, right) = (shelf.variants(n1, t), shelf.variants(runs / n1, t));
        let few = if runs <= CLOSED { usize::MAX } else { FEW };
        for (i, a) in left.iter().enumerate().take(few) {
            for (j, b) in right.iter().enumerate().take(few) {
                if i == 0 && j == 0 {
                    continue;
                }
                for pairing in pairings(&a.bag, &b.bag).into_iter().take(few) {
                    let bag = pairing.bag(&a.bag, &b.bag);
                    let (left, right) = (Arc::clone(&left), Arc::clone(&right));
                    candidates.offer(bag, "product, level by level (Bush 1952)", move || {
                        pairing.recipe(&left[i], &right[j])
                    });
                }
            }
        }
    }
}

/// How many pairs of an s-level and an s'-level column are made.
#[derive(Clone, Debug)]
struct Pairing(Vec<(u16, u16, u32)>);

impl Pairing {
    fn bag(&self, a: &Bag, b: &Bag) -> Bag {
        let (mut a, mut b, mut out) = (a.clone(), b.clone(), Bag::default());
        for &(s, s2, k) in &self.0 {
            a.take(s, k);
            b.take(s2, k);
            out.add(s * s2, k);
        }
        out.union(&a).union(&b)
    }

    fn recipe(&self, a: &Variant, b: &Variant) -> Arc<Recipe> {
        let (left, right) = (a.recipe(), b.recipe());
        let columns = |recipe: &Recipe, wanted: Vec<u16>| -> Vec<u32> {
            let levels = recipe.levels().expect("recipes on the shelf are well formed");
            let mut used = vec![false; levels.len()];
            wanted
                .into_iter()
                .map(|s| {
                    let i = (0..levels.len())
                        .find(|&i| levels[i] == s && !used[i])
                        .expect("the pairing takes columns that are there");
                    used[i] = true;
                    i as u32
                })
                .collect()
        };
        let repeated = |pick: fn(&(u16, u16, u32)) -> u16| -> Vec<u16> {
            self.0.iter().flat_map(|p| std::iter::repeat_n(pick(p), p.2 as usize)).collect()
        };
        let pairs = columns(&left, repeated(|p| p.0)).into_iter().zip(columns(&right, repeated(|p| p.1)));
        let pairs = pairs.collect();
        Arc::new(Recipe::LevelProduct { left, right, pairs })
    }
}

/// The pairings to which no pair can be added.
fn pairings(a: &Bag, b: &Bag) -> Vec<Pairing> {
    let mut cells: Vec<(u16, u16)> = Vec::new();
    for &(s, _) in a.entries() {
        for &(s2, _) in b.entries() {
            if u32::from(s) * u32::from(s2) <= u32::from(u16::MAX) {
                cells.push((s, s2));
            }
        }
    }
    let mut out = Vec::new();
    fill(&cells, 0, &mut (a.clone(), b.clone()), &mut Vec::new(), &mut out);
    out
}

/// Chooses the number of pairs of `cells[at]` and the ones behind it.
fn fill(
    cells: &[(u16, u16)],
    at: usize,
    free: &mut (Bag, Bag),
    chosen: &mut Vec<(u16, u16, u32)>,
    out: &mut Vec<Pairing>,
) {
    /// More are not looked at; two arrays with up to three numbers of levels have fewer.
    const MOST: usize = 256;
    if out.len() >= MOST {
        return;
    }
    let Some(&(s, s2)) = cells.get(at) else {
        if cells.iter().all(|&(s, s2)| free.0.count(s) == 0 || free.1.count(s2) == 0) {
            out.push(Pairing(chosen.clone()));
        }
        return;
    };
    let top = free.0.count(s).min(free.1.count(s2));
    let shared = cells[at + 1..].iter().any(|c| c.0 == s) || cells[at + 1..].iter().any(|c| c.1 == s2);
    let least = if shared { 0 } else { top };
    for k in (least..=top).rev() {
        free.0.take(s, k);
        free.1.take(s2, k);
        if k > 0 {
            chosen.push((s, s2, k));
        }
        fill(cells, at + 1, free, chosen, out);
        if k > 0 {
            chosen.pop();
        }
        free.0.add(s, k);
        free.1.add(s2, k);
    }
}

/// Two arrays on top of each other, the named columns adding up to a factor of p + q levels.
pub(super) fn juxtapositions<'a>(shelf: &'a Shelf, runs: u64, t: u32, candidates: &mut Candidates<'a>) {
    for w in divisors(runs) {
        let lambda = runs / w;
        let Ok(level) = u16::try_from(w) else { continue };
        if w < 3 || lambda < 2 {
            continue;
        }
        for p in 1..=level / 2 {
            let q = level - p;
            let (upper, lower) =
                (shelf.variants(lambda * u64::from(p), t), shelf.variants(lambda * u64::from(q), t));
            for (i, a) in upper.iter().enumerate() {
                let Some(rest_a) = beside(&a.bag, p) else { continue };
                for (j, b) in lower.iter().enumerate() {
                    let Some(rest_b) = beside(&b.bag, q) else { continue };
                    let common = rest_a.meet(&rest_b);
                    if common.factors() + 1 < u64::from(t) {
                        continue;
                    }
                    let mut bag = common.clone();
                    bag.add(level, 1);
                    let (upper, lower) = (Arc::clone(&upper), Arc::clone(&lower));
                    candidates.offer(bag, "juxtaposition", move || {
                        let parts = vec![part(&upper[i], p, &common), part(&lower[j], q, &common)];
                        Arc::new(Recipe::Juxtapose { parts })
                    });
                }
            }
        }
    }
}

/// The bag without one p-level column; for p = 1 the whole bag.
fn beside(bag: &Bag, p: u16) -> Option<Bag> {
    if p == 1 { Some(bag.clone()) } else { bag.without(&Bag::from_pairs([(p, 1)])) }
}

/// The variant cut down to its named column and the common ones, in the same order in each part.
fn part(variant: &Variant, p: u16, common: &Bag) -> Part {
    let mut wanted: Vec<u16> = if p == 1 { Vec::new() } else { vec![p] };
    for &(s, k) in common.entries() {
        wanted.extend(std::iter::repeat_n(s, k as usize));
    }
    let placement = wanted.iter().map(|&s| (s, Host::As(s))).collect();
    Part { of: arrange(&variant.recipe(), &placement, Some(&wanted)), column: (p > 1).then_some(0) }
}
