use clap::Args;

use super::flags::{self, ReadFlags};
use super::output::{self, Output};
use super::page::Report;
use super::progress::Progress;
use super::{ExitCode, Failure, words};
use crate::exchange::Received;
use crate::exchange::document::{CertifyDocument, NamedWitness};
use crate::verify::{Demand, Judgement, StrengthClaim, Verdict, certify};

/// Judge an array from anywhere, with evidence
///
/// The file is CSV with any separator, or JSON, with any symbols for the levels. What it was taken
/// to be is said on stderr; the flags under "Reading the file" put it right.
#[derive(Args)]
pub(super) struct Flags {
    /// The file with the array; - for stdin
    #[arg(value_name = "FILE")]
    file: String,
    /// The strength to demand [default: 2, or 1 for a single factor]
    #[arg(long, value_name = "T")]
    strength: Option<usize>,
    /// Let both judges work, whatever it costs
    #[arg(long)]
    thorough: bool,
    /// Print one JSON object
    #[arg(long)]
    json: bool,
    /// Write the certificate to this file
    #[arg(long, value_name = "FILE")]
    certificate: Option<String>,
    /// Write a page with plan, balance and verdict to this file, HTML to read or print
    #[arg(long, value_name = "FILE")]
    report: Option<String>,
    /// The number of threads [default: all]; the verdict does not depend on it
    #[arg(long, value_name = "K", value_parser = clap::value_parser!(u16).range(1..=1024))]
    threads: Option<u16>,
    /// Nothing on stderr
    #[arg(long)]
    quiet: bool,
    #[command(flatten)]
    reading: ReadFlags,
}

pub(super) fn run(flags: &Flags) -> Result<ExitCode, Failure> {
    output::distinct(&[&flags.file], &[flags.certificate.as_deref(), flags.report.as_deref()])?;
    if flags.certificate.as_deref() == Some("-") {
        return Err(Failure::usage("--certificate needs a file: stdout is for the verdict"));
    }
    if flags.strength == Some(0) {
        return Err(Failure::usage("strength 0 makes no sense: every array has it; write 1 or more"));
    }
    let certificate = flags.certificate.as_deref().map(|name| Output::open(Some(name))).transpose()?;
    let page = Report::open(flags.report.as_deref())?;
    let received = flags.reading.read(&flags.file, None)?;
    if !flags.quiet {
        output::remark(&read_as(&received));
    }
    let demand = Demand::strength(flags.strength.unwrap_or(received.array.factors().min(2)));
    let demand = if flags.thorough { demand.thorough() } else { demand };
    let judgement = flags::on_threads(flags.threads, || {
        let _progress = Progress::start("judging", None, flags.quiet);
        Ok(certify(&received.array, &demand)?)
    })?;
    if let Some(mut certificate) = certificate {
        certificate.write(|out| out.write_all(judgement.certificate.to_json().as_bytes()))?;
        certificate.finish()?;
    }
    page.judged(&received, &judgement, &flags.file, flags.certificate.as_deref(), &flags.reading)?;
    if flags.json {
        let document = CertifyDocument::new(&received, &judgement);
        Output::Stdout.write(|out| {
            serde_json::to_writer(&mut *out, &document)?;
            out.write_all(b"\n")
        })?;
    } else {
        output::data(&report(&received, &judgement, flags))?;
    }
    Ok(match judgement.verdict {
        Verdict::Orthogonal => ExitCode::Yes,
        Verdict::NotOrthogonal => ExitCode::No,
    })
}

/// What a file was taken to be, with everything that was decided about it.
pub(super) fn read_as(received: &Received) -> String {
    let mut text = format!("read as: {}", received.describe());
    for remark in &received.remarks {
        text.push_str("\n  ");
        text.push_str(remark);
    }
    text
}

fn report(received: &Received, judgement: &Judgement, flags: &Flags) -> String {
    let certificate = &judgement.certificate;
    let repeated = match certificate.repeated_runs {
        0 => "none".to_owned(),
        n => format!("{n} of {} repeat an earlier run", words::count(certificate.runs as u64, "run")),
    };
    let verdict = match judgement.verdict {
        Verdict::Orthogonal => format!("orthogonal at strength {}", judgement.demanded),
        Verdict::NotOrthogonal => format!("not orthogonal at strength {}", judgement.demanded),
    };
    let mut lines = vec![("verdict", verdict)];
    if let Some(witness) = &judgement.witness {
        lines.push(("evidence", evidence(&NamedWitness::new(witness, received), received, certificate.runs)));
    }
    lines.push(("strength", words::strength(certificate)));
    if certificate.strength > 0 {
        lines.push(("index", words::index(certificate)));
    }
    lines.push(("word lengths", words::words(certificate)));
    lines.push(("repeated runs", repeated));
    lines.push(("sha256", certificate.sha256.clone()));
    lines.push(("judged by", words::engines(&certificate.engines)));
    lines.push(("next", next(judgement, flags)));
    words::labelled(&lines)
}

/// The combination that occurs too often or too rarely, and what follows from it.
fn evidence(witness: &NamedWitness, received: &Received, runs: usize) -> String {
    let names = witness.names(received);
    let shown: Vec<String> =
        names.iter().zip(&witness.combination).map(|(name, level)| format!("{name} = {level}")).collect();
    let columns: Vec<String> = witness.columns.iter().map(usize::to_string).collect();
    let plural = if columns.len() == 1 { "" } else { "s" };
    let mut text = format!(
        "{} occurs in {}, not in {} (factor{plural} {})",
        shown.join(", "),
        words::count(witness.count, "run"),
        witness.expected,
        columns.join(", ")
    );
    if witness.expected.denominator() > 1 {
        text.push_str(&format!(
            "\n{} cannot show every level combination of these factors equally often",
            words::count(runs as u64, "run")
        ));
    }
    text
}

fn next(judgement: &Judgement, flags: &Flags) -> String {
    let certificate = &judgement.certificate;
    let holds = certificate.strength;
    match judgement.verdict {
        Verdict::Orthogonal if holds > judgement.demanded => {
            format!("strength {holds} holds too: the array is stronger than demanded")
        }
        Verdict::Orthogonal if certificate.strength_claim == StrengthClaim::AtLeast => {
            format!("to know whether strength {} holds, demand it with --strength", holds + 1)
        }
        Verdict::Orthogonal => match &flags.certificate {
            Some(file) => {
                format!(
                    "to check again: trysquare recheck {} {}",
                    words::quoted(file),
                    words::quoted(&flags.file)
                )
            }
            None => "to keep this verdict with its evidence, add --certificate FILE".into(),
        },
        Verdict::NotOrthogonal if holds == 0 => {
            "some factor does not show its levels equally often: look for wrong or missing runs in the file"
                .into()
        }
        Verdict::NotOrthogonal => format!(
            "strength {holds} holds; look for wrong or missing runs in the file, or ask for an array of this \
             mix:\ntrysquare seek \"{}\" --strength {}",
            levels(&certificate.levels),
            judgement.demanded
        ),
    }
}

fn levels(levels: &[u16]) -> String {
    crate::mix::Mix::new(levels.to_vec()).map_or_else(|_| String::new(), |mix| mix.to_string())
}
