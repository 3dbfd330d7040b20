//! From a request to the smallest array known for it, judged.

mod fallback;
mod reach;

use serde::{Deserialize, Serialize};
use thiserror::Error;

use crate::array::Array;
use crate::catalog::{Bag, Packer, Shelf, arrange};
use crate::floor::{self, Below, Effort, FloorError, Proof, QUICK, Strengthened};
use crate::mix::Mix;
use crate::recipe::{Recipe, RecipeError};
use crate::verify::{self, Certificate, Demand, JudgeError};
use fallback::fallback;
pub use reach::reach;

/// Arrays with more runs than this are not looked for unless the request says so.
pub const DEFAULT_MAX_RUNS: u64 = 1_000_000;

/// Arrays with more cells than this are not built.
pub const MAX_CELLS: u64 = 1 << 31;

/// What is asked for.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Request {
    /// The levels of the factors, in the order the answer keeps.
    pub mix: Mix,
    /// The strength, 1 to the number of factors.
    pub strength: u32,
    /// The largest number of runs that is of use.
    pub max_runs: u64,
}

impl Request {
    /// A request at strength 2 (1 for a single factor) for at most [`DEFAULT_MAX_RUNS`] runs.
    #[must_use]
    pub fn new(mix: Mix) -> Self {
        let strength = if mix.factors() > 1 { 2 } else { 1 };
        Self { mix, strength, max_runs: DEFAULT_MAX_RUNS }
    }

    /// The same request at another strength.
    #[must_use]
    pub fn strength(self, strength: u32) -> Self {
        Self { strength, ..self }
    }

    /// The same request for at most that many runs.
    #[must_use]
    pub fn max_runs(self, max_runs: u64) -> Self {
        Self { max_runs, ..self }
    }
}

/// How far an answer is from the best possible.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub enum Verdict {
    /// The number of runs equals the proved floor.
    ProvedSmallest,
    /// No smaller array is known here; the floor leaves a gap.
    SmallestKnown,
}

/// An array for a request, judged.
#[derive(Clone, Debug, PartialEq)]
pub struct Answer {
    /// The request.
    pub request: Request,
    /// How far it is from the best possible.
    pub verdict: Verdict,
    /// The proved lower bound on the number of runs.
    pub floor: Proof,
    /// The numbers of runs below the answer that divisibility allows, ascending, and why each is
    /// impossible, as far as that is known; of very many only the last ones.
    pub below: Vec<Below>,
    /// The array; its columns stand in the order of the request.
    pub array: Array,
    /// How it is built.
    pub recipe: Recipe,
    /// What the judges found.
    pub certificate: Certificate,
}

impl Answer {
    /// How many runs the answer has above the floor.
    #[must_use]
    pub fn gap(&self) -> u64 {
        (self.array.runs() as u64).saturating_sub(self.floor.runs)
    }
}

/// What became of a request.
#[derive(Clone, Debug, PartialEq)]
#[non_exhaustive]
pub enum Outcome {
    /// An array.
    Found(Box<Answer>),
    /// The floor is above the largest number of runs that the request allows.
    ProvedImpossible {
        /// The floor.
        floor: Proof,
    },
    /// Nothing was found up to the largest number of runs that the request, or memory, allows.
    LimitReached {
        /// The floor.
        floor: Proof,
        /// The largest number of runs looked at.
        searched: u64,
    },
}

