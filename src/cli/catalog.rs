use std::ops::RangeInclusive;

use clap::Args;

use super::output::{self, unless_closed};
use super::progress::Progress;
use super::{ExitCode, Failure, words};
use crate::catalog::{Bag, Packer, Shelf};
use crate::exchange::document::CatalogDocument;
use crate::mix::Mix;

/// Show what is on the shelf
///
/// For each number of runs the mixes that cannot be had from another one by dropping columns,
/// merging levels or splitting columns, with the way to build them.
#[derive(Args)]
pub(super) struct Flags {
    /// The number of runs, or a range such as 12-36
    #[arg(long, value_name = "N", default_value = "4-100", value_parser = range)]
    runs: RangeInclusive<u64>,
    /// The strength, 2 or more
    #[arg(long, value_name = "T", default_value_t = 2, value_parser = clap::value_parser!(u32).range(2..))]
    strength: u32,
    /// Only what this mix can be had from by dropping, merging and splitting
    #[arg(long, value_name = "MIX", value_parser = |text: &str| text.parse::<Mix>())]
    containing: Option<Mix>,
    /// Print one JSON object per line
    #[arg(long)]
    json: bool,
}

/// A number, or two with a hyphen between them.
fn range(text: &str) -> Result<RangeInclusive<u64>, String> {
    let advice =
        || format!("{text:?} is no number of runs; write a number such as 36, or a range such as 12-36");
    let number = |part: &str| part.trim().parse::<u64>().ok().filter(|&n| n > 0).ok_or_else(advice);
    let (first, last) = text.split_once('-').unwrap_or((text, text));
    let (first, last) = (number(first)?, number(last)?);
    if first > last { Err(advice()) } else { Ok(first..=last) }
}

pub(super) fn run(flags: &Flags) -> Result<ExitCode, Failure> {
    let wanted = flags.containing.as_ref();
    if let Some(mix) = wanted.filter(|mix| (mix.factors() as u64) < u64::from(flags.strength)) {
        let (strength, factors) = (flags.strength, mix.factors());
        return Err(crate::floor::FloorError::Strength { strength, factors }.into());
    }
    let wanted = wanted.map(|mix| Bag::of_levels(mix.levels()));
    let shelf = Shelf::new();
    let packer = Packer::new(&shelf, flags.strength);
    let progress = Progress::start("looking through the shelf", Some("numbers of runs"), false);
    let mut rows = Vec::new();
    let mut found = false;
    for runs in flags.runs.clone() {
        for parent in shelf.parents(runs, flags.strength).iter() {
            let enough = parent.bag.factors() >= u64::from(flags.strength);
            if !enough || wanted.as_ref().is_some_and(|mix| packer.fit(mix, &parent.bag).is_none()) {
                continue;
            }
            found = true;
            if flags.json {
                let document = CatalogDocument::new(runs, flags.strength, parent);
                let line = serde_json::to_string(&document).expect("strings, numbers and text keys only");
                if !unless_closed(output::line(&line))? {
                    return Ok(ExitCode::Yes);
                }
            } else {
                let degrees = format!("{} of {}", parent.bag.degrees(), runs - 1);
                rows.push([runs.to_string(), parent.bag.to_string(), degrees, parent.recipe.to_string()]);
            }
        }
        progress.tick();
    }
    drop(progress);
    if !found {
        output::remark(&nothing(flags));
        return Ok(ExitCode::No);
    }
    if !flags.json {
        output::data(&words::table(["runs", "mix", "degrees of freedom", "recipe"], &rows))?;
    }
    Ok(ExitCode::Yes)
}

fn nothing(flags: &Flags) -> String {
    let runs = match (flags.runs.start(), flags.runs.end()) {
        (a, b) if a == b => words::count(*a, "run"),
        (a, b) => format!("{a} to {b} runs"),
    };
    match &flags.containing {
        Some(mix) => format!(
            "nothing on the shelf at {runs} and strength {} yields {mix}; ask for the smallest with: trysquare \
             seek \"{mix}\" --strength {}",
            flags.strength, flags.strength
        ),
        None => format!(
            "nothing is on the shelf at {runs} and strength {}; try a range of runs or a lower strength",
            flags.strength
        ),
    }
}

#[cfg(test)]
mod tests {
    use super::range;

    #[test]
    fn ranges() {
        assert_eq!(range("36"), Ok(36..=36));
        assert_eq!(range("12-36"), Ok(12..=36));
        for bad in ["", "0", "36-12", "-", "12-", "a", "1.5", "0-4", "4-5-6"] {
            assert!(range(bad).is_err(), "{bad}");
        }
    }
}
