use std::time::{Duration, Instant};

use clap::Args;

use super::output::{self, Output};
use super::{ExitCode, Failure, flags, input, words};
use crate::catalog::Shelf;
use crate::exchange::document::{FloorDocument, MostDocument};
use crate::floor::{Effort, FloorError, Proof, ProofError, bounds, linear_program, most, raise};
use crate::mix::Mix;
use crate::seek::reach;

/// The effort of the linear programs: some seconds at the most.
const EFFORT: u64 = 2_000_000_000;

/// The clock ends what is left of the effort: what was found until then is valid.
const TIME: Duration = Duration::from_secs(20);

/// Show every lower bound on the number of runs, with proof
///
/// A bound is its least value, rounded up to a multiple of what divides the number of runs; from
/// the best one on single numbers of runs are excluded as far as reasons are found.
#[derive(Args)]
pub(super) struct Flags {
    /// The factors as levels^factors, such as "2^1 3^7"; with --runs one term may be like 2^?
    #[arg(value_name = "MIX", required_unless_present = "check")]
    mix: Vec<String>,
    /// In so many runs: how many factors of the term with ? can stand beside the others
    #[arg(long, value_name = "N", conflicts_with_all = ["check", "proof"], value_parser = clap::value_parser!(u64).range(1..))]
    runs: Option<u64>,
    /// The strength [default: 2, or 1 for a single factor]
    #[arg(long, value_name = "T")]
    strength: Option<u32>,
    /// Write the proof of the best bound to this file, as JSON
    #[arg(long, value_name = "FILE")]
    proof: Option<String>,
    /// Check the proof in this file (- for stdin), trusting nothing in it
    #[arg(long, value_name = "FILE", conflicts_with_all = ["mix", "strength", "proof", "json"])]
    check: Option<String>,
    /// Make recorded searches again, however long it takes; a proof that rests on one is not
    /// confirmed without
    #[arg(long, requires = "check")]
    deep: bool,
    /// Print one JSON object
    #[arg(long)]
    json: bool,
}

pub(super) fn run(flags: &Flags) -> Result<ExitCode, Failure> {
    if let Some(file) = &flags.check {
        return check(file, flags.deep);
    }
    let text = flags.mix.join(" ");
    if let Some(runs) = flags.runs {
        return limit(flags, &text, runs);
    }
    if text.contains('?') {
        return Err(Failure::usage("a term with ? needs the number of runs: --runs N"));
    }
    let mix = flags::mix(&flags.mix)?;
    let strength = flags.strength.unwrap_or(if mix.factors() > 1 { 2 } else { 1 });
    if flags.proof.as_deref() == Some("-") {
        return Err(Failure::usage("--proof needs a file: stdout is for the table"));
    }
    let proof = flags.proof.as_deref().map(|name| Output::open(Some(name))).transpose()?;
    let timed = every_bound(&mix, strength)?;
    let bounds: Vec<Proof> = timed.iter().map(|b| b.0.clone()).collect();
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
        output::data(&table(&timed, &document))?;
    }
    Ok(ExitCode::Yes)
}

/// All bounds with the time each took, the best one first: the closed formulas, the linear
/// program, and the best of these raised by reasons against single numbers of runs.
fn every_bound(mix: &Mix, strength: u32) -> Result<Vec<(Proof, Duration)>, FloorError> {
    let start = Instant::now();
    let plain = bounds(mix, strength)?;
    let each = start.elapsed() / u32::try_from(plain.len()).unwrap_or(1).max(1);
    let mut timed: Vec<(Proof, Duration)> = plain.into_iter().map(|p| (p, each)).collect();
    let late = || start.elapsed() > TIME;
    let mut effort = Effort::new(EFFORT, &late);
    let divisor = timed.first().map(|b| b.0.divisibility.clone());
    let at = Instant::now();
    let program = divisor.and_then(|d| Some((linear_program(mix, strength, 1, &mut effort)?, d)));
    if let Some((bound, divisor)) = program {
        timed.push((Proof::new(mix.clone(), strength, divisor, bound)?, at.elapsed()));
    }
    timed.sort_by_key(|b| std::cmp::Reverse(b.0.runs));
    if let Some((best, _)) = timed.first() {
        let at = Instant::now();
        let raised = raise(best.clone(), u64::MAX, &mut effort)?;
        if raised.runs > best.runs {
            timed.insert(0, (raised, at.elapsed()));
        }
    }
    Ok(timed)
}

