//! How many factors of one kind can stand beside others.

use super::proof::{Exclusion, Proof};
use super::{Effort, FloorError, exclude, floor};
use crate::mix::Mix;

/// No more than this many numbers of factors are looked at one by one.
const MOST: u64 = 256;

/// An upper limit on the number of factors of one kind beside others, in exactly so many runs.
#[derive(Clone, Debug, PartialEq)]
pub struct Most {
    /// No more factors can stand there; `None` when the others alone have no array.
    pub factors: Option<u64>,
    /// The mix with one factor more.
    pub mix: Mix,
    /// Why that one has no array of so many runs.
    pub exclusion: Exclusion,
}

/// How many factors of `levels` levels can stand beside the factors `rest` in `runs` runs at
/// strength t: an upper limit with proof.
///
/// More factors contain fewer, so one number that is excluded bounds all above it. The search
/// starts where the closed formulas end and goes down as long as a reason is found, not below
/// `known`, a number of factors that an array is known to have.
///
/// # Errors
/// [`FloorError::TooLarge`] when the limit is beyond what a mix can hold.
pub fn most(
    rest: &[u16],
    levels: u16,
    runs: u64,
    strength: u32,
    known: Option<u64>,
    effort: &mut Effort<'_>,
) -> Result<Most, FloorError> {
    let mix = |factors: u64| -> Result<Mix, FloorError> {
        let factors = usize::try_from(factors).map_err(|_| FloorError::TooLarge)?;
        let counts = rest.iter().map(|&s| (s, 1)).chain([(levels, factors)]);
        Mix::from_counts(counts).map_err(|_| FloorError::TooLarge)
    };
    // Fewer factors than the strength make no question.
    let first = u64::from(strength).saturating_sub(rest.len() as u64).max(u64::from(rest.is_empty()));
    let first = known.map_or(first, |k| first.max(k + 1));
    let fails = |factors: u64| -> Result<bool, FloorError> {
        let Proof { runs: least, divisibility, .. } = floor(&mix(factors)?, strength)?;
        Ok(least > runs || !runs.is_multiple_of(divisibility.divisor))
    };
    let (mut low, mut high) = (first, first);
    while !fails(high)? {
        low = high + 1;
        high = high.checked_mul(2).ok_or(FloorError::TooLarge)?.max(1);
    }
    while low < high {
        let middle = low + (high - low) / 2;
        if fails(middle)? { high = middle } else { low = middle + 1 }
    }
    let wrong = FloorError::TooLarge;
    let mut exclusion = exclude(&mix(high)?, strength, runs, effort).ok_or(wrong)?;
    let stop = first.max(high.saturating_sub(MOST));
    while high > stop {
        let Some(better) = exclude(&mix(high - 1)?, strength, runs, effort) else { break };
        exclusion = better;
        high -= 1;
    }
    let factors = high.checked_sub(1).filter(|_| high > 0);
    Ok(Most { factors, mix: mix(high)?, exclusion })
}
