//! Looks for sets of independent subspaces that the shelf does not have.
//!
//! `find_subspaces q n strength largest low high groups tries seed`: see
//! [`Wanted`](trysquare::hunt::subspaces::Wanted). Prints one body per maximal type.

use trysquare::catalog::{Bag, Packer, Shelf};
use trysquare::hunt::subspaces::{Packing, Wanted, packings};

fn bag(q: u32, packing: &Packing) -> Bag {
    let level = |e: usize| u16::try_from(q.pow(e as u32 + 1)).expect("small spaces only");
    Bag::from_pairs(packing.counts.iter().enumerate().filter(|c| *c.1 > 0).map(|(e, &k)| (level(e), k)))
}

fn main() -> Result<(), Box<dyn std::error::Error>> {
    let a = std::env::args().skip(1).map(|a| a.parse::<u32>()).collect::<Result<Vec<_>, _>>()?;
    let [q, n, strength, largest, low, high, groups, tries, seed] = a[..] else {
        return Err("find_subspaces q n strength largest low high groups tries seed".into());
    };
    let wanted = Wanted {
        q,
        n,
        strength: strength as usize,
        largest,
        orders: (low, high),
        groups,
        tries,
        seed: u64::from(seed),
    };
    let Some(found) = packings(&wanted)? else { return Err("the space is too large".into()) };
    let shelf = Shelf::new();
    let packer = Packer::new(&shelf, strength);
    let mut new: Vec<(Bag, &Packing)> = found.iter().map(|p| (bag(q, p), p)).collect();
    new.sort_by_key(|(b, _)| std::cmp::Reverse((b.degrees(), b.factors())));
    let known = shelf.parents(u64::from(q).pow(n), strength);
    let mut kept: Vec<(Bag, &Packing)> = Vec::new();
    for (b, p) in new {
        let old = known.iter().any(|k| packer.fit(&b, &k.bag).is_some());
        if !old && !kept.iter().any(|(k, _)| packer.fit(&b, k).is_some()) {
            kept.retain(|(k, _)| packer.fit(k, &b).is_none());
            kept.push((b, p));
        }
    }
    for (b, p) in kept {
        println!("{b}");
        for basis in &p.bases {
            let words: Vec<String> = basis.iter().map(u16::to_string).collect();
            println!("  {}", words.join(" "));
        }
    }
    Ok(())
}
