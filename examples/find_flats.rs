//! Looks for slices of flats that are an array of strength 3 together and writes them as a seed of
//! the format in `catalog/FORMAT.md`.
//!
//! `find_flats p directions slices flats tries seed levels…`: see
//! [`Wanted`](trysquare::hunt::flats::Wanted).

use sha2::{Digest, Sha256};
use trysquare::catalog::Bag;
use trysquare::construct::field::flats;
use trysquare::hunt::flats::{Wanted, find};

fn main() -> Result<(), Box<dyn std::error::Error>> {
    let words: Vec<String> = std::env::args().skip(1).collect();
    let a = words.iter().map(|a| a.parse::<u16>()).collect::<Result<Vec<_>, _>>()?;
    let [p, directions, slices, per_slice, tries, seed, ref levels @ ..] = a[..] else {
        return Err("find_flats p directions slices flats tries seed levels…".into());
    };
    let wanted = Wanted {
        p,
        directions: u32::from(directions),
        slices: usize::from(slices),
        flats: usize::from(per_slice),
        levels: levels.to_vec(),
        tries: u32::from(tries),
        seed: u64::from(seed),
    };
    let found = find(&wanted).ok_or("nothing was found")?;
    let all: Vec<u16> = std::iter::once(slices).chain(levels.iter().copied()).collect();
    let array = flats(u32::from(p), &all, &found)?;
    let line = |run: &[u16]| run.iter().map(u16::to_string).collect::<Vec<_>>().join(" ");
    let lines: String = array.rows().map(|row| line(&row) + "\n").collect();
    let digest: String = Sha256::digest(lines).iter().map(|b| format!("{b:02x}")).collect();
    let types: Vec<String> =
        Bag::of_levels(&all).entries().iter().rev().map(|(s, k)| format!("{s}x{k}")).collect();
    println!("name: flats-{:04}-3-{}\nkind: flats\nprime: {p}", array.runs(), types.join("-"));
    println!("levels: {}\nflats: {}\ndirections: {directions}\nstrength: 3", line(&all), found.len());
    println!("source: computed for this project: examples/find_flats {}", words.join(" "));
    println!("digest: {digest}\nbody:");
    for flat in &found {
        println!("{}", line(&flat.base));
        flat.directions.iter().for_each(|d| println!("{}", line(d)));
    }
    println!("end");
    Ok(())
}
