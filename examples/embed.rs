//! A program that asks for an array, judges it itself and writes it as JSON.
//!
//! `cargo run --no-default-features --example embed > array.json`

use std::error::Error;

use serde_json::json;
use trysquare::mix::Mix;
use trysquare::seek::{Outcome, Request, seek};
use trysquare::verify::{Demand, Verdict, certify};

fn main() -> Result<(), Box<dyn Error>> {
    // Two ovens, and eight dials with three settings each.
    let mix: Mix = "2^1 3^8".parse()?;
    let answer = match seek(&Request::new(mix).max_runs(200))? {
        Outcome::Found(answer) => answer,
        Outcome::ProvedImpossible { floor } => {
            return Err(format!("at least {} runs are needed", floor.runs).into());
        }
        _ => return Err("no array with at most 200 runs is known".into()),
    };
    // `seek` has judged the array already; a program that reads one from elsewhere judges it so.
    let judged = certify(&answer.array, &Demand::strength(2).thorough())?;
    if judged.verdict != Verdict::Orthogonal {
        return Err(format!("refused: {:?}", judged.witness).into());
    }
    eprintln!(
        "{} runs, floor {} by {}: {}",
        answer.array.runs(),
        answer.floor.runs,
        answer.floor.bound.name(),
        answer.recipe
    );
    let rows: Vec<Vec<u16>> = answer.array.rows().collect();
    let out = json!({
        "levels": answer.array.levels(),
        "array": rows,
        "certificate": judged.certificate,
    });
    println!("{}", serde_json::to_string_pretty(&out)?);
    Ok(())
}
