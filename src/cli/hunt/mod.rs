mod extend;
mod watch;

use std::path::Path;
use std::sync::{Arc, Mutex, PoisonError};
use std::time::{Duration, Instant};

use clap::{Args, ValueEnum};

use self::watch::{Watcher, best, keep};
use super::flags::ReadFlags;
use super::output::{self, Output};
use super::progress::Progress;
use super::{ExitCode, Failure, flags, input, words};
use crate::exchange::document::HuntDocument;
use crate::exchange::{Header, Symbols, csv, text};
use crate::hunt::campaign::{
    Find, HuntRequest, Impossible, Outcome, Shard, State, Stopped, Symmetry, run as hunt,
};
use crate::hunt::orbits_seed;
use crate::mix::Mix;
use crate::seek;

/// Search for an array by computation, on all cores
///
/// Several methods and groups of symmetries take turns, each round with twice the effort of the
/// one before, until an array is found, none can exist, or the time is over. The same request,
/// seed and shard give the same array for any number of threads.
#[derive(Args)]
#[command(after_help = "\
Examples:
  trysquare hunt \"2^8 6^3\" --runs 36 --seconds 60
  trysquare hunt \"2^16 11\" --runs 44 --resume state.json      go on from the state, if there is one
  trysquare hunt \"2^16 11\" --runs 44 --shard 3/8 --json       the third of eight parts of the work
  trysquare hunt --from plan.csv                  which more factors could ride along?
  trysquare hunt --from plan.csv \"2^2 3\"          could these?

Ctrl-C keeps the state: in the file of --resume, else in a new one that is named. Of several
shards the find with the smallest \"task\" is what a single run would give.

With --from the columns of a given array are kept and others are added: those of MIX, or as many
as possible. The exit code is 0 when all columns of MIX, or at least one, could be added, 1 when
it is proved that they cannot, and 4 when the search ended before that was known.")]
pub(super) struct Flags {
    /// The factors as levels^factors, such as "2^8 6^3"; the columns keep this order
    #[arg(value_name = "MIX", required_unless_present_any = ["resume", "from"])]
    mix: Vec<String>,
    /// The number of runs, at most 128
    #[arg(long, value_name = "N", required_unless_present_any = ["resume", "from"])]
    runs: Option<u32>,
    /// The strength, 2 or 3 [default: 2]
    #[arg(long, value_name = "T")]
    strength: Option<u32>,
    /// The symmetry of the array: auto (several in turn), none, or a group such as Z3 or Z3xZ3 that
    /// acts freely on the runs and adds constants to the levels [default: auto]
    #[arg(long, value_name = "GROUP")]
    symmetry: Option<String>,
    /// The seed of the random numbers [default: 1]
    #[arg(long, value_name = "K")]
    seed: Option<u64>,
    /// Stop after so many seconds
    #[arg(long, value_name = "S", value_parser = clap::value_parser!(u64).range(1..))]
    seconds: Option<u64>,
    /// Stop at the end of so many tasks of the work list, counted over all shards
    #[arg(long, value_name = "K")]
    tasks: Option<u64>,
    /// Keep the state in this file, and go on from it when it is there
    #[arg(long, value_name = "FILE")]
    resume: Option<String>,
    /// Do part I of N of the work list [default: 1/1]
    #[arg(long, value_name = "I/N")]
    shard: Option<String>,
    /// Add columns to the array in this file; - for stdin
    #[arg(
        long,
        value_name = "FILE",
        conflicts_with_all = ["runs", "symmetry", "seed", "tasks", "resume", "shard", "starter"]
    )]
    from: Option<String>,
    /// How the array is written [default: csv]
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
    /// Write what was found as a seed of the catalog to this file: group and orbit representatives
    #[arg(long, value_name = "FILE")]
    starter: Option<String>,
    /// The number of threads [default: all]; the answer does not depend on it
    #[arg(long, value_name = "K", value_parser = clap::value_parser!(u16).range(1..=1024))]
    threads: Option<u16>,
    /// No account on stderr
    #[arg(long)]
    quiet: bool,
    #[command(flatten)]
    reading: ReadFlags,
}

