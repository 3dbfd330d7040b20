//! Further columns for a given array, or the proof that there are none.
//!
//! | file | what it does |
//! | --- | --- |
//! | `level_sets` | the sets of runs that can be a level of a further column |
//! | `candidates` | all columns that can join, by exact cover; or one |
//! | `best` | the best set of listed columns |
//! | `grow` | all of it, also where columns are too many to be listed |

mod best;
mod candidates;
mod grow;
mod level_sets;

use super::Effort;
use super::exact::MAX_RUNS;
use crate::array::{Array, ArrayError};
use crate::verify::{Demand, JudgeError, Verdict, certify};

/// Columns that are wanted.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Wanted {
    /// Their number of levels.
    pub levels: u16,
    /// How many at the most; as many as possible when `None`.
    pub most: Option<usize>,
}

/// The request: an array, its strength, and the columns that are wanted beside it.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Extension {
    /// The array whose columns are kept.
    pub array: Array,
    /// 2 or 3.
    pub strength: u32,
    /// What is wanted, the most important first.
    pub wanted: Vec<Wanted>,
    /// How many candidate columns of one kind are listed at the most.
    pub most_candidates: usize,
}

/// What is proved about the columns that were added.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Standing {
    /// All that were wanted.
    Complete,
    /// Not all, but there is no better set: as many as possible of the first kind, with those as
    /// many as possible of the second, and so on.
    Maximum,
    /// No further column of the wanted kinds fits; whether another set is larger is not known.
    Maximal,
    /// The most that were met.
    Met,
}

/// What an extension came to.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Extended {
    /// At least one column was added.
    Found {
        /// The given columns and after them the new ones, in the order of the request; judged.
        array: Array,
        /// The numbers of levels of the new ones.
        added: Vec<u16>,
        /// What is proved about them.
        standing: Standing,
    },
    /// There is no column of any of the wanted kinds: proved.
    NoneExists,
    /// The effort was used up before a column was found or excluded.
    GaveUp,
}

/// Why a request makes no sense, or an answer was not let out.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub enum ExtendError {
    /// Another strength, nothing wanted, a kind named twice or with fewer than two levels.
    #[error("columns can be added at strength 2 or 3; each kind is named once and has 2 levels or more")]
    Request,
    /// Too many runs.
    #[error("{runs} runs are too many: at most {MAX_RUNS} can be searched")]
    Runs {
        /// How many there are.
        runs: usize,
    },
    /// The given array does not have the strength.
    #[error("the given array does not have strength {strength}")]
    Strength {
        /// The strength in question.
        strength: usize,
    },
    /// The judges did not confirm what was found: a fault of this program.
    #[error("the judges did not confirm the extended array")]
    NotConfirmed,
    /// The judges could not be asked.
    #[error(transparent)]
    Judge(#[from] JudgeError),
    /// The result is no array.
    #[error(transparent)]
    Array(#[from] ArrayError),
}

/// Adds as many of the wanted columns as possible to an array, keeping its strength.
///
/// # Parameters
/// `request`: see [`Extension`]. All of these must hold:
/// * at most [`MAX_RUNS`] runs; strength 2 or 3, and the array has it (an array of two columns
///   strength 2, an array of one column strength 1);
/// * at least one kind is wanted, each named once, of 2 levels or more, at least one column of it.
///
/// `effort`: a step is about one comparison of two columns.
///
/// # Result
/// [`Extended`]. A kind that the floors exclude (Rao, Bose & Bush, divisibility) is excluded by
/// them. Otherwise all columns that keep the strength are listed, up to renaming of levels: the
/// sets of runs that can be a level, then the exact covers by them. Among the columns the best set
/// is found as in [`exact`](super::exact), where identical runs are interchangeable. Columns
/// that are too many to be listed are added one at a time until the rest can be listed; then the
/// standing is at most [`Standing::Maximal`].
///
/// # Errors
/// [`ExtendError`].
///
/// # Cost
/// Bounded by `effort`; memory by about 300 bytes times `most_candidates`. Deterministic. When
/// [`Effort::halted`] the result means nothing.
///
/// # Reference
/// Exact cover for orthogonal mates as in Parker's search by transversals (1959) \[memory\];
/// extension by cliques is common practice, no source.
///
/// ```
/// use trysquare::{array::Array, hunt::Effort};
/// use trysquare::hunt::extend::{Extended, Extension, Standing, Wanted, extend};
/// use trysquare::verify::{Demand, Verdict, certify};
/// let square = Array::from_fn(9, vec![3, 3], |run, j| [run / 3, run % 3][j] as u16)?;
/// let wanted = vec![Wanted { levels: 3, most: None }];
/// let request = Extension { array: square, strength: 2, wanted, most_candidates: 1000 };
/// let Extended::Found { array, standing, .. } = extend(&request, &mut Effort::unlimited())? else { panic!() };
/// assert_eq!((array.factors(), standing), (4, Standing::Maximum));
/// assert_eq!(certify(&array, &Demand::strength(2))?.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn extend(request: &Extension, effort: &mut Effort) -> Result<Extended, ExtendError> {
    let Extension { array, strength, wanted, .. } = request;
    let strength = *strength as usize;
    let once = |(i, w): (usize, &Wanted)| wanted[..i].iter().all(|v| v.levels != w.levels);
    if !matches!(strength, 2 | 3)
        || wanted.is_empty()
        || wanted.iter().any(|w| w.levels < 2 || w.most == Some(0))
        || !wanted.iter().enumerate().all(once)
    {
        return Err(ExtendError::Request);
    }
    if array.runs() > MAX_RUNS as usize {
        return Err(ExtendError::Runs { runs: array.runs() });
    }
    let held = strength.min(array.factors());
    if certify(array, &Demand::strength(held))?.verdict != Verdict::Orthogonal {
        return Err(ExtendError::Strength { strength: held });
    }
    let grown = grow::grow(request, effort);
    let added: Vec<u16> = grown.columns.iter().map(|(s, _)| *s).collect();
    if added.is_empty() {
        return Ok(if grown.none { Extended::NoneExists } else { Extended::GaveUp });
    }
    let given = array.levels().iter().copied().zip(array.columns().map(<[u16]>::to_vec));
    let array = Array::from_columns(given.chain(grown.columns).collect())?;
    if certify(&array, &Demand::strength(strength.min(array.factors())))?.verdict != Verdict::Orthogonal {
        return Err(ExtendError::NotConfirmed);
    }
    Ok(Extended::Found { array, added, standing: grown.standing })
}

#[cfg(test)]
mod tests;
