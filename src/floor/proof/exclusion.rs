use serde::{Deserialize, Serialize};

use super::blocks::blocks_allow;
use super::check::theorem;
use super::distances::Distances;
use super::eight::eight_runs_allow;
use super::error::ExclusionError;
use super::parity::{parity_applies, parity_bounds};
use super::program::Weights;
use super::subject::{Step, Subject};
use super::{Bound, ProofError};

/// Why no array has exactly so many runs: steps that lead to a sub-request, and why that one has
/// no array.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Exclusion {
    /// The number of runs.
    pub runs: u64,
    /// What leads from the request to the sub-request.
    #[serde(default, skip_serializing_if = "Vec::is_empty")]
    pub steps: Vec<Step>,
    /// The sub-request.
    pub about: Subject,
    /// Why it has no array.
    pub reason: Reason,
}

/// Why a subject has no array.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(tag = "by", rename_all = "kebab-case", deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
#[non_exhaustive]
pub enum Reason {
    /// The levels of t factors whose product does not divide the number of runs.
    Indivisible {
        /// The levels.
        set: Vec<u16>,
    },
    /// A bound above the number of runs.
    Bound {
        /// The bound.
        bound: Bound,
    },
    /// The linear program, sharpened by [`parity_bounds`].
    Parity {
        /// The weights.
        weights: Weights,
    },
    /// Four runs per level of a factor of 3 or 5 levels: [`blocks_allow`].
    FourRunsPerLevel {
        /// The levels.
        levels: u16,
    },
    /// Eight runs per level at strength 3: [`eight_runs_allow`].
    EightRunsPerLevel {
        /// The levels.
        levels: u16,
    },
    /// The distances from one run.
    Distances {
        /// The cases.
        cases: Distances,
    },
    /// A search that went through all arrays column by column: its record, which only making the
    /// search again can confirm.
    Exhaustion {
        /// The record, read by whoever makes the search again.
        record: serde_json::Value,
    },
}

/// Makes a recorded search again: whether it shows that the subject has no array.
pub type Replay<'a> = dyn Fn(&serde_json::Value, &Subject) -> Result<(), String> + 'a;

impl Reason {
    /// The name of the reason, as in the JSON form; of a bound the bound's.
    #[must_use]
    pub fn name(&self) -> &'static str {
        match self {
            Self::Indivisible { .. } => "indivisible",
            Self::Bound { bound } => bound.name(),
            Self::Parity { .. } => "parity",
            Self::FourRunsPerLevel { .. } => "four-runs-per-level",
            Self::EightRunsPerLevel { .. } => "eight-runs-per-level",
            Self::Distances { .. } => "distances",
            Self::Exhaustion { .. } => "exhaustion",
        }
    }

    /// Checks that the subject has no array; recorded searches are made again by `replay`.
    ///
    /// # Errors
    /// The first condition that does not hold.
    pub fn check(&self, about: &Subject, replay: &Replay<'_>) -> Result<(), ExclusionError> {
        let counts = about.counts();
        let factors = |levels: u16| counts.iter().find(|c| c.0 == levels).map_or(0, |c| c.1);
        let demand = |is: bool| if is { Ok(()) } else { Err(ExclusionError::Subject) };
        match self {
            Self::Indivisible { set } => {
                let product = set.iter().try_fold(1u64, |n, &s| n.checked_mul(u64::from(s)));
                let inside =
                    set.iter().all(|&s| set.iter().filter(|&&x| x == s).count() as u64 <= factors(s));
                demand(set.len() == about.strength as usize && inside)?;
                // A product above 64 bits divides no such number.
                demand(about.runs > 0 && product.is_none_or(|p| !about.runs.is_multiple_of(p)))
            }
            Self::Bound { bound } => {
                let given = theorem(bound, &counts, about.strength).map_err(|e| match e {
                    ProofError::Program(why) => why,
                    ProofError::TooLarge => ExclusionError::TooLarge,
                    _ => ExclusionError::Subject,
                })?;
                demand(bound.least() <= given)?;
                if bound.least() > about.runs { Ok(()) } else { Err(ExclusionError::Weak) }
            }
            Self::Parity { weights } => {
                demand(parity_applies(about.runs, about.strength))?;
                weights.check(&counts, about.strength)?;
                parity(weights, about, &counts)
            }
            Self::FourRunsPerLevel { levels } => {
                let runs = u64::from(*levels) * 4;
                demand(about.strength == 2 && about.runs == runs && factors(*levels) > 0)?;
                match blocks_allow(*levels, factors(2)) {
                    Some(false) => Ok(()),
                    Some(true) => Err(ExclusionError::Weak),
                    None => Err(ExclusionError::Subject),
                }
            }
            Self::EightRunsPerLevel { levels } => {
                let runs = u64::from(*levels) * 8;
                demand(about.strength == 3 && about.runs == runs && factors(*levels) > 0)?;
                if eight_runs_allow(*levels, factors(2)) { Err(ExclusionError::Weak) } else { Ok(()) }
            }
            Self::Distances { cases } => cases.check(about),
            Self::Exhaustion { record } => replay(record, about).map_err(ExclusionError::Replay),
        }
    }
}

/// With N² B_j ≥ 4^t v_j for some j the inequality of [`Weights`] becomes
/// G(0) ≤ N g − (4^t/N) Σ f_j over those j.
fn parity(weights: &Weights, about: &Subject, counts: &[(u16, u64)]) -> Result<(), ExclusionError> {
    let sharpened = |at: &[u32]| parity_bounds(at, counts, about.strength);
    let sum: i128 = weights.terms.iter().filter(|t| sharpened(&t.at)).map(|t| i128::from(t.weight)).sum();
    let runs = i128::from(about.runs);
    let room = runs.checked_mul(i128::from(weights.constant)).and_then(|n| n.checked_sub(weights.at_zero()));
    let room = room.and_then(|n| n.checked_mul(runs)).ok_or(ExclusionError::TooLarge)?;
    let taken = sum.checked_mul(1 << (2 * about.strength)).ok_or(ExclusionError::TooLarge)?;
    if room < taken { Ok(()) } else { Err(ExclusionError::Weak) }
}

impl Exclusion {
    /// Checks that the request has no array of exactly `self.runs` runs.
    ///
    /// # Errors
    /// The first rule that is broken; [`ExclusionError::Replay`] for a recorded search.
    pub fn check(&self, request: &Subject) -> Result<(), ExclusionError> {
        self.check_with(request, &no_replay)
    }

    /// As [`Exclusion::check`], recorded searches made again by `replay`.
    ///
    /// # Errors
    /// The first rule that is broken.
    pub fn check_with(&self, request: &Subject, replay: &Replay<'_>) -> Result<(), ExclusionError> {
        if self.runs != request.runs {
            return Err(ExclusionError::Order { expected: request.runs });
        }
        let mut subject = request.clone();
        for (n, step) in self.steps.iter().enumerate() {
            subject = subject.after(step).ok_or(ExclusionError::Step(n + 1))?;
        }
        if !subject.same(&self.about) {
            return Err(ExclusionError::About(subject.to_string()));
        }
        self.reason.check(&subject, replay)
    }
}

/// Accepts no recorded search.
pub(super) fn no_replay(_: &serde_json::Value, _: &Subject) -> Result<(), String> {
    Err("the search must be made again for this".into())
}