#[derive(Clone, Copy, PartialEq, Eq, ValueEnum)]
enum Format {
    /// Cells separated by commas under a line of names
    Csv,
    /// One JSON object with the array, its recipe and certificate, or the best that was met
    Json,
    /// An aligned table
    Text,
}

pub(super) fn run(flags: &Flags) -> Result<ExitCode, Failure> {
    let format = match (flags.format, flags.json) {
        (Some(Format::Csv | Format::Text), true) => {
            return Err(Failure::usage("--json is the same as --format json; leave out one of the two"));
        }
        (Some(format), _) => format,
        (None, json) => {
            if json {
                Format::Json
            } else {
                Format::Csv
            }
        }
    };
    let inputs: Vec<&str> = flags.from.as_deref().into_iter().collect();
    let outputs = [&flags.out, &flags.certificate, &flags.starter, &flags.resume];
    output::distinct(&inputs, &outputs.map(Option::as_deref))?;
    for (name, flag) in
        [(&flags.certificate, "--certificate"), (&flags.starter, "--starter"), (&flags.resume, "--resume")]
    {
        if name.as_deref() == Some("-") {
            return Err(Failure::usage(format!("{flag} needs a file: stdout is for the array")));
        }
    }
    if let Some(from) = &flags.from {
        return extend::run(from, flags, format);
    }
    let state = flags.state()?;
    let request = state.request.clone();
    let out = Output::open(flags.out.as_deref())?;
    let certificate = flags.certificate.as_deref().map(|name| Output::open(Some(name))).transpose()?;
    let starter = flags.starter.as_deref().map(|name| Output::open(Some(name))).transpose()?;
    flags.hint(&request);
    let clock = Instant::now();
    let outcome = flags.hunt(state)?;
    let mut out = out;
    if format == Format::Json {
        let document = HuntDocument::new(&request, &outcome, flags.symbols);
        out.write(|out| {
            serde_json::to_writer(&mut *out, &document)?;
            out.write_all(b"\n")
        })?;
    }
    let find = match &outcome {
        Outcome::Found(find) => find,
        other => {
            if format == Format::Json {
                out.finish()?;
            }
            return flags.nothing(&request, other);
        }
    };
    match format {
        Format::Csv => out.write(|out| csv::write(&find.array, flags.symbols, Header::Default, out))?,
        Format::Text => out.write(|out| text::write(&find.array, flags.symbols, Header::Default, out))?,
        Format::Json => true,
    };
    if let Some(mut file) = certificate {
        file.write(|out| out.write_all(find.certificate.to_json().as_bytes()))?;
        file.finish()?;
    }
    if let Some(mut file) = starter {
        let placed = &find.placed;
        let seed = orbits_seed(&placed.group, &placed.columns, request.strength, &source(&request));
        let seed = seed.map_err(Failure::stopped)?;
        file.write(|out| out.write_all(seed.as_bytes()))?;
        file.finish()?;
    }
    out.finish()?;
    flags.say(&account(&request, find, clock.elapsed()));
    Ok(ExitCode::Yes)
}

/// The command that finds the array again.
fn source(request: &HuntRequest) -> String {
    let mut words = vec![format!("computed: trysquare hunt \"{}\" --runs {}", request.mix, request.runs)];
    if request.strength != 2 {
        words.push(format!("--strength {}", request.strength));
    }
    if request.symmetry != Symmetry::Auto {
        words.push(format!("--symmetry {}", request.symmetry));
    }
    words.push(format!("--seed {}", request.seed));
    if request.shard != Shard::WHOLE {
        words.push(format!("--shard {}", request.shard));
    }
    words.join(" ")
}

