//! From a first bound to the best that can be proved below a number of runs.

use super::linear_program::linear_program;
use super::{Effort, FloorError, Proof, exclude};

/// The effort that leaves [`strengthen`] well under a tenth of a second.
pub const QUICK: u64 = 1_500_000;

/// No more than this many numbers of runs are looked at one by one.
const MOST: usize = 64;

/// A number of runs that divisibility allows, and why no array has so many.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Below {
    /// The number of runs.
    pub runs: u64,
    /// The name of the bound or of the reason, `None` when it is not excluded.
    pub excluded: Option<&'static str>,
}

/// A floor together with what is known about the numbers of runs below an answer.
#[derive(Clone, Debug, PartialEq)]
pub struct Strengthened {
    /// The proof, as strong as could be made.
    pub proof: Proof,
    /// The multiples of the divisor below the answer, ascending; of many only the last ones.
    pub below: Vec<Below>,
}

/// Makes a floor stronger where `answer` runs are above it: by the linear program, then by
/// excluding single numbers of runs from the floor on, as far as that goes.
///
/// # Errors
/// [`FloorError::TooLarge`] when a number does not fit 64 bits.
pub fn raise(proof: Proof, answer: u64, effort: &mut Effort<'_>) -> Result<Proof, FloorError> {
    let mut proof = proof;
    if proof.runs < answer && proof.exclusions.is_empty() {
        let step = proof.divisibility.divisor;
        let better = linear_program(&proof.mix, proof.strength, step, effort)
            .map(|bound| Proof::new(proof.mix.clone(), proof.strength, proof.divisibility.clone(), bound))
            .transpose()?
            .filter(|p| p.runs > proof.runs);
        proof = better.unwrap_or(proof);
    }
    while proof.runs < answer && proof.exclusions.len() < MOST {
        let Some(exclusion) = exclude(&proof.mix, proof.strength, proof.runs, effort) else { break };
        proof = proof.excluding(exclusion)?;
    }
    Ok(proof)
}

/// [`raise`], and for every multiple of the divisor below the answer whether it is excluded.
///
/// # Errors
/// As [`raise`].
pub fn strengthen(proof: Proof, answer: u64, effort: &mut Effort<'_>) -> Result<Strengthened, FloorError> {
    let proof = raise(proof, answer, effort)?;
    let below = multiples(proof.divisibility.divisor.max(1), answer)
        .map(|runs| Below { runs, excluded: excluded(&proof, runs, effort) })
        .collect();
    Ok(Strengthened { proof, below })
}

/// The last multiples of `step` below `answer`, ascending.
fn multiples(step: u64, answer: u64) -> impl Iterator<Item = u64> {
    let last = answer.saturating_sub(1) / step;
    (last.saturating_sub(MOST as u64 - 1).max(1)..=last).map(move |n| n * step)
}

/// The name of what rules a number of runs out: the proof, or a reason found for it.
fn excluded(proof: &Proof, runs: u64, effort: &mut Effort<'_>) -> Option<&'static str> {
    if let Some(exclusion) = proof.exclusions.iter().find(|e| e.runs == runs) {
        return Some(exclusion.reason.name());
    }
    if runs < proof.runs {
        return Some(proof.bound.name());
    }
    exclude(&proof.mix, proof.strength, runs, effort).map(|e| e.reason.name())
}
