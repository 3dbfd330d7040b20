use clap::{Args, ValueEnum};

use super::output::{self, Output};
use super::progress::Progress;
use super::{ExitCode, Failure, batch, flags, near, words};
use crate::array::Array;
use crate::exchange::document::SeekDocument;
use crate::exchange::{Header, Symbols, csv, text};
use crate::floor::Proof;
use crate::mix::Mix;
use crate::seek::{Answer, DEFAULT_MAX_RUNS, Outcome, Request, Verdict, seek};

/// Make the smallest array known for a mix of factors
///
/// The array goes to stdout, a short account of it to stderr: the number of runs, whether a
/// smaller array can exist, how it is built, what was checked.
#[derive(Args)]
#[command(after_help = "\
Examples:
  trysquare seek \"2^1 3^7\"                      one factor of 2 levels, seven of 3
  trysquare seek \"4 2^11\" --strength 3 --out plan.csv --certificate plan.json
  trysquare seek \"2^8 5\" --budget 18            the nearest plan of 18 runs: 20 would be exact
  trysquare seek --batch mixes.txt              one mix per line in, one JSON object per line out

A batch skips blank lines and lines that begin with #, and never stops in the middle: a line that
makes no sense is answered with {\"line\",\"request\",\"error\"}. Its exit code is 3 when there was such
a line, else 4 when a limit was reached, else 1 when a request was proved impossible, else 0.")]
pub(super) struct Flags {
    /// The factors as levels^factors, such as "2^1 3^7"; the columns keep this order
    #[arg(value_name = "MIX", required_unless_present = "batch", conflicts_with = "batch")]
    mix: Vec<String>,
    /// Answer every line of a file (- for stdin) with one JSON object per line
    #[arg(long, value_name = "FILE", conflicts_with = "certificate")]
    batch: Option<String>,
    /// The strength: every so many factors show all level combinations equally often
    /// [default: 2, or 1 for a single factor]
    #[arg(long, value_name = "T")]
    strength: Option<u32>,
    /// The largest number of runs that is of use
    #[arg(long, value_name = "N", default_value_t = DEFAULT_MAX_RUNS, value_parser = clap::value_parser!(u64).range(1..))]
    max_runs: u64,
    /// The runs that can be paid for: an exact array when one fits, else the nearest plan of so many
    /// runs that is found, with the verdict near
    #[arg(long, value_name = "N", conflicts_with = "batch", value_parser = clap::value_parser!(u64).range(1..))]
    budget: Option<u64>,
    /// Runs already made, with which the plan must begin
    #[arg(long, value_name = "FILE", requires = "budget")]
    keep: Option<String>,
    /// How the array is written [default: csv; json for a batch]
    #[arg(long, value_enum)]
    format: Option<Format>,
    /// The same as --format json
    #[arg(long)]
    json: bool,
    /// How levels are written: zero (0, 1, …), one (1, 2, …) or coded (-1, 1 / -1, 0, 1 / …)
    #[arg(long, default_value_t)]
    symbols: Symbols,
    /// Write to this file, not to stdout; it appears whole or not at all
    #[arg(long, value_name = "FILE")]
    out: Option<String>,
    /// Write the certificate to this file
    #[arg(long, value_name = "FILE")]
    certificate: Option<String>,
    /// The number of threads [default: all]; the answer does not depend on it
    #[arg(long, value_name = "K", value_parser = clap::value_parser!(u16).range(1..=1024))]
    threads: Option<u16>,
    /// A seed for chance [default: 0]; only near plans leave something to it
    #[arg(long, value_name = "K")]
    seed: Option<u64>,
    /// No account on stderr
    #[arg(long)]
    quiet: bool,
}

#[derive(Clone, Copy, PartialEq, Eq, ValueEnum)]
pub(super) enum Format {
    /// Cells separated by commas under a line of names
    Csv,
    /// One JSON object with the array, its floor, recipe and certificate
    Json,
    /// An aligned table
    Text,
}

pub(super) fn run(flags: &Flags) -> Result<ExitCode, Failure> {
    let format = format(flags)?;
    let inputs: Vec<&str> = flags.batch.as_deref().into_iter().chain(flags.keep.as_deref()).collect();
    output::distinct(&inputs, &[flags.out.as_deref(), flags.certificate.as_deref()])?;
    if let Some(file) = &flags.batch {
        return batch::run(file, flags);
    }
    if flags.certificate.as_deref() == Some("-") {
        return Err(Failure::usage("--certificate needs a file: stdout is for the array"));
    }
    let request = request(flags.request(flags::mix(&flags.mix)?))?;
    if let Some(budget) = flags.budget {
        return near::run(flags, request, budget, format);
    }
    let out = Output::open(flags.out.as_deref())?;
    let certificate = flags.certificate.as_deref().map(|name| Output::open(Some(name))).transpose()?;
    let outcome = flags::on_threads(flags.threads, || {
        let _progress = Progress::start("looking for an array", None, flags.quiet);
        Ok(seek(&request)?)
    })?;
    deliver(flags, format, &request, &outcome, out, certificate)
}

/// Writes what became of a request where it belongs, and says the rest.
pub(super) fn deliver(
    flags: &Flags,
    format: Format,
    request: &Request,
    outcome: &Outcome,
    mut out: Output,
    certificate: Option<Output>,
) -> Result<ExitCode, Failure> {
    if format == Format::Json {
        let document = SeekDocument::new(request, outcome, flags.symbols);
        out.write(|out| {
            serde_json::to_writer(&mut *out, &document)?;
            out.write_all(b"\n")
        })?;
    }
    let answer = match outcome {
        Outcome::Found(answer) => answer,
        Outcome::ProvedImpossible { floor } => {
            // With JSON the file asked for holds the answer, which is no.
            let written = if format == Format::Json { out.finish() } else { Ok(()) };
            flags.say(&impossible(request, floor));
            return written.map(|()| ExitCode::No);
        }
        Outcome::LimitReached { floor, .. } => {
            let written = if format == Format::Json { out.finish() } else { Ok(()) };
            flags.say(&limit(request, floor));
            return written.map(|()| ExitCode::Stopped);
        }
    };
    write_cells(flags, format, &answer.array, &mut out)?;
    if let Some(mut certificate) = certificate {
        certificate.write(|out| out.write_all(answer.certificate.to_json().as_bytes()))?;
        certificate.finish()?;
    }
    out.finish()?;
    flags.say(&account(answer, flags));
    Ok(ExitCode::Yes)
}

/// Writes an array as cells, unless a JSON object holds it.
pub(super) fn write_cells(
    flags: &Flags,
    format: Format,
    array: &Array,
    out: &mut Output,
) -> Result<(), Failure> {
    match format {
        Format::Csv => out.write(|out| csv::write(array, flags.symbols, Header::Default, out))?,
        Format::Text => out.write(|out| text::write(array, flags.symbols, Header::Default, out))?,
        Format::Json => true,
    };
    Ok(())
}

fn format(flags: &Flags) -> Result<Format, Failure> {
    let json = flags.json || flags.batch.is_some();
    match flags.format {
        Some(Format::Csv | Format::Text) if flags.batch.is_some() => {
            Err(Failure::usage("a batch is answered in JSON; leave out --format"))
        }
        Some(Format::Csv | Format::Text) if json => {
            Err(Failure::usage("--json is the same as --format json; leave out one of the two"))
        }
        Some(format) => Ok(format),
        None if json => Ok(Format::Json),
        None => Ok(Format::Csv),
    }
}

/// A request of a strength that makes sense.
pub(super) fn request(request: Request) -> Result<Request, Failure> {
    let factors = request.mix.factors();
    if request.strength == 0 || request.strength as usize > factors {
        return Err(crate::floor::FloorError::Strength { strength: request.strength, factors }.into());
    }
    Ok(request)
}

impl Flags {
    /// What these flags ask for a mix.
    pub(super) fn request(&self, mix: Mix) -> Request {
        let request = Request::new(mix).max_runs(self.max_runs);
        match self.strength {
            Some(strength) => request.strength(strength),
            None => request,
        }
    }

    pub(super) fn symbols(&self) -> Symbols {
        self.symbols
    }

    pub(super) fn out(&self) -> Option<&str> {
        self.out.as_deref()
    }

    pub(super) fn keep(&self) -> Option<&str> {
        self.keep.as_deref()
    }

    pub(super) fn seed(&self) -> Option<u64> {
        self.seed
    }

    pub(super) fn wants_certificate(&self) -> bool {
        self.certificate.is_some()
    }

    pub(super) fn threads(&self) -> Option<u16> {
        self.threads
    }

    pub(super) fn quiet(&self) -> bool {
        self.quiet
    }

    /// Says something unless told to be quiet.
    pub(super) fn say(&self, text: &str) {
        if !self.quiet {
            output::remark(text.trim_end());
        }
    }
}

fn impossible(request: &Request, floor: &Proof) -> String {
    format!(
        "proved impossible: {} at strength {} needs at least {}, and at most {} are allowed\n\
         allow more with --max-runs, or ask for fewer factors, fewer levels or a lower strength",
        request.mix,
        request.strength,
        words::floor(floor),
        request.max_runs
    )
}

fn limit(request: &Request, floor: &Proof) -> String {
    format!(
        "limit reached: no array for {} at strength {} is known here within {}; the floor is {}\n\
         allow more with --max-runs, or ask for fewer factors, fewer levels or a lower strength",
        request.mix,
        request.strength,
        words::count(request.max_runs, "run"),
        words::floor(floor)
    )
}

/// What is said about an array that was found.
fn account(answer: &Answer, flags: &Flags) -> String {
    let (request, certificate) = (&answer.request, &answer.certificate);
    let verdict = match answer.verdict {
        Verdict::ProvedSmallest => {
            "proved smallest: no array for this mix and strength has fewer runs".to_owned()
        }
        Verdict::SmallestKnown => format!(
            "smallest known here, {} above the floor: a smaller array is neither known here nor ruled out",
            words::count(answer.gap(), "run")
        ),
    };
    let subject = format!(
        "{} × {}, {} at strength {}",
        words::count(answer.array.runs() as u64, "run"),
        words::count(request.mix.factors() as u64, "factor"),
        request.mix,
        request.strength
    );
    let repeated = match certificate.repeated_runs {
        0 => "no run is repeated".to_owned(),
        n => format!(
            "{} an earlier one",
            if n == 1 { "1 run repeats".into() } else { format!("{n} runs repeat") }
        ),
    };
    let mut lines = vec![
        ("array", subject),
        ("verdict", verdict),
        ("floor", words::floor(&answer.floor)),
        ("fewer runs", words::below(answer)),
        ("recipe", answer.recipe.to_string()),
        ("judged by", words::engines(&certificate.engines)),
        ("strength", words::strength(certificate)),
        ("index", words::index(certificate)),
        ("word lengths", words::words(certificate)),
        ("runs", repeated),
        ("sha256", certificate.sha256.clone()),
    ];
    lines.retain(|(label, _)| *label != "fewer runs" || !answer.below.is_empty());
    if let Some(seed) = flags.seed {
        lines.push(("seed", format!("{seed} was not needed: nothing was left to chance")));
    }
    lines.push(("check again", check_again(answer, flags)));
    lines.push(("before use", words::CAUTION.to_owned()));
    words::labelled(&lines)
}

fn check_again(answer: &Answer, flags: &Flags) -> String {
    let file = flags.out.as_deref().filter(|n| *n != "-").map_or("FILE".into(), words::quoted);
    match &flags.certificate {
        Some(certificate) => format!("trysquare recheck {} {file}", words::quoted(certificate)),
        None => format!("trysquare certify {file} --strength {}", answer.request.strength),
    }
}
