//! [`Proof`]: a lower bound on the number of runs, and its checker.
//!
//! The checker uses nothing but integers and the statements of the cited theorems; it shares no
//! code with whatever searched for the bound.

use num_integer::{Integer, Roots};
use serde::{Deserialize, Serialize};
use thiserror::Error;

use super::FloorError;
use crate::mix::Mix;

/// The version of the JSON form of [`Proof`].
pub const PROOF_VERSION: u32 = 1;

/// A proved statement: every array of the mix and strength has at least `runs` runs.
///
/// It rests on two parts: a bound that says N ≥ some least value, and a divisor of N; `runs` is
/// the least value rounded up to a multiple of the divisor.
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
        }
    }

    /// The bound before it is rounded up to a multiple of the divisor.
    #[must_use]
    pub fn least(&self) -> u64 {
        match self {
            Self::Divisibility => 1,
            Self::Rao { least, .. } | Self::BoseBush { least, .. } | Self::Bush { least, .. } => *least,
        }
    }
}

/// Why a proof is not accepted.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[non_exhaustive]
pub enum ProofError {
    /// Another version.
    #[error("version {0} of the proof format is not known here")]
    Version(u32),
    /// The strength is 0 or above the number of factors.
    #[error("strength {0} makes no sense for this mix")]
    Strength(u32),
    /// A set is not the levels of t factors of the mix.
    #[error("{0:?} are not the levels of as many factors of the mix as the strength says")]
    Set(Vec<u16>),
    /// The divisor is not the least common multiple of the products of the sets.
    #[error("{0} is not the least common multiple of the products of the sets")]
    Divisor(u64),
    /// The bound is about a strength or about factors that the mix does not have.
    #[error("the bound is not about this mix: {0}")]
    Subject(String),
    /// The bound claims more than its theorem gives.
    #[error("the bound claims {claimed} runs where its theorem gives {given}")]
    Least {
        /// What the proof claims.
        claimed: u64,
        /// What the theorem gives.
        given: u64,
    },
    /// The number of runs does not follow from the bound and the divisor.
    #[error("{claimed} runs do not follow; the bound and the divisor give {given}")]
    Runs {
        /// What the proof claims.
        claimed: u64,
        /// What follows.
        given: u64,
    },
    /// Some number does not fit 64 bits.
    #[error("a number in the proof does not fit 64 bits")]
    TooLarge,
}

impl Proof {
    /// A proof from its parts; the number of runs is worked out.
    ///
    /// # Errors
    /// [`FloorError::TooLarge`] when it does not fit 64 bits.
    pub fn new(mix: Mix, strength: u32, divisibility: Divisor, bound: Bound) -> Result<Self, FloorError> {
        let runs = round_up(bound.least(), divisibility.divisor).ok_or(FloorError::TooLarge)?;
        Ok(Self { version: PROOF_VERSION, mix, strength, runs, divisibility, bound })
    }

    /// Checks the proof, trusting nothing in it.
    ///
    /// # Errors
    /// The first rule that is broken.
    pub fn check(&self) -> Result<(), ProofError> {
        if self.version != PROOF_VERSION {
            return Err(ProofError::Version(self.version));
        }
        let counts: Vec<(u16, u64)> = self.mix.counts().into_iter().map(|(s, k)| (s, k as u64)).collect();
        if self.strength == 0 || self.strength as usize > self.mix.factors() {
            return Err(ProofError::Strength(self.strength));
        }
        self.check_divisor(&counts)?;
        let given = self.theorem(&counts)?;
        let claimed = self.bound.least();
        if claimed > given {
            return Err(ProofError::Least { claimed, given });
        }
        let given = round_up(claimed, self.divisibility.divisor).ok_or(ProofError::TooLarge)?;
        if self.runs > given {
            return Err(ProofError::Runs { claimed: self.runs, given });
        }
        Ok(())
    }

    fn check_divisor(&self, counts: &[(u16, u64)]) -> Result<(), ProofError> {
        let mut multiple = 1u64;
        for set in &self.divisibility.sets {
            let fits = set.len() == self.strength as usize
                && set.iter().all(|&s| {
                    let wanted = set.iter().filter(|&&x| x == s).count() as u64;
                    counts.iter().any(|&(level, k)| level == s && k >= wanted)
                });
            if !fits {
                return Err(ProofError::Set(set.clone()));
            }
            let product =
                set.iter().try_fold(1u64, |n, &s| n.checked_mul(u64::from(s))).ok_or(ProofError::TooLarge)?;
            let factor = product / multiple.gcd(&product);
            multiple = multiple.checked_mul(factor).ok_or(ProofError::TooLarge)?;
        }
        if multiple == self.divisibility.divisor {
            Ok(())
        } else {
            Err(ProofError::Divisor(self.divisibility.divisor))
        }
    }

