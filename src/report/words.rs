//! Sentences that the page and the command line share, and those of the page alone.

use super::{Page, Smaller};
use crate::verify::{Certificate, Engine, StrengthClaim};

/// What is to be said beside every plan.
pub const CAUTION: &str = "the runs combine settings nobody may have run together: check each one against the\n\
                       limits of the equipment, local rules and the judgement of whoever is licensed to run it";

/// `1 run`, `2 runs`.
pub(super) fn count(n: u64, what: &str) -> String {
    if n == 1 { format!("1 {what}") } else { format!("{n} {what}s") }
}

/// The first letter of a sentence made large.
pub(super) fn sentence(text: &str) -> String {
    let mut chars = text.chars();
    let first = chars.next().map(|c| c.to_uppercase().to_string()).unwrap_or_default();
    let end = if text.ends_with(['.', '!', '?']) { "" } else { "." };
    first + chars.as_str() + end
}

/// The strength a certificate states.
pub(crate) fn strength(certificate: &Certificate) -> String {
    match certificate.strength_claim {
        StrengthClaim::Exact if certificate.strength == 0 => "0: not even single factors are balanced".into(),
        StrengthClaim::Exact => format!("{}, no larger one holds", certificate.strength),
        StrengthClaim::AtLeast => format!("{}, larger ones were not looked into", certificate.strength),
    }
}

/// Who judged, and how.
pub(crate) fn engines(engines: &[Engine]) -> String {
    let name = |e: &Engine| match e {
        Engine::Counting => "counting (by the definition)",
        Engine::Distance => "distance (by the dual distribution)",
    };
    engines.iter().map(name).collect::<Vec<_>>().join(" and ")
}

/// What the first word of a word-length pattern of an array of `factors` factors means.
pub(crate) fn meaning(pattern: &[String], factors: usize) -> &'static str {
    match pattern.iter().position(|b| b != "0").map(|i| i + 1) {
        None if pattern.len() == factors => "no effects are confused with one another",
        None => "no words of these lengths",
        Some(1) => "main effects are confused with the mean",
        Some(2) => "main effects are confused with one another",
        Some(3) => "main effects are confused with interactions of two factors, not with one another",
        Some(4) => "interactions of two factors are confused with one another, main effects with neither",
        Some(_) => "main effects and interactions of two factors are not confused with one another",
    }
}

/// What the page says first: a mark, its class, a few words, and one sentence.
pub(super) fn verdict(page: &Page<'_>) -> (&'static str, &'static str, String, String) {
    let t = page.strength;
    let subsets = |t: usize| match t {
        0 | 1 => "each factor shows its settings".to_owned(),
        2 => "every two factors show all combinations of their settings".to_owned(),
        n => format!("every {n} factors show all combinations of their settings"),
    };
    match page.certificate {
        Some(c) if c.strength >= t => {
            let smallest = match page.floor.as_ref().map(|f| f.smaller) {
                Some(Smaller::Impossible) => ", and no plan of fewer runs can do that",
                Some(Smaller::NoneKnown(_)) => "; whether fewer runs could do that is not known",
                Some(Smaller::NotLookedFor(_)) | None => "",
            };
            (
                "✓",
                "yes",
                format!("Orthogonal at strength {t}"),
                format!("In this plan {} equally often{smallest}.", subsets(t)),
            )
        }
        Some(c) => {
            let holds = match c.strength {
                0 => "not even each single factor shows its settings equally often".to_owned(),
                s => format!("only {} equally often", subsets(s)),
            };
            ("✗", "no", format!("Not orthogonal at strength {t}"), format!("In this plan {holds}."))
        }
        None if page.nearness.is_some() => {
            let few = format!("Near, not orthogonal at strength {t}");
            ("≈", "near", few, "How near this plan comes is in the balance and the criteria below.".into())
        }
        None => ("?", "near", "Not judged".into(), "Nobody said what strength this plan has.".into()),
    }
}
