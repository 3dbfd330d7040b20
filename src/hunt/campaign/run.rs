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
        decided: AtomicU64::new(decisive(&work, &state).unwrap_or(u64::MAX)),
        state: Mutex::new(state),
    };
    rayon::scope(|scope| {
        for _ in 0..rayon::current_num_threads() {
            scope.spawn(|_| crew.labour());
        }
    });
    let state = crew.state.into_inner().unwrap_or_else(PoisonError::into_inner);
    conclude(&work, state, observer)
}

/// What can be said without a search.
fn impossible(request: &HuntRequest) -> Option<Outcome> {
    let floor = floor::floor(&request.mix, request.strength).ok()?;
    let runs = u64::from(request.runs);
    (floor.runs > runs || !runs.is_multiple_of(floor.divisibility.divisor))
        .then_some(Outcome::ProvedImpossible(Impossible::Floor(floor)))
}

/// The task that found an array, if any, and the one that proved that there is none.
fn verdicts(work: &WorkList, state: &State) -> (Option<u64>, Option<(u64, Symmetry)>) {
    let asked = &state.request.symmetry;
    let none = Symmetry::Group(Vec::new());
    let proved = [none, asked.clone()].into_iter().filter(|s| work.settles(s));
    let proved = proved.filter_map(|s| state.exhausted.get(&s.to_string()).map(|&task| (task, s)));
    (state.found.as_ref().map(|f| f.task), proved.min_by_key(|p| p.0))
}

/// The earliest task that decides the hunt.
fn decisive(work: &WorkList, state: &State) -> Option<u64> {
    let (found, proved) = verdicts(work, state);
    found.into_iter().chain(proved.map(|p| p.0)).min()
}

/// The earliest task decides, so that chance among the threads does not.
fn conclude(work: &WorkList, state: State, observer: &dyn Observer) -> Result<Outcome, RunError> {
    let (found, proved) = verdicts(work, &state);
    if let Some((task, symmetry)) = proved
        && found.is_none_or(|f| task < f)
    {
        return Ok(Outcome::ProvedImpossible(Impossible::Exhausted { symmetry }));
    }
    if let Some(found) = &state.found {
        return Ok(Outcome::Found(Box::new(judged(&state.request, found)?)));
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
                let first = state.exhausted.entry(self.work.strategy(task).symmetry()).or_insert(task);
                *first = task.min(*first);
                if let Some(task) = decisive(self.work, &state) {
                    self.decided.fetch_min(task, Ordering::Relaxed);
                }
            }
        }
        state.finish(place);
        self.observer.changed(&state);
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_was_proved_is_known_when_the_hunt_goes_on() {
        let request = HuntRequest::new("2^5 3".parse().unwrap(), 12);
        let outcome = |state| run(state, &()).unwrap();
        let proved = outcome(State::new(request.clone()).unwrap());
        let Outcome::ProvedImpossible(Impossible::Exhausted { symmetry }) = &proved else { panic!() };
        assert_eq!(*symmetry, Symmetry::Group(Vec::new()));
        let mut known = State::new(HuntRequest { tasks: Some(0), ..request }).unwrap();
        known.exhausted.insert("none".to_owned(), 3);
        assert_eq!(outcome(known), proved);
    }

    /// Z2 × Z2 does not act on the columns of 4^5 by numbers modulo 4, but it does on vectors: that
    /// the first is impossible must not end the hunt.
    #[test]
    fn levels_as_vectors_are_another_action() {
        let request = HuntRequest {
            symmetry: "Z2xZ2".parse().unwrap(),
            tasks: Some(60),
            ..HuntRequest::new("4^5".parse().unwrap(), 16)
        };
        let outcome = run(State::new(request).unwrap(), &()).unwrap();
        assert!(matches!(outcome, Outcome::Found(_)), "{outcome:?}");
    }
}
