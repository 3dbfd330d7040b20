//! Checking a certificate again, trusting nothing in it.

use std::fmt;

use serde::{Deserialize, Serialize};

use super::certificate::{CERTIFICATE_VERSION, Certificate, StrengthClaim, index_of};
use super::choice::{Engine, Findings, both_affordable, investigate, pattern_length, strength_ceiling};
use super::{JudgeError, digest, distance};
use crate::array::Array;

/// A field of a [`Certificate`].
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub enum Field {
    /// The version of the format.
    Version,
    /// The number of runs.
    Runs,
    /// The numbers of levels.
    Levels,
    /// The strength together with its claim to be exact.
    Strength,
    /// The index per product of levels.
    Index,
    /// The number of repeated runs.
    RepeatedRuns,
    /// The generalised word-length pattern.
    WordLengthPattern,
    /// The digest.
    Sha256,
    /// The engines.
    Engines,
    /// The program and its version.
    EngineVersion,
    /// The recipe.
    Recipe,
}

impl fmt::Display for Field {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Self::Version => "version",
            Self::Runs => "runs",
            Self::Levels => "levels",
            Self::Strength => "strength",
            Self::Index => "index",
            Self::RepeatedRuns => "repeated_runs",
            Self::WordLengthPattern => "word_length_pattern",
            Self::Sha256 => "sha256",
            Self::Engines => "engines",
            Self::EngineVersion => "engine_version",
            Self::Recipe => "recipe",
        })
    }
}

/// A field of a certificate that does not fit the array.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Mismatch {
    /// The field.
    pub field: Field,
    /// What the certificate states.
    pub stated: String,
    /// What is true of the array.
    pub found: String,
}

/// The outcome of a [`recheck`].
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct RecheckReport {
    /// What is wrong, in the order of the certificate's fields.
    pub mismatches: Vec<Mismatch>,
    /// What an array cannot confirm or the certificate does not state.
    pub not_checked: Vec<Field>,
    /// The engines that judged the array this time.
    pub engines: Vec<Engine>,
}

impl RecheckReport {
    /// Whether everything that could be checked is true.
    #[must_use]
    pub fn holds(&self) -> bool {
        self.mismatches.is_empty()
    }
}

/// Finds out everything that `certificate` states about `array` anew, and lists what differs.
///
/// A stated strength that is only "at least" is accepted when a larger one holds. Index and
/// pattern are compared at the stated strength when that is true, at the real one otherwise, so
/// one wrong field gives one mismatch. Which program and which engines judged before, and the
/// recipe, say nothing an array could confirm: they are listed as not checked, but the engines
/// must be named once each, in order, and include the one that yields a stated pattern.
///
/// Both engines judge when both are cheap. Cost: that of [`certify`](super::certify) at the stated
/// strength, and of [`distance::dual_distribution`] when a pattern is stated.
///
/// # Errors
/// [`JudgeError::Disagreement`] when the engines contradict each other.
pub fn recheck(certificate: &Certificate, array: &Array) -> Result<RecheckReport, JudgeError> {
    let exact = certificate.strength_claim == StrengthClaim::Exact;
    // Beyond this no array is so strong, whatever is stated.
    let ceiling = strength_ceiling(array);
    let required = certificate.strength.min(ceiling).saturating_add(usize::from(exact));
    let findings = investigate(array, required, both_affordable(array, required))?;
    let strength_holds = if exact {
        findings.exact && findings.strength == certificate.strength
    } else {
        findings.strength >= certificate.strength
    };
    let strength = if strength_holds { certificate.strength } else { findings.strength };
    let mut report = RecheckReport {
        mismatches: Vec::new(),
        not_checked: vec![Field::EngineVersion, Field::Recipe],
        engines: findings.engines.clone(),
    };
    report.compare(Field::Version, &certificate.version, &CERTIFICATE_VERSION);
    report.compare(Field::Runs, &certificate.runs, &array.runs());
    report.compare(Field::Levels, &certificate.levels.as_slice(), &array.levels());
    if !strength_holds {
        let stated = describe(certificate.strength, exact);
        report.add(Field::Strength, stated, describe(findings.strength, findings.exact));
    }
    report.compare(Field::Index, &certificate.index, &index_of(array, strength));
    report.compare(Field::RepeatedRuns, &certificate.repeated_runs, &digest::repeated_runs(array));
    match &certificate.word_length_pattern {
        None => report.not_checked.insert(0, Field::WordLengthPattern),
        Some(stated) => {
            let found = report.pattern(array, findings, strength);
            report.compare(Field::WordLengthPattern, stated, &found);
        }
    }
    report.compare(Field::Sha256, &certificate.sha256, &digest::sha256(array));
    report.check_engines(certificate);
    Ok(report)
}

fn describe(strength: usize, exact: bool) -> String {
    format!("{} {strength}", if exact { "exactly" } else { "at least" })
}

impl RecheckReport {
    fn compare<T: PartialEq + fmt::Debug>(&mut self, field: Field, stated: &T, found: &T) {
        if stated != found {
            self.add(field, format!("{stated:?}"), format!("{found:?}"));
        }
    }

    fn add(&mut self, field: Field, stated: String, found: String) {
        self.mismatches.push(Mismatch { field, stated, found });
    }

    /// The pattern an honest certificate of this strength states.
    fn pattern(&mut self, array: &Array, findings: Findings, strength: usize) -> Vec<String> {
        let length = pattern_length(strength, array.factors());
        match findings.pattern {
            Some(mut pattern) if pattern.len() >= length => {
                pattern.truncate(length);
                pattern
            }
            _ => {
                if !self.engines.contains(&Engine::Distance) {
                    self.engines.push(Engine::Distance);
                }
                distance::dual_distribution(array, length).word_length_pattern()
            }
        }
    }

    fn check_engines(&mut self, certificate: &Certificate) {
        let engines = &certificate.engines;
        let in_order = !engines.is_empty() && engines.windows(2).all(|w| w[0] < w[1]);
        let patterned = certificate.word_length_pattern.is_none() || engines.contains(&Engine::Distance);
        if !in_order {
            self.add(Field::Engines, format!("{engines:?}"), "each engine at most once, in order".to_owned());
        } else if !patterned {
            self.add(Field::Engines, format!("{engines:?}"), "a pattern only Distance yields".to_owned());
        } else {
            self.not_checked.insert(self.not_checked.len() - 2, Field::Engines);
        }
    }
}
