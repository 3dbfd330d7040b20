//! Looks for two-level columns beside one p-level column in 4p runs:
//! `find_types P SYMMETRY WANTED SEED ATTEMPTS LOOKS STAGES STEPS`; prints the seed.
//!
//! SYMMETRY: `none`, or generators with a semicolon between, each `POSITIONS/TYPES`: positions as
//! `2x+1` or as the images `0-2-3-1`, types as the images of 1, 2, 3, signed: `2,3,-1`; after
//! further strokes other types for single blocks: `/0:2,1,3`. STAGES: `none`, or numbers of columns
//! with a comma between.

use trysquare::hunt::orbits_seed;
use trysquare::hunt::types::{Turn, TypesHunt, hunt_types};

type Fail = Box<dyn std::error::Error>;

fn main() -> Result<(), Fail> {
    let words: Vec<String> = std::env::args().skip(1).collect();
    let [blocks, symmetry, wanted, seed, attempts, looks, stages, steps] = &words[..] else {
        return Err("write: find_types P SYMMETRY WANTED SEED ATTEMPTS LOOKS STAGES STEPS".into());
    };
    let blocks: u16 = blocks.parse()?;
    let request = TypesHunt {
        blocks,
        symmetry: if symmetry == "none" {
            vec![]
        } else {
            symmetry.split(';').map(|g| read_turn(g, blocks)).collect::<Result<_, _>>()?
        },
        wanted: wanted.parse()?,
        seed: seed.parse()?,
        attempts: attempts.parse()?,
        looks: looks.parse()?,
        stages: if stages == "none" {
            vec![]
        } else {
            stages.split(',').map(str::parse).collect::<Result<_, _>>()?
        },
        steps: steps.parse()?,
    };
    let clock = std::time::Instant::now();
    let found = hunt_types(&request).ok_or("the request makes no sense")?;
    eprintln!(
        "{} of {} columns, attempt {}, {} orbits in the list, {:.1} s",
        found.beside,
        request.wanted,
        found.attempt,
        found.pool,
        clock.elapsed().as_secs_f64()
    );
    let source = format!(
        "computed for this project: examples/find_types {} \"{symmetry}\" {}",
        words[0],
        words[2..].join(" ")
    );
    print!("{}", orbits_seed(&[], &found.columns, 2, &source)?);
    if found.complete { Ok(()) } else { Err("not all columns were found".into()) }
}

fn read_turn(text: &str, blocks: u16) -> Result<Turn, Fail> {
    let parts: Vec<&str> = text.split('/').collect();
    let [positions, types, rest @ ..] = &parts[..] else { return Err("write: POSITIONS/TYPES".into()) };
    let positions = if let Some((factor, term)) = positions.split_once('x') {
        let factor: u32 = if factor.is_empty() { 1 } else { factor.parse()? };
        let term: u32 = if term.is_empty() { 0 } else { term.trim_start_matches('+').parse()? };
        (0..blocks).map(|x| ((u32::from(x) * factor + term) % u32::from(blocks)) as u16).collect()
    } else {
        positions.split('-').map(str::parse).collect::<Result<Vec<u16>, _>>()?
    };
    let signed = |text: &str| -> Result<[i8; 3], Fail> {
        let images = text.split(',').map(str::parse).collect::<Result<Vec<i8>, _>>()?;
        images.try_into().map_err(|_| "three types".into())
    };
    let mut types = vec![signed(types)?; usize::from(blocks)];
    for other in rest {
        let (block, images) = other.split_once(':').ok_or("write: BLOCK:TYPES")?;
        *types.get_mut(block.parse::<usize>()?).ok_or("no such block")? = signed(images)?;
    }
    Ok(Turn { positions, types })
}