impl Flags {
    /// The state to begin with: a new one, or the one that was kept.
    fn state(&self) -> Result<State, Failure> {
        let mix = if self.mix.is_empty() { None } else { Some(flags::mix(&self.mix)?) };
        let symmetry: Option<Symmetry> = self.symmetry.as_deref().map(str::parse).transpose()?;
        let shard: Option<Shard> = self.shard.as_deref().map(str::parse).transpose()?;
        if let Some(name) = self.resume.as_deref().filter(|name| Path::new(name).exists()) {
            let kept = String::from_utf8(input::read(name)?)
                .map_err(|_| Failure::input(name, "the state is not text"))?;
            let mut state = State::from_json(&kept).map_err(|e| Failure::input(name, e))?;
            let known = &state.request;
            let differs = mix.is_some_and(|m| m.levels() != known.mix.levels())
                || self.runs.is_some_and(|n| n != known.runs)
                || self.strength.is_some_and(|t| t != known.strength)
                || self.seed.is_some_and(|k| k != known.seed)
                || symmetry.is_some_and(|s| s != known.symmetry)
                || shard.is_some_and(|s| s != known.shard);
            if differs {
                return Err(Failure::usage(format!(
                    "{name} is the state of another hunt: {}; name another file, or leave the request out",
                    source(known).trim_start_matches("computed: ")
                )));
            }
            state.request.tasks = self.tasks;
            return Ok(state);
        }
        let (Some(mix), Some(runs)) = (mix, self.runs) else {
            let name = self.resume.as_deref().unwrap_or_default();
            return Err(Failure::usage(format!(
                "{name} is not there yet: name a mix and --runs to begin with"
            )));
        };
        let new = HuntRequest::new(mix, runs);
        Ok(State::new(HuntRequest {
            strength: self.strength.unwrap_or(new.strength),
            seed: self.seed.unwrap_or(new.seed),
            symmetry: symmetry.unwrap_or_default(),
            shard: shard.unwrap_or_default(),
            tasks: self.tasks,
            ..new
        })?)
    }

    fn say(&self, text: &str) {
        if !self.quiet {
            output::remark(text.trim_end());
        }
    }

    /// Says when there is no need to search.
    fn hint(&self, request: &HuntRequest) {
        if self.quiet || self.json || self.format == Some(Format::Json) {
            return;
        }
        let asked =
            seek::Request::new(request.mix.clone()).strength(request.strength).max_runs(request.runs.into());
        if let Ok(seek::Outcome::Found(answer)) = seek::seek(&asked) {
            let strength = if request.strength == 2 {
                String::new()
            } else {
                format!(" --strength {}", request.strength)
            };
            self.say(&format!(
                "note: the shelf has {} for this mix: trysquare seek \"{}\"{strength}",
                words::count(answer.array.runs() as u64, "run"),
                request.mix
            ));
        }
    }

    fn hunt(&self, state: State) -> Result<Outcome, Failure> {
        output::listen();
        let begin = Instant::now();
        let watcher = Watcher {
            file: self.resume.as_deref(),
            end: self.seconds.map(|s| begin + Duration::from_secs(s)),
            factors: state.request.mix.factors(),
            first: state.tasks_done(),
            saved: Mutex::new(None),
            line: Arc::default(),
        };
        watcher.save(&state);
        watcher.show(|line| line.best = best(&state, watcher.factors));
        let line = Arc::clone(&watcher.line);
        let end = watcher.end;
        let message = move || line.lock().unwrap_or_else(PoisonError::into_inner).text(begin, end);
        let outcome = flags::on_threads(self.threads, || {
            let _progress = Progress::telling(message, self.quiet);
            Ok(hunt(state, &watcher)?)
        })?;
        if let Some(state) = watcher.last() {
            watcher.save(&state);
        }
        Ok(outcome)
    }

