use crate::floor::{Below, Bound, Exclusion, Proof};
use crate::seek::Answer;
use crate::verify::{Certificate, Engine, StrengthClaim};

/// What is to be said beside every plan.
pub(super) const CAUTION: &str = "the runs combine settings nobody may have run together: check each one against the\n\
                       limits of the equipment, local rules and the judgement of whoever is licensed to run it";

/// `1 run`, `2 runs`.
pub(super) fn count(n: u64, what: &str) -> String {
    if n == 1 { format!("1 {what}") } else { format!("{n} {what}s") }
}

/// `0.3 ms`, `1.2 s`.
pub(super) fn time(time: std::time::Duration) -> String {
    let seconds = time.as_secs_f64();
    if seconds < 0.1 { format!("{:.1} ms", seconds * 1000.0) } else { format!("{seconds:.1} s") }
}

/// What is known about the numbers of runs below an answer, a line each.
pub(super) fn below(answer: &Answer) -> String {
    const SHOWN: usize = 8;
    let each = |b: &Below| match b.excluded {
        Some(name) => format!("{}: impossible, {} ({name})", b.runs, why(name)),
        None => format!("{}: not excluded, none known here", b.runs),
    };
    let skipped = answer.below.len().saturating_sub(SHOWN);
    let mut shown: Vec<String> = answer.below.iter().skip(skipped).map(each).collect();
    if skipped > 0 {
        shown.insert(0, format!("{skipped} smaller ones, see --json"));
    }
    shown.join("\n")
}

/// The name of a reason in words.
fn why(name: &str) -> &'static str {
    match name {
        "indivisible" => "the level combinations cannot occur equally often",
        "rao" => "too few degrees of freedom",
        "bose-bush" | "bush" => "too many factors of one number of levels",
        "linear-program" => "no distribution of distances is possible",
        "parity" => "no distribution of distances is possible, counts being even",
        "four-runs-per-level" => "too many two-level factors for four runs per level",
        "eight-runs-per-level" => "too many two-level factors for eight runs per level",
        "distances" => "no run can have the distances to the others that it must have",
        "exhaustion" => "a complete search, on record, found none",
        _ => "ruled out",
    }
}

/// An aligned table under a line of titles, two blanks between columns; columns of numbers to the
/// right, the last column as it comes.
pub(super) fn table<const K: usize>(titles: [&str; K], rows: &[[String; K]]) -> String {
    let width = |j: usize| {
        rows.iter().map(|r| r[j].as_str()).chain([titles[j]]).map(|c| c.chars().count()).max().unwrap_or(0)
    };
    let number = |c: &str| !c.is_empty() && c.bytes().all(|b| b.is_ascii_digit());
    let right: Vec<bool> = (0..K).map(|j| !rows.is_empty() && rows.iter().all(|r| number(&r[j]))).collect();
    let widths: Vec<usize> = (0..K).map(width).collect();
    let mut text = String::new();
    for row in std::iter::once(titles.map(str::to_owned)).chain(rows.iter().cloned()) {
        let mut line = String::new();
        for (j, cell) in row.iter().enumerate() {
            let gap = " ".repeat(widths[j] - cell.chars().count());
            let (before, after) = if right[j] { (gap.as_str(), "") } else { ("", gap.as_str()) };
            line.push_str(&format!("{}{before}{cell}{after}", if j > 0 { "  " } else { "" }));
        }
        text.push_str(line.trim_end());
        text.push('\n');
    }
    text
}

/// Labelled lines with the values aligned; a value of several lines is continued under itself.
pub(super) fn labelled(lines: &[(&str, String)]) -> String {
    let width = lines.iter().map(|(label, _)| label.len()).max().unwrap_or(0);
    let indent = format!("\n{}", " ".repeat(width + 2));
    lines.iter().map(|(label, value)| format!("{label:width$}  {}\n", value.replace('\n', &indent))).collect()
}

