use clap::Args;

use super::certify::read_as;
use super::flags::{self, ReadFlags};
use super::output::{self, Output};
use super::progress::Progress;
use super::{ExitCode, Failure, input, words};
use crate::array::Array;
use crate::exchange::document::{RecheckDocument, RecipeCheck};
use crate::floor::Effort;
use crate::floor::exhaustion::{Record, RecordError};
use crate::mix::Mix;
use crate::recipe::Recipe;
use crate::verify::{Certificate, Field, Mismatch, RecheckReport, digest, recheck};

/// Check a certificate again, trusting nothing in it
///
/// Everything the certificate states about the array is found out anew. If it carries a recipe,
/// that is built again and compared, too.
#[derive(Args)]
pub(super) struct Flags {
    /// The certificate, or the JSON object of seek that holds one; - for stdin
    #[arg(value_name = "CERTIFICATE")]
    certificate: String,
    /// The file with the array; - for stdin
    #[arg(value_name = "FILE", required_unless_present = "deep")]
    file: Option<String>,
    /// Make the search of a record again (catalog/none-*.json), which says that no array exists; it
    /// stands in place of CERTIFICATE
    #[arg(long, conflicts_with_all = ["file", "json"])]
    deep: bool,
    /// Print one JSON object
    #[arg(long)]
    json: bool,
    /// The number of threads [default: all]; the result does not depend on it
    #[arg(long, value_name = "K", value_parser = clap::value_parser!(u16).range(1..=1024))]
    threads: Option<u16>,
    /// Nothing on stderr
    #[arg(long)]
    quiet: bool,
    #[command(flatten)]
    reading: ReadFlags,
}

pub(super) fn run(flags: &Flags) -> Result<ExitCode, Failure> {
    let Some(file) = flags.file.as_deref() else { return again(flags) };
    if flags.certificate == "-" && file == "-" {
        return Err(Failure::usage("stdin holds one file: give a name to the certificate or to the array"));
    }
    let certificate = read_certificate(&flags.certificate)?;
    let received = flags.reading.read(file, Mix::new(certificate.levels.clone()).ok())?;
    if !flags.quiet {
        output::remark(&read_as(&received));
    }
    let (report, recipe) = flags::on_threads(flags.threads, || {
        let _progress = Progress::start("checking", None, flags.quiet);
        let mut report = recheck(&certificate, &received.array)?;
        let recipe = check_recipe(&certificate, &received.array, &mut report);
        Ok((report, recipe))
    })?;
    if flags.json {
        let document = RecheckDocument::new(&report, recipe);
        Output::Stdout.write(|out| {
            serde_json::to_writer(&mut *out, &document)?;
            out.write_all(b"\n")
        })?;
    } else {
        output::data(&verdict(&report, &recipe))?;
    }
    Ok(if report.holds() { ExitCode::Yes } else { ExitCode::No })
}

/// Makes a recorded search again.
fn again(flags: &Flags) -> Result<ExitCode, Failure> {
    let name = input::title(&flags.certificate);
    let fail = |e: RecordError| Failure::input(name, e);
    let record = Record::from_json(&input::read_text(&flags.certificate)?).map_err(fail)?;
    let claim = record.claim().map_err(fail)?;
    let claim = format!(
        "no array of {} is for {} at strength {}",
        words::count(claim.runs.into(), "run"),
        claim.mix,
        claim.strength
    );
    output::listen();
    let halt = output::interrupted;
    let outcome = flags::on_threads(flags.threads, || {
        let _progress = Progress::start("searching again", None, flags.quiet);
        Ok(record.replay(&mut Effort::new(u64::MAX, &halt)))
    })?;
    match outcome {
        Ok(()) => {
            output::data(&format!("the record holds, its search was made again: {claim}\n"))?;
            Ok(ExitCode::Yes)
        }
        Err(RecordError::Unfinished) => Err(Failure::stopped("interrupted before the search was made again")),
        Err(e) => {
            output::data(&format!("not confirmed: {e}\nit claims: {claim}\n"))?;
            Ok(ExitCode::No)
        }
    }
}

fn read_certificate(name: &str) -> Result<Certificate, Failure> {
    let text = input::read_text(name)?;
    let inside = serde_json::from_str::<serde_json::Value>(&text)
        .ok()
        .and_then(|mut document| document.get_mut("certificate").map(serde_json::Value::take));
    let text = inside.map_or(text, |certificate| certificate.to_string());
    Certificate::from_json(&text).map_err(|e| Failure::input(input::title(name), e))
}

/// Builds the recipe anew; what differs becomes a mismatch of the report.
fn check_recipe(certificate: &Certificate, array: &Array, report: &mut RecheckReport) -> RecipeCheck {
    report.not_checked.retain(|&field| field != Field::Recipe);
    let Some(recipe) = &certificate.recipe else { return RecipeCheck::None };
    let found = match rebuild(recipe, array) {
        Ok(sha256) if sha256 == digest::sha256(array) => return RecipeCheck::SameArray,
        Ok(sha256) => format!("it yields another array, sha256 {sha256}"),
        Err(why) => why,
    };
    let stated = "a recipe that yields the array".to_owned();
    report.mismatches.push(Mismatch { field: Field::Recipe, stated, found });
    RecipeCheck::Differs
}

/// The digest of what a recipe yields. Nothing larger than the array is built.
fn rebuild(recipe: &serde_json::Value, array: &Array) -> Result<String, String> {
    let recipe: Recipe =
        serde_json::from_value(recipe.clone()).map_err(|e| format!("it cannot be read: {e}"))?;
    let shape = recipe.runs().and_then(|runs| Ok((runs, recipe.mix()?)));
    let (runs, mix) = shape.map_err(|e| e.to_string())?;
    if runs != array.runs() || mix.levels() != array.levels() {
        return Err(format!("it yields {} of {mix}", words::count(runs as u64, "run")));
    }
    let built = recipe.build().map_err(|e| e.to_string())?;
    Ok(digest::sha256(&built))
}

fn verdict(report: &RecheckReport, recipe: &RecipeCheck) -> String {
    let list = |fields: &[Field]| match fields {
        [] => "nothing".to_owned(),
        fields => fields.iter().map(Field::to_string).collect::<Vec<_>>().join(", "),
    };
    let verdict = match report.mismatches.len() as u64 {
        0 => "the certificate holds".to_owned(),
        n => format!("the certificate does not hold: {} not true of the array", are(n)),
    };
    let mut lines = vec![("verdict", verdict)];
    match recipe {
        RecipeCheck::SameArray => lines.push(("recipe", "built again, it yields the same array".into())),
        RecipeCheck::None => lines.push(("recipe", "the certificate carries none".into())),
        RecipeCheck::Differs => {}
    }
    lines.push(("not checked", list(&report.not_checked)));
    lines.push(("judged by", words::engines(&report.engines)));
    if report.holds() {
        return words::labelled(&lines);
    }
    lines.push((
        "next",
        "judge the array itself with trysquare certify; do not rely on this certificate".into(),
    ));
    let rows: Vec<[String; 3]> =
        report.mismatches.iter().map(|m| [m.field.to_string(), m.stated.clone(), m.found.clone()]).collect();
    words::labelled(&lines) + "\n" + &words::table(["field", "stated", "found"], &rows)
}

fn are(n: u64) -> String {
    if n == 1 { "1 field is".into() } else { format!("{n} fields are") }
}
