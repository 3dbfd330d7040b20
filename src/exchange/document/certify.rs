use serde::Serialize;

use crate::exchange::{Received, default_name};
use crate::verify::{Engine, Judgement, Ratio, StrengthClaim, Verdict, Witness};

/// The verdict on an array from elsewhere, in the words of its file.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct CertifyDocument<'a> {
    /// The number of runs.
    pub runs: usize,
    /// The number of levels of each factor.
    pub levels: &'a [u16],
    /// The largest strength that holds, as far as `strength_claim` says; 0 when not even every
    /// column is balanced.
    pub strength: usize,
    /// Whether a larger strength is ruled out.
    pub strength_claim: StrengthClaim,
    /// Whether the demanded strength holds.
    pub verdict: Verdict,
    /// The strength demanded.
    pub demanded: usize,
    /// Why not, when it does not.
    pub witness: Option<NamedWitness>,
    /// The number of runs that repeat an earlier run.
    pub repeated_runs: u64,
    /// The generalised word-length pattern B_1, B_2, … as fractions, when it was affordable.
    pub word_length_pattern: Option<&'a [String]>,
    /// The digest of the array.
    pub sha256: &'a str,
    /// The program with its version, and the engines that judged.
    pub engine: String,
    /// The names of the factors, when the file has names.
    pub factors: Option<&'a [String]>,
    /// What the file was taken to be.
    pub read_as: String,
    /// Anything else that was decided about the file.
    pub remarks: &'a [String],
}

/// A level combination that occurs too often or too rarely, in the words of the file.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct NamedWitness {
    /// The factors, from 1, counted without run numbers and columns left out.
    pub columns: Vec<usize>,
    /// The level of each as the file writes it.
    pub combination: Vec<String>,
    /// How many runs show the combination.
    pub count: u64,
    /// How many would have to: a number, or a text such as `"9/4"` when that is not whole.
    pub expected: Ratio,
}

impl NamedWitness {
    /// The witness in the words of the file. A level that does not occur there is called
    /// `level 3`, counted from 1.
    #[must_use]
    pub fn new(witness: &Witness, received: &Received) -> Self {
        let name = |(&factor, &symbol): (&usize, &u16)| {
            let cell = received.level_name(factor, symbol).map(str::to_owned);
            cell.unwrap_or_else(|| format!("level {}", u32::from(symbol) + 1))
        };
        Self {
            columns: witness.columns.iter().map(|c| c + 1).collect(),
            combination: witness.columns.iter().zip(&witness.combination).map(name).collect(),
            count: witness.count,
            expected: witness.expected,
        }
    }

    /// The names of the factors, as in the file or by default.
    #[must_use]
    pub fn names(&self, received: &Received) -> Vec<String> {
        let named = |&c: &usize| received.names.as_ref().and_then(|n| n.get(c - 1).cloned());
        self.columns.iter().map(|c| named(c).unwrap_or_else(|| default_name(*c))).collect()
    }
}

impl<'a> CertifyDocument<'a> {
    /// The document of a judgement on a received array.
    #[must_use]
    pub fn new(received: &'a Received, judgement: &'a Judgement) -> Self {
        let certificate = &judgement.certificate;
        Self {
            runs: certificate.runs,
            levels: &certificate.levels,
            strength: certificate.strength,
            strength_claim: certificate.strength_claim,
            verdict: judgement.verdict,
            demanded: judgement.demanded,
            witness: judgement.witness.as_ref().map(|w| NamedWitness::new(w, received)),
            repeated_runs: certificate.repeated_runs,
            word_length_pattern: certificate.word_length_pattern.as_deref(),
            sha256: &certificate.sha256,
            engine: format!("{} ({})", certificate.engine_version, engines(&certificate.engines)),
            factors: received.names.as_deref(),
            read_as: received.describe(),
            remarks: &received.remarks,
        }
    }
}

fn engines(engines: &[Engine]) -> String {
    let name = |e: &Engine| match e {
        Engine::Counting => "counting",
        Engine::Distance => "distance",
    };
    engines.iter().map(name).collect::<Vec<_>>().join(", ")
}
