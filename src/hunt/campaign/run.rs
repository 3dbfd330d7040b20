//! The tasks of a hunt on all cores.

use std::sync::atomic::{AtomicU64, Ordering};
use std::sync::{Mutex, PoisonError};

use thiserror::Error;

use super::request::{HuntError, HuntRequest, Symmetry};
use super::state::{Placed, State};
use super::work::{Work, WorkList};
use crate::array::Array;
use crate::floor::{self, Proof};
use crate::mix::Mix;
use crate::recipe::Recipe;
use crate::verify::{self, Certificate, Demand, certify};

/// Who watches a hunt and may end it. All methods may be called from any thread.
pub trait Observer: Sync {
    /// Whether to end as soon as possible; what is being done is given up.
    fn interrupt(&self) -> bool {
        false
    }

    /// Whether the time is over.
    fn time_is_over(&self) -> bool {
        false
    }

    /// A task begins.
    fn begins(&self, _task: u64, _method: &'static str, _symmetry: &str) {}

    /// A task ended; the state is as of now. Called under a lock, so it should be quick.
    fn changed(&self, _state: &State) {}
}

/// Nobody watches.
impl Observer for () {}

/// An array that was found, judged.
#[derive(Clone, Debug, PartialEq)]
pub struct Find {
    /// The array; its columns stand in the order of the request.
    pub array: Array,
    /// How it is built.
    pub recipe: Recipe,
    /// What the judges found.
    pub certificate: Certificate,
    /// How it was met.
    pub placed: Placed,
}

/// Why there is no array.
#[derive(Clone, Debug, PartialEq)]
#[non_exhaustive]
pub enum Impossible {
    /// Every array has more runs, or another number of them.
    Floor(Proof),
    /// All arrays with the symmetry were gone through.
    Exhausted {
        /// The group that was asked for; `none` when no array exists at all.
        symmetry: Symmetry,
    },
}

/// A hunt that ended without an answer.
#[derive(Clone, Debug, PartialEq)]
pub struct Stopped {
    /// The most that was met, judged as far as it goes: an array for some of the factors.
    pub best: Option<Box<Find>>,
    /// What was done, to go on with.
    pub state: State,
}

/// What a hunt came to.
#[derive(Clone, Debug, PartialEq)]
#[non_exhaustive]
pub enum Outcome {
    /// An array.
    Found(Box<Find>),
    /// There is none.
    ProvedImpossible(Impossible),
    /// The work list or the time is over.
    LimitReached(Box<Stopped>),
    /// Somebody wanted the end.
    Interrupted(Box<Stopped>),
}

/// A search that met something that is no array: a defect of this crate. Nothing is handed out.
#[derive(Debug, Error, PartialEq, Eq)]
#[non_exhaustive]
pub enum RunError {
    /// The request makes no sense, or the state belongs to something else.
    #[error(transparent)]
    Request(#[from] HuntError),
    /// What a method met does not pass the judges.
    #[error("task {task} ({method}) met something that is no array, please report this")]
    Wrong {
        /// The task.
        task: u64,
        /// Its method.
        method: String,
    },
}

/// Goes on with a hunt until an array is found, none can exist, the work list is done, or the
/// observer wants the end.
///
/// # Parameters
/// `state`: [`State::new`] of a request, or one that was written down. `observer`: `&()` for none.
///
/// # Guarantee
/// The array is judged at the strength of the request. The same request and shard give the same
/// array for any number of threads, however often the hunt is stopped and gone on with, unless
/// the observer ends it before: the earliest task of the work list that finds one decides. Of several
/// shards the one whose find has the smallest task number has what the whole work list finds.
///
/// # Errors
/// A [`RunError`] when the request makes no sense or a method is defective.
///
/// # Cost
/// Up to some seconds of one core for each task; without a limit on tasks and an observer it may
/// never end.
///
/// ```
/// use trysquare::hunt::campaign::{HuntRequest, Outcome, State, run};
/// use trysquare::verify::{Demand, Verdict, certify};
/// let state = State::new(HuntRequest::new("2^4 3".parse()?, 12))?;
/// let Outcome::Found(find) = run(state, &())? else { panic!() };
/// assert_eq!(find.array.levels(), [2, 2, 2, 2, 3]);
/// assert_eq!(certify(&find.array, &Demand::strength(2))?.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn run(state: State, observer: &dyn Observer) -> Result<Outcome, RunError> {
    state.request.check()?;
    if let Some(outcome) = impossible(&state.request) {
        return Ok(outcome);
    }
    let work = WorkList::new(&state.request);
    let crew = Crew {
        work: &work,
        request: state.request.clone(),
        observer,
        next: AtomicU64::new(state.first_open()),
        decided: AtomicU64::new(state.found.as_ref().map_or(u64::MAX, |f| f.task)),
        state: Mutex::new(state),
    };
    rayon::scope(|scope| {
        for _ in 0..rayon::current_num_threads() {
            scope.spawn(|_| crew.labour());
        }
    });
    let state = crew.state.into_inner().unwrap_or_else(PoisonError::into_inner);
    conclude(state, observer)
}

/// What can be said without a search.
fn impossible(request: &HuntRequest) -> Option<Outcome> {
    let floor = floor::floor(&request.mix, request.strength).ok()?;
    let runs = u64::from(request.runs);
    (floor.runs > runs || !runs.is_multiple_of(floor.divisibility.divisor))
        .then_some(Outcome::ProvedImpossible(Impossible::Floor(floor)))
}

fn conclude(state: State, observer: &dyn Observer) -> Result<Outcome, RunError> {
    if let Some(found) = &state.found {
        return Ok(Outcome::Found(Box::new(judged(&state.request, found)?)));
    }
    if state.exhausted.contains(&state.request.symmetry.to_string()) || state.exhausted.contains("none") {
        let symmetry = if state.exhausted.contains("none") {
            Symmetry::Group(Vec::new())
        } else {
            state.request.symmetry.clone()
        };
        return Ok(Outcome::ProvedImpossible(Impossible::Exhausted { symmetry }));
    }
    let best = state.best.as_ref().map(|b| judged(&state.request, b).map(Box::new)).transpose()?;
    let stopped = Box::new(Stopped { best, state });
    Ok(if observer.interrupt() { Outcome::Interrupted(stopped) } else { Outcome::LimitReached(stopped) })
}

/// The array of some columns, in the order of the request, judged.
fn judged(request: &HuntRequest, placed: &Placed) -> Result<Find, RunError> {
    let wrong = || RunError::Wrong { task: placed.task, method: placed.method.clone() };
    let mut left = placed.columns.clone();
    let mut columns = Vec::new();
    for &s in request.mix.levels() {
        if let Some(at) = left.iter().position(|c| c.levels == s) {
            columns.push(left.remove(at));
        }
    }
    let mix = Mix::new(columns.iter().map(|c| c.levels).collect()).map_err(|_| wrong())?;
    let recipe = Recipe::Orbits { group: placed.group.clone(), columns, strength: request.strength };
    let array = recipe.build().map_err(|_| wrong())?;
    let demand = Demand::strength((request.strength as usize).min(array.factors()));
    let judgement = certify(&array, &demand).map_err(|_| wrong())?;
    let right = judgement.verdict == verify::Verdict::Orthogonal
        && array.runs() == request.runs as usize
        && array.levels() == mix.levels();
    if !right || !left.is_empty() {
        return Err(wrong());
    }
    let certificate = judgement.certificate.with_recipe(serde_json::to_value(&recipe).unwrap_or_default());
    Ok(Find { array, recipe, certificate, placed: placed.clone() })
}

/// Those who do the tasks.
struct Crew<'a> {
    work: &'a WorkList,
    request: HuntRequest,
    observer: &'a dyn Observer,
    /// The next place of the shard.
    next: AtomicU64,
    /// The earliest task that decides the hunt; later ones are of no use.
    decided: AtomicU64,
    state: Mutex<State>,
}

