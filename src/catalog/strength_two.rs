//! What can be had at strength 2.

use std::sync::Arc;

use super::bag::Bag;
use super::candidates::Candidates;
use super::compositions::{juxtapositions, level_products};
use super::shelf::{CLOSED, Shelf, Variant};
use crate::algebra::{divisors, prime_power};
use crate::construct::has_conference_blocks;
use crate::recipe::{HadamardRecipe, Recipe, SchemeRecipe};

/// Offers everything known at `runs` runs: families first, then compositions.
pub(super) fn collect<'a>(shelf: &'a Shelf, runs: u64, candidates: &mut Candidates<'a>) {
    let Ok(n) = u32::try_from(runs) else { return };
    families(shelf, n, candidates);
    developed(shelf, n, candidates);
    latin_squares(shelf, n, candidates);
    merging_products(shelf, n, candidates);
    if runs <= CLOSED {
        kronecker_sums(shelf, n, candidates);
        juxtapositions(shelf, runs, 2, candidates);
    }
    level_products(shelf, runs, 2, candidates);
}

fn families<'a>(shelf: &'a Shelf, n: u32, candidates: &mut Candidates<'a>) {
    if n > 2
        && let Some(matrix) = shelf.hadamard.get(n)
    {
        let source = "Hadamard matrix (Plackett & Burman 1946)";
        candidates
            .offer(Bag::from_pairs([(2, n - 1)]), source, move || Arc::new(Recipe::Hadamard { matrix }));
    }
    for (q, e) in roots(n) {
        let factors = (n - 1) / (u32::from(q) - 1);
        candidates.offer(Bag::from_pairs([(q, factors)]), "Rao 1947", move || {
            Arc::new(Recipe::RaoHamming { q: u32::from(q), n: e })
        });
    }
    if n.is_multiple_of(2) {
        for (q, e) in roots(n / 2) {
            let factors = 2 * ((n / 2 - 1) / (u32::from(q) - 1)) - 1;
            candidates.offer(Bag::from_pairs([(q, factors)]), "Addelman & Kempthorne 1961", move || {
                Arc::new(Recipe::AddelmanKempthorne { q: u32::from(q), n: e })
            });
        }
    }
    if let (true, Ok(q)) = (n.is_multiple_of(4) && has_conference_blocks(n / 4), u16::try_from(n / 4)) {
        let source = "blocks from conference matrices (found for this project)";
        candidates.offer(Bag::from_pairs([(2, 2 * (n / 4 - 1)), (q, 1)]), source, move || {
            Arc::new(Recipe::ConferenceBlocks { q: u32::from(q) })
        });
    }
    if let Some((p, m)) = prime_power(n) {
        for d in 1..=m / 2 {
            let (Some(large), Ok(small)) = (p.checked_pow(m - d), u16::try_from(p.pow(d))) else { continue };
            let Ok(level) = u16::try_from(large) else { continue };
            let bag = Bag::from_pairs([(small, large), (level, 1)]);
            candidates.offer(bag, "subspaces meeting in 0 (Bose & Bush 1952)", move || {
                Arc::new(Recipe::LargeAndSmall { p, e: m - d, d })
            });
        }
    }
}

/// The ways to write n = q^e with e at least 2 and q a prime power that fits a level.
fn roots(n: u32) -> Vec<(u16, u32)> {
    let Some((p, m)) = prime_power(n) else { return Vec::new() };
    (1..m)
        .filter(|d| m.is_multiple_of(*d))
        .filter_map(|d| Some((u16::try_from(p.checked_pow(d)?).ok()?, m / d)))
        .collect()
}

/// D(r, c, s) for every s: s^c · r.
fn developed<'a>(shelf: &'a Shelf, n: u32, candidates: &mut Candidates<'a>) {
    for s in divisors(u64::from(n)) {
        let (Ok(level), s) = (u16::try_from(s), s as u32) else { continue };
        let r = n / s;
        let (Some(best), Ok(rows)) = (shelf.schemes.best(r, s), u16::try_from(r)) else { continue };
        let mut bag = Bag::from_pairs([(level, best.columns)]);
        bag.add(rows, 1);
        let source =
            if best.columns == 1 { "full factorial" } else { "difference scheme (Bose & Bush 1952)" };
        candidates.offer(bag, source, move || Arc::new(Recipe::Developed { scheme: best.recipe }));
    }
}

