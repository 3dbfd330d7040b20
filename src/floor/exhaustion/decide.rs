use rayon::prelude::*;

use super::census::PORTION;
use super::columns::{Columns, columns};
use super::meter::Purse;
use super::record::{ByColumns, Record};
use super::sketch::Sketch;
use super::{Census, ExhaustionError, Progress, Stage};
use crate::array::Array;
use crate::floor::Effort;
use crate::mix::Mix;

/// What is known about the existence of an array.
#[derive(Clone, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum Decision {
    /// There is one; its columns stand in the order of the mix. To be judged like every array.
    Exists(Array),
    /// There is none.
    None(Record),
    /// The budget is used up (or the engine gave up, see [`Progress::Stopped`]): a state to go on
    /// from.
    NotDecided(Census),
}

/// Whether there is an orthogonal array of a mix.
///
/// # Parameters
/// * `mix`, `runs`, `strength`: of the array, in the limits of [`Census::new`];
/// * `close_from`: `None` to add all columns one by one; else from how many columns on arrays are
///   closed by cliques, see [`Census::closing`] (4 or 5 is a good start when many
///   columns have equal levels, and the claim is the same);
/// * `from`: the state of an earlier call for the same question, or `None`;
/// * `effort`: as [`Census::advance`].
///
/// # Result
/// See [`Decision`]. The columns are added with most levels first; for the last one it is only
/// asked whether it exists.
///
/// # Guarantee
/// The same bytes for any number of threads.
///
/// # Errors
/// As [`Census::new`]; [`ExhaustionError::State`] when `from` is about another question.
///
/// # Reference
/// As [`classes`](super::classes).
///
/// ```
/// use trysquare::floor::{Effort, exhaustion::{Decision, decide}};
/// use trysquare::verify::{Demand, Verdict, certify};
/// let mut effort = Effort::unlimited();
/// let none = decide(&"3^1 2^5".parse()?, 12, 2, None, None, &mut effort)?;
/// let Decision::None(record) = none else { panic!("no 12 runs hold 3^1 2^5") };
/// record.check_light()?;
/// record.replay(&mut effort)?;
/// let some = decide(&"2^4 3^1".parse()?, 12, 2, None, None, &mut effort)?;
/// let Decision::Exists(array) = some else { panic!("12 runs hold 2^4 3^1") };
/// assert_eq!(array.levels(), [2, 2, 2, 2, 3]);
/// assert_eq!(certify(&array, &Demand::strength(2))?.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn decide(
    mix: &Mix,
    runs: u32,
    strength: u32,
    close_from: Option<u32>,
    from: Option<Census>,
    effort: &mut Effort<'_>,
) -> Result<Decision, ExhaustionError> {
    let mut order = mix.levels().to_vec();
    order.sort_unstable_by_key(|&s| std::cmp::Reverse(s));
    let mut fresh = Census::new(&order, runs, strength)?;
    fresh.close_from = close_from;
    let mut census = match from {
        None => fresh,
        Some(state) => {
            if !fresh.asks_the_same_as(&state) {
                return Err(ExhaustionError::State("it is about another question".into()));
            }
            state
        }
    };
    while !census.is_complete() && census.stages.len() + 1 < order.len() {
        match census.advance(effort) {
            Progress::Stopped => return Ok(Decision::NotDecided(census)),
            Progress::Found(array) => return Ok(Decision::Exists(in_order(&array, mix))),
            Progress::Advanced | Progress::Complete => {}
        }
    }
    if !census.is_complete() {
        match last_column(&census, effort) {
            Some(Some(found)) => return Ok(Decision::Exists(in_order(&found, mix))),
            Some(None) => census.stages.push(Stage::new(Vec::new())),
            None => return Ok(Decision::NotDecided(census)),
        }
    }
    match census.arrays().first() {
        Some(array) => Ok(Decision::Exists(in_order(array, mix))),
        None => Ok(Decision::None(Record::Columns(ByColumns::new(&census)))),
    }
}

/// The first array with the last column, `None` in it when there is none; `None` when stopped.
fn last_column(census: &Census, effort: &mut Effort<'_>) -> Option<Option<Array>> {
    let &last = census.order.last()?;
    if census.stages.is_empty() {
        let runs = census.runs as usize;
        return Some(runs.is_multiple_of(usize::from(last)).then(|| Sketch::one_column(last, runs).array()));
    }
    let sketches = census.sketches();
    let purse = Purse::new(effort);
    for portion in sketches.chunks(PORTION) {
        // The whole portion is searched, so that the steps made do not depend on the threads.
        let found: Vec<Option<Sketch>> = portion
            .par_iter()
            .map(|sketch| {
                purse.pay(|spend| match columns(sketch, census.strength, last, true, spend) {
                    Columns::All(all) => Some(all.first().map(|split| sketch.with_column(last, split))),
                    Columns::Stopped => None,
                })
            })
            .collect::<Option<_>>()?;
        if let Some(sketch) = found.into_iter().flatten().next() {
            return Some(Some(sketch.array()));
        }
    }
    Some(None)
}

/// The array with its columns in the order of the mix.
fn in_order(array: &Array, mix: &Mix) -> Array {
    let mut taken = vec![false; array.factors()];
    let places: Vec<usize> = mix
        .levels()
        .iter()
        .filter_map(|s| {
            let place = (0..taken.len()).find(|&j| !taken[j] && array.levels()[j] == *s)?;
            taken[place] = true;
            Some(place)
        })
        .collect();
    array.select(&places).expect("a mix has columns")
}
