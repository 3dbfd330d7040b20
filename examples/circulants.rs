//! Hunts four circulants and prints the seed:
//! `circulants LENGTH GENERATORS SEED SAMPLES POOL PAIRS`, the generators separated by commas.

use std::process::ExitCode;

use trysquare::hunt::{FourCirculants, circulants_seed};

fn main() -> ExitCode {
    let words: Vec<String> = std::env::args().skip(1).collect();
    let Some(hunt) = request(&words) else {
        eprintln!(
            "write: circulants LENGTH GENERATORS SEED SAMPLES POOL PAIRS, as in: circulants 37 10 1 1000 500 100000"
        );
        return ExitCode::from(2);
    };
    let source =
        format!("computed for this project: cargo run --release --example circulants -- {}", words.join(" "));
    let text = hunt.run().and_then(|rows| match rows {
        Some(rows) => circulants_seed(&hunt.multipliers()?, &rows, &source).map(Some),
        None => Ok(None),
    });
    match text {
        Ok(Some(text)) => print!("{text}"),
        Ok(None) => eprintln!("none in this sample; write another seed, more samples or a larger pool"),
        Err(e) => {
            eprintln!("{e}");
            return ExitCode::from(2);
        }
    }
    ExitCode::SUCCESS
}

fn request(words: &[String]) -> Option<FourCirculants> {
    let [length, generators, seed, samples, pool, pairs] = words else { return None };
    Some(FourCirculants {
        length: length.parse().ok()?,
        generators: generators.split(',').map(|g| g.parse().ok()).collect::<Option<_>>()?,
        seed: seed.parse().ok()?,
        samples: samples.parse().ok()?,
        pool: pool.parse().ok()?,
        pairs: pairs.parse().ok()?,
    })
}
