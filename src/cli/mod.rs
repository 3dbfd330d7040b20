//! The command line: a thin client of the library, one file per command, no mathematics.
//!
//! | file | what lives there |
//! | --- | --- |
//! | `seek`, `batch`, `certify`, `recheck`, `floor`, `catalog`, `hunt` | one command each (`batch` is `seek --batch`): its flags, `run`, and its sentences |
//! | `exit` | the exit codes |
//! | `failure` | why a command gave up, with its exit code |
//! | `flags` | flags that several commands share |
//! | `input`, `output` | files and the standard streams; output files appear whole or not at all |
//! | `near` | `seek --budget`: the nearest plan and its account |
//! | `page` | `--report`: what the commands put on the page |
//! | `progress` | the sign of life on a terminal |
//! | `words` | tables and phrases that several commands print |
//!
//! Data goes to stdout, remarks to stderr. Nothing is coloured, so `NO_COLOR` is respected. A
//! reader that closes the pipe ends the output quietly and leaves the exit code as it is.

mod batch;
mod catalog;
mod certify;
mod exit;
mod failure;
mod flags;
mod floor;
mod hunt;
mod input;
mod near;
mod output;
mod page;
mod progress;
mod recheck;
mod seek;
mod words;

use clap::{ColorChoice, Parser, Subcommand};

pub use exit::ExitCode;
use failure::Failure;

/// Makes the smallest orthogonal array for a list of factors, and judges arrays from anywhere.
#[derive(Parser)]
#[command(name = "trysquare", version, color = ColorChoice::Never, max_term_width = 100)]
#[command(after_help = EXIT_CODES)]
struct Cli {
    #[command(subcommand)]
    command: Command,
}

const EXIT_CODES: &str = "\
Exit codes:
  0  yes: found, orthogonal, the certificate or proof holds
  1  no: not orthogonal, not true, proved impossible, nothing on the shelf
  2  the command line makes no sense
  3  the input cannot be read
  4  stopped before an answer: a limit was reached, or somebody interrupted";

#[derive(Subcommand)]
enum Command {
    Seek(seek::Flags),
    Certify(certify::Flags),
    Recheck(recheck::Flags),
    Floor(floor::Flags),
    Catalog(catalog::Flags),
    Hunt(Box<hunt::Flags>),
}

/// Runs the program on the arguments of the process.
#[must_use]
pub fn run() -> ExitCode {
    let command = match Cli::try_parse() {
        Ok(cli) => cli.command,
        Err(message) => {
            // Help asked for is no error; a pipe closed early is nobody's concern.
            let _ = message.print();
            return if message.use_stderr() { ExitCode::Usage } else { ExitCode::Yes };
        }
    };
    output::clean_up_on_interrupt();
    let outcome = match command {
        Command::Seek(flags) => seek::run(&flags),
        Command::Certify(flags) => certify::run(&flags),
        Command::Recheck(flags) => recheck::run(&flags),
        Command::Floor(flags) => floor::run(&flags),
        Command::Catalog(flags) => catalog::run(&flags),
        Command::Hunt(flags) => hunt::run(&flags),
    };
    outcome.unwrap_or_else(|Failure { code, message }| {
        output::remark(&format!("error: {message}"));
        code
    })
}

#[cfg(test)]
mod tests {
    use clap::CommandFactory;

    #[test]
    fn the_command_line_is_consistent() {
        super::Cli::command().debug_assert();
    }
}
