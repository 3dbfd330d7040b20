//! Hunts a difference scheme and prints the seed:
//! `schemes GROUP BLOCKS MOVES FIXES FIXED COLUMNS SEED NODES TRIES`.
//!
//! GROUP and BLOCKS are lists with commas; MOVES and FIXES are `times,plus,turn/v0,v1,…` as in
//! `Symmetry::of_blocks`, the values left out for the identity, FIXES `-` for nothing; FIXED is the
//! number of invariant columns after the zero column, `-` for no zero column.

use std::process::ExitCode;

use trysquare::hunt::{SchemeHunt, Symmetry, scheme_seed};

fn main() -> ExitCode {
    let words: Vec<String> = std::env::args().skip(1).collect();
    let Some(hunt) = request(&words) else {
        eprintln!(
            "write: schemes GROUP BLOCKS MOVES FIXES FIXED COLUMNS SEED NODES TRIES, as in: schemes 3 5,1 1,1,0 - 0 6 1 1000 100"
        );
        return ExitCode::from(2);
    };
    let source =
        format!("computed for this project: cargo run --release --example schemes -- {}", words.join(" "));
    // No column at all is no scheme; `scheme_seed` refuses it.
    match hunt.run().and_then(|columns| Ok((columns.len(), scheme_seed(&hunt.group, &columns, &source)?))) {
        Ok((found, text)) => {
            print!("{text}");
            if found < hunt.columns {
                eprintln!("{found} columns, {} wanted", hunt.columns);
                return ExitCode::FAILURE;
            }
            ExitCode::SUCCESS
        }
        Err(e) => {
            eprintln!("{e}");
            ExitCode::from(2)
        }
    }
}

fn list<T: std::str::FromStr>(text: &str) -> Option<Vec<T>> {
    text.split(',').map(|w| w.parse().ok()).collect()
}

fn request(words: &[String]) -> Option<SchemeHunt> {
    let [group, blocks, moves, fixes, fixed, columns, seed, nodes, tries] = words else { return None };
    let group: Vec<u16> = list(group)?;
    let blocks: Vec<usize> = list(blocks)?;
    let order = group.iter().try_fold(1u16, |n, &g| n.checked_mul(g))?;
    let symmetry = |text: &str| {
        let (places, values) = text.split_once('/').map_or((text, None), |(p, v)| (p, Some(v)));
        let values = values.map_or_else(|| Some((0..order).collect()), list)?;
        match list(places)?.as_slice() {
            [times, plus, turn] => Some(Symmetry::of_blocks(&blocks, *times, *plus, *turn, &values)),
            _ => None,
        }
    };
    Some(SchemeHunt {
        moves: symmetry(moves)?,
        fixes: if fixes == "-" { None } else { Some(symmetry(fixes)?) },
        fixed: if fixed == "-" { 0 } else { fixed.parse().ok()? },
        zero: fixed != "-",
        columns: columns.parse().ok()?,
        seed: seed.parse().ok()?,
        nodes: nodes.parse().ok()?,
        tries: tries.parse().ok()?,
        group,
    })
}
