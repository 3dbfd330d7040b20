//! Looks for sets of independent subspaces and writes them as seeds of the format in
//! `catalog/FORMAT.md`, one for each type that is maximal among those found.
//!
//! `find_subspaces q n strength largest low high groups tries seed [limits…]`: see
//! [`Wanted`](trysquare::hunt::subspaces::Wanted); the limits are for dimensions 1, 2, ….
//! With `new` in front, types that the shelf has are left out.

use sha2::{Digest, Sha256};
use trysquare::array::Array;
use trysquare::catalog::{Bag, Packer, Shelf};
use trysquare::hunt::subspaces::{Packing, Wanted, packings};
use trysquare::recipe::Recipe;

fn main() -> Result<(), Box<dyn std::error::Error>> {
    let mut words: Vec<String> = std::env::args().skip(1).collect();
    let only_new = words.first().is_some_and(|w| w == "new");
    words.drain(..usize::from(only_new));
    let command = format!("computed for this project: examples/find_subspaces {}", words.join(" "));
    let a = words.iter().map(|a| a.parse::<u32>()).collect::<Result<Vec<_>, _>>()?;
    let [q, n, strength, largest, low, high, groups, tries, seed, ref limits @ ..] = a[..] else {
        return Err("find_subspaces q n strength largest low high groups tries seed [limits]".into());
    };
    let wanted = Wanted {
        q,
        n,
        strength: strength as usize,
        largest,
        limits: limits.to_vec(),
        orders: (low, high),
        groups,
        tries,
        seed: u64::from(seed),
    };
    let Some(found) = packings(&wanted)? else { return Err("the space is too large".into()) };
    let shelf = Shelf::new();
    let packer = Packer::new(&shelf, strength);
    let mut all: Vec<(Bag, &Packing)> = found.iter().map(|p| (bag(q, p), p)).collect();
    all.sort_by_key(|(b, _)| std::cmp::Reverse((b.degrees(), b.factors())));
    let known = if only_new { shelf.parents(u64::from(q).pow(n), strength) } else { Default::default() };
    let mut kept: Vec<(Bag, &Packing)> = Vec::new();
    for (b, p) in all {
        let old = known.iter().any(|k| packer.fit(&b, &k.bag).is_some());
        if !old && !kept.iter().any(|(k, _)| packer.fit(&b, k).is_some()) {
            kept.retain(|(k, _)| packer.fit(k, &b).is_none());
            kept.push((b, p));
        }
    }
    for (b, p) in kept {
        print!("{}", seed_text(&wanted, &command, &b, p)?);
    }
    Ok(())
}

fn bag(q: u32, packing: &Packing) -> Bag {
    let level = |e: usize| u16::try_from(q.pow(e as u32 + 1)).expect("small spaces only");
    Bag::from_pairs(packing.counts.iter().enumerate().filter(|c| *c.1 > 0).map(|(e, &k)| (level(e), k)))
}

fn seed_text(
    wanted: &Wanted,
    command: &str,
    bag: &Bag,
    packing: &Packing,
) -> Result<String, Box<dyn std::error::Error>> {
    let Wanted { q, n, strength, .. } = wanted;
    let field = trysquare::algebra::Field::new(*q)?;
    let vector = |&v: &u16| trysquare::algebra::vector(&field, *n as usize, usize::from(v));
    let subspaces = packing.bases.iter().map(|b| b.iter().map(vector).collect()).collect();
    let array = Recipe::Subspaces { q: *q, n: *n, subspaces, strength: *strength as u32 }.build()?;
    let types: Vec<String> = bag.entries().iter().rev().map(|(s, k)| format!("{s}x{k}")).collect();
    let mut text = format!(
        "name: subspaces-{:04}-{strength}-{}\nkind: subspaces\norder: {q}\ndimension: {n}\nstrength: {strength}\n\
         subspaces: {}\nsource: {command}\ndigest: {}\nbody:\n",
        q.pow(*n),
        types.join("-"),
        packing.bases.len(),
        digest(&array)
    );
    for basis in &packing.bases {
        text += &(basis.iter().map(u16::to_string).collect::<Vec<_>>().join(" ") + "\n");
    }
    Ok(text + "end\n")
}

fn digest(array: &Array) -> String {
    let lines: String =
        array.rows().map(|row| row.iter().map(u16::to_string).collect::<Vec<_>>().join(" ") + "\n").collect();
    Sha256::digest(lines).iter().map(|b| format!("{b:02x}")).collect()
}
