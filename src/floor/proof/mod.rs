//! [`Proof`]: a lower bound on the number of runs, and its checker.
//!
//! The checker uses nothing but integers and the statements of the cited theorems; it shares no
//! code with whatever searched for the bound.
//!
//! | file | holds |
//! | --- | --- |
//! | `theorem` | what Rao's bound and those of Bose & Bush give |
//! | `subject`, `exclusion` | arrays of exactly N runs: what follows from them, and why there are none |
//! | `program`, `krawtchouk` | certificates of the linear program |
//! | `parity`, `blocks`, `eight`, `distances` | counting arguments |
//! | `check` | the rules, in order |

mod blocks;
mod check;
mod distances;
mod eight;
mod error;
mod exclusion;
mod krawtchouk;
mod parity;
mod program;
mod subject;
#[cfg(test)]
mod tests;
mod theorem;

use serde::{Deserialize, Serialize};

use super::FloorError;
use crate::mix::Mix;

pub use blocks::{block_limit, blocks_allow};
pub use distances::{Distances, MAX_BRANCHES};
pub use eight::eight_runs_allow;
pub use error::{ExclusionError, ProofError};
pub use exclusion::{Exclusion, Reason, Replay};
pub use krawtchouk::Krawtchouk;
pub use parity::{parity_applies, parity_bounds};
pub use program::{MAX_COST, MAX_FACTORS, MAX_TUPLES, Term, Weights};
pub use subject::{Step, Subject};
pub use theorem::{bose_bush_allows, bush_limit, rao_value};

/// The version of the JSON form of [`Proof`] that is written; version 1, which knows no
/// exclusions, is read as well.
pub const PROOF_VERSION: u32 = 2;

/// A proved statement: every array of the mix and strength has at least `runs` runs.
///
/// It rests on three parts: a bound that says N ≥ some least value, a divisor of N, and exclusions:
/// for some multiples of the divisor from the least one on the reason why no array has exactly
/// that many runs. `runs` is the first multiple that is left.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields, expecting = "an object with the keys of a proof")]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Proof {
    /// [`PROOF_VERSION`].
    pub version: u32,
    /// The mix.
    #[cfg_attr(feature = "schema", schemars(with = "String"))]
    pub mix: Mix,
    /// The strength.
    pub strength: u32,
    /// The proved number of runs.
    pub runs: u64,
    /// What divides the number of runs.
    pub divisibility: Divisor,
    /// What bounds it from below.
    pub bound: Bound,
    /// The multiples of the divisor between the bound and `runs`, each with the reason why no
    /// array has so many runs.
    #[serde(default, skip_serializing_if = "Vec::is_empty")]
    pub exclusions: Vec<Exclusion>,
}

/// A divisor of the number of runs.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Divisor {
    /// The divisor: the least common multiple of the products of the sets.
    pub divisor: u64,
    /// The levels of t factors each.
    pub sets: Vec<Vec<u16>>,
}

/// A lower bound on the number of runs.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(tag = "by", rename_all = "kebab-case", deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
#[non_exhaustive]
pub enum Bound {
    /// Nothing but the divisor: N is at least one times it.
    Divisibility,
    /// Rao's bound at a strength up to the one asked for.
    Rao {
        /// The strength at which the bound is taken.
        strength: u32,
        /// At odd strengths the levels of the factor set aside.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        aside: Option<u16>,
        /// The bound.
        least: u64,
    },
    /// The bound of Bose & Bush for factors of one number of levels.
    BoseBush {
        /// The number of levels.
        levels: u16,
        /// How many factors of them the mix has.
        factors: u64,
        /// The bound.
        least: u64,
    },
    /// Bush's bound at index 1 for factors of one number of levels.
    Bush {
        /// The number of levels.
        levels: u16,
        /// How many factors of them the mix has.
        factors: u64,
        /// The bound.
        least: u64,
    },
    /// The linear program: weights whose polynomial is nowhere negative.
    LinearProgram {
        /// The weights.
        weights: Weights,
        /// The bound.
        least: u64,
    },
}

impl Bound {
    /// The name of the bound, as in the JSON form.
    #[must_use]
    pub fn name(&self) -> &'static str {
        match self {
            Self::Divisibility => "divisibility",
            Self::Rao { .. } => "rao",
            Self::BoseBush { .. } => "bose-bush",
            Self::Bush { .. } => "bush",
            Self::LinearProgram { .. } => "linear-program",
        }
    }

    /// The bound before it is rounded up to a multiple of the divisor.
    #[must_use]
    pub fn least(&self) -> u64 {
        match self {
            Self::Divisibility => 1,
            Self::Rao { least, .. }
            | Self::BoseBush { least, .. }
            | Self::Bush { least, .. }
            | Self::LinearProgram { least, .. } => *least,
        }
    }
}

impl Proof {
    /// A proof from a divisor and a bound, without exclusions; the number of runs is worked out.
    ///
    /// # Errors
    /// [`FloorError::TooLarge`] when it does not fit 64 bits.
    pub fn new(mix: Mix, strength: u32, divisibility: Divisor, bound: Bound) -> Result<Self, FloorError> {
        let runs = round_up(bound.least(), divisibility.divisor).ok_or(FloorError::TooLarge)?;
        let exclusions = Vec::new();
        Ok(Self { version: PROOF_VERSION, mix, strength, runs, divisibility, bound, exclusions })
    }

    /// The proof that goes one multiple of the divisor further, because no array has exactly
    /// `self.runs` runs; `exclusion` says why.
    ///
    /// # Errors
    /// [`FloorError::TooLarge`] when the next multiple does not fit 64 bits.
    pub fn excluding(mut self, exclusion: Exclusion) -> Result<Self, FloorError> {
        self.runs = self.runs.checked_add(self.divisibility.divisor).ok_or(FloorError::TooLarge)?;
        self.exclusions.push(exclusion);
        Ok(self)
    }

    /// The least number of runs that is not ruled out, before it is rounded up.
    #[must_use]
    pub fn least(&self) -> u64 {
        self.exclusions.last().map_or(self.bound.least(), |e| e.runs.saturating_add(1))
    }

    /// The name of what the number of runs rests on: the reason of the last exclusion, or the
    /// bound.
    #[must_use]
    pub fn name(&self) -> &'static str {
        self.exclusions.last().map_or(self.bound.name(), |e| e.reason.name())
    }
}

/// `least` rounded up to a multiple of `divisor`; `None` when it does not fit or there is no such
/// multiple.
fn round_up(least: u64, divisor: u64) -> Option<u64> {
    if divisor == 0 {
        return None;
    }
    least.max(1).div_ceil(divisor).checked_mul(divisor)
}