/// `2^? 3^1` in so many runs.
fn limit(flags: &Flags, text: &str, runs: u64) -> Result<ExitCode, Failure> {
    const WRITE: &str = "--runs needs one term with ? for the number of factors, such as \"2^? 3^1\"";
    let terms: Vec<&str> =
        text.split(|c: char| c.is_whitespace() || c == ',').filter(|t| !t.is_empty()).collect();
    let (open, given): (Vec<&str>, Vec<&str>) = terms.into_iter().partition(|t| t.contains('?'));
    let [term] = open[..] else { return Err(Failure::usage(WRITE)) };
    let levels = term.strip_suffix("^?").and_then(|s| s.parse::<u16>().ok()).filter(|&s| s >= 2);
    let levels = levels.ok_or_else(|| Failure::usage(WRITE))?;
    let rest =
        if given.is_empty() { None } else { Some(given.join(" ").parse::<Mix>().map_err(Failure::usage)?) };
    let beside = rest.as_ref().map_or(&[][..], Mix::levels);
    let strength = flags.strength.unwrap_or(2);
    if strength < 2 {
        return Err(Failure::usage(
            "at strength 1 any number of factors can stand there; ask for --strength 2 or more",
        ));
    }
    let reached = reach(&Shelf::new(), beside, levels, runs, strength);
    let start = Instant::now();
    let late = || start.elapsed() > TIME;
    let found = most(beside, levels, runs, strength, reached, &mut Effort::new(EFFORT, &late))?;
    let document = MostDocument::new(rest.as_ref().map(Mix::to_string), levels, strength, &found, reached);
    if flags.json {
        Output::Stdout.write(|out| {
            serde_json::to_writer(&mut *out, &document)?;
            out.write_all(b"\n")
        })?;
    } else {
        output::data(&limit_text(&document))?;
    }
    Ok(if document.most.is_none() { ExitCode::No } else { ExitCode::Yes })
}

fn limit_text(limit: &MostDocument<'_>) -> String {
    let beside = limit.beside.as_ref().map_or(String::new(), |mix| format!(" beside {mix}"));
    let subject = format!(
        "factors of {} levels{beside} in {} at strength {}",
        limit.levels,
        words::count(limit.runs, "run"),
        limit.strength
    );
    let proved = match limit.most {
        Some(n) => format!("at most {n}: no array for {} has so many runs ({})", limit.impossible, limit.by),
        None => format!("none: {} has no array of so many runs ({})", limit.impossible, limit.by),
    };
    let shelf = match limit.reached {
        Some(n) => n.to_string(),
        None => "not even the others".into(),
    };
    let gap = match (limit.most, limit.reached) {
        (Some(most), Some(reached)) if most > reached => {
            format!("{} to {most}: neither known here nor ruled out", reached + 1)
        }
        (Some(most), None) => format!("0 to {most}: neither known here nor ruled out"),
        _ => "nothing is left open".into(),
    };
    words::labelled(&[("asked", subject), ("proved", proved), ("on the shelf", shelf), ("open", gap)])
}

fn table(bounds: &[(Proof, Duration)], best: &FloorDocument<'_>) -> String {
    let rows: Vec<[String; 5]> = bounds
        .iter()
        .map(|(p, took)| {
            let (least, runs) = (p.least().to_string(), p.runs.to_string());
            [p.name().to_owned(), least, runs, words::time(*took), words::reason(p)]
        })
        .collect();
    let factors = words::count(best.proof.mix.factors() as u64, "factor");
    format!(
        "{}\n{} ({factors}) at strength {}: at least {}, by {}\n\
         No smaller array exists; whether one of this size does is another matter: trysquare seek \"{}\" --strength {}\n",
        words::table(["bound", "least", "runs", "took", "because"], &rows),
        best.mix,
        best.strength,
        words::count(best.runs, "run"),
        best.by,
        best.mix,
        best.strength
    )
}

fn check(file: &str, deep: bool) -> Result<ExitCode, Failure> {
    let text = input::read_text(file)?;
    let proof: Proof = serde_json::from_str(&text)
        .map_err(|e| Failure::input(input::title(file), format!("not a proof: {e}")))?;
    let claim = format!(
        "every array for {} at strength {} has at least {} (by {})",
        proof.mix,
        proof.strength,
        words::count(proof.runs, "run"),
        proof.name()
    );
    if !deep && proof.is_recorded() && proof.check_light().is_ok() {
        output::data(&format!(
            "not confirmed: the proof rests on the record of a search, which was not made again; add --deep\n\
             it claims that {claim}\n"
        ))?;
        return Ok(ExitCode::Stopped);
    }
    let checked = if deep { proof.check_deep(&mut Effort::unlimited()) } else { proof.check() };
    match checked {
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
