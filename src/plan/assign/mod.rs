//! Which factor on which column, so that every wanted interaction can be estimated.
//!
//! | file | what it does |
//! | --- | --- |
//! | `search` | places factor after factor, the best first |
//! | `state` | independence, proved, and the determinant, column by column |

mod search;
mod state;
#[cfg(test)]
mod tests;

use serde::{Deserialize, Serialize};
use thiserror::Error;

use crate::array::Array;
use crate::verify::MOST_PARAMETERS;
use search::Search;

/// Where each factor stands, and what that is worth.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Assignment {
    /// For each factor its column of the parent, from 0: what [`Array::select`] takes.
    pub columns: Vec<usize>,
    /// Whether every wanted interaction is orthogonal to the mean, to all main effects and to all
    /// other wanted interactions; exact.
    pub orthogonal: bool,
    /// The D-efficiency of the model: (det(X'X)/N^p)^(1/p), every column of mean square 1 over all
    /// combinations of levels; at most 1, rounded to nine decimals.
    pub d_efficiency: f64,
    /// The parameters p of the model: the mean, all main effects, the wanted interactions.
    pub parameters: usize,
    /// The degrees of freedom left for error.
    pub left: usize,
}

/// What became of a request.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub enum Outcome {
    /// No assignment is better: all were considered, or nothing can be better.
    Best(Assignment),
    /// The best that was met within the steps.
    BestMet(Assignment),
    /// All assignments were considered: in none can the model be estimated.
    NotPossible,
    /// None was met within the steps.
    LimitReached,
    /// Somebody asked for the end.
    Interrupted,
}

/// What is asked that makes no sense.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[non_exhaustive]
pub enum AssignError {
    /// No factor.
    #[error("name at least one factor")]
    NoFactors,
    /// The parent has too few columns with these levels.
    #[error("{wanted} factors have {levels} levels, but the array has {there} columns with so many")]
    Columns {
        /// The number of levels.
        levels: u16,
        /// How many factors have it.
        wanted: usize,
        /// How many columns have it.
        there: usize,
    },
    /// An interaction is not one of two different factors, or is there twice.
    #[error("interaction {0} must name two different factors of the list, and only once")]
    Interaction(
        /// Its place in the list, from 0.
        usize,
    ),
    /// The model has too many parameters.
    #[error("the model has more than {MOST_PARAMETERS} parameters; ask for fewer factors or interactions")]
    TooLarge,
}

/// Puts factors with these numbers of levels on columns of `parent`, so that the model of the mean, all
/// main effects and the `wanted` two-factor interactions can be estimated.
///
/// Better is: first, that the wanted interactions are orthogonal to the mean, to all main effects and to
/// each other; then, the higher D-efficiency of the model; of equals the one met first, which is the same
/// for any number of threads. What was not wished for plays no part: among equals none is preferred
/// for its other interactions. Levels are not merged: a factor goes onto a column with as many levels.
///
/// All of these must hold: at least as many columns as factors for each number of levels; every
/// wanted interaction names two different factors (from 0), none twice; at most [`MOST_PARAMETERS`]
/// parameters. `steps` placements of a factor are made at the most in each of two passes (orthogonal
/// ones, then all); `halt` is asked now and then whether to stop.
///
/// Guarantee: `Best` and `NotPossible` hold over all assignments; those left out are images under an
/// exchange of factors that keeps the request, or cannot be better, since a determinant only falls
/// with further columns. What counts as not estimable is proved by elimination modulo primes,
/// and orthogonality by sums that are whole numbers; D-efficiencies are floats and equal within 1e-9.
///
/// # Errors
/// An [`AssignError`] naming the first condition that does not hold.
///
/// Cost: N·p per column of the model and step. References: E. M. L. Fischer's inequality for the bound;
/// the search is common practice, no source.
///
/// ```
/// use trysquare::{array::Array, plan::assign::{Outcome, assign}, verify::{Demand, certify}};
/// // 8 runs, 7 two-level columns: x, y, z and all their sums.
/// let parent = Array::from_fn(8, vec![2; 7], |run, j| ((run & (j + 1)).count_ones() % 2) as u16)?;
/// let Outcome::Best(found) = assign(&parent, &[2; 4], &[[0, 1], [0, 2], [0, 3]], 1 << 20, &|| false)?
/// else { panic!() };
/// assert!(found.orthogonal && found.d_efficiency == 1.0 && found.left == 0);
/// assert!(certify(&parent.select(&found.columns)?, &Demand::strength(2))?.witness.is_none());
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn assign(
    parent: &Array,
    levels: &[u16],
    wanted: &[[usize; 2]],
    steps: u64,
    halt: &(dyn Fn() -> bool + Sync),
) -> Result<Outcome, AssignError> {
    let parameters = check(parent, levels, wanted)?;
    if parameters > parent.runs() {
        return Ok(Outcome::NotPossible);
    }
    let search = Search::new(parent, levels, wanted, parameters);
    let assignment = |(logarithm, columns): (f64, Vec<usize>), orthogonal| Assignment {
        columns,
        orthogonal,
        d_efficiency: ((logarithm / parameters as f64).exp() * 1e9).round() / 1e9,
        parameters,
        left: parent.runs() - parameters,
    };
    let clear = search.best(true, steps, halt);
    if clear.halted {
        return Ok(Outcome::Interrupted);
    }
    if let Some(best) = clear.best {
        let best = assignment(best, true);
        return Ok(if clear.exhausted { Outcome::Best(best) } else { Outcome::BestMet(best) });
    }
    let any = search.best(false, steps, halt);
    if any.halted {
        return Ok(Outcome::Interrupted);
    }
    Ok(match any.best {
        Some(best) => {
            // The first pass may have missed what the second met.
            let orthogonal = search.is_orthogonal(&best.1);
            let certain = any.exhausted && clear.exhausted;
            let best = assignment(best, orthogonal);
            if certain { Outcome::Best(best) } else { Outcome::BestMet(best) }
        }
        None if any.exhausted => Outcome::NotPossible,
        None => Outcome::LimitReached,
    })
}

/// The number of parameters of the model.
fn check(parent: &Array, levels: &[u16], wanted: &[[usize; 2]]) -> Result<usize, AssignError> {
    if levels.is_empty() {
        return Err(AssignError::NoFactors);
    }
    for &s in levels {
        let count = |of: &[u16]| of.iter().filter(|&&x| x == s).count();
        let (asked, there) = (count(levels), count(parent.levels()));
        if asked > there {
            return Err(AssignError::Columns { levels: s, wanted: asked, there });
        }
    }
    let mut parameters = levels.iter().fold(1usize, |p, &s| p.saturating_add(usize::from(s) - 1));
    for (at, &[a, b]) in wanted.iter().enumerate() {
        let again = wanted[..at].iter().any(|w| *w == [a, b] || *w == [b, a]);
        if a == b || a.max(b) >= levels.len() || again {
            return Err(AssignError::Interaction(at));
        }
        let product = (usize::from(levels[a]) - 1) * (usize::from(levels[b]) - 1);
        parameters = parameters.saturating_add(product);
    }
    if parameters > MOST_PARAMETERS { Err(AssignError::TooLarge) } else { Ok(parameters) }
}
