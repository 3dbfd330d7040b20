//! The [`Certificate`]: what was found out about one array, in a form that can be kept.

use std::collections::{BTreeMap, BTreeSet};

use serde::{Deserialize, Deserializer, Serialize};
use thiserror::Error;

use super::choice::{Engine, Findings};
use super::digest;
use crate::array::Array;
use crate::mix::counts_of;

/// The version of the certificate format that this crate writes and reads.
pub const CERTIFICATE_VERSION: u32 = 1;

/// How far [`Certificate::strength`] goes.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub enum StrengthClaim {
    /// It is the largest strength that holds.
    Exact,
    /// It holds; whether a larger one does was not looked into.
    AtLeast,
}

/// What is known about one array, to be checked again by anybody who has the array.
///
/// The JSON form carries every key; unknown keys are refused.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields, expecting = "an object with the keys of a certificate")]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Certificate {
    /// The version of the format, [`CERTIFICATE_VERSION`].
    pub version: u32,
    /// N, the number of runs.
    pub runs: usize,
    /// The number of levels of each factor, in column order.
    pub levels: Vec<u16>,
    /// A strength that holds; 0 when not even every column is balanced.
    pub strength: usize,
    /// Whether it is the largest.
    pub strength_claim: StrengthClaim,
    /// The index λ for every product of levels that `strength` columns can have: product → λ. At
    /// strength 0 the empty product 1 with λ = N.
    pub index: BTreeMap<u64, u64>,
    /// The number of runs that repeat an earlier run.
    pub repeated_runs: u64,
    /// The generalised word-length pattern B_1, B_2, … as fractions in lowest terms (`"0"`,
    /// `"55/3"`), max(strength + 2, 6) entries but at most k; nothing when the distance engine
    /// was too expensive.
    #[serde(deserialize_with = "present")]
    #[cfg_attr(feature = "schema", schemars(required, extend("type" = ["array", "null"])))]
    pub word_length_pattern: Option<Vec<String>>,
    /// The digest of the array, see [`digest::sha256`].
    pub sha256: String,
    /// The engines that judged, in the order counting, distance.
    pub engines: Vec<Engine>,
    /// The program that judged, with its version.
    pub engine_version: String,
    /// How the array was built, if that is known. Never looked at by the judges.
    #[serde(deserialize_with = "present")]
    #[cfg_attr(feature = "schema", schemars(required))]
    pub recipe: Option<serde_json::Value>,
}

/// Makes a missing key an error, where serde's own habit is to read it as null.
fn present<'de, D: Deserializer<'de>, T: Deserialize<'de>>(deserializer: D) -> Result<Option<T>, D::Error> {
    Option::deserialize(deserializer)
}

/// Why a text is no certificate.
#[derive(Debug, Error)]
#[non_exhaustive]
pub enum CertificateError {
    /// Cut off, no JSON, or not with the keys of a certificate.
    #[error("not a certificate: {0}")]
    Malformed(#[from] serde_json::Error),
    /// A format of another version.
    #[error("a certificate of version {0}; this program reads version {CERTIFICATE_VERSION}")]
    Version(u32),
}

impl Certificate {
    pub(super) fn from_findings(array: &Array, findings: Findings, engines: Vec<Engine>) -> Self {
        let claim = if findings.exact { StrengthClaim::Exact } else { StrengthClaim::AtLeast };
        Self {
            version: CERTIFICATE_VERSION,
            runs: array.runs(),
            levels: array.levels().to_vec(),
            strength: findings.strength,
            strength_claim: claim,
            index: index_of(array, findings.strength),
            repeated_runs: digest::repeated_runs(array),
            word_length_pattern: findings.pattern,
            sha256: digest::sha256(array),
            engines,
            engine_version: concat!(env!("CARGO_PKG_NAME"), " ", env!("CARGO_PKG_VERSION")).to_owned(),
            recipe: None,
        }
    }

    /// The same certificate with the recipe of the array.
    #[must_use]
    pub fn with_recipe(self, recipe: serde_json::Value) -> Self {
        Self { recipe: Some(recipe), ..self }
    }

    /// Reads a certificate from JSON. What it states is not checked: that is
    /// [`recheck`](super::recheck)'s task.
    ///
    /// # Errors
    /// A [`CertificateError`] on anything but one whole certificate of this version.
    pub fn from_json(text: &str) -> Result<Self, CertificateError> {
        #[derive(Deserialize)]
        #[serde(expecting = "an object with a version")]
        struct Version {
            version: u32,
        }
        let Version { version } = serde_json::from_str(text)?;
        if version != CERTIFICATE_VERSION {
            return Err(CertificateError::Version(version));
        }
        Ok(serde_json::from_str(text)?)
    }

    /// The certificate as indented JSON, ended by a line feed; the same bytes every time.
    ///
    /// # Panics
    /// Never: every field has a JSON form.
    #[must_use]
    pub fn to_json(&self) -> String {
        serde_json::to_string_pretty(self).expect("strings, numbers and text keys only") + "\n"
    }
}

/// λ for every product of the levels of `strength` columns. Needs an array of that strength, so
/// that every product divides N.
pub(super) fn index_of(array: &Array, strength: usize) -> BTreeMap<u64, u64> {
    let runs = array.runs() as u64;
    let mut reached: Vec<BTreeSet<u64>> = vec![BTreeSet::new(); strength + 1];
    reached[0].insert(1);
    for (s, count) in counts_of(array.levels()) {
        for chosen in (1..=strength).rev() {
            for more in 1..=count.min(chosen) {
                let power = u64::from(s).checked_pow(more as u32).filter(|p| runs.is_multiple_of(*p));
                let Some(power) = power else { break };
                let products: Vec<u64> = reached[chosen - more]
                    .iter()
                    .filter_map(|p| p.checked_mul(power).filter(|p| runs.is_multiple_of(*p)))
                    .collect();
                reached[chosen].extend(products);
            }
        }
    }
    reached[strength].iter().map(|&product| (product, runs / product)).collect()
}
