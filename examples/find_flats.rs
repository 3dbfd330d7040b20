//! Looks for slices that are an array of strength 3 together and writes them as a seed of the format
//! in `catalog/FORMAT.md`.
//!
//! `find_flats p directions slices flats tries seed levels…`: see
//! [`Wanted`](trysquare::hunt::flats::Wanted). `find_flats matrices slices factors tries seed`: see
//! [`Wanted`](trysquare::hunt::slices::Wanted).

use sha2::{Digest, Sha256};
use trysquare::catalog::Bag;
use trysquare::construct::field::Flat;
use trysquare::hunt::{flats, slices};

type Error = Box<dyn std::error::Error>;

fn main() -> Result<(), Error> {
    let words: Vec<String> = std::env::args().skip(1).collect();
    let matrices = words.first().is_some_and(|w| w == "matrices");
    let numbers = words.iter().skip(usize::from(matrices)).map(|a| a.parse::<u16>());
    let a = numbers.collect::<Result<Vec<_>, _>>()?;
    let (p, levels, found) = if matrices {
        let [slices, factors, tries, seed] = a[..] else {
            return Err("find_flats matrices slices factors tries seed".into());
        };
        let wanted = slices::Wanted {
            slices: slices.into(),
            factors: factors.into(),
            tries: tries.into(),
            seed: seed.into(),
        };
        let mut levels = vec![slices];
        levels.resize(usize::from(factors) + 1, 2);
        (2, levels, slices::find(&wanted))
    } else {
        let [p, directions, slices, per_slice, tries, seed, ref beside @ ..] = a[..] else {
            return Err("find_flats p directions slices flats tries seed levels…".into());
        };
        let wanted = flats::Wanted {
            p,
            directions: directions.into(),
            slices: slices.into(),
            flats: per_slice.into(),
            levels: beside.to_vec(),
            tries: tries.into(),
            seed: seed.into(),
        };
        let levels = std::iter::once(slices).chain(beside.iter().copied()).collect();
        (p, levels, flats::find(&wanted))
    };
    write(p, &levels, &found.ok_or("nothing was found")?, &words.join(" "))
}

fn write(p: u16, levels: &[u16], found: &[Flat], command: &str) -> Result<(), Error> {
    let array = trysquare::construct::field::flats(p.into(), levels, found)?;
    let line = |run: &[u16]| run.iter().map(u16::to_string).collect::<Vec<_>>().join(" ");
    let lines: String = array.rows().map(|row| line(&row) + "\n").collect();
    let digest: String = Sha256::digest(lines).iter().map(|b| format!("{b:02x}")).collect();
    let bag = Bag::of_levels(levels);
    let types: Vec<String> = bag.entries().iter().rev().map(|(s, k)| format!("{s}x{k}")).collect();
    println!("name: flats-{:04}-3-{}\nkind: flats\nprime: {p}", array.runs(), types.join("-"));
    println!("levels: {}\nflats: {}", line(levels), found.len());
    println!("directions: {}\nstrength: 3", found.first().map_or(0, |f| f.directions.len()));
    println!("source: computed for this project: examples/find_flats {command}");
    println!("digest: {digest}\nbody:");
    for flat in found {
        println!("{}", line(&flat.base));
        flat.directions.iter().for_each(|d| println!("{}", line(d)));
    }
    println!("end");
    Ok(())
}