/// What a lower bound rests on.
pub(super) fn reason(proof: &Proof) -> String {
    let divisor = proof.divisibility.divisor;
    let multiple = if divisor == 1 { String::new() } else { format!("; multiple of {divisor}") };
    let excluded = excluded(proof);
    let rests = match proof.bound {
        Bound::Divisibility => return format!("the number of runs is a multiple of {divisor}{excluded}"),
        Bound::Rao { strength, aside: None, .. } => format!("degrees of freedom at strength {strength}"),
        Bound::Rao { strength, aside: Some(s), .. } => {
            format!("degrees of freedom at strength {strength}, one factor of {s} levels set aside")
        }
        Bound::BoseBush { levels, factors, .. } => {
            format!("the {} of {levels} levels", count(factors, "factor"))
        }
        Bound::Bush { levels, factors, .. } => {
            format!("the {} of {levels} levels at index 1", count(factors, "factor"))
        }
        Bound::LinearProgram { ref weights, .. } => {
            format!("a certificate of {}", count(weights.terms.len() as u64, "weight"))
        }
    };
    format!("{rests}: at least {}{multiple}{excluded}", proof.bound.least())
}

/// `; not 12 (four-runs-per-level), not 24 (…)`: what the exclusions of a proof rule out.
fn excluded(proof: &Proof) -> String {
    const SHOWN: usize = 4;
    let each = |e: &Exclusion| format!("not {} ({})", e.runs, e.reason.name());
    match proof.exclusions.len() {
        0 => String::new(),
        n if n <= SHOWN => format!("; {}", proof.exclusions.iter().map(each).collect::<Vec<_>>().join(", ")),
        n => format!(
            "; not {} to {}, each ruled out by itself",
            proof.exclusions[0].runs,
            proof.exclusions[n - 1].runs
        ),
    }
}

/// The floor in one phrase: runs, name of the bound, what it rests on.
pub(super) fn floor(proof: &Proof) -> String {
    format!("{} ({}: {})", count(proof.runs, "run"), proof.name(), reason(proof))
}

/// The strength a certificate states.
pub(super) fn strength(certificate: &Certificate) -> String {
    match certificate.strength_claim {
        StrengthClaim::Exact if certificate.strength == 0 => "0: not even single factors are balanced".into(),
        StrengthClaim::Exact => format!("{}, no larger one holds", certificate.strength),
        StrengthClaim::AtLeast => format!("{}, larger ones were not looked into", certificate.strength),
    }
}

/// Who judged, and how.
pub(super) fn engines(engines: &[Engine]) -> String {
    let name = |e: &Engine| match e {
        Engine::Counting => "counting (by the definition)",
        Engine::Distance => "distance (by the dual distribution)",
    };
    engines.iter().map(name).collect::<Vec<_>>().join(" and ")
}

/// How often the level combinations of as many factors as the strength says occur: by the number
/// of combinations.
pub(super) fn index(certificate: &Certificate) -> String {
    const SHOWN: usize = 8;
    let each = |(product, times): (&u64, &u64)| format!("{product} combinations {}", each(*times));
    let shown: Vec<String> = certificate.index.iter().take(SHOWN).map(each).collect();
    let more = if certificate.index.len() > SHOWN { ", …" } else { "" };
    shown.join(", ") + more
}

fn each(times: u64) -> String {
    if times == 1 { "once each".into() } else { format!("{times} times each") }
}

/// A file name as one word of a shell.
pub(super) fn quoted(name: &str) -> String {
    let plain = |c: char| c.is_alphanumeric() || "._/+-=:,@".contains(c);
    if name.chars().all(plain) { name.to_owned() } else { format!("'{}'", name.replace('\'', "'\\''")) }
}

/// The word-length pattern and what its first word means.
pub(super) fn words(certificate: &Certificate) -> String {
    let Some(pattern) = &certificate.word_length_pattern else {
        return "not worked out: too many runs and factors for it to be quick".into();
    };
    let entries = match pattern.len() {
        0 | 1 => format!("B1 = {}", pattern.join(" ")),
        n => format!("B1 … B{n} = {}", pattern.join(" ")),
    };
    let meaning = match pattern.iter().position(|b| b != "0").map(|i| i + 1) {
        None if pattern.len() == certificate.levels.len() => "no effects are confused with one another",
        None => "no words of these lengths",
        Some(1) => "main effects are confused with the mean",
        Some(2) => "main effects are confused with one another",
        Some(3) => "main effects are confused with interactions of two factors, not with one another",
        Some(4) => "interactions of two factors are confused with one another, main effects with neither",
        Some(_) => "main effects and interactions of two factors are not confused with one another",
    };
    format!("{entries}\n{meaning}")
}
