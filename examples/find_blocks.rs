//! Looks for two-level columns beside one p-level column in 4p runs:
//! `find_blocks P MULTIPLIER WANTED SEED POOL TRIES` prints the vectors of block types.

use trysquare::hunt::blocks::{BlockSearch, blocks};

fn main() -> Result<(), Box<dyn std::error::Error>> {
    let numbers = std::env::args().skip(1).map(|a| a.parse::<u64>()).collect::<Result<Vec<_>, _>>()?;
    let [p, multiplier, wanted, seed, pool, tries] = numbers[..] else {
        return Err("write: find_blocks P MULTIPLIER WANTED SEED POOL TRIES".into());
    };
    let search = BlockSearch {
        p: u16::try_from(p)?,
        multiplier: u16::try_from(multiplier)?,
        wanted: usize::try_from(wanted)?,
        seed,
        pool: usize::try_from(pool)?,
        tries: usize::try_from(tries)?,
    };
    let vectors = blocks(&search);
    eprintln!("{} of {wanted}", vectors.len());
    for v in &vectors {
        println!("{}", v.iter().map(|x| format!("{x:+}")).collect::<Vec<_>>().join(" "));
    }
    Ok(())
}
