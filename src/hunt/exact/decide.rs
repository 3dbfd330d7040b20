//! The question, its answers, and the first two columns.

use std::collections::BTreeMap;

use super::action::{Action, Column, Kind};
use super::classes::Classes;
use super::generate::{End, Generator};
use super::meter::Meter;
use super::search::{Answer, Search, Store, joint};
use super::shares::{Share, shares};
use crate::construct::OrbitColumn;
use crate::hunt::Effort;

/// What is to be decided.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct ExactHunt {
    /// The number of runs, at most [`MAX_RUNS`](super::MAX_RUNS).
    pub runs: u32,
    /// The levels of the factors, in any order.
    pub levels: Vec<u16>,
    /// 2 or 3.
    pub strength: u32,
    /// The cyclic factors of the group; empty for the trivial group.
    pub group: Vec<u16>,
    /// How many candidate columns beside the first two are listed at the most.
    pub most_candidates: usize,
}

/// What the decision is.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Outcome {
    /// An array of these columns, most levels first, for
    /// [`orbit_array`](crate::construct::orbit_array); to be judged like every array.
    Found(Vec<OrbitColumn>),
    /// There is no array with this symmetry; when the group is trivial, none at all.
    Impossible,
    /// More candidates than allowed, or the effort used up: no answer.
    GaveUp,
}

/// The budget of the first round of a share; it grows fourfold from round to round.
const FIRST_ROUND: u64 = 1 << 22;

/// Decides whether there is an array with the wanted factors on which the group acts.
///
/// # Parameters
/// `hunt`: see [`ExactHunt`]. All of these must hold:
/// * 1 to [`MAX_RUNS`](super::MAX_RUNS) runs; at least one factor, each of 2 levels or more; strength 2 or 3;
/// * every cyclic factor of the group is at least 2, and the group's order divides the runs.
///
/// `effort`: a step is about one comparison of two columns.
///
/// # Result
/// `None` when a condition fails. The claim of [`Outcome::Impossible`]: there is no array of the
/// wanted strength, runs and factors whose runs are numbered (o, g) by the orbits o and the
/// elements g of the group so that every column has the form a(o) + χ(g) modulo its levels, with
/// any function a and any homomorphism χ from the group to the integers modulo the levels, both
/// chosen freely for each column (χ may be trivial). In other words, the group permutes the runs
/// freely and the levels of each factor by translations. Other actions (on the levels by other
/// permutations, with fixed runs, permuting the columns) are not excluded. For the trivial group
/// every array has this form, so then there is no such array at all. Two levels are renamed by
/// nothing but translations of Z2, so for two-level factors every free action that keeps the
/// columns is covered.
///
/// # Method
/// Exhaustive search; what is left out is left out for one of these reasons.
/// * *Names of levels*: a column stands for all that come from it by renaming levels, and of the
///   characters with the same kernel only one is used.
/// * *Dimensions*: the columns are shared out among the characters in every way that the
///   multiplicities of the group's characters on the functions on the runs allow; a strength 3
///   array is also one of strength 2.
/// * *First column*: all columns of a kind are one orbit of the permutations of orbits of runs
///   and translations of single orbits, which keep the form of the array; so one is tried.
/// * *Later columns*: of each orbit under the symmetries that keep the chosen columns one is
///   tried, and then the whole orbit dropped. See `classes` and `search`.
/// * *Colours*: pairwise not orthogonal columns give at most one to the array.
///
/// # Cost
/// Grows with the number of candidates beside two columns; bounded by `effort`, and about
/// 200 bytes for each candidate. Deterministic. When [`Effort::halted`] the result means nothing.
///
/// # Reference
/// Column-by-column extension with isomorph rejection as in McKay 1998 and Schoen, Eendebak &
/// Nguyen 2010, here with a prescribed group; colour bounds for cliques as in Tomita & Seki 2003
/// and San Segundo et al. 2011 \[memory\].
///
/// ```
/// use trysquare::construct::orbit_array;
/// use trysquare::hunt::Effort;
/// use trysquare::hunt::exact::{ExactHunt, Outcome, decide};
/// use trysquare::verify::{Demand, Verdict, certify};
/// let hunt = |levels: &[u16]| ExactHunt {
///     runs: 12, levels: levels.to_vec(), strength: 2, group: vec![], most_candidates: 100_000,
/// };
/// let mut effort = Effort::unlimited();
/// let Some(Outcome::Found(columns)) = decide(&hunt(&[3, 2, 2, 2, 2]), &mut effort) else { panic!() };
/// let array = orbit_array(&[], &columns)?;
/// assert_eq!(certify(&array, &Demand::strength(2))?.verdict, Verdict::Orthogonal);
/// assert_eq!(decide(&hunt(&[3, 2, 2, 2, 2, 2]), &mut effort), Some(Outcome::Impossible));
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
#[must_use]
pub fn decide(hunt: &ExactHunt, effort: &mut Effort) -> Option<Outcome> {
    let action = Action::new(hunt.runs, &hunt.group)?;
    if hunt.levels.is_empty() || hunt.levels.iter().any(|&s| s < 2) || !matches!(hunt.strength, 2 | 3) {
        return None;
    }
    if !divisible(hunt.runs, &hunt.levels, hunt.strength as usize) {
        return Some(Outcome::Impossible);
    }
    let wanted: Vec<(u16, usize)> = crate::mix::counts_of(&hunt.levels).into_iter().rev().collect();
    let Some(mut open) = shares(&action, &wanted) else { return Some(Outcome::GaveUp) };
    let (mut round, mut gave_up) = (FIRST_ROUND, false);
    // A share that takes long must not keep the others from being tried.
    while !open.is_empty() {
        let mut later = Vec::new();
        let steps = if open.len() == 1 { u64::MAX } else { round };
        for share in open {
            let mut meter = Meter::new(effort, steps);
            let outcome = one_share(hunt, &action, &share, &mut meter);
            let used_up = meter.used_up();
            match outcome {
                Outcome::Impossible => {}
                Outcome::Found(columns) => return Some(Outcome::Found(columns)),
                Outcome::GaveUp if !effort.goes_on() => return Some(Outcome::GaveUp),
                Outcome::GaveUp if used_up => later.push(share),
                Outcome::GaveUp => gave_up = true,
            }
        }
        open = later;
        round = round.saturating_mul(4);
    }
    Some(if gave_up { Outcome::GaveUp } else { Outcome::Impossible })
}

