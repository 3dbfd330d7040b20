//! Stored arrays and codes.

use std::collections::HashMap;
use std::sync::Arc;

use super::bag::Bag;
use super::candidates::Candidates;
use super::seed;
use crate::algebra::prime_power;
use crate::construct::field::greedy_points;
use crate::recipe::Recipe;

/// The names of the stored arrays by (runs, strength). A seed is read when its number of runs is
/// asked for, not before.
#[derive(Debug)]
pub(super) struct StoredArrays {
    names: HashMap<(u64, u32), Vec<&'static str>>,
}

impl StoredArrays {
    pub(super) fn new() -> Self {
        let mut names: HashMap<_, Vec<_>> = HashMap::new();
        for entry in seed::arrays() {
            names.entry((entry.runs, entry.strength)).or_default().push(entry.name);
        }
        Self { names }
    }

    /// Offers the arrays stored with this number of runs and this strength.
    pub(super) fn offer(&self, runs: u64, strength: u32, candidates: &mut Candidates<'_>) {
        for name in self.names.get(&(runs, strength)).into_iter().flatten() {
            let Some(seed) = seed::find(name) else { continue };
            let Some(recipe) = seed.kind.recipe() else { continue };
            let Ok(levels) = recipe.levels() else { continue };
            let source = format!("stored: {}", seed.source);
            candidates.offer(Bag::of_levels(&levels), &source, move || Arc::new(recipe));
        }
    }
}

/// A cyclic code whose dual is on the shelf: (q, length, zeros, extended, dimension of the dual,
/// strength). A test computes every dimension and strength.
type Cyclic = (u32, u32, &'static [u32], bool, u32, u32);

/// The Golay, BCH and other codes with at least as many factors at their strength as
/// [`greedy_points`] and the other families reach; those that reach more are found by
/// `examples/find_codes`, with arguments 2 127 12, 3 80 7 and 4 65 6.
const CYCLIC: &[Cyclic] = &[
    (2, 17, &[1], false, 8, 4),
    (2, 23, &[1], false, 11, 6),
    (2, 23, &[1], true, 12, 7),
    (2, 31, &[1, 3], false, 10, 4),
    (2, 31, &[1, 3], true, 11, 5),
    (2, 33, &[0, 1], false, 11, 5),
    (2, 63, &[1, 3], true, 13, 5),
    (2, 65, &[1], false, 12, 4),
    (2, 127, &[1, 3], false, 14, 4),
    (2, 127, &[1, 3], true, 15, 5),
    (3, 11, &[1], false, 5, 4),
    (3, 11, &[1], true, 6, 5),
    (3, 13, &[1, 4], false, 6, 4),
    (3, 13, &[1, 4], true, 7, 5),
    (3, 26, &[1, 2], true, 7, 4),
    (4, 11, &[1], false, 5, 4),
    (4, 11, &[1], true, 6, 5),
];

/// Up to this number of runs points are taken greedily.
const GREEDY: u64 = 2048;

/// Offers codes of strength t ≥ 4.
pub(super) fn codes(runs: u64, t: u32, candidates: &mut Candidates<'_>) {
    let Some((p, m)) = u32::try_from(runs).ok().and_then(prime_power) else { return };
    for &(q, length, zeros, extended, dimension, strength) in CYCLIC {
        if strength >= t && u64::from(q).checked_pow(dimension) == Some(runs) {
            let bag = Bag::from_pairs([(q as u16, length + u32::from(extended))]);
            candidates.offer(bag, "dual of a cyclic code", move || {
                Arc::new(Recipe::DualOfCyclic { q, length, zeros: zeros.to_vec(), extended, strength })
            });
        }
    }
    if p == 2 && m.is_multiple_of(4) && (8..=28).contains(&m) && t <= 5 {
        let m = m / 2;
        candidates
            .offer(Bag::from_pairs([(2, 1 << m)]), "Kerdock 1972", move || Arc::new(Recipe::Kerdock { m }));
    }
    if p == 2 {
        reed_muller(m, t, candidates);
    }
    for d in (1..m).filter(|d| m.is_multiple_of(*d) && runs <= GREEDY && t < 16) {
        let (q, n) = (p.pow(d), m / d);
        let Ok(points) = greedy_points(q, n, t) else { continue };
        let bag = Bag::from_pairs([(q as u16, points.len() as u32)]);
        candidates.offer(bag, "lexicographic code (Conway & Sloane 1986)", move || {
            let subspaces = points.into_iter().map(|p| vec![p]).collect();
            Arc::new(Recipe::Subspaces { q, n, subspaces, strength: t })
        });
    }
}

/// Reed–Muller codes of dimension k and strength at least t.
fn reed_muller(k: u32, t: u32, candidates: &mut Candidates<'_>) {
    for m in 3..=16u32 {
        for r in 1..m {
            let dimension: u32 = (0..=r).map(|i| num_integer::binomial(m, i)).sum();
            if dimension == k && (1u64 << (r + 1)) > u64::from(t) {
                let source = "Reed–Muller code (Muller 1954)";
                candidates.offer(Bag::from_pairs([(2, 1 << m)]), source, move || {
                    Arc::new(Recipe::ReedMuller { r, m })
                });
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::construct::code::dual_of_cyclic;

    #[test]
    fn the_strengths_of_the_cyclic_codes() {
        for &(q, n, zeros, extended, dimension, strength) in CYCLIC {
            let code = dual_of_cyclic(q, n, zeros, extended).unwrap();
            assert_eq!(code.dimension(), dimension as usize, "{q} {n} {zeros:?}");
            assert_eq!(code.dual_distance().unwrap(), strength as usize + 1, "{q} {n} {zeros:?}");
        }
    }

    #[test]
    fn every_stored_array_is_found_by_its_runs() {
        let stored = StoredArrays::new();
        for entry in seed::arrays() {
            let recipe = seed::find(entry.name).unwrap().kind.recipe().unwrap();
            assert_eq!(recipe.runs(), Ok(entry.runs as usize), "{}", entry.name);
            assert_eq!(recipe.strength(), entry.strength);
            assert!(stored.names[&(entry.runs, entry.strength)].contains(&entry.name));
        }
    }
}
