use std::io::{self, BufRead, BufReader};
use std::sync::mpsc::{Receiver, sync_channel};

use rayon::prelude::*;

use super::output::Output;
use super::progress::Progress;
use super::seek::{self, Flags};
use super::{ExitCode, Failure, flags, input};
use crate::catalog::Shelf;
use crate::exchange::document::{ErrorDocument, SeekDocument};
use crate::seek::{Outcome, seek_on};

/// So many lines are answered side by side before any is printed.
const CHUNK: usize = 64;

type Line = io::Result<Vec<u8>>;

/// How many lines ended how.
#[derive(Default)]
struct Tally {
    found: u64,
    impossible: u64,
    limited: u64,
    malformed: u64,
}

/// Answers every line of `file`, in order.
pub(super) fn run(file: &str, flags: &Flags) -> Result<ExitCode, Failure> {
    let reader: Box<dyn BufRead + Send> = if file == "-" {
        Box::new(BufReader::new(io::stdin()))
    } else {
        let opened = std::fs::File::open(file);
        Box::new(BufReader::new(opened.map_err(|e| Failure::input(file, format!("cannot be read: {e}")))?))
    };
    let mut out = Output::open(flags.out())?;
    let lines = lines(reader);
    let tally = flags::on_threads(flags.threads(), || answer_all(file, lines, flags, &mut out))?;
    out.finish()?;
    flags.say(&format!(
        "{} found, {} proved impossible, {} beyond a limit, {} malformed",
        tally.found, tally.impossible, tally.limited, tally.malformed
    ));
    Ok(tally.code())
}

/// The lines as they come in, so that a chunk need not be full before it is answered.
fn lines(mut reader: Box<dyn BufRead + Send>) -> Receiver<Line> {
    let (sender, receiver) = sync_channel(4 * CHUNK);
    std::thread::spawn(move || {
        loop {
            let mut line = Vec::new();
            let item = match reader.read_until(b'\n', &mut line) {
                Ok(0) => return,
                Ok(_) => Ok(line),
                Err(e) => Err(e),
            };
            let last = item.is_err();
            if sender.send(item).is_err() || last {
                return;
            }
        }
    });
    receiver
}

fn answer_all(file: &str, lines: Receiver<Line>, flags: &Flags, out: &mut Output) -> Result<Tally, Failure> {
    let shelf = Shelf::new();
    let progress = Progress::start("batch", Some("lines answered"), flags.quiet());
    let mut tally = Tally::default();
    let mut number = 0;
    while let Ok(first) = lines.recv() {
        let mut chunk = Vec::new();
        for line in std::iter::once(first).chain(lines.try_iter().take(CHUNK - 1)) {
            number += 1;
            let line =
                line.map_err(|e| Failure::input(input::title(file), format!("cannot be read: {e}")))?;
            let text = String::from_utf8_lossy(&line)
                .trim_matches(|c: char| c.is_whitespace() || c == '\u{feff}')
                .to_owned();
            if !text.is_empty() && !text.starts_with('#') {
                chunk.push((number, text));
            }
        }
        let answers: Vec<(String, Ending)> = chunk
            .par_iter()
            .map(|(number, text)| {
                let answer = answer(&shelf, *number, text, flags);
                progress.tick();
                answer
            })
            .collect();
        for (answer, ending) in answers {
            tally.add(ending);
            if !out.write(|out| out.write_all(answer.as_bytes()).and_then(|()| out.flush()))? {
                return Ok(tally);
            }
        }
    }
    Ok(tally)
}

enum Ending {
    Found,
    Impossible,
    Limited,
    Malformed,
}

/// The line that answers a line.
fn answer(shelf: &Shelf, line: u64, text: &str, flags: &Flags) -> (String, Ending) {
    let error = |failure: Failure| {
        let ending = if failure.code == ExitCode::Stopped { Ending::Limited } else { Ending::Malformed };
        let document = ErrorDocument { line, request: text, error: failure.message };
        (json(&SeekDocument::Error(document)), ending)
    };
    let request = match text.parse().map_err(Failure::usage).and_then(|mix| seek::request(flags.request(mix)))
    {
        Ok(request) => request,
        Err(e) => return error(e),
    };
    let outcome = match seek_on(shelf, &request) {
        Ok(outcome) => outcome,
        Err(e) => return error(e.into()),
    };
    let ending = match outcome {
        Outcome::Found(_) => Ending::Found,
        Outcome::ProvedImpossible { .. } => Ending::Impossible,
        Outcome::LimitReached { .. } => Ending::Limited,
    };
    (json(&SeekDocument::new(&request, &outcome, flags.symbols())), ending)
}

fn json(document: &SeekDocument<'_>) -> String {
    serde_json::to_string(document).expect("strings, numbers and text keys only") + "\n"
}

impl Tally {
    fn add(&mut self, ending: Ending) {
        *match ending {
            Ending::Found => &mut self.found,
            Ending::Impossible => &mut self.impossible,
            Ending::Limited => &mut self.limited,
            Ending::Malformed => &mut self.malformed,
        } += 1;
    }

    fn code(&self) -> ExitCode {
        match self {
            Self { malformed: 1.., .. } => ExitCode::Input,
            Self { limited: 1.., .. } => ExitCode::Stopped,
            Self { impossible: 1.., .. } => ExitCode::No,
            _ => ExitCode::Yes,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_worst_line_decides() {
        let tally =
            |found, impossible, limited, malformed| Tally { found, impossible, limited, malformed }.code();
        assert_eq!(tally(0, 0, 0, 0), ExitCode::Yes);
        assert_eq!(tally(5, 0, 0, 0), ExitCode::Yes);
        assert_eq!(tally(5, 1, 0, 0), ExitCode::No);
        assert_eq!(tally(5, 1, 1, 0), ExitCode::Stopped);
        assert_eq!(tally(5, 1, 1, 1), ExitCode::Input);
    }
}
