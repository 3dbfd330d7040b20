//! Plans for a budget of runs that no orthogonal array fits.
//!
//! | file | what lives there |
//! | --- | --- |
//! | `plain` | random plans with even level counts |
//! | `table` | a plan in the making, with the agreements of its runs |
//! | `exchange` | the improvement of one column |
//! | `climb` | one attempt, from a start to the best plan its effort yields |
//! | `starts` | exact arrays to start from: one to shorten, some to widen |
//! | `choice` | the best of several plans |
//! | `page` | the page `catalog/NEAR.md` |

mod choice;
mod climb;
mod exchange;
mod page;
mod plain;
mod starts;
mod table;

use rayon::prelude::*;
use thiserror::Error;

pub use page::page;
pub use plain::random_balanced;

use super::{Effort, Random};
use crate::array::{Array, ArrayError};
use crate::catalog::Shelf;
use crate::floor::Proof;
use crate::mix::Mix;
use crate::seek::{Answer, DEFAULT_MAX_RUNS, Outcome, Request, SeekError, Verdict, seek_on};
use crate::verify::{self, Certificate, Demand, JudgeError, Nearness};
use choice::Judged;
use climb::{Climb, Climbed};
use starts::{Start, to_shorten, to_widen};

/// The effort of a request that names none: some seconds at the most.
pub const DEFAULT_EFFORT: u64 = 1 << 29;

/// Near plans have at most so many cells.
pub const MOST_CELLS: u64 = 1 << 22;

/// Plans of more runs are made by chance alone, or from an exact array: the table of agreements would
/// be too large.
const MOST_RUNS: usize = 1 << 11;

/// At most so many attempts are made.
const ATTEMPTS: u64 = 48;

/// Of the plans with the least sum of squares, so many are judged by the other criteria.
const FINALISTS: usize = 16;

/// What is asked for.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct NearRequest {
    /// The levels of the factors, in the order the plan keeps.
    pub mix: Mix,
    /// The strength of an exact array; near plans are made and judged at pairs of factors.
    pub strength: u32,
    /// The number of runs that can be paid for.
    pub budget: u64,
    /// Runs already made, with which the plan must begin.
    pub kept: Option<Array>,
    /// Where chance begins.
    pub seed: u64,
    /// How many steps the search may make.
    pub effort: u64,
    /// The largest number of runs for which the next exact array is of interest.
    pub max_runs: u64,
}

impl NearRequest {
    /// A request at strength 2 (1 for a single factor) with no runs to keep, seed 0 and
    /// [`DEFAULT_EFFORT`].
    #[must_use]
    pub fn new(mix: Mix, budget: u64) -> Self {
        let strength = Request::new(mix.clone()).strength;
        let (effort, max_runs) = (DEFAULT_EFFORT, DEFAULT_MAX_RUNS);
        Self { mix, strength, budget, kept: None, seed: 0, effort, max_runs }
    }

    /// The same request at another strength.
    #[must_use]
    pub fn strength(self, strength: u32) -> Self {
        Self { strength, ..self }
    }

    /// The same request for plans that begin with the runs of `kept`.
    #[must_use]
    pub fn kept(self, kept: Array) -> Self {
        Self { kept: Some(kept), ..self }
    }

    /// The same request with another seed.
    #[must_use]
    pub fn seed(self, seed: u64) -> Self {
        Self { seed, ..self }
    }

    /// The same request with another number of steps.
    #[must_use]
    pub fn effort(self, effort: u64) -> Self {
        Self { effort, ..self }
    }
}

/// A plan of exactly the budget, judged by how near to orthogonal it is.
#[derive(Clone, Debug, PartialEq)]
pub struct NearPlan {
    /// The request.
    pub request: NearRequest,
    /// The plan; its columns stand in the order of the request, the kept runs come first.
    pub array: Array,
    /// How near to orthogonal it is.
    pub nearness: Nearness,
    /// The smallest exact array known here; `None` when there is none within `max_runs`. It has more
    /// runs than the budget unless runs had to be kept, which an exact array need not contain.
    pub next_exact: Option<NextExact>,
    /// What no plan of so few runs can be: factors with more levels than runs, as (factor from 0,
    /// levels).
    pub too_many_levels: Vec<(usize, u16)>,
}

/// What the next exact array costs.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct NextExact {
    /// Its number of runs.
    pub runs: u64,
    /// How far this is from the best possible.
    pub verdict: Verdict,
}

/// What became of a request.
#[derive(Clone, Debug, PartialEq)]
#[non_exhaustive]
pub enum NearOutcome {
    /// An exact array within the budget; it may have fewer runs.
    Exact(Box<Answer>),
    /// A plan of the budget's runs that is orthogonal at the strength asked for, found by the search:
    /// with its certificate, the floor, and how far from that it is.
    Orthogonal(Box<NearPlan>, Box<Certificate>, Box<Proof>, Verdict),
    /// A plan of the budget's runs that is not orthogonal.
    Near(Box<NearPlan>),
}

