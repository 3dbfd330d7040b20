use std::collections::BTreeSet;

use rayon::prelude::*;
use serde::{Deserialize, Serialize};

use super::ExhaustionError;
use super::canonical::canonical;
use super::columns::{Columns, columns};
use super::completion::{Completion, completion};
use super::meter::Purse;
use super::orbits::orbit_representatives;
use super::sketch::{MAX_LEVELS, MAX_RUNS, Sketch};
use super::text::{digest, from_text, to_text};
use crate::array::Array;
use crate::floor::Effort;

/// The version of the JSON form of [`Census`].
pub const CENSUS_VERSION: u32 = 1;

/// How many arrays are extended before their extensions are put together.
pub(super) const PORTION: usize = 64;

/// The isomorphism classes found so far: a state that can be written, read and gone on from.
///
/// What is read has passed these checks: the version, the shape, and that the representatives of
/// the last stage are arrays of the strength, canonical and all different. That none is missing
/// cannot be checked but by searching again.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(try_from = "Unchecked")]
pub struct Census {
    /// [`CENSUS_VERSION`].
    pub(super) version: u32,
    /// The number of runs.
    pub(super) runs: u32,
    /// The strength.
    pub(super) strength: u32,
    /// The levels of the columns, in the order in which they are added.
    pub(super) order: Vec<u16>,
    /// From how many columns on arrays are closed by cliques, see [`Census::closing`].
    #[serde(skip_serializing_if = "Option::is_none")]
    pub(super) close_from: Option<u32>,
    /// One for every prefix of `order` that is done.
    pub(super) stages: Vec<Stage>,
}

/// A census as it was read.
#[derive(Deserialize)]
#[serde(deny_unknown_fields, expecting = "an object with the keys of a census")]
struct Unchecked {
    version: u32,
    runs: u32,
    strength: u32,
    order: Vec<u16>,
    #[serde(default)]
    close_from: Option<u32>,
    stages: Vec<Stage>,
}

impl TryFrom<Unchecked> for Census {
    type Error = ExhaustionError;

    fn try_from(read: Unchecked) -> Result<Self, ExhaustionError> {
        let Unchecked { version, runs, strength, order, close_from, stages } = read;
        let census = Self { version, runs, strength, order, close_from, stages };
        census.check()?;
        Ok(census)
    }
}

/// The isomorphism classes of one prefix of the columns.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Stage {
    /// How many there are.
    pub classes: u64,
    /// How many of them were closed: shown by cliques to be completed by no columns, and so not
    /// extended one column at a time.
    #[serde(default, skip_serializing_if = "is_zero")]
    pub closed: u64,
    /// The SHA-256 of the canonical representatives, ascending, each ended by a line feed.
    pub digest: String,
    /// The canonical representatives, ascending: columns with most levels first, separated by
    /// dots, a digit (0-9, a-z) for every run. Empty where they are left out.
    pub representatives: Vec<String>,
}

// Serde hands over a reference.
#[allow(clippy::trivially_copy_pass_by_ref)]
fn is_zero(n: &u64) -> bool {
    *n == 0
}

impl Stage {
    pub(super) fn new(representatives: Vec<String>) -> Self {
        Self {
            classes: representatives.len() as u64,
            closed: 0,
            digest: digest(representatives.iter().map(String::as_str)),
            representatives,
        }
    }
}

/// What became of a stage.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Progress {
    /// One more stage is done.
    Advanced,
    /// All columns are placed, or there is no array with the last one.
    Complete,
    /// An array with all the columns, found while closing; nothing has changed.
    Found(Array),
    /// The budget is used up, somebody wants the end, or a class has more than two million columns
    /// that extend it; nothing has changed.
    Stopped,
}

impl Census {
    /// Before the first column.
    ///
    /// # Parameters
    /// * `order`: the levels of the columns in the order in which they are added; many levels
    ///   first is quickest;
    /// * `runs`, `strength`: of the arrays.
    ///
    /// All of these must hold: 1 to [`MAX_RUNS`] runs; 2 to [`MAX_LEVELS`] levels; strength 1 to
    /// the number of columns.
    ///
    /// # Errors
    /// An [`ExhaustionError`] when a condition fails.
    pub fn new(order: &[u16], runs: u32, strength: u32) -> Result<Self, ExhaustionError> {
        let columns = order.len();
        if strength == 0 || strength as usize > columns {
            return Err(ExhaustionError::Strength { strength, columns });
        }
        let fits =
            (1..=MAX_RUNS as u32).contains(&runs) && order.iter().all(|s| (2..=MAX_LEVELS).contains(s));
        if !fits || columns > MAX_RUNS {
            return Err(ExhaustionError::TooLarge);
        }
        Ok(Self {
            version: CENSUS_VERSION,
            runs,
            strength,
            order: order.to_vec(),
            close_from: None,
            stages: Vec::new(),
        })
    }

