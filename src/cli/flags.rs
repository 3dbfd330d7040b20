use clap::{Args, ValueEnum};

use super::{Failure, input, words};
use crate::exchange::{HeaderOption, ReadError, ReadOptions, Received, RunColumn, Separator, read_any};
use crate::mix::Mix;

/// A mix from the words of the command line, quoted or not.
pub(super) fn mix(words: &[String]) -> Result<Mix, Failure> {
    words.join(" ").parse().map_err(Failure::usage)
}

/// Runs `work` on so many threads; on all there are when nothing is said.
pub(super) fn on_threads<T: Send>(
    threads: Option<u16>,
    work: impl FnOnce() -> Result<T, Failure> + Send,
) -> Result<T, Failure> {
    let Some(threads) = threads else { return work() };
    let pool = rayon::ThreadPoolBuilder::new().num_threads(threads.into()).build();
    pool.map_err(|e| Failure::stopped(format!("{threads} threads cannot be started: {e}")))?.install(work)
}

/// What the file is, where finding out gets it wrong.
#[derive(Args)]
#[command(next_help_heading = "Reading the file")]
pub(super) struct ReadFlags {
    /// Whether the first line names the columns [default: find out]
    #[arg(long, value_name = "YES|NO")]
    header: Option<YesNo>,
    /// The column that numbers the runs: `no` for none, `first`, a name, or a number from 1
    /// [default: find out]
    #[arg(long, value_name = "COLUMN")]
    run_column: Option<String>,
    /// What stands between cells: comma, semicolon, tab or blank [default: find out]
    #[arg(long)]
    separator: Option<Separator>,
    /// A column that is no factor, by name or number from 1; may be given several times
    #[arg(long, value_name = "COLUMN")]
    leave_out: Vec<String>,
    /// A column that is a factor, by name or number from 1; may be given several times, and the
    /// others are left out
    #[arg(long, value_name = "COLUMN")]
    only: Vec<String>,
    /// The levels of the factors in the order of the file, such as "2 3^7" [default: those that
    /// occur]
    #[arg(long, value_name = "MIX", value_parser = |text: &str| text.parse::<Mix>())]
    levels: Option<Mix>,
}

#[derive(Clone, Copy, ValueEnum)]
enum YesNo {
    Yes,
    No,
}

impl ReadFlags {
    fn options(&self) -> ReadOptions {
        ReadOptions {
            header: match self.header {
                None => HeaderOption::Auto,
                Some(YesNo::Yes) => HeaderOption::Yes,
                Some(YesNo::No) => HeaderOption::No,
            },
            run_column: match self.run_column.as_deref() {
                None => RunColumn::Auto,
                Some("no") => RunColumn::No,
                Some("first") => RunColumn::First,
                Some(column) => RunColumn::Column(column.to_owned()),
            },
            separator: self.separator,
            leave_out: self.leave_out.clone(),
            only: (!self.only.is_empty()).then(|| self.only.clone()),
            levels: self.levels.clone(),
        }
    }

    /// These flags as they would be typed behind a command.
    pub(super) fn again(&self) -> String {
        let mut text = String::new();
        let mut add = |flag: &str, value: &str| text.push_str(&format!(" {flag} {}", words::quoted(value)));
        if let Some(header) = self.header {
            add("--header", if matches!(header, YesNo::Yes) { "yes" } else { "no" });
        }
        self.run_column.iter().for_each(|column| add("--run-column", column));
        self.separator.iter().for_each(|separator| add("--separator", &separator.to_string()));
        self.leave_out.iter().for_each(|column| add("--leave-out", column));
        self.only.iter().for_each(|column| add("--only", column));
        self.levels.iter().for_each(|levels| add("--levels", &levels.to_string()));
        text
    }

    /// Reads the array in a file. Where nothing is said about levels, `expected` ones are tried
    /// first.
    pub(super) fn read(&self, name: &str, expected: Option<Mix>) -> Result<Received, Failure> {
        let bytes = input::read(name)?;
        let options = self.options();
        let plain = |e: ReadError| match e {
            ReadError::NoColumn { .. } | ReadError::TwoColumns { .. } | ReadError::NoFactors => {
                Failure::usage(e)
            }
            e => Failure::input(input::title(name), e),
        };
        match expected.filter(|_| options.levels.is_none()) {
            None => read_any(&bytes, &options).map_err(plain),
            Some(levels) => read_any(&bytes, &ReadOptions { levels: Some(levels), ..options.clone() })
                .or_else(|_| read_any(&bytes, &options).map_err(plain)),
        }
    }
}
