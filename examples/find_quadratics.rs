//! Looks for D(3k, 3c, 3) in circulant blocks of order 3 and prints the seed:
//! `find_quadratics BLOCKS WANTED EXTRA MINUS SEED STARTS STEPS`.

use trysquare::hunt::{Quadratics, scheme_seed};

fn main() -> Result<(), Box<dyn std::error::Error>> {
    let words: Vec<String> = std::env::args().skip(1).collect();
    let numbers = words.iter().map(|w| w.parse::<u64>()).collect::<Result<Vec<_>, _>>()?;
    let [blocks, wanted, extra, minus, seed, starts, steps] = numbers[..] else {
        return Err("write: find_quadratics BLOCKS WANTED EXTRA MINUS SEED STARTS STEPS".into());
    };
    let hunt = Quadratics {
        blocks: usize::try_from(blocks)?,
        wanted: usize::try_from(wanted)?,
        extra: usize::try_from(extra)?,
        minus: usize::try_from(minus)?,
        seed,
        starts,
        steps,
    };
    let columns = hunt.run();
    eprintln!("{} columns of {}", columns.len(), 3 * wanted + extra);
    let source = format!("computed for this project: examples/find_quadratics {}", words.join(" "));
    print!("{}", scheme_seed(&[3], &columns, &source)?);
    Ok(())
}
