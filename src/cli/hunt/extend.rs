//! `hunt --from`: which more columns fit beside given ones.

use std::io::{self, Write};
use std::time::{Duration, Instant};

use ::csv as csv_lines;

use super::{Flags, Format};
use crate::array::Array;
use crate::cli::certify::read_as;
use crate::cli::output::{self, Output};
use crate::cli::progress::Progress;
use crate::cli::{ExitCode, Failure, flags, words};
use crate::exchange::document::{ExtendDocument, KindPart};
use crate::exchange::{Header, Received, Symbols, default_name, text};
use crate::hunt::Effort;
use crate::hunt::extend::{ExtendError, Extended, Extension, Standing, Wanted, extend};
use crate::mix::counts_of;
use crate::verify::{Certificate, Demand, certify};

/// Lists of more candidates than this are gone through one column at a time.
const MOST: usize = 1 << 20;

impl From<ExtendError> for Failure {
    fn from(e: ExtendError) -> Self {
        match e {
            e @ (ExtendError::Request | ExtendError::Runs { .. } | ExtendError::Strength { .. }) => {
                Self::usage(e)
            }
            e => Self::stopped(e),
        }
    }
}

pub(super) fn run(from: &str, flags: &Flags, format: Format) -> Result<ExitCode, Failure> {
    let mut out = Output::open(flags.out.as_deref())?;
    let certificate = flags.certificate.as_deref().map(|name| Output::open(Some(name))).transpose()?;
    let received = flags.reading.read(from, None)?;
    flags.say(&read_as(&received));
    let strength = flags.strength.unwrap_or(2);
    let asked = if flags.mix.is_empty() { None } else { Some(flags::mix(&flags.mix)?) };
    output::listen();
    let end = flags.seconds.map(|s| Instant::now() + Duration::from_secs(s));
    let halt = || output::interrupted() || end.is_some_and(|end| Instant::now() >= end);
    let (kinds, best) = flags::on_threads(flags.threads, || {
        let _progress = Progress::start("looking for columns", None, flags.quiet);
        match &asked {
            Some(mix) => {
                let wanted: Vec<Wanted> = counts_of(mix.levels())
                    .into_iter()
                    .rev()
                    .map(|(levels, most)| Wanted { levels, most: Some(most) })
                    .collect();
                let one = attempt(&received, strength, &wanted, &halt)?;
                Ok((vec![KindPart::new(&wanted, &one)], one))
            }
            None => each_kind(&received, strength, &halt),
        }
    })?;
    let names = names(&received, &best);
    let judged = match &best {
        Extended::Found { array, .. } => {
            Some((array, certify(array, &Demand::strength(strength as usize))?.certificate))
        }
        _ => None,
    };
    if format == Format::Json {
        let certificate = judged.as_ref().map(|(_, c)| c);
        let document =
            ExtendDocument::new(&received.array, strength, &kinds, &best, certificate, flags.symbols);
        out.write(|out| {
            serde_json::to_writer(&mut *out, &document)?;
            out.write_all(b"\n")
        })?;
    }
    if let Some((array, proof)) = &judged {
        let header = Header::Names(&names);
        match format {
            Format::Csv => out.write(|out| in_words(&received, array, &names, flags.symbols, out))?,
            Format::Text => out.write(|out| text::write(array, flags.symbols, header, out))?,
            Format::Json => true,
        };
        if let Some(mut file) = certificate {
            file.write(|out| out.write_all(proof.to_json().as_bytes()))?;
            file.finish()?;
        }
        out.finish()?;
    } else if format == Format::Json {
        out.finish()?;
    }
    flags.say(&account(&received, strength, &kinds, judged.as_ref().map(|(_, c)| c)));
    Ok(code(asked.is_some(), &best))
}

/// CSV in which the given columns keep the words of their file.
fn in_words(
    received: &Received,
    array: &Array,
    names: &[String],
    symbols: Symbols,
    out: &mut dyn Write,
) -> io::Result<()> {
    let mut writer = csv_lines::Writer::from_writer(out);
    writer.write_record(names)?;
    for row in array.rows() {
        let cell = |(j, &symbol): (usize, &u16)| match received.level_name(j, symbol) {
            Some(word) => word.to_owned(),
            None => symbols.value(symbol, array.levels()[j]).to_string(),
        };
        writer.write_record(row.iter().enumerate().map(cell))?;
    }
    writer.flush()
}

