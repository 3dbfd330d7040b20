//! From a first bound to the best that can be proved below a number of runs.

use super::linear_program::linear_program;
use super::{Effort, FloorError, Proof, exclude};

/// What the default effort of [`strengthen`] is: well under a tenth of a second.
pub const QUICK: u64 = 20_000_000;

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

/// Makes a floor stronger where an answer of `answer` runs is above it: by the linear program,
/// then by excluding single numbers of runs from the floor on; and says of every multiple of the
/// divisor below the answer whether it is excluded.
///
/// # Errors
/// [`FloorError::TooLarge`] when a number does not fit 64 bits.
pub fn strengthen(proof: Proof, answer: u64, effort: &mut Effort<'_>) -> Result<Strengthened, FloorError> {
    let mut proof = proof;
    let step = proof.divisibility.divisor.max(1);
    if proof.runs < answer && proof.exclusions.is_empty() {
        let better = linear_program(&proof.mix, proof.strength, step, effort)
            .map(|bound| Proof::new(proof.mix.clone(), proof.strength, proof.divisibility.clone(), bound))
            .transpose()?
            .filter(|p| p.runs > proof.runs && p.runs <= answer);
        proof = better.unwrap_or(proof);
    }
    let bound = proof.bound.name();
    let base = proof.exclusions.first().map_or(proof.runs, |e| e.runs);
    let first = (answer.saturating_sub(1) / step).saturating_sub(MOST as u64 - 1).max(1) * step;
    let known: Vec<Below> = std::iter::successors(Some(first), |n| n.checked_add(step))
        .take_while(|&n| n < answer)
        .filter(|&n| n < base)
        .map(|runs| Below { runs, excluded: Some(bound) })
        .collect();
    let mut below = known;
    below.extend(proof.exclusions.iter().map(|e| Below { runs: e.runs, excluded: Some(e.reason.name()) }));
    let mut gap = false;
    let mut runs = proof.runs;
    while runs < answer && below.len() < 2 * MOST {
        let exclusion = exclude(&proof.mix, proof.strength, runs, effort);
        below.push(Below { runs, excluded: exclusion.as_ref().map(|e| e.reason.name()) });
        match exclusion {
            Some(exclusion) if !gap => proof = proof.excluding(exclusion)?,
            Some(_) => {}
            None => gap = true,
        }
        let Some(next) = runs.checked_add(step) else { break };
        runs = next;
    }
    Ok(Strengthened { proof, below })
}
