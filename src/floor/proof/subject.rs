use std::collections::BTreeMap;
use std::fmt;

use serde::{Deserialize, Serialize};

use crate::mix::Mix;

/// A question of existence: an array of exactly so many runs for a mix at a strength.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Subject {
    /// The number of runs.
    pub runs: u64,
    /// The strength.
    pub strength: u32,
    /// The mix; only how many factors there are of each number of levels matters.
    #[cfg_attr(feature = "schema", schemars(with = "String"))]
    pub mix: Mix,
}

/// A step from one array to another that then exists as well.
///
/// If an array for the subject before the step exists, so does one for the subject after it;
/// an impossibility therefore travels backwards.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(tag = "step", rename_all = "kebab-case", deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
#[non_exhaustive]
pub enum Step {
    /// An array of strength t has every strength from 1 to t.
    Strength {
        /// The lower strength.
        to: u32,
    },
    /// Factors are left out.
    Drop {
        /// Their levels.
        levels: u16,
        /// How many.
        factors: u32,
    },
    /// Levels of factors are merged, a divisor of them remaining.
    Merge {
        /// The levels before.
        levels: u16,
        /// The levels after.
        into: u16,
        /// How many factors.
        factors: u32,
    },
    /// One factor of r·s levels is taken as a factor of r and one of s levels: two columns that
    /// show all combinations of theirs equally often, alone and with any other factors.
    Part {
        /// r·s.
        levels: u16,
        /// r; s is what remains.
        into: u16,
    },
    /// The runs at one level of a factor of s levels, without that factor: N/s runs, strength t−1.
    Derive {
        /// The levels of the factor.
        levels: u16,
    },
    /// Two-level factors at even strength: the runs with a 0 and their complements with a 1 are
    /// 2N runs of one factor more at strength t + 1 (Seiden 1954; \[memory\]).
    FoldOver,
}

impl Subject {
    /// How many factors there are of each number of levels, levels ascending.
    #[must_use]
    pub fn counts(&self) -> Vec<(u16, u64)> {
        self.mix.counts().into_iter().map(|(s, k)| (s, k as u64)).collect()
    }

    /// The subject after a step, `None` when the step asks for what is not there.
    #[must_use]
    pub fn after(&self, step: &Step) -> Option<Self> {
        let mut counts: BTreeMap<u16, usize> = self.mix.counts();
        let mut take = |levels: u16, factors: usize| {
            let there = counts.get_mut(&levels)?;
            *there = there.checked_sub(factors)?;
            (factors > 0).then_some(())
        };
        let (mut runs, mut strength) = (self.runs, self.strength);
        match *step {
            Step::Strength { to } => {
                if to == 0 || to >= strength {
                    return None;
                }
                strength = to;
            }
            Step::Drop { levels, factors } => take(levels, factors as usize)?,
            Step::Merge { levels, into, factors } => {
                if into < 2 || into >= levels || !levels.is_multiple_of(into) {
                    return None;
                }
                take(levels, factors as usize)?;
                *counts.entry(into).or_insert(0) += factors as usize;
            }
            Step::Part { levels, into } => {
                if into < 2 || into >= levels || !levels.is_multiple_of(into) {
                    return None;
                }
                take(levels, 1)?;
                *counts.entry(into).or_insert(0) += 1;
                *counts.entry(levels / into).or_insert(0) += 1;
            }
            Step::Derive { levels } => {
                take(levels, 1)?;
                if strength < 2 || !runs.is_multiple_of(u64::from(levels)) {
                    return None;
                }
                strength -= 1;
                runs /= u64::from(levels);
            }
            Step::FoldOver => {
                let only = counts.keys().all(|&s| s == 2);
                if !only || !strength.is_multiple_of(2) {
                    return None;
                }
                *counts.get_mut(&2)? += 1;
                strength += 1;
                runs = runs.checked_mul(2)?;
            }
        }
        let mix = Mix::from_counts(counts).ok()?;
        let sensible = strength >= 1 && strength as usize <= mix.factors();
        sensible.then_some(Self { runs, strength, mix })
    }

    /// The same question, whatever the order of the factors.
    #[must_use]
    pub fn same(&self, other: &Self) -> bool {
        (self.runs, self.strength, self.mix.counts()) == (other.runs, other.strength, other.mix.counts())
    }
}

impl fmt::Display for Subject {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{} at strength {} in {} runs", self.mix, self.strength, self.runs)
    }
}