    /// What is said, and kept, when there is no array.
    fn nothing(&self, request: &HuntRequest, outcome: &Outcome) -> Result<ExitCode, Failure> {
        let (stopped, first) = match outcome {
            Outcome::ProvedImpossible(reason) => {
                self.say(&impossible(request, reason));
                return Ok(ExitCode::No);
            }
            Outcome::LimitReached(stopped) => (stopped, "limit reached: no array was found"),
            Outcome::Interrupted(stopped) => (stopped, "interrupted before an array was found"),
            Outcome::Found(_) => return Ok(ExitCode::Yes),
        };
        let mut lines = vec![("verdict", first.to_owned()), ("asked for", subject(request))];
        lines.push(("best", best_met(stopped)));
        lines.push(("tried", words::count(stopped.state.tasks_done(), "task")));
        if !stopped.state.exhausted.is_empty() {
            let names: Vec<&str> = stopped.state.exhausted.keys().map(String::as_str).collect();
            lines.push(("exhausted", format!("no array has this symmetry: {}", names.join(", "))));
        }
        let kept = match (&self.resume, outcome) {
            (Some(name), _) => Some(name.clone()),
            (None, Outcome::Interrupted(_)) => Some(keep(&stopped.state)?),
            _ => None,
        };
        lines.push((
            "go on",
            match kept {
                Some(name) => format!("trysquare hunt --resume {}", words::quoted(&name)),
                None => "with more --seconds, another --seed, or --resume FILE to keep the state".to_owned(),
            },
        ));
        self.say(&words::labelled(&lines));
        Ok(ExitCode::Stopped)
    }
}

fn best_met(stopped: &Stopped) -> String {
    let Some(find) = &stopped.best else { return "nothing was met".to_owned() };
    let levels = find.array.levels().to_vec();
    let mix = Mix::new(levels).map_or_else(|_| String::new(), |m| m.to_string());
    format!(
        "{mix}: {} of {} factors, by {} (symmetry {}); --json prints it",
        find.array.factors(),
        stopped.state.request.mix.factors(),
        find.placed.method,
        find.placed.symmetry
    )
}

fn subject(request: &HuntRequest) -> String {
    format!(
        "{} × {}, {} at strength {}, symmetry {}, seed {}, shard {}",
        words::count(request.runs.into(), "run"),
        words::count(request.mix.factors() as u64, "factor"),
        request.mix,
        request.strength,
        request.symmetry,
        request.seed,
        request.shard
    )
}

fn impossible(request: &HuntRequest, reason: &Impossible) -> String {
    match reason {
        Impossible::Floor(floor) if floor.runs > u64::from(request.runs) => format!(
            "proved impossible: {} at strength {} needs at least {}, not {}",
            request.mix,
            request.strength,
            words::floor(floor),
            request.runs
        ),
        Impossible::Floor(floor) => format!(
            "proved impossible: the number of runs for {} at strength {} is a multiple of {}, and {} is not",
            request.mix, request.strength, floor.divisibility.divisor, request.runs
        ),
        Impossible::Exhausted { symmetry } if *symmetry == Symmetry::Group(Vec::new()) => format!(
            "proved impossible: all arrays of {} were gone through, and none is for {} at strength {}",
            words::count(request.runs.into(), "run"),
            request.mix,
            request.strength
        ),
        Impossible::Exhausted { symmetry } => format!(
            "proved impossible under {symmetry}: in no array of {} for {} at strength {} does this group act \
             freely on the runs and add constants to the levels, modulo their number; others may exist: try --symmetry auto",
            words::count(request.runs.into(), "run"),
            request.mix,
            request.strength
        ),
    }
}

fn account(request: &HuntRequest, find: &Find, time: Duration) -> String {
    let certificate = &find.certificate;
    let lines = vec![
        ("array", subject(request)),
        ("verdict", "found".to_owned()),
        (
            "found by",
            format!(
                "{} (symmetry {}), task {}; {:.1} s",
                find.placed.method,
                find.placed.symmetry,
                find.placed.task,
                time.as_secs_f64()
            ),
        ),
        ("judged by", words::engines(&certificate.engines)),
        ("strength", words::strength(certificate)),
        ("index", words::index(certificate)),
        ("word lengths", words::words(certificate)),
        ("sha256", certificate.sha256.clone()),
        ("find again", source(request).trim_start_matches("computed: ").to_owned()),
        ("before use", words::CAUTION.to_owned()),
    ];
    words::labelled(&lines)
}
