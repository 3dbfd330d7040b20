//! What can be had at strength 3.

use std::sync::Arc;

use super::bag::Bag;
use super::candidates::Candidates;
use super::compositions::{juxtapositions, level_products};
use super::shelf::{CLOSED, Shelf};
use super::strength_any::full_factorials;
use crate::algebra::{divisors, prime_power};
use crate::recipe::{Recipe, Signs};

/// Offers everything known at `runs` runs: families first, then compositions.
pub(super) fn collect<'a>(shelf: &'a Shelf, runs: u64, candidates: &mut Candidates<'a>) {
    let Ok(n) = u32::try_from(runs) else { return };
    full_factorials(runs, candidates);
    geometry(n, candidates);
    hadamard_based(shelf, n, candidates);
    if runs <= CLOSED {
        juxtapositions(shelf, runs, 3, candidates);
    }
    level_products(shelf, runs, 3, candidates);
}

/// Points and subspaces over a finite field, any three independent.
fn geometry(n: u32, candidates: &mut Candidates<'_>) {
    let Some((p, m)) = prime_power(n) else { return };
    for d in (1..=m).filter(|d| m.is_multiple_of(*d)) {
        let (q, e) = (p.pow(d), m / d);
        let Ok(level) = u16::try_from(q) else { continue };
        if e == 3 {
            let factors = if q.is_multiple_of(2) { q + 2 } else { q + 1 };
            candidates.offer(Bag::from_pairs([(level, factors)]), "Bush 1952", move || {
                Arc::new(Recipe::Bush { q, t: 3 })
            });
        }
        if e == 4 {
            candidates.offer(
                Bag::from_pairs([(level, q * q + 1)]),
                "elliptic quadric (Bose 1947)",
                move || Arc::new(Recipe::Ovoid { q }),
            );
        }
        for k in 2..e {
            let Ok(large) = u16::try_from(q.pow(e - k)) else { continue };
            if u64::from(e) > (u64::from(q).pow(k) - 1) / u64::from(q - 1) {
                continue;
            }
            let mut bag = Bag::from_pairs([(level, e)]);
            bag.add(large, 1);
            candidates.offer(bag, "cosets of a code of dual distance 3", move || {
                Arc::new(Recipe::CodeCosets { q, n: e, k })
            });
        }
    }
    if p == 2 {
        for a in (2..).take_while(|a| 2 * a < m) {
            let d = m - 2 * a;
            let (Ok(level), Some(points)) = (u16::try_from(1u32 << a), (1u32 << d).checked_sub(1)) else {
                continue;
            };
            let bag = Bag::from_pairs([(level, 2), (2, points << a)]);
            candidates.offer(bag, "two subspaces and points, any three independent", move || {
                Arc::new(Recipe::TwoSubspaces { m: a, d })
            });
        }
    }
}

fn hadamard_based<'a>(shelf: &'a Shelf, n: u32, candidates: &mut Candidates<'a>) {
    if n.is_multiple_of(2)
        && n > 4
        && let Some(matrix) = shelf.hadamard.get(n / 2)
    {
        candidates.offer(Bag::from_pairs([(2, n / 2)]), "foldover (Box & Wilson 1951)", move || {
            Arc::new(Recipe::Foldover { of: Arc::new(Recipe::Hadamard { matrix }) })
        });
    }
    for s in divisors(u64::from(n)) {
        let (Ok(level), s) = (u16::try_from(s), s as u32) else { continue };
        if s.is_multiple_of(2)
            && n / s > 2
            && let Some(matrix) = shelf.hadamard.get(n / s)
        {
            let mut bag = Bag::from_pairs([(2, n / s - 1)]);
            bag.add(level, 1);
            candidates.offer(bag, "saturated slices and their complements", move || {
                Arc::new(Recipe::EvenLevel { s, matrix })
            });
        }
        if n == 8 * s && s % 2 == 1 && s >= 3 {
            let factors = if s == 3 { 4 } else { 6 };
            candidates.offer(Bag::from_pairs([(2, factors), (level, 1)]), "slices of 8 runs", move || {
                Arc::new(Recipe::EightRunsPerLevel { s })
            });
        }
        two_grids(shelf, n, s, candidates);
    }
}

/// N = 2·s1·s2.
fn two_grids<'a>(shelf: &'a Shelf, n: u32, s1: u32, candidates: &mut Candidates<'a>) {
    if !n.is_multiple_of(2 * s1) {
        return;
    }
    let s2 = n / (2 * s1);
    let (Ok(a), Ok(b)) = (u16::try_from(s1), u16::try_from(s2)) else { return };
    if s1 < 2 || s1 > s2 {
        return;
    }
    let signs = |s: u32| match shelf.hadamard.get(s) {
        Some(matrix) => Some((s, Signs::Matrix(matrix))),
        None => s.is_multiple_of(2).then_some((2, Signs::Halves(s))),
    };
    let (Some((m1, left)), Some((m2, right))) = (signs(s1), signs(s2)) else { return };
    let bag = Bag::from_pairs([(a, 1), (b, 1), (2, m1.min(m2))]);
    candidates.offer(bag, "two grids of signs", move || Arc::new(Recipe::TwoGrids { left, right }));
}