/// Whether the runs are divisible by the levels of any `strength` of the factors.
fn divisible(runs: u32, levels: &[u16], strength: usize) -> bool {
    fn product(levels: &[u16], strength: usize, runs: u64) -> bool {
        let divides = |p: u64| p <= runs && runs.is_multiple_of(p);
        levels.iter().enumerate().all(|(i, &s)| {
            let left = runs / u64::from(s);
            divides(u64::from(s)) && (strength == 1 || product(&levels[i + 1..], strength - 1, left))
        })
    }
    product(levels, strength, u64::from(runs))
}

/// Decides for fixed numbers of columns of each kind.
fn one_share(hunt: &ExactHunt, action: &Action, share: &Share, meter: &mut Meter) -> Outcome {
    let mut missing: Vec<usize> = share.iter().map(|(_, count)| *count).collect();
    let kind = &share[0].0;
    let first = action.column(kind, kind.first(action.orbits));
    missing[0] -= 1;
    let Some(next) = missing.iter().position(|&m| m > 0) else {
        return Outcome::Found(vec![first.stored()]);
    };
    missing[next] -= 1;
    let classes = Classes::new(action, std::slice::from_ref(&first));
    let Some(seconds) = seconds(hunt, action, &share[next].0, &first, &classes, meter) else {
        return Outcome::GaveUp;
    };
    for (key, base) in seconds {
        let second = action.column(&share[next].0, base);
        let mut given = joint(hunt.strength as usize, std::slice::from_ref(&first), &second);
        given.push(first.masks.clone());
        let mut beside = Beside { hunt, action, given: &given, meter };
        let mut stores = Vec::new();
        for (k, (kind, _)) in share.iter().enumerate() {
            // What is like a second column that was tried before has been excluded.
            let lowest = (k == next).then_some((&classes, key.as_slice()));
            match beside.list(kind, missing[k] > 0, lowest) {
                Some(store) => stores.push(store),
                None => return Outcome::GaveUp,
            }
        }
        let lists: Vec<Vec<u32>> = stores.iter().map(|s| (0..s.len() as u32).collect()).collect();
        let search = Search { action, strength: hunt.strength as usize, stores: &stores };
        let mut chosen = vec![first.clone(), second];
        match search.node(&mut chosen, &lists, &mut missing.clone(), meter) {
            Answer::Found => return Outcome::Found(chosen.iter().map(Column::stored).collect()),
            Answer::None => {}
            Answer::UsedUp => return Outcome::GaveUp,
        }
    }
    Outcome::Impossible
}

/// One second column for each orbit of those orthogonal to the first, by their keys; `None` when
/// the effort is used up or there are too many.
fn seconds(
    hunt: &ExactHunt,
    action: &Action,
    kind: &Kind,
    first: &Column,
    classes: &Classes,
    meter: &mut Meter,
) -> Option<BTreeMap<Vec<u8>, Vec<u8>>> {
    let mut seconds = BTreeMap::new();
    let given = [first.masks.clone()];
    let Some(mut generator) = Generator::new(action, kind, &given, Some(&classes.class)) else {
        return Some(seconds);
    };
    let end = generator.run(meter, &mut |base| {
        seconds.entry(classes.key(kind, base)).or_insert_with(|| base.to_vec());
        seconds.len() <= hunt.most_candidates
    });
    (end == End::Complete).then_some(seconds)
}

/// The candidates beside given partitions.
struct Beside<'a, 'm, 'e, 'h> {
    hunt: &'a ExactHunt,
    action: &'a Action,
    given: &'a [Vec<u128>],
    meter: &'m mut Meter<'e, 'h>,
}

impl Beside<'_, '_, '_, '_> {
    /// All candidates of a kind, when they are wanted; `None` when there are too many or the
    /// effort is used up.
    fn list(&mut self, kind: &Kind, wanted: bool, lowest: Option<(&Classes, &[u8])>) -> Option<Store> {
        let mut store = Store::new(self.action, kind.clone());
        let generator = Generator::new(self.action, kind, self.given, None);
        let Some(mut generator) = generator.filter(|_| wanted) else { return Some(store) };
        let end = generator.run(self.meter, &mut |base| {
            if lowest.is_none_or(|(classes, key)| classes.key(kind, base).as_slice() >= key) {
                store.push(self.action, base);
            }
            store.len() <= self.hunt.most_candidates
        });
        (end == End::Complete).then_some(store)
    }
}

#[cfg(test)]
mod tests;