/// All columns asked for, or at least one, is yes.
fn code(asked: bool, best: &Extended) -> ExitCode {
    match best {
        Extended::NoneExists => ExitCode::No,
        Extended::GaveUp => ExitCode::Stopped,
        Extended::Found { standing: Standing::Maximum, .. } if asked => ExitCode::No,
        Extended::Found { standing: Standing::Maximal | Standing::Met, .. } if asked => ExitCode::Stopped,
        Extended::Found { .. } => ExitCode::Yes,
    }
}

fn attempt(
    received: &Received,
    strength: u32,
    wanted: &[Wanted],
    halt: &(dyn Fn() -> bool + Sync),
) -> Result<Extended, Failure> {
    let request =
        Extension { array: received.array.clone(), strength, wanted: wanted.to_vec(), most_candidates: MOST };
    let mut effort = Effort::new(u64::MAX, halt);
    let found = extend(&request, &mut effort)?;
    Ok(match found {
        // What was cut short proves nothing.
        Extended::NoneExists if effort.halted() => Extended::GaveUp,
        Extended::Found { array, added, standing } if effort.halted() && standing != Standing::Complete => {
            Extended::Found { array, added, standing: Standing::Met }
        }
        found => found,
    })
}

/// Every number of levels on its own, and the one that uses most degrees of freedom.
fn each_kind(
    received: &Received,
    strength: u32,
    halt: &(dyn Fn() -> bool + Sync),
) -> Result<(Vec<KindPart>, Extended), Failure> {
    let runs = received.array.runs();
    let least = received.array.levels().iter().copied().min().unwrap_or(2);
    let fits = |s: &u16| runs.is_multiple_of(usize::from(*s) * usize::from(least).pow(strength - 1));
    let (mut kinds, mut best, mut most) = (Vec::new(), Extended::NoneExists, 0);
    for levels in (2..=u16::try_from(runs).unwrap_or(u16::MAX)).filter(fits).rev() {
        let wanted = [Wanted { levels, most: None }];
        let found = attempt(received, strength, &wanted, halt)?;
        kinds.push(KindPart::new(&wanted, &found));
        let freedom = match &found {
            Extended::Found { added, .. } => added.len() * usize::from(levels - 1),
            _ => 0,
        };
        let unknown = matches!((&best, &found), (Extended::NoneExists, Extended::GaveUp));
        if freedom > most || unknown {
            (best, most) = (found, freedom);
        }
    }
    Ok((kinds, best))
}

/// The names of the file, and new ones for the new columns.
fn names(received: &Received, best: &Extended) -> Vec<String> {
    let given = received.array.factors();
    let mut names = received.names.clone().unwrap_or_else(|| (0..given).map(default_name).collect());
    if let Extended::Found { added, .. } = best {
        for j in 0..added.len() {
            let mut name = format!("added {}", j + 1);
            while names.contains(&name) {
                name.push('*');
            }
            names.push(name);
        }
    }
    names
}

fn account(
    received: &Received,
    strength: u32,
    kinds: &[KindPart],
    certificate: Option<&Certificate>,
) -> String {
    let mut lines = vec![(
        "given",
        format!(
            "{} × {} at strength {strength}",
            words::count(received.array.runs() as u64, "run"),
            words::count(received.array.factors() as u64, "factor")
        ),
    )];
    let one = |kind: &KindPart| format!("{}: {}", kind.wanted, kind.words());
    lines.push((
        "could ride along",
        if kinds.is_empty() {
            "nothing: no number of levels divides the runs often enough".to_owned()
        } else {
            kinds.iter().map(one).collect::<Vec<_>>().join("\n")
        },
    ));
    if let Some(certificate) = certificate {
        lines.push(("judged by", words::engines(&certificate.engines)));
        lines.push(("strength", words::strength(certificate)));
        lines.push(("sha256", certificate.sha256.clone()));
        lines.push(("before use", words::CAUTION.to_owned()));
    }
    words::labelled(&lines)
}
