//! Multiplies T-matrices with Williamson's matrices of the catalogue and prints the seed:
//! `products T-SEQUENCES WILLIAMSON` with the names of two seeds, or
//! `products LENGTH GENERATORS SEED TRIES WILLIAMSON`, which hunts the T-matrices.

use std::process::ExitCode;

use trysquare::catalog::seed::{SeedKind, find};
use trysquare::construct::hadamard::{cooper_wallis, t_sequences};
use trysquare::hunt::{circulants_seed, t_matrices};

fn main() -> ExitCode {
    let words: Vec<String> = std::env::args().skip(1).collect();
    match seed(&words) {
        Ok(text) => {
            print!("{text}");
            ExitCode::SUCCESS
        }
        Err(why) => {
            eprintln!("{why}");
            ExitCode::from(2)
        }
    }
}

fn seed(words: &[String]) -> Result<String, String> {
    let text = |e: trysquare::construct::ConstructError| e.to_string();
    let number = |w: &str| w.parse::<u64>().map_err(|e| format!("{w}: {e}"));
    let (t, williamson) = match words {
        [name, williamson] => match find(name).map(|s| s.kind) {
            Some(SeedKind::TurynType { sequences: [x, y, z, w] }) => {
                (t_sequences(&x, &y, &z, &w).map_err(text)?, williamson)
            }
            _ => return Err(format!("{name} is no set of Turyn-type sequences in the catalogue")),
        },
        [length, generators, seed, tries, williamson] => {
            let small = |w: &str| w.parse::<u16>().map_err(|e| format!("{w}: {e}"));
            let generators: Vec<u16> = generators.split(',').map(small).collect::<Result<_, _>>()?;
            let found =
                t_matrices(small(length)?, &generators, number(seed)?, number(tries)?).map_err(text)?;
            (found.ok_or("none in this sample; write another seed or more tries")?, williamson)
        }
        _ => {
            return Err(
                "write: products TURYN WILLIAMSON, or: products LENGTH GENERATORS SEED TRIES WILLIAMSON"
                    .into(),
            );
        }
    };
    let Some(SeedKind::FourCirculants { rows: w, .. }) = find(williamson).map(|s| s.kind) else {
        return Err(format!("{williamson} is no set of four circulants in the catalogue"));
    };
    let rows =
        cooper_wallis(t.each_ref().map(Vec::as_slice), w.each_ref().map(Vec::as_slice)).map_err(text)?;
    let source =
        format!("computed for this project: cargo run --release --example products -- {}", words.join(" "));
    circulants_seed(&[1], &rows, &source).map_err(text)
}