/// Why a request cannot be answered at all.
#[derive(Debug, Error)]
#[non_exhaustive]
pub enum SeekError {
    /// The strength is 0 or above the number of factors, or the floor is out of range.
    #[error(transparent)]
    Floor(#[from] FloorError),
    /// A recipe on the shelf could not be carried out: a defect of this crate.
    #[error("a recipe on the shelf could not be carried out, please report this: {0}")]
    Recipe(#[from] RecipeError),
    /// The judges could not do their work: a defect of this crate.
    #[error("the judges failed, please report this: {0}")]
    Judge(#[from] JudgeError),
    /// An array did not have the strength or the levels that its recipe promises: a defect of this
    /// crate. Such an array is never handed out.
    #[error("the recipe [{recipe}] yields a wrong array, please report this")]
    WrongConstruction {
        /// The recipe in one line.
        recipe: String,
    },
}

/// The smallest array known for a request, from a fresh [`Shelf`]; for several requests call
/// [`seek_on`] with one shelf.
///
/// ```
/// use trysquare::seek::{Outcome, Request, Verdict, seek};
/// let Outcome::Found(answer) = seek(&Request::new("2^1 3^7".parse()?))? else { panic!() };
/// assert_eq!((answer.array.runs(), answer.verdict), (18, Verdict::ProvedSmallest));
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
///
/// # Errors
/// A [`SeekError`] when the request makes no sense, or on a defect of this crate.
pub fn seek(request: &Request) -> Result<Outcome, SeekError> {
    seek_on(&Shelf::new(), request)
}

/// The smallest array on `shelf` for a request: numbers of runs are tried upwards from the floor
/// in steps of what divides them, and the first parent into which the request fits is built and
/// judged.
///
/// Where that is above the closed formulas, the linear program and the reasons against single
/// numbers of runs raise the floor, within an effort that costs well under a tenth of a second.
///
/// # Errors
/// As [`seek`].
pub fn seek_on(shelf: &Shelf, request: &Request) -> Result<Outcome, SeekError> {
    let floor = floor::floor(&request.mix, request.strength)?;
    if floor.runs > request.max_runs {
        return Ok(Outcome::ProvedImpossible { floor });
    }
    let found = find(shelf, request, &floor);
    let mut effort = Effort::new(QUICK, &|| false);
    let Some((runs, recipe)) = found else {
        let floor = floor::raise(floor, request.max_runs.saturating_add(1), &mut effort)?;
        return Ok(if floor.runs > request.max_runs {
            Outcome::ProvedImpossible { floor }
        } else {
            Outcome::LimitReached { floor, searched: request.max_runs }
        });
    };
    if runs.saturating_mul(request.mix.factors() as u64) > MAX_CELLS {
        return Ok(Outcome::LimitReached { floor, searched: runs });
    }
    let Strengthened { proof: floor, below } = floor::strengthen(floor, runs, &mut effort)?;
    let array = recipe.build()?;
    let judgement = verify::certify(&array, &Demand::strength(request.strength as usize))?;
    let right = judgement.verdict == verify::Verdict::Orthogonal
        && array.levels() == request.mix.levels()
        && array.runs() as u64 == runs;
    if !right {
        return Err(SeekError::WrongConstruction { recipe: recipe.to_string() });
    }
    let certificate = judgement.certificate.with_recipe(serde_json::to_value(&recipe).unwrap_or_default());
    let verdict = if runs == floor.runs { Verdict::ProvedSmallest } else { Verdict::SmallestKnown };
    Ok(Outcome::Found(Box::new(Answer {
        request: request.clone(),
        verdict,
        floor,
        below,
        array,
        recipe,
        certificate,
    })))
}

/// The smallest number of runs with a recipe for the request, its columns in order.
fn find(shelf: &Shelf, request: &Request, floor: &Proof) -> Option<(u64, Recipe)> {
    let t = request.strength;
    let levels = request.mix.levels();
    if t == 1 {
        let runs = u32::try_from(floor.runs).ok()?;
        return Some((floor.runs, Recipe::Balanced { runs, levels: levels.to_vec() }));
    }
    let last_resort = fallback(&request.mix, t);
    let wanted = Bag::of_levels(levels);
    let packer = Packer::new(shelf, t);
    let step = floor.divisibility.divisor;
    let mut runs = floor.runs;
    while runs <= request.max_runs && last_resort.as_ref().is_none_or(|(most, _)| runs < *most) {
        for parent in shelf.parents(runs, t).iter() {
            if let Some(placement) = packer.fit(&wanted, &parent.bag) {
                let recipe = arrange(&parent.recipe, &placement, Some(levels));
                return Some((runs, (*recipe).clone()));
            }
        }
        runs = runs.checked_add(step)?;
    }
    last_resort.filter(|(runs, _)| *runs <= request.max_runs)
}
