//! What can be had at any strength.

use std::sync::Arc;

use super::bag::Bag;
use super::candidates::Candidates;
use super::compositions::level_products;
use super::shelf::Shelf;
use super::stored::codes;
use crate::algebra::{divisors, prime_power};
use crate::recipe::Recipe;

/// Offers everything known at `runs` runs and strength t ≥ 4: full factorials, Bush, foldover,
/// codes, products.
pub(super) fn collect<'a>(shelf: &'a Shelf, runs: u64, t: u32, candidates: &mut Candidates<'a>) {
    full_factorials(runs, candidates);
    if let Some((p, m)) = u32::try_from(runs).ok().and_then(prime_power)
        && m.is_multiple_of(t)
        && let Ok(level) = u16::try_from(p.pow(m / t))
    {
        let q = u32::from(level);
        if q + 1 > t {
            candidates.offer(Bag::from_pairs([(level, q + 1)]), "Bush 1952", move || {
                Arc::new(Recipe::Bush { q, t })
            });
        }
    }
    if t % 2 == 1 && runs.is_multiple_of(2) {
        for variant in shelf.variants(runs / 2, t - 1).iter() {
            if let [(2, k)] = variant.bag.entries() {
                let of = variant.recipe();
                candidates.offer(Bag::from_pairs([(2, k + 1)]), "foldover", move || {
                    Arc::new(Recipe::Foldover { of })
                });
            }
        }
    }
    codes(runs, t, candidates);
    level_products(shelf, runs, t, candidates);
}

/// The full factorials of two factors; those of more come from them by splitting.
pub(super) fn full_factorials(runs: u64, candidates: &mut Candidates<'_>) {
    for s in divisors(runs).into_iter().filter(|&s| s > 1 && s * s <= runs) {
        if let (Ok(a), Ok(b)) = (u16::try_from(s), u16::try_from(runs / s)) {
            let mut bag = Bag::from_pairs([(a, 1)]);
            bag.add(b, 1);
            candidates
                .offer(bag, "full factorial", move || Arc::new(Recipe::FullFactorial { levels: vec![a, b] }));
        }
    }
}
