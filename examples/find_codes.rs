//! Lists duals of cyclic codes with more letters than the greedy points of the same strength.
//!
//! `find_codes q longest largest`: lengths up to `longest`, dimensions of the dual up to `largest`;
//! strength from 4. Each line is one of the table in `src/catalog/stored.rs`.

use std::collections::BTreeMap;

use trysquare::construct::code::dual_of_cyclic;
use trysquare::construct::field::greedy_points;

/// (factors, length, zeros, extended).
type Found = (u32, u32, Vec<u32>, bool);

fn main() -> Result<(), Box<dyn std::error::Error>> {
    let a = std::env::args().skip(1).map(|a| a.parse::<u32>()).collect::<Result<Vec<_>, _>>()?;
    let [q, longest, largest] = a[..] else { return Err("find_codes q longest largest".into()) };
    // By (dimension, strength).
    let mut best: BTreeMap<(u32, u32), Found> = BTreeMap::new();
    for n in (2..=longest).filter(|&n| num_integer::gcd(n, q) == 1) {
        for zeros in choices(&cosets(q, n), largest as usize) {
            for extended in [false, true] {
                let Ok(code) = dual_of_cyclic(q, n, &zeros, extended) else { continue };
                let (k, factors) = (code.dimension() as u32, code.length() as u32);
                if k > largest {
                    continue;
                }
                let strength = code.dual_distance()? as u32 - 1;
                for t in 4..=strength.min(factors) {
                    if best.get(&(k, t)).is_none_or(|b| b.0 < factors) {
                        best.insert((k, t), (factors, n, zeros.clone(), extended));
                    }
                }
            }
        }
    }
    let mut last = None;
    for ((k, t), (factors, n, zeros, extended)) in best.into_iter().rev() {
        let here = (k, factors, zeros.clone());
        if factors as usize > greedy_points(q, k, t)?.len() && last.as_ref() != Some(&here) {
            println!("    ({q}, {n}, &{zeros:?}, {extended}, {k}, {t}),");
            last = Some(here);
        }
    }
    Ok(())
}

/// The least element of each cyclotomic coset, with its size.
fn cosets(q: u32, n: u32) -> Vec<(u32, usize)> {
    let mut seen = vec![false; n as usize];
    let mut out = Vec::new();
    for z in 0..n {
        let (mut at, mut size) = (z, 0);
        while !std::mem::replace(&mut seen[at as usize], true) {
            at = at * q % n;
            size += 1;
        }
        if size > 0 {
            out.push((z, size));
        }
    }
    out
}

/// The sets of at most four cosets with at most `largest` elements.
fn choices(cosets: &[(u32, usize)], largest: usize) -> Vec<Vec<u32>> {
    let mut all: Vec<(Vec<u32>, usize)> = vec![(Vec::new(), 0)];
    for &(z, size) in cosets {
        let more: Vec<(Vec<u32>, usize)> = all
            .iter()
            .filter(|(zeros, k)| k + size <= largest && zeros.len() < 4)
            .map(|(zeros, k)| (zeros.iter().copied().chain([z]).collect(), k + size))
            .collect();
        all.extend(more);
    }
    all.into_iter().map(|c| c.0).filter(|c| !c.is_empty()).collect()
}
