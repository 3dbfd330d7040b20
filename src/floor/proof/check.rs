use num_integer::Integer;

use super::error::{ExclusionError, ProofError};
use super::exclusion::{Exclusion, Replay, no_replay};
use super::subject::Subject;
use super::theorem::{bose_bush_allows, bush_limit, rao_value};
use super::{Bound, PROOF_VERSION, Proof, round_up};

impl Proof {
    /// Checks the proof, trusting nothing in it.
    ///
    /// # Errors
    /// The first rule that is broken.
    pub fn check(&self) -> Result<(), ProofError> {
        self.check_with(&no_replay)
    }

    /// As [`Proof::check`], recorded searches made again by `replay`; without it a proof that rests
    /// on one is not accepted.
    ///
    /// # Errors
    /// The first rule that is broken.
    pub fn check_with(&self, replay: &Replay<'_>) -> Result<(), ProofError> {
        if !(1..=PROOF_VERSION).contains(&self.version) || (self.version == 1 && !self.exclusions.is_empty())
        {
            return Err(ProofError::Version(self.version));
        }
        let counts: Vec<(u16, u64)> = self.mix.counts().into_iter().map(|(s, k)| (s, k as u64)).collect();
        if self.strength == 0 || self.strength as usize > self.mix.factors() {
            return Err(ProofError::Strength(self.strength));
        }
        self.check_divisor(&counts)?;
        let given = theorem(&self.bound, &counts, self.strength)?;
        let claimed = self.bound.least();
        if claimed > given {
            return Err(ProofError::Least { claimed, given });
        }
        let mut given = round_up(claimed, self.divisibility.divisor).ok_or(ProofError::TooLarge)?;
        for exclusion in &self.exclusions {
            self.check_exclusion(exclusion, given, replay)
                .map_err(|why| ProofError::Exclusion { runs: exclusion.runs, why })?;
            given = given.checked_add(self.divisibility.divisor).ok_or(ProofError::TooLarge)?;
        }
        if self.runs > given {
            return Err(ProofError::Runs { claimed: self.runs, given });
        }
        Ok(())
    }

    /// That `expected` runs, the next multiple of the divisor, are excluded.
    fn check_exclusion(
        &self,
        exclusion: &Exclusion,
        expected: u64,
        replay: &Replay<'_>,
    ) -> Result<(), ExclusionError> {
        let request = Subject { runs: expected, strength: self.strength, mix: self.mix.clone() };
        exclusion.check_with(&request, replay)
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
}

/// What the theorem behind a bound gives for a mix and a strength.
pub(super) fn theorem(bound: &Bound, counts: &[(u16, u64)], of_strength: u32) -> Result<u64, ProofError> {
    let pure = |levels: u16, factors: u64| {
        if factors >= u64::from(of_strength) && counts.iter().any(|&(s, k)| s == levels && k >= factors) {
            Ok(())
        } else {
            Err(ProofError::Subject(format!("{factors} factors of {levels} levels")))
        }
    };
    match *bound {
        Bound::Divisibility => Ok(1),
        Bound::Rao { strength, aside, .. } => {
            let about = strength >= 1
                && strength <= of_strength
                && (strength % 2 == 1) == aside.is_some()
                && aside.is_none_or(|x| counts.iter().any(|&(s, _)| s == x));
            if !about {
                return Err(ProofError::Subject(format!("strength {strength}, aside {aside:?}")));
            }
            rao_value(counts, strength, aside).ok_or(ProofError::TooLarge)
        }
        Bound::BoseBush { levels, factors, least } => {
            pure(levels, factors)?;
            if !(2..=3).contains(&of_strength) {
                return Err(ProofError::Subject(format!("strength {of_strength}")));
            }
            let power = u64::from(levels).pow(of_strength);
            let index = least.div_ceil(power);
            let refuted = (1..index).find(|&i| bose_bush_allows(levels, factors, of_strength, i));
            Ok(refuted.unwrap_or(index).saturating_mul(power))
        }
        Bound::Bush { levels, factors, .. } => {
            pure(levels, factors)?;
            let power = u64::from(levels).checked_pow(of_strength).ok_or(ProofError::TooLarge)?;
            let index = if of_strength >= 2 && factors > bush_limit(levels, of_strength) { 2 } else { 1 };
            power.checked_mul(index).ok_or(ProofError::TooLarge)
        }
        Bound::LinearProgram { ref weights, .. } => {
            weights.check(counts, of_strength).map_err(ProofError::Program)?;
            weights.least().ok_or(ProofError::TooLarge)
        }
    }
}