    /// The same, but from `columns` columns on, when two or more columns are missing and all of
    /// them have equal levels, it is asked of every array by cliques whether it can be completed.
    /// When it cannot, it is closed: not extended column by column. The stages that follow hold
    /// only the extensions of what was left open: fit to decide existence, not to count.
    #[must_use]
    pub fn closing(self, columns: u32) -> Self {
        Self { close_from: Some(columns), ..self }
    }

    /// Whether both are about one question, asked in the same way.
    pub(super) fn asks_the_same_as(&self, other: &Self) -> bool {
        let question = |c: &Self| (c.runs, c.strength, c.order.clone(), c.close_from);
        question(self) == question(other)
    }

    /// How many columns are missing after stage `stage` (from 1) and of how many levels, when
    /// arrays of that stage may be closed.
    pub(super) fn closable(&self, stage: usize) -> Option<(usize, u16)> {
        let missing = self.order.get(stage..)?;
        let &levels = missing.first()?;
        let alike = missing.iter().all(|&s| s == levels);
        let from = self.close_from? as usize;
        (self.strength >= 2 && alike && missing.len() > 1 && stage >= from).then_some((missing.len(), levels))
    }

    /// Whether stage `stage` (from 1) has more closed classes than it can have.
    pub(super) fn is_overdrawn(&self, stage: usize) -> bool {
        let Stage { classes, closed, .. } = self.stages[stage - 1];
        closed > classes || (closed > 0 && self.closable(stage).is_none())
    }

    /// The stages that are done.
    #[must_use]
    pub fn stages(&self) -> &[Stage] {
        &self.stages
    }

    /// The number of classes of every prefix that is done.
    #[must_use]
    pub fn numbers(&self) -> Vec<u64> {
        self.stages.iter().map(|stage| stage.classes).collect()
    }

    /// Whether all columns are placed, or there is no array with the last one.
    #[must_use]
    pub fn is_complete(&self) -> bool {
        self.stages.len() == self.order.len() || self.stages.last().is_some_and(|stage| stage.classes == 0)
    }

    /// Checks what was read.
    fn check(&self) -> Result<(), ExhaustionError> {
        let state = |text: String| Err(ExhaustionError::State(text));
        if self.version != CENSUS_VERSION {
            return state(format!("version {} is not known here", self.version));
        }
        Self::new(&self.order, self.runs, self.strength)?;
        let stages = self.stages.len();
        if stages > self.order.len() || (1..stages).any(|i| self.stages[i - 1].classes == 0) {
            return state("its stages do not fit its columns".into());
        }
        if let Some(wrong) = (1..=stages).find(|&i| self.is_overdrawn(i)) {
            return state(format!("stage {wrong} has a number of closed classes that it cannot have"));
        }
        let Some(last) = self.stages.last() else { return Ok(()) };
        last.check(stages, self, &mut Effort::unlimited())
            .map_err(|error| ExhaustionError::State(error.to_string()))
    }

    /// The levels of the first `columns` columns, most first, as the representatives have them.
    pub(super) fn levels(&self, columns: usize) -> Vec<u16> {
        let mut levels = self.order[..columns].to_vec();
        levels.sort_unstable_by_key(|&s| std::cmp::Reverse(s));
        levels
    }

    /// The representatives of the last stage.
    pub(super) fn sketches(&self) -> Vec<Sketch> {
        let levels = self.levels(self.stages.len());
        let texts = self.stages.last().map_or(&[][..], |stage| &stage.representatives);
        let sketch = |text: &String| {
            from_text(text, &levels, self.runs as usize)
                .expect("the texts of a census are checked or its own")
        };
        texts.iter().map(sketch).collect()
    }

    /// One array of every class of the last stage, columns with most levels first.
    #[must_use]
    pub fn arrays(&self) -> Vec<Array> {
        self.sketches().iter().map(Sketch::array).collect()
    }

