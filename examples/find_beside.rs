//! Looks for columns of two and three levels beside given ones:
//! `find_beside FRAME BASE SYMMETRY TWOS THREES SEED ATTEMPTS LOOKS START STEPS`; prints the seed.
//!
//! FRAME: radices, `6x6`. BASE: forms as levels and coefficients, `6:1,0 6:0,1`, or `random K MIX`,
//! symmetric under the first K coordinates (`moving` for `random`: these move all levels), or `given`
//! and columns as levels and the level in each run, `3=012012 2=000111` (10 is written `a`), or `seed
//! NAME`, the columns of a seed in `catalog/`, `seed NAME 1 3` those with these numbers. SYMMETRY: `none`, or generators with a semicolon
//! between, each a word per coordinate with a comma between: `2x+1` or the images `0-2-3-1`.

use trysquare::catalog::seed::{SeedKind, find};
use trysquare::construct::orbit_array;
use trysquare::hunt::beside::{Base, BesideHunt, hunt_beside};
use trysquare::hunt::orbits_seed;
use trysquare::mix::Mix;

type Fail = Box<dyn std::error::Error>;

fn main() -> Result<(), Fail> {
    let words: Vec<String> = std::env::args().skip(1).collect();
    let [frame, base, symmetry, twos, threes, seed, attempts, looks, start, steps] = &words[..] else {
        return Err(
            "write: find_beside FRAME BASE SYMMETRY TWOS THREES SEED ATTEMPTS LOOKS START STEPS".into()
        );
    };
    let frame: Vec<u16> = frame.split('x').map(str::parse).collect::<Result<_, _>>()?;
    let request = BesideHunt {
        base: read_base(base)?,
        symmetry: read_symmetry(symmetry, &frame)?,
        wanted: [twos.parse()?, threes.parse()?],
        seed: seed.parse()?,
        attempts: attempts.parse()?,
        looks: looks.parse()?,
        start: start.parse()?,
        steps: steps.parse()?,
        frame,
    };
    let clock = std::time::Instant::now();
    let found = hunt_beside(&request).ok_or("nothing was met, or the request makes no sense")?;
    eprintln!(
        "{} of {} columns, attempt {}, {:.1} s",
        found.beside,
        request.wanted[0] + request.wanted[1],
        found.attempt,
        clock.elapsed().as_secs_f64()
    );
    let source = format!(
        "computed for this project: examples/find_beside {} \"{base}\" \"{symmetry}\" {}",
        words[0],
        words[3..].join(" ")
    );
    print!("{}", orbits_seed(&[], &found.columns, 2, &source)?);
    if found.complete { Ok(()) } else { Err("not all columns were found".into()) }
}

fn read_base(text: &str) -> Result<Base, Fail> {
    let moving = text.starts_with("moving ");
    if let Some(rest) = text.strip_prefix("random ").or(text.strip_prefix("moving ")) {
        let (coordinates, mix) = rest.split_once(' ').ok_or("write: random K MIX")?;
        let levels = mix.parse::<Mix>()?.levels().to_vec();
        return Ok(Base::Random { levels, coordinates: coordinates.parse()?, moving });
    }
    if let Some(rest) = text.strip_prefix("given ") {
        return Ok(Base::Given(rest.split(' ').map(given).collect::<Result<_, _>>()?));
    }
    if let Some(rest) = text.strip_prefix("seed ") {
        return read_seed(rest);
    }
    let form = |word: &str| -> Result<(u16, Vec<u16>), Fail> {
        let (levels, shifts) = word.split_once(':').ok_or("write forms as 6:1,0")?;
        Ok((levels.parse()?, shifts.split(',').map(str::parse).collect::<Result<_, _>>()?))
    };
    Ok(Base::Forms(text.split(' ').map(form).collect::<Result<_, _>>()?))
}

fn given(word: &str) -> Result<(u16, Vec<u8>), Fail> {
    let (levels, symbols) = word.split_once('=').ok_or("write columns as 3=012012")?;
    let digit = |c: char| c.to_digit(36).map(|d| d as u8).ok_or("a level is a digit or a letter");
    Ok((levels.parse()?, symbols.chars().map(digit).collect::<Result<_, _>>()?))
}

fn read_seed(text: &str) -> Result<Base, Fail> {
    let mut words = text.split(' ');
    let name = words.next().ok_or("write: seed NAME")?;
    let seed = find(name).ok_or("there is no such seed")?;
    let SeedKind::Orbits { group, columns, .. } = seed.kind else { return Err("no seed of orbits".into()) };
    let array = orbit_array(&group, &columns)?;
    let mut numbers: Vec<usize> = words.map(str::parse).collect::<Result<_, _>>()?;
    if numbers.is_empty() {
        numbers = (0..array.factors()).collect();
    }
    let column = |j: usize| -> Result<(u16, Vec<u8>), Fail> {
        let levels = *array.levels().get(j).ok_or("no such column")?;
        Ok((levels, array.column(j).iter().map(|&x| u8::try_from(x)).collect::<Result<_, _>>()?))
    };
    Ok(Base::Given(numbers.into_iter().map(column).collect::<Result<_, _>>()?))
}

fn read_symmetry(text: &str, frame: &[u16]) -> Result<Vec<Vec<Vec<u16>>>, Fail> {
    if text == "none" {
        return Ok(Vec::new());
    }
    let images = |(word, &radix): (&str, &u16)| -> Result<Vec<u16>, Fail> {
        if let Some((factor, term)) = word.split_once('x') {
            let factor: u32 = if factor.is_empty() { 1 } else { factor.parse()? };
            let term: u32 = if term.is_empty() { 0 } else { term.trim_start_matches('+').parse()? };
            let image = |x: u16| ((u32::from(x) * factor + term) % u32::from(radix)) as u16;
            return Ok((0..radix).map(image).collect());
        }
        Ok(word.split('-').map(str::parse).collect::<Result<_, _>>()?)
    };
    text.split(';').map(|g| g.split(',').zip(frame).map(images).collect()).collect()
}