impl Crew<'_> {
    fn labour(&self) {
        let shard = self.request.shard;
        loop {
            let place = self.next.fetch_add(1, Ordering::Relaxed);
            let Some(task) =
                place.checked_mul(shard.modulus()).and_then(|t| t.checked_add(shard.remainder()))
            else {
                return;
            };
            if self.request.tasks.is_some_and(|n| task >= n) || self.stopped(task) {
                return;
            }
            if self.state().is_done(place) {
                continue;
            }
            let strategy = self.work.strategy(task);
            self.observer.begins(task, strategy.method(), &strategy.symmetry());
            let work = self.work.run(task, &|| self.stopped(task));
            self.note(place, task, work);
        }
    }

    fn state(&self) -> std::sync::MutexGuard<'_, State> {
        self.state.lock().unwrap_or_else(PoisonError::into_inner)
    }

    /// Whether a task is of no use any more. Once something decides, the earlier tasks are done to
    /// their end, whatever the time: they are few.
    fn stopped(&self, task: u64) -> bool {
        let decided = self.decided.load(Ordering::Relaxed);
        task > decided || self.observer.interrupt() || (decided == u64::MAX && self.observer.time_is_over())
    }

    fn note(&self, place: u64, task: u64, work: Work) {
        let mut state = self.state();
        match work {
            Work::Halted => return,
            Work::Met(Some(placed)) => {
                if placed.columns.len() == self.request.mix.factors() {
                    self.decided.fetch_min(task, Ordering::Relaxed);
                }
                state.meet(placed);
            }
            Work::Met(None) => {}
            Work::Exhausted => {
                let symmetry = self.work.strategy(task).symmetry();
                if symmetry == "none" || symmetry == self.request.symmetry.to_string() {
                    self.decided.fetch_min(task, Ordering::Relaxed);
                }
                state.exhausted.insert(symmetry);
            }
        }
        state.finish(place);
        self.observer.changed(&state);
    }
}
