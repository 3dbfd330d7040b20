use clap::Args;

use super::output::{self, Output};
use super::{ExitCode, Failure, flags, input, words};
use crate::exchange::document::FloorDocument;
use crate::floor::{Proof, ProofError, bounds};

/// Show every lower bound on the number of runs, with proof
///
/// A bound is its least value, rounded up to a multiple of what divides the number of runs.
#[derive(Args)]
pub(super) struct Flags {
    /// The factors as levels^factors, such as "2^1 3^7"
    #[arg(value_name = "MIX", required_unless_present = "check")]
    mix: Vec<String>,
    /// The strength [default: 2, or 1 for a single factor]
    #[arg(long, value_name = "T")]
    strength: Option<u32>,
    /// Write the proof of the best bound to this file, as JSON
    #[arg(long, value_name = "FILE")]
    proof: Option<String>,
    /// Check the proof in this file (- for stdin), trusting nothing in it
    #[arg(long, value_name = "FILE", conflicts_with_all = ["mix", "strength", "proof", "json"])]
    check: Option<String>,
    /// Print one JSON object
    #[arg(long)]
    json: bool,
}

pub(super) fn run(flags: &Flags) -> Result<ExitCode, Failure> {
    if let Some(file) = &flags.check {
        return check(file);
    }
    let mix = flags::mix(&flags.mix)?;
    let strength = flags.strength.unwrap_or(if mix.factors() > 1 { 2 } else { 1 });
    if flags.proof.as_deref() == Some("-") {
        return Err(Failure::usage("--proof needs a file: stdout is for the table"));
    }
    let proof = flags.proof.as_deref().map(|name| Output::open(Some(name))).transpose()?;
    let bounds = bounds(&mix, strength)?;
    let document = FloorDocument::new(&bounds).ok_or_else(|| Failure::stopped("there is no bound"))?;
    if let Some(mut proof) = proof {
        proof.write(|out| {
            serde_json::to_writer_pretty(&mut *out, document.proof)?;
            out.write_all(b"\n")
        })?;
        proof.finish()?;
    }
    if flags.json {
        Output::Stdout.write(|out| {
            serde_json::to_writer(&mut *out, &document)?;
            out.write_all(b"\n")
        })?;
    } else {
        output::data(&table(&bounds, &document))?;
    }
    Ok(ExitCode::Yes)
}

fn table(bounds: &[Proof], best: &FloorDocument<'_>) -> String {
    let rows: Vec<[String; 4]> = bounds
        .iter()
        .map(|p| {
            let least = p.bound.least().to_string();
            [p.bound.name().to_owned(), least, p.runs.to_string(), words::reason(p)]
        })
        .collect();
    let factors = words::count(best.proof.mix.factors() as u64, "factor");
    format!(
        "{}\n{} ({factors}) at strength {}: at least {}, by {}\n\
         No smaller array exists; whether one of this size does is another matter: trysquare seek \"{}\" --strength {}\n",
        words::table(["bound", "least", "runs", "because"], &rows),
        best.mix,
        best.strength,
        words::count(best.runs, "run"),
        best.by,
        best.mix,
        best.strength
    )
}

fn check(file: &str) -> Result<ExitCode, Failure> {
    let text = input::read_text(file)?;
    let proof: Proof = serde_json::from_str(&text)
        .map_err(|e| Failure::input(input::title(file), format!("not a proof: {e}")))?;
    let claim = format!(
        "every array for {} at strength {} has at least {} (by {})",
        proof.mix,
        proof.strength,
        words::count(proof.runs, "run"),
        proof.bound.name()
    );
    match proof.check() {
        Ok(()) => {
            output::data(&format!("the proof holds: {claim}\n"))?;
            Ok(ExitCode::Yes)
        }
        Err(e @ ProofError::Version(_)) => Err(Failure::input(input::title(file), e)),
        Err(e) => {
            output::data(&format!("the proof does not hold: {e}\nit claims that {claim}\n"))?;
            Ok(ExitCode::No)
        }
    }
}