/// Why a request cannot be answered.
#[derive(Debug, Error)]
#[non_exhaustive]
pub enum NearError {
    /// A budget of no runs.
    #[error("a plan has at least one run; ask for a budget of 1 or more")]
    NoRuns,
    /// More cells than are searched.
    #[error(
        "{budget} runs × {factors} factors are too many for a near plan, {MOST_CELLS} cells at the most; \
         ask for fewer runs or factors, or for an exact array"
    )]
    TooLarge {
        /// The budget.
        budget: u64,
        /// The number of factors.
        factors: usize,
    },
    /// The runs to keep have other levels.
    #[error("the runs to keep have the levels {kept}, the plan is to have {wanted}")]
    KeptLevels {
        /// The levels of the runs to keep.
        kept: Mix,
        /// The levels asked for.
        wanted: Mix,
    },
    /// More runs to keep than the budget.
    #[error("{kept} runs are to be kept and the budget is {budget}; ask for a budget of {kept} or more")]
    KeptRuns {
        /// The number of runs to keep.
        kept: usize,
        /// The budget.
        budget: u64,
    },
    /// The search for an exact array failed.
    #[error(transparent)]
    Seek(#[from] SeekError),
    /// The judges could not do their work.
    #[error(transparent)]
    Judge(#[from] JudgeError),
    /// The search made what is no plan: a defect of this crate.
    #[error("the search made no plan, please report this: {0}")]
    Array(#[from] ArrayError),
}

/// An exact array when one fits the budget, else the nearest plan found.
///
/// All of these must hold:
///
/// * 1 ≤ strength ≤ number of factors; budget ≥ 1; budget × factors ≤ [`MOST_CELLS`] unless an exact
///   array fits;
/// * the runs to keep have the levels of the mix, in its order, and are no more than the budget.
///
/// Guarantee: a near plan has exactly `budget` runs, begins with the kept ones, and its level counts
/// are as even as they allow (without any, they differ by at most one in each column). It is the
/// best of many attempts (of the 16 with the least sum of squared deviations) by the sum of squared deviations of pair counts, then the largest
/// correlation, then the D-efficiency, then the number of the attempt, among those that are by none of
/// these worse than [`random_balanced`] from the same seed, which is one of them. Every plan is
/// judged; one that is orthogonal at the strength asked for is certified and reported as such. The
/// same request gives the same plan for any number of threads.
///
/// The attempts start from chance, from the next exact array with runs dropped, and from exact arrays
/// for some of the factors with runs and columns added; columns are improved by exchange.
///
/// Cost: that of [`crate::seek::seek`], and `effort` steps, N² for a look at a column.
///
/// # Errors
/// A [`NearError`] when a condition does not hold, or on a defect of this crate.
///
/// Reference: H. Xu, *Technometrics* 44 (2002), 356–368; N.-K. Nguyen, *Technometrics* 38 (1996),
/// 279–283.
///
/// ```
/// use trysquare::hunt::near::{NearOutcome, NearRequest, near};
/// use trysquare::verify::nearness;
/// let request = NearRequest::new("2^11".parse()?, 11);
/// let NearOutcome::Near(plan) = near(&request)? else { panic!() };
/// assert_eq!((plan.array.runs(), plan.next_exact.map(|e| e.runs)), (11, Some(12)));
/// assert_eq!(nearness(&plan.array), plan.nearness);
/// assert!(plan.nearness.attains_the_bound());
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn near(request: &NearRequest) -> Result<NearOutcome, NearError> {
    check(request)?;
    let shelf = Shelf::new();
    let asked = Request::new(request.mix.clone()).strength(request.strength);
    let exact = seek_on(&shelf, &asked.max_runs(request.max_runs.max(request.budget)))?;
    let answer = match exact {
        Outcome::Found(answer) => Some(answer),
        _ => None,
    };
    if request.kept.is_none() && answer.as_ref().is_some_and(|a| a.array.runs() as u64 <= request.budget) {
        return answer.map(NearOutcome::Exact).ok_or(NearError::NoRuns);
    }
    let factors = request.mix.factors();
    let cells = request.budget.saturating_mul(factors as u64);
    let runs = usize::try_from(request.budget).ok().filter(|_| cells <= MOST_CELLS);
    let runs = runs.ok_or(NearError::TooLarge { budget: request.budget, factors })?;
    let found = search(request, &shelf, runs, answer.as_deref())?;
    let levels = (0..).zip(request.mix.levels().iter().copied());
    let plan = Box::new(NearPlan {
        request: request.clone(),
        array: found.array,
        nearness: found.nearness,
        next_exact: answer.map(|a| NextExact { runs: a.array.runs() as u64, verdict: a.verdict }),
        too_many_levels: levels.filter(|&(_, s)| usize::from(s) > runs).collect(),
    });
    let judgement = verify::certify(&plan.array, &Demand::strength(request.strength as usize))?;
    if judgement.verdict == verify::Verdict::NotOrthogonal {
        return Ok(NearOutcome::Near(plan));
    }
    let floor = crate::floor::floor(&request.mix, request.strength).map_err(SeekError::from)?;
    let smallest = runs as u64 == floor.runs;
    let verdict = if smallest { Verdict::ProvedSmallest } else { Verdict::SmallestKnown };
    Ok(NearOutcome::Orthogonal(plan, Box::new(judgement.certificate), Box::new(floor), verdict))
}

fn check(request: &NearRequest) -> Result<(), NearError> {
    if request.budget == 0 {
        return Err(NearError::NoRuns);
    }
    let Some(kept) = &request.kept else { return Ok(()) };
    if kept.levels() != request.mix.levels() {
        return Err(NearError::KeptLevels { kept: kept.mix(), wanted: request.mix.clone() });
    }
    if kept.runs() as u64 > request.budget {
        return Err(NearError::KeptRuns { kept: kept.runs(), budget: request.budget });
    }
    Ok(())
}

/// The best of the plain plan and all attempts.
fn search(
    request: &NearRequest,
    shelf: &Shelf,
    runs: usize,
    exact: Option<&Answer>,
) -> Result<Judged, NearError> {
    let levels = request.mix.levels();
    let kept = request.kept.as_ref();
    let plain = Judged::new(random_balanced(levels, runs, kept, &mut Random::new(request.seed))?);
    if plain.nearness.pairs == 0 {
        return Ok(plain);
    }
    let starts = starts(request, shelf, runs, exact);
    // Σ n_ab² less N·k(k − 1)/2 is what a table calls its score.
    let constant = (runs as u64).saturating_mul(plain.nearness.pairs);
    let goal = plain.nearness.least_squares.saturating_sub(constant);
    let climb = Climb { levels, runs, kept, goal };
    let one = (levels.len() as u64).saturating_mul((runs * runs) as u64).saturating_mul(8);
    let attempts = (request.effort / one).clamp(1 + starts.len() as u64, ATTEMPTS);
    let attempt = |number: u64| -> Climbed {
        // Each attempt has a sequence of its own, far from that of the plain plan.
        let mut random = Random::new(Random::new(request.seed ^ (number + 1).rotate_left(32)).bits());
        let mut effort = Effort::new(request.effort / attempts, &|| false);
        let given = match (number as usize).checked_rem(starts.len() + 1).filter(|at| *at > 0) {
            Some(at) => starts[at - 1].columns(runs, levels, kept, &mut random),
            None => vec![None; levels.len()],
        };
        if runs > MOST_RUNS {
            climb.fill(given, &mut random)
        } else {
            climb.run(given, &mut random, &mut effort)
        }
    };
    let mut climbed: Vec<Climbed> = (0..attempts).into_par_iter().map(attempt).collect();
    climbed.sort_by_key(|c| c.score);
    let arrays =
        climbed.into_iter().map(|c| Array::from_columns(levels.iter().copied().zip(c.columns).collect()));
    let mut finalists = distinct(arrays.collect::<Result<Vec<_>, _>>()?);
    finalists.truncate(FINALISTS);
    Ok(choice::best(plain, finalists.into_par_iter().map(Judged::new).collect()))
}

/// Without those that came before.
fn distinct(arrays: Vec<Array>) -> Vec<Array> {
    let mut distinct: Vec<Array> = Vec::new();
    for array in arrays {
        if !distinct.contains(&array) {
            distinct.push(array);
        }
    }
    distinct
}

/// The exact arrays from which attempts start.
fn starts(request: &NearRequest, shelf: &Shelf, runs: usize, exact: Option<&Answer>) -> Vec<Start> {
    let at_pairs = match exact.filter(|a| a.request.strength == 2) {
        Some(answer) => Some(answer.array.clone()),
        None => match seek_on(shelf, &Request::new(request.mix.clone()).max_runs(request.max_runs)) {
            Ok(Outcome::Found(answer)) => Some(answer.array),
            _ => None,
        },
    };
    // Dropping runs costs their number times the cells.
    let worth_it = |a: &&Array| {
        let steps = a.runs().saturating_sub(runs).saturating_mul(a.runs()).saturating_mul(a.factors());
        (steps as u64) < request.effort / ATTEMPTS
    };
    let mut starts: Vec<Start> = at_pairs.iter().filter(worth_it).map(to_shorten).collect();
    if at_pairs.is_none_or(|a| a.runs() > runs) {
        starts.extend(to_widen(shelf, &request.mix, runs));
    }
    starts
}

#[cfg(test)]
mod tests;