    /// What the theorem behind the bound gives for this mix.
    fn theorem(&self, counts: &[(u16, u64)]) -> Result<u64, ProofError> {
        let pure = |levels: u16, factors: u64| {
            if factors >= u64::from(self.strength) && counts.iter().any(|&(s, k)| s == levels && k >= factors)
            {
                Ok(())
            } else {
                Err(ProofError::Subject(format!("{factors} factors of {levels} levels")))
            }
        };
        match self.bound {
            Bound::Divisibility => Ok(1),
            Bound::Rao { strength, aside, .. } => {
                let about = strength >= 1
                    && strength <= self.strength
                    && (strength % 2 == 1) == aside.is_some()
                    && aside.is_none_or(|x| counts.iter().any(|&(s, _)| s == x));
                if !about {
                    return Err(ProofError::Subject(format!("strength {strength}, aside {aside:?}")));
                }
                rao_value(counts, strength, aside).ok_or(ProofError::TooLarge)
            }
            Bound::BoseBush { levels, factors, least } => {
                pure(levels, factors)?;
                if !(2..=3).contains(&self.strength) {
                    return Err(ProofError::Subject(format!("strength {}", self.strength)));
                }
                let power = u64::from(levels).pow(self.strength);
                let index = least.div_ceil(power);
                let refuted = (1..index).find(|&i| bose_bush_allows(levels, factors, self.strength, i));
                Ok(refuted.unwrap_or(index).saturating_mul(power))
            }
            Bound::Bush { levels, factors, .. } => {
                pure(levels, factors)?;
                let power = u64::from(levels).checked_pow(self.strength).ok_or(ProofError::TooLarge)?;
                let index =
                    if self.strength >= 2 && factors > bush_limit(levels, self.strength) { 2 } else { 1 };
                power.checked_mul(index).ok_or(ProofError::TooLarge)
            }
        }
    }
}

fn round_up(least: u64, divisor: u64) -> Option<u64> {
    least.max(1).div_ceil(divisor).checked_mul(divisor)
}

/// Rao's bound at `strength` for (levels, factors) pairs, with one factor of `aside` levels set
/// aside at odd strengths; `None` when it does not fit 64 bits.
#[must_use]
pub fn rao_value(counts: &[(u16, u64)], strength: u32, aside: Option<u16>) -> Option<u64> {
    let degree = (strength / 2) as usize;
    // The elementary symmetric polynomials e_0 … e_u of the numbers s_i − 1.
    let mut e = vec![0u64; degree + 1];
    e[0] = 1;
    for &(s, k) in counts {
        let k = k - u64::from(aside == Some(s));
        let mut next = vec![0u64; degree + 1];
        let (mut binomial, mut power) = (1u64, 1u64);
        for i in 0..=degree.min(usize::try_from(k).unwrap_or(usize::MAX)) {
            for j in 0..=degree - i {
                let term = e[j].checked_mul(binomial)?.checked_mul(power)?;
                next[i + j] = next[i + j].checked_add(term)?;
            }
            if i < degree {
                binomial = binomial.checked_mul(k - i as u64)? / (i as u64 + 1);
                power = power.checked_mul(u64::from(s) - 1)?;
            }
        }
        e = next;
    }
    let sum = e.into_iter().try_fold(0u64, u64::checked_add)?;
    sum.checked_mul(u64::from(aside.unwrap_or(1)))
}

/// Whether the theorem of Bose & Bush lets k factors of s levels stand in λ s^t runs, t 2 or 3.
///
/// With λ − 1 = a(s − 1) + b, 0 ≤ b < s − 1, and k one less at strength 3:
/// k ≤ ⌊(λs² − 1)/(s − 1)⌋, and if b > 0 even k ≤ ⌊(λs² − 1)/(s − 1)⌋ − ⌊θ⌋ − 1, where
/// θ = (√(1 + 4s(s − 1 − b)) − (2s − 2b − 1)) / 2.
#[must_use]
pub fn bose_bush_allows(s: u16, k: u64, strength: u32, index: u64) -> bool {
    let (s, k) = (u64::from(s), k - u64::from(strength == 3));
    let Some(top) = index.checked_mul(s * s) else { return true };
    let limit = (top - 1) / (s - 1);
    let b = (index - 1) % (s - 1);
    if b == 0 {
        return k <= limit;
    }
    // ⌊θ⌋ is the largest m ≥ 0 with 2m + 2s − 2b − 1 ≤ √(1 + 4s(s − 1 − b)); where even m = 0
    // fails, θ is negative and the refinement says nothing.
    let root = (1 + 4 * s * (s - 1 - b)).sqrt();
    let offset = 2 * s - 2 * b - 1;
    if root < offset {
        return k <= limit;
    }
    k + (root - offset) / 2 < limit
}