/// Mutually orthogonal Latin squares when the number of runs is a square.
fn latin_squares<'a>(shelf: &'a Shelf, runs: u32, candidates: &mut Candidates<'a>) {
    let n = runs.isqrt();
    let (Ok(level), true) = (u16::try_from(n), n * n == runs) else { return };
    let Some((recipe, source)) = shelf.latin.recipe(level, &shelf.schemes) else { return };
    let bag = Bag::from_pairs([(level, shelf.latin.factors(level, &shelf.schemes))]);
    candidates.offer(bag, &source, move || recipe);
}

/// Methods of Wang & Wu 1991, with the zero columns kept and given up.
fn kronecker_sums<'a>(shelf: &'a Shelf, n: u32, candidates: &mut Candidates<'a>) {
    for m in divisors(u64::from(n)) {
        let n1 = u64::from(n) / m;
        let (Ok(m), Ok(outer)) = (u16::try_from(m), u16::try_from(n1)) else { continue };
        if m < 2 || n1 < 4 {
            continue;
        }
        let variants = shelf.variants(n1, 2);
        for (i, variant) in variants.iter().enumerate() {
            let (mut plain, mut refined) = (Bag::default(), Bag::default());
            let mut schemes = Vec::new();
            for &(s, k) in variant.bag.entries() {
                let Some(best) = shelf.schemes.best(u32::from(m), u32::from(s)) else { continue };
                plain.add(s, k * best.columns);
                refined.add(s, k * (best.columns - 1));
                schemes.push(best);
            }
            if schemes.iter().all(|b| b.columns < 2) {
                continue;
            }
            plain.add(m, 1);
            refined.add(m, 1);
            refined.add(outer, 1);
            let schemes: Vec<Arc<SchemeRecipe>> = schemes.into_iter().map(|b| b.recipe).collect();
            let (variants, of) = (Arc::clone(&variants), move |v: &[Variant]| v[i].recipe());
            let again = (Arc::clone(&variants), schemes.clone());
            candidates.offer(plain, "generalised Kronecker sum (Wang & Wu 1991)", move || {
                let beside = Arc::new(Recipe::FullFactorial { levels: vec![m] });
                Arc::new(Recipe::KroneckerSum { of: of(&variants), schemes, beside })
            });
            let source = "generalised Kronecker sum, zero columns refined (Wang & Wu 1991)";
            candidates.offer(refined, source, move || {
                Arc::new(Recipe::ZeroColumn { of: again.0[i].recipe(), schemes: again.1 })
            });
        }
    }
}

/// OA(n, 2^(n−1)) times H(M) with m columns merged into the m-level factor of an array of M runs.
fn merging_products<'a>(shelf: &'a Shelf, runs: u32, candidates: &mut Candidates<'a>) {
    for n in divisors(u64::from(runs)) {
        let (n, big_m) = (n as u32, runs / n as u32);
        let Some(inner) = shelf.hadamard.get(n).filter(|_| n > 1) else { continue };
        if u64::from(big_m) > CLOSED {
            continue;
        }
        for a in 1..16u32 {
            let m = 1u32 << a;
            if !big_m.is_multiple_of(2 * m) {
                break;
            }
            let Some(right) = shelf.hadamard.get(big_m >> (a - 1)) else { continue };
            let outer = if a == 1 {
                right
            } else {
                let left = Arc::new(HadamardRecipe::Sylvester { k: a - 1 });
                Arc::new(HadamardRecipe::Kronecker { left, right })
            };
            let block = big_m >> (a - 1);
            let merged: Vec<u32> = (0..m / 2).flat_map(|i| [i * block, i * block + 1]).collect();
            let (Ok(level), Ok(product)) = (u16::try_from(m), u16::try_from(n * m)) else { continue };
            let variants = shelf.variants(u64::from(big_m), 2);
            for (i, variant) in variants.iter().enumerate() {
                let Some(mut bag) = variant.bag.without(&Bag::from_pairs([(level, 1)])) else { continue };
                bag.add(2, (n - 1) * (big_m - m));
                bag.add(product, 1);
                let (inner, outer) = (Arc::clone(&inner), Arc::clone(&outer));
                let (merged, variants) = (merged.clone(), Arc::clone(&variants));
                candidates.offer(bag, "merging across a product with a Hadamard matrix", move || {
                    let of = variants[i].recipe();
                    let levels = of.levels().expect("recipes on the shelf are well formed");
                    let factor = levels.iter().position(|&s| s == level).expect("chosen for it") as u32;
                    Arc::new(Recipe::MergingProduct { inner, outer, merged, of, factor })
                });
            }
        }
    }
}
