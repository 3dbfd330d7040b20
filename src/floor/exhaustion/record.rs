use serde::{Deserialize, Serialize};
use thiserror::Error;

use super::canonical::canonical;
use super::latin::ByLatinSquares;
use super::text::{digest, from_text, to_text};
use super::{Census, Decision, ExhaustionError, Stage, decide};
use crate::floor::Effort;
use crate::mix::Mix;

/// The version of the JSON form of [`Record`].
pub const RECORD_VERSION: u32 = 1;

/// The most bytes of representatives that a record keeps; above that it has numbers and digests.
const MOST_TEXT: usize = 6_000;

/// The budget of [`Record::check_light`].
const LIGHT: u64 = 1 << 30;

/// The record of a search that found no array.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(tag = "by", rename_all = "kebab-case", expecting = "an object with the keys of a record")]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
#[non_exhaustive]
pub enum Record {
    /// Column by column.
    Columns(ByColumns),
    /// By the Latin squares of an order.
    LatinSquares(ByLatinSquares),
}

/// What a record says: there is no array of these runs, this mix and this strength.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Claim {
    /// The number of runs.
    pub runs: u32,
    /// The mix, most levels first.
    pub mix: Mix,
    /// The strength.
    pub strength: u32,
}

/// The record of a search column by column.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct ByColumns {
    /// [`RECORD_VERSION`].
    pub version: u32,
    /// The number of runs.
    pub runs: u32,
    /// The strength.
    pub strength: u32,
    /// The levels of the columns, descending: the order in which they were added.
    pub order: Vec<u16>,
    /// From how many columns on arrays were closed by cliques, see [`Census::closing`].
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub close_from: Option<u32>,
    /// The classes of every prefix; the last one has none.
    pub stages: Vec<Stage>,
    /// The SHA-256 of all the above.
    pub digest: String,
}

/// Why a record is not accepted.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[non_exhaustive]
pub enum RecordError {
    /// The text is not a record.
    #[error("this is not a record of an exhaustion: {0}")]
    Text(String),
    /// Another version.
    #[error("version {0} of the record format is not known here")]
    Version(u32),
    /// A question that the engine does not take.
    #[error(transparent)]
    Question(#[from] ExhaustionError),
    /// The columns do not stand with most levels first.
    #[error("the columns are not ordered with most levels first")]
    Order,
    /// Too few or too many stages.
    #[error("{stages} stages do not fit {columns} columns")]
    Stages {
        /// The number of stages.
        stages: usize,
        /// The number of columns.
        columns: usize,
    },
    /// A stage has classes where it should not, or has none where it should.
    #[error("stage {0} has a number of classes that it cannot have")]
    Classes(usize),
    /// A stage has more closed classes than classes, or cannot have any.
    #[error("stage {0} has a number of closed classes that it cannot have")]
    Closed(usize),
    /// The representatives of a stage are not as many as the classes, or not of its digest.
    #[error("the representatives of stage {0} do not match its number of classes and its digest")]
    Representatives(usize),
    /// A representative that is no array, lacks the strength, is not canonical or out of order.
    #[error("representative {number} of stage {stage} {reason}")]
    Representative {
        /// The stage, from 1.
        stage: usize,
        /// The representative, from 1.
        number: usize,
        /// What is wrong with it.
        reason: &'static str,
    },
    /// The digest of the record is not that of its content.
    #[error("the digest is not that of the content")]
    Digest,
    /// A number about Latin squares that cannot be.
    #[error("the numbers of squares do not make the claim")]
    Squares,
    /// The search, made again, gives something else.
    #[error("the search made again differs from the record{}", stage.map_or(String::new(), |s| format!(" in stage {s}")))]
    Differs {
        /// The first stage that differs, from 1, when there are stages.
        stage: Option<usize>,
    },
    /// The budget is used up: neither accepted nor refuted.
    #[error("the budget ended before the record was checked")]
    Unfinished,
}

impl Claim {
    /// The name of its file in `catalog/`.
    #[must_use]
    pub fn file_name(&self) -> String {
        let mix: String = self.mix.counts().iter().rev().map(|(s, k)| format!("-{s}x{k}")).collect();
        format!("none-{:04}-{}{mix}.json", self.runs, self.strength)
    }
}

impl Record {
    /// Reads a record; nothing of it is checked but its shape.
    ///
    /// # Errors
    /// [`RecordError::Text`] with the place.
    pub fn from_json(text: &str) -> Result<Self, RecordError> {
        serde_json::from_str(text).map_err(|error| RecordError::Text(error.to_string()))
    }

    /// The record as JSON.
    #[must_use]
    pub fn to_json(&self) -> String {
        serde_json::to_string_pretty(self).expect("numbers and texts")
    }

    /// What the record claims.
    ///
    /// # Errors
    /// [`RecordError::Question`] when it is about no mix.
    pub fn claim(&self) -> Result<Claim, RecordError> {
        let (runs, order, strength) = match self {
            Self::Columns(by) => (by.runs, by.order.clone(), by.strength),
            Self::LatinSquares(by) => (u32::from(by.order) * u32::from(by.order), vec![by.order; 4], 2),
        };
        let mix = Mix::new(order).map_err(|_| ExhaustionError::TooLarge)?;
        Ok(Claim { runs, mix, strength })
    }

