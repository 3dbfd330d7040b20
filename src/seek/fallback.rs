//! An array that can always be had, however large: it ends the search.

use std::sync::Arc;

use crate::algebra::factorise;
use crate::mix::Mix;
use crate::recipe::Recipe;

/// The better one of the full factorial and the product, over the primes, of linear arrays; `None`
/// when both have more than 2^63 runs.
pub(super) fn fallback(mix: &Mix, t: u32) -> Option<(u64, Recipe)> {
    let full = mix.full_factorial().and_then(|n| u64::try_from(n).ok()).filter(|&n| n < 1 << 63);
    let linear = by_primes(mix, t);
    match (full, linear) {
        (Some(full), Some((n, recipe))) if n < full => Some((n, recipe)),
        (Some(full), _) => Some((full, Recipe::FullFactorial { levels: mix.levels().to_vec() })),
        (None, linear) => linear,
    }
}

/// For each prime p the p-parts of the levels, in the factors that have one.
struct Part {
    p: u64,
    factors: Vec<usize>,
    levels: Vec<u16>,
}

fn by_primes(mix: &Mix, t: u32) -> Option<(u64, Recipe)> {
    let mut parts: Vec<Part> = Vec::new();
    for (j, &s) in mix.levels().iter().enumerate() {
        for (p, e) in factorise(u64::from(s)) {
            let level = u16::try_from(p.pow(e)).ok()?;
            match parts.iter_mut().find(|part| part.p == p) {
                Some(part) => {
                    part.factors.push(j);
                    part.levels.push(level);
                }
                None => parts.push(Part { p, factors: vec![j], levels: vec![level] }),
            }
        }
    }
    let mut product: Option<(u64, Recipe, Vec<usize>)> = None;
    for part in parts {
        let (runs, recipe) = linear(&part, t)?;
        product = Some(match product {
            None => (runs, recipe, part.factors),
            Some((n, left, factors)) => {
                let (recipe, factors) = multiply(left, &factors, recipe, &part.factors);
                (n.checked_mul(runs).filter(|&n| n < 1 << 63)?, recipe, factors)
            }
        });
    }
    let (runs, recipe, factors) = product?;
    let mut take = vec![0u32; factors.len()];
    for (position, &factor) in (0u32..).zip(&factors) {
        take[factor] = position;
    }
    if take.iter().copied().eq(0..take.len() as u32) {
        return Some((runs, recipe));
    }
    Some((runs, Recipe::Arrange { of: Arc::new(recipe), split: vec![], take: Some(take), merge: vec![] }))
}

/// The level-by-level product of two arrays whose columns belong to the named factors; a factor in
/// both gets the product of its levels.
fn multiply(left: Recipe, a: &[usize], right: Recipe, b: &[usize]) -> (Recipe, Vec<usize>) {
    let pairs: Vec<(usize, usize)> = a
        .iter()
        .enumerate()
        .filter_map(|(i, factor)| Some((i, b.iter().position(|f| f == factor)?)))
        .collect();
    let paired = pairs.iter().map(|&(i, _)| a[i]);
    let only_a = a.iter().filter(|f| !b.contains(f)).copied();
    let only_b = b.iter().filter(|f| !a.contains(f)).copied();
    let factors = paired.chain(only_a).chain(only_b).collect();
    let pairs = pairs.iter().map(|&(i, j)| (i as u32, j as u32)).collect();
    (Recipe::LevelProduct { left: Arc::new(left), right: Arc::new(right), pairs }, factors)
}

/// A linear array over GF(p) or an extension for levels that are powers of p.
fn linear(part: &Part, t: u32) -> Option<(u64, Recipe)> {
    let k = part.levels.len() as u64;
    let full = part.levels.iter().try_fold(1u64, |n, &s| n.checked_mul(u64::from(s)));
    let largest = u64::from(*part.levels.iter().max()?);
    let power = if t == 2 { points(largest, k) } else { polynomials(part.p, largest, k, t) };
    match (full, power) {
        (Some(full), Some((runs, _))) if full <= runs => {
            Some((full, Recipe::FullFactorial { levels: part.levels.clone() }))
        }
        (_, Some((runs, recipe))) => Some((runs, cut(recipe, &part.levels))),
        (Some(full), None) => Some((full, Recipe::FullFactorial { levels: part.levels.clone() })),
        (None, None) => None,
    }
}

/// Enough points of PG(n − 1, q) for k factors at strength 2.
fn points(q: u64, k: u64) -> Option<(u64, Recipe)> {
    let (mut runs, mut n) = (q.checked_mul(q)?, 2u32);
    while (runs - 1) / (q - 1) < k {
        runs = runs.checked_mul(q)?;
        n += 1;
    }
    Some((runs, Recipe::RaoHamming { q: u32::try_from(q).ok()?, n }))
}

/// Polynomials over a field with enough elements for k factors at strength t.
fn polynomials(p: u64, least: u64, k: u64, t: u32) -> Option<(u64, Recipe)> {
    let mut q = least;
    while q + 1 < k {
        q = q.checked_mul(p)?;
    }
    let runs = q.checked_pow(t)?;
    (q <= u64::from(u16::MAX)).then_some(())?;
    Some((runs, Recipe::Bush { q: u32::try_from(q).ok()?, t }))
}

/// The first columns of the recipe, merged to the wanted levels.
fn cut(recipe: Recipe, levels: &[u16]) -> Recipe {
    let of = recipe.levels().expect("the shape of a family");
    let merge: Vec<(u32, u16)> =
        (0u32..).zip(levels).filter(|&(i, &s)| of[i as usize] != s).map(|(i, &s)| (i, s)).collect();
    let take = (of.len() != levels.len()).then(|| (0..levels.len() as u32).collect());
    if take.is_none() && merge.is_empty() {
        return recipe;
    }
    Recipe::Arrange { of: Arc::new(recipe), split: vec![], take, merge }
}