    /// Does the next stage.
    ///
    /// # Cost
    /// For every class: a backtracking for the columns that extend it and a canonical form for
    /// each of their orbits; in parallel. A step is a choice of the backtracking or a cell of a
    /// node of the canonical form.
    pub fn advance(&mut self, effort: &mut Effort<'_>) -> Progress {
        if self.is_complete() {
            return Progress::Complete;
        }
        let Some(&next) = self.order.get(self.stages.len()) else { return Progress::Complete };
        let runs = self.runs as usize;
        let mut forms = BTreeSet::new();
        if self.stages.is_empty() {
            if runs.is_multiple_of(usize::from(next)) {
                let Some(first) = canonical(&Sketch::one_column(next, runs), &mut |n| effort.spend(n)) else {
                    return Progress::Stopped;
                };
                forms.insert(first.form);
            }
        } else {
            match self.extend(next, effort) {
                Some(Extended { found: Some(array), .. }) => return Progress::Found(array),
                Some(extended) => {
                    forms = extended.forms;
                    if let Some(last) = self.stages.last_mut() {
                        last.closed = extended.closed;
                    }
                }
                None => return Progress::Stopped,
            }
        }
        self.stages.push(Stage::new(forms.iter().map(|form| to_text(form, runs)).collect()));
        Progress::Advanced
    }

    /// The extensions of the last stage by a column of `next` levels; `None` when stopped.
    fn extend(&self, next: u16, effort: &mut Effort<'_>) -> Option<Extended> {
        let closable = self.closable(self.stages.len());
        let purse = Purse::new(effort);
        let mut all = Extended::default();
        for portion in self.sketches().chunks(PORTION) {
            let work = |sketch: &Sketch| {
                purse.pay(|spend| {
                    if let Some((missing, levels)) = closable {
                        match completion(sketch, self.strength, levels, missing, spend) {
                            Completion::To(whole) => return Some(Extended::found(whole.array())),
                            Completion::Never => return Some(Extended { closed: 1, ..Extended::default() }),
                            Completion::Stopped => return None,
                            Completion::Open => {}
                        }
                    }
                    let forms = extensions(sketch, self.strength, next, spend)?;
                    Some(Extended { forms, ..Extended::default() })
                })
            };
            // The whole portion is searched, so that the steps made do not depend on the threads.
            let done: Vec<Extended> = portion.par_iter().map(work).collect::<Option<_>>()?;
            for one in done {
                all.forms.extend(one.forms);
                all.closed += one.closed;
                all.found = all.found.or(one.found);
            }
            if all.found.is_some() {
                break;
            }
        }
        Some(all)
    }
}

/// What became of arrays that were to be extended.
#[derive(Default)]
struct Extended {
    forms: BTreeSet<Vec<u8>>,
    closed: u64,
    found: Option<Array>,
}

impl Extended {
    fn found(array: Array) -> Self {
        Self { found: Some(array), ..Self::default() }
    }
}

/// The canonical forms of all extensions by one column.
fn extensions(
    sketch: &Sketch,
    strength: u32,
    levels: u16,
    spend: &mut dyn FnMut(u64) -> bool,
) -> Option<BTreeSet<Vec<u8>>> {
    let Columns::All(all) = columns(sketch, strength, levels, false, spend) else { return None };
    if all.is_empty() {
        return Some(BTreeSet::new());
    }
    let generators = canonical(sketch, spend)?.generators;
    let few = orbit_representatives(all, sketch.rows.len(), usize::from(levels), &generators);
    few.iter().map(|split| canonical(&sketch.with_column(levels, split), spend).map(|c| c.form)).collect()
}

/// The isomorphism classes of the orthogonal arrays of every prefix of a list of columns; a prefix
/// shorter than the strength has full strength.
///
/// # Parameters
/// As [`Census::new`]; `effort` as [`Census::advance`].
///
/// # Result
/// A census that is complete, or as far as the effort went: [`Census::advance`] goes on from there.
///
/// # Guarantee
/// Every class of every stage is there exactly once; the same bytes for any number of threads.
///
/// # Errors
/// As [`Census::new`].
///
/// # Reference
/// Schoen, Eendebak & Nguyen 2010, 'Complete enumeration of pure-level and mixed-level orthogonal
/// arrays', for the columns; isomorphs are rejected by canonical forms (McKay 1981).
///
/// ```
/// use trysquare::floor::{Effort, exhaustion::classes};
/// use trysquare::verify::{Demand, Verdict, certify};
/// let census = classes(&[3, 3, 3, 3, 3, 3, 3], 18, 2, &mut Effort::unlimited())?;
/// assert_eq!(census.numbers(), [1, 1, 4, 12, 10, 8, 3]);
/// for array in census.arrays() {
///     assert_eq!(certify(&array, &Demand::strength(2))?.verdict, Verdict::Orthogonal);
/// }
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn classes(
    order: &[u16],
    runs: u32,
    strength: u32,
    effort: &mut Effort<'_>,
) -> Result<Census, ExhaustionError> {
    let mut census = Census::new(order, runs, strength)?;
    while census.advance(effort) == Progress::Advanced {}
    Ok(census)
}