    /// Checks everything that can be checked without the search: version, shape, digests, and that
    /// the stored representatives are arrays of the strength, canonical and all different. This
    /// does not prove the claim; [`Record::replay`] does.
    ///
    /// # Cost
    /// At most 2^30 steps.
    ///
    /// # Errors
    /// The first rule that is broken; [`RecordError::Unfinished`] when that budget is used up.
    pub fn check_light(&self) -> Result<(), RecordError> {
        match self {
            Self::Columns(by) => by.check_light(),
            Self::LatinSquares(by) => by.check_light(),
        }
    }

    /// Makes the whole search again, without looking at the representatives, and compares.
    ///
    /// # Errors
    /// As [`Record::check_light`]; [`RecordError::Differs`] when the search gives something else,
    /// [`RecordError::Unfinished`] when the budget is used up.
    pub fn replay(&self, effort: &mut Effort<'_>) -> Result<(), RecordError> {
        self.check_light()?;
        match self {
            Self::Columns(by) => by.replay(effort),
            Self::LatinSquares(by) => by.replay(effort),
        }
    }
}

impl ByColumns {
    /// The record of a census whose last stage is empty.
    pub(super) fn new(census: &Census) -> Self {
        let mut stages = census.stages.clone();
        if stages.iter().flat_map(|stage| &stage.representatives).map(String::len).sum::<usize>() > MOST_TEXT
        {
            stages.iter_mut().for_each(|stage| stage.representatives.clear());
        }
        let Census { runs, strength, close_from, ref order, .. } = *census;
        let (version, digest) = (RECORD_VERSION, String::new());
        let mut record = Self { version, runs, strength, order: order.clone(), close_from, stages, digest };
        record.digest = record.own_digest();
        record
    }

    pub(super) fn own_digest(&self) -> String {
        let close_from = self.close_from.map_or(String::new(), |columns| format!(" {columns}"));
        let head = format!("{} {} {} {:?}{close_from}", self.version, self.runs, self.strength, self.order);
        let stages: Vec<String> =
            self.stages.iter().map(|s| format!("{} {} {}", s.classes, s.closed, s.digest)).collect();
        digest([head.as_str()].into_iter().chain(stages.iter().map(String::as_str)))
    }

    fn check_light(&self) -> Result<(), RecordError> {
        if self.version != RECORD_VERSION {
            return Err(RecordError::Version(self.version));
        }
        let mut census = Census::new(&self.order, self.runs, self.strength)?;
        census.close_from = self.close_from;
        census.stages.clone_from(&self.stages);
        if !self.order.is_sorted_by(|a, b| a >= b) {
            return Err(RecordError::Order);
        }
        let (stages, columns) = (self.stages.len(), self.order.len());
        if stages == 0 || stages > columns {
            return Err(RecordError::Stages { stages, columns });
        }
        if let Some(wrong) = (1..=stages).find(|&i| (self.stages[i - 1].classes == 0) != (i == stages)) {
            return Err(RecordError::Classes(wrong));
        }
        if let Some(wrong) = (1..=stages).find(|&i| census.is_overdrawn(i)) {
            return Err(RecordError::Closed(wrong));
        }
        if self.digest != self.own_digest() {
            return Err(RecordError::Digest);
        }
        let mut effort = Effort::new(LIGHT, &|| false);
        for (i, stage) in self.stages.iter().enumerate() {
            let left_out = stage.representatives.is_empty() && stage.classes > 0;
            if !left_out {
                stage.check(i + 1, &census, &mut effort)?;
            }
        }
        Ok(())
    }

    fn replay(&self, effort: &mut Effort<'_>) -> Result<(), RecordError> {
        let mix = Mix::new(self.order.clone()).map_err(|_| ExhaustionError::TooLarge)?;
        let stages = match decide(&mix, self.runs, self.strength, self.close_from, None, effort)? {
            Decision::None(Record::Columns(again)) => again.stages,
            Decision::NotDecided(_) => return Err(RecordError::Unfinished),
            _ => return Err(RecordError::Differs { stage: Some(self.stages.len()) }),
        };
        let alike = |i: usize| match (stages.get(i), self.stages.get(i)) {
            (Some(a), Some(b)) => (a.classes, a.closed, &a.digest) == (b.classes, b.closed, &b.digest),
            (a, b) => a.is_none() && b.is_none(),
        };
        match (0..stages.len().max(self.stages.len())).find(|&i| !alike(i)) {
            Some(i) => Err(RecordError::Differs { stage: Some(i + 1) }),
            None => Ok(()),
        }
    }
}

impl Stage {
    /// Checks the representatives of stage `stage` (from 1) of a census.
    pub(super) fn check(
        &self,
        stage: usize,
        census: &Census,
        effort: &mut Effort<'_>,
    ) -> Result<(), RecordError> {
        let texts = &self.representatives;
        if texts.len() as u64 != self.classes || self.digest != digest(texts.iter().map(String::as_str)) {
            return Err(RecordError::Representatives(stage));
        }
        let levels = census.levels(stage);
        let runs = census.runs as usize;
        for (i, text) in texts.iter().enumerate() {
            let wrong = |reason| RecordError::Representative { stage, number: i + 1, reason };
            let sketch = from_text(text, &levels, runs).ok_or(wrong("is no array of that shape"))?;
            if !sketch.has_strength(census.strength) {
                return Err(wrong("lacks the strength"));
            }
            let own = canonical(&sketch, &mut |steps| effort.spend(steps)).ok_or(RecordError::Unfinished)?;
            if to_text(&own.form, runs) != *text {
                return Err(wrong("is not canonical"));
            }
            if i > 0 && texts[i - 1] >= *text {
                return Err(wrong("does not stand in ascending order"));
            }
        }
        Ok(())
    }
}