/// The largest number of factors of s levels at index 1 and strength t that Bush's theorem allows.
#[must_use]
pub fn bush_limit(s: u16, strength: u32) -> u64 {
    let (s, t) = (u64::from(s), u64::from(strength));
    if s <= t {
        t + 1
    } else if s % 2 == 1 && t >= 3 {
        s + t - 2
    } else {
        s + t - 1
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::floor::{bounds, floor};

    fn proof(mix: &str, t: u32) -> Proof {
        floor(&mix.parse().unwrap(), t).unwrap()
    }

    #[test]
    fn every_bound_of_many_mixes_is_accepted() {
        for mix in ["2^1 3^7", "3^8", "4^10", "2^11", "6^4", "5^7", "2^3 4^2 7^1", "3^5", "2^20 3^20 4^20"] {
            for t in 1..=4 {
                for p in bounds(&mix.parse().unwrap(), t).unwrap() {
                    p.check().unwrap();
                    let json = serde_json::to_string(&p).unwrap();
                    let mut again: Proof = serde_json::from_str(&json).unwrap();
                    again.mix = p.mix.clone();
                    assert_eq!(again, p);
                }
            }
        }
    }

    #[test]
    fn refinements_of_bose_bush_and_bush() {
        // Bose & Bush 1952: at most 7 three-level factors in 18 runs, 4 in 9, 13 in 27.
        assert_eq!(proof("3^7", 2).runs, 18);
        assert_eq!(proof("3^8", 2).runs, 27);
        assert_eq!(proof("3^13", 2).runs, 27);
        // Bush 1952: OA(s^3, k, s, 3) with s odd has k ≤ s + 1.
        assert_eq!(proof("5^6", 3).runs, 125);
        assert_eq!(proof("5^7", 3).runs, 250);
        assert_eq!(proof("4^6", 3).runs, 64);
    }

    #[test]
    fn the_limit_of_bose_bush_against_floating_point() {
        for s in 3u16..20 {
            for index in 1u64..60 {
                let (sf, b) = (f64::from(s), ((index - 1) % u64::from(s - 1)) as f64);
                let mut limit = (index * u64::from(s) * u64::from(s) - 1) / u64::from(s - 1);
                if b > 0.0 {
                    let theta = ((1.0 + 4.0 * sf * (sf - 1.0 - b)).sqrt() - (2.0 * sf - 2.0 * b - 1.0)) / 2.0;
                    if theta >= 0.0 {
                        limit = limit - theta.floor() as u64 - 1;
                    }
                }
                assert!(bose_bush_allows(s, limit, 2, index), "s {s} index {index}");
                assert!(!bose_bush_allows(s, limit + 1, 2, index), "s {s} index {index}");
            }
        }
    }

    #[test]
    fn each_rule_rejects() {
        let good = proof("3^8 2^1", 2);
        good.check().unwrap();
        let broken = |change: &dyn Fn(&mut Proof)| {
            let mut p = good.clone();
            change(&mut p);
            p.check().unwrap_err()
        };
        assert_eq!(broken(&|p| p.version = 2), ProofError::Version(2));
        assert_eq!(broken(&|p| p.strength = 0), ProofError::Strength(0));
        assert_eq!(broken(&|p| p.strength = 10), ProofError::Strength(10));
        assert_eq!(broken(&|p| p.divisibility.sets.push(vec![2, 2])), ProofError::Set(vec![2, 2]));
        assert_eq!(broken(&|p| p.divisibility.sets.push(vec![3])), ProofError::Set(vec![3]));
        assert_eq!(broken(&|p| p.divisibility.divisor = 36), ProofError::Divisor(36));
        assert_eq!(broken(&|p| p.divisibility.sets.clear()), ProofError::Divisor(good.divisibility.divisor));
        assert_eq!(broken(&|p| p.runs += 1), ProofError::Runs { claimed: good.runs + 1, given: good.runs });
        let claims = |bound: Bound| broken(&move |p| p.bound = bound.clone());
        assert_eq!(
            claims(Bound::BoseBush { levels: 3, factors: 8, least: 28 }),
            ProofError::Least { claimed: 28, given: 27 }
        );
        assert!(matches!(
            claims(Bound::BoseBush { levels: 3, factors: 9, least: 27 }),
            ProofError::Subject(_)
        ));
        assert!(matches!(claims(Bound::Bush { levels: 5, factors: 8, least: 50 }), ProofError::Subject(_)));
        assert_eq!(
            claims(Bound::Bush { levels: 3, factors: 4, least: 18 }),
            ProofError::Least { claimed: 18, given: 9 }
        );
        assert_eq!(
            claims(Bound::Rao { strength: 2, aside: None, least: 19 }),
            ProofError::Least { claimed: 19, given: 18 }
        );
        assert!(matches!(
            claims(Bound::Rao { strength: 3, aside: Some(2), least: 20 }),
            ProofError::Subject(_)
        ));
        assert!(matches!(claims(Bound::Rao { strength: 1, aside: None, least: 2 }), ProofError::Subject(_)));
        assert!(matches!(
            claims(Bound::Rao { strength: 1, aside: Some(5), least: 5 }),
            ProofError::Subject(_)
        ));
    }

    #[test]
    fn a_cut_proof_is_incomplete() {
        let json = serde_json::to_string(&proof("3^8 2^1", 2)).unwrap();
        for end in 0..json.len() {
            assert!(serde_json::from_str::<Proof>(&json[..end]).is_err());
        }
    }
}
