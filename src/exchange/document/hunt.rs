use serde::{Deserialize, Serialize};

use super::seek::{FloorPart, Rows};
use crate::exchange::Symbols;
use crate::hunt::campaign::{Find, HuntRequest, Impossible, Outcome, Shard, Stopped, Symmetry};
use crate::recipe::Recipe;
use crate::verify::Certificate;

/// What became of a hunt.
///
/// ```
/// use trysquare::exchange::{Symbols, document::HuntDocument};
/// use trysquare::hunt::campaign::{HuntRequest, State, run};
/// let request = HuntRequest::new("2^4 3".parse()?, 12);
/// let outcome = run(State::new(request.clone())?, &())?;
/// let json = serde_json::to_string(&HuntDocument::new(&request, &outcome, Symbols::Zero))?;
/// assert!(json.starts_with(r#"{"request":"2^4 3^1","strength":2,"runs":12,"verdict":"found","#));
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct HuntDocument<'a> {
    /// The mix asked for, canonical.
    pub request: String,
    /// The strength asked for.
    pub strength: u32,
    /// The number of runs asked for.
    pub runs: u32,
    /// What became of it.
    pub verdict: HuntVerdict,
    /// The seed of the random numbers.
    pub seed: u64,
    /// The symmetry asked for.
    pub symmetry: &'a Symmetry,
    /// The part of the work list that was done.
    pub shard: Shard,
    /// The array, when one was found.
    #[serde(flatten, skip_serializing_if = "Option::is_none")]
    pub found: Option<FindPart<'a>>,
    /// The proved lower bound that leaves no array.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub floor: Option<FloorPart<'a>>,
    /// The symmetry under which all arrays were gone through: `none` when no array exists at all.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub exhausted: Option<&'a Symmetry>,
    /// How many tasks were done, when the hunt ended without an answer.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub tasks_done: Option<u64>,
    /// The most that was met, when the hunt ended without an answer: an array for some of the factors.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub best: Option<BestPart<'a>>,
}

/// What became of a hunt.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub enum HuntVerdict {
    /// An array was found and judged.
    Found,
    /// There is no array: none at all, or none with the symmetry that was asked for.
    ProvedImpossible,
    /// The work list or the time is over.
    LimitReached,
    /// Somebody wanted the end.
    Interrupted,
}

/// An array with how it was met.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct FindPart<'a> {
    /// The number of the task that found it; of several shards the smallest number counts.
    pub task: u64,
    /// The method that found it.
    pub method: &'a str,
    /// The group under which it was found.
    pub method_symmetry: &'a str,
    /// The number of levels of each factor, in the order of the request.
    pub levels: &'a [u16],
    /// One array of level symbols per run.
    pub array: Rows<'a>,
    /// How the array is built.
    pub recipe: &'a Recipe,
    /// What the judges found.
    pub certificate: &'a Certificate,
}

/// An array for some of the factors.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct BestPart<'a> {
    /// How many factors are there.
    pub factors: usize,
    /// Their degrees of freedom.
    pub degrees_of_freedom: u64,
    /// The array.
    #[serde(flatten)]
    pub find: FindPart<'a>,
}

impl<'a> FindPart<'a> {
    fn new(find: &'a Find, symbols: Symbols) -> Self {
        Self {
            task: find.placed.task,
            method: &find.placed.method,
            method_symmetry: &find.placed.symmetry,
            levels: find.array.levels(),
            array: Rows { array: &find.array, symbols },
            recipe: &find.recipe,
            certificate: &find.certificate,
        }
    }
}

impl<'a> HuntDocument<'a> {
    /// The document of an outcome.
    #[must_use]
    pub fn new(request: &'a HuntRequest, outcome: &'a Outcome, symbols: Symbols) -> Self {
        let mut document = Self {
            request: request.mix.to_string(),
            strength: request.strength,
            runs: request.runs,
            verdict: HuntVerdict::Found,
            seed: request.seed,
            symmetry: &request.symmetry,
            shard: request.shard,
            found: None,
            floor: None,
            exhausted: None,
            tasks_done: None,
            best: None,
        };
        match outcome {
            Outcome::Found(find) => document.found = Some(FindPart::new(find, symbols)),
            Outcome::ProvedImpossible(reason) => {
                document.verdict = HuntVerdict::ProvedImpossible;
                match reason {
                    Impossible::Floor(proof) => document.floor = Some(FloorPart::new(proof)),
                    Impossible::Exhausted { symmetry } => document.exhausted = Some(symmetry),
                }
            }
            Outcome::LimitReached(stopped) => document.stop(stopped, HuntVerdict::LimitReached, symbols),
            Outcome::Interrupted(stopped) => document.stop(stopped, HuntVerdict::Interrupted, symbols),
        }
        document
    }

    fn stop(&mut self, stopped: &'a Stopped, verdict: HuntVerdict, symbols: Symbols) {
        self.verdict = verdict;
        self.tasks_done = Some(stopped.state.tasks_done());
        self.best = stopped.best.as_ref().map(|find| BestPart {
            factors: find.array.factors(),
            degrees_of_freedom: find.placed.degrees_of_freedom(),
            find: FindPart::new(find, symbols),
        });
    }
}
