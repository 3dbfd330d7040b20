//! Exhaustion: every array of a mix, built column by column, one of each isomorphism class kept.
//!
//! Two arrays are isomorphic when one becomes the other by permuting the runs, the columns of
//! equal levels, and the levels within columns.
//!
//! | question | ask | answer |
//! | --- | --- | --- |
//! | how many classes are there | [`classes`] | a [`Census`], one stage for every prefix of the columns |
//! | is there an array at all | [`decide`] | an array, a [`Record`] that there is none, or a state to go on from |
//! | are there orthogonal Latin squares of order n ≤ 6 | [`latin::search`] | a pair, or a [`Record`] |
//! | is a record true | [`Record::check_light`], [`Record::replay`] | form and stored arrays; the whole search again |
//! | which records are stored | [`stored()`] | texts of `catalog/none-*.json` |
//!
//! A decision may close classes by cliques ([`Census::closing`]): far fewer stages and classes when
//! many columns have equal levels, at the price that the numbers are no longer numbers of all
//! classes. 24 runs with `6^1 2^15` take less than a second so, and do not end without.
//!
//! [`Record::check_light`] does not prove the claim: that no class was forgotten only shows when
//! the search is made again, which [`Record::replay`] does without looking at the stored arrays.
//! The claim reaches further than its mix: there is no array of a mix that has all of these
//! factors either, nor of a higher strength, at that number of runs.

mod canonical;
mod census;
mod columns;
mod completion;
mod decide;
pub mod latin;
mod meter;
mod orbits;
mod record;
mod refine;
mod sketch;
mod stored;
#[cfg(test)]
mod tests;
mod text;

use thiserror::Error;

pub use census::{CENSUS_VERSION, Census, Progress, Stage, classes};
pub use decide::{Decision, decide};
pub use record::{ByColumns, Claim, RECORD_VERSION, Record, RecordError};
pub use sketch::{MAX_LEVELS, MAX_RUNS};
pub use stored::stored;

/// Why a question cannot be put to the engine.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[non_exhaustive]
pub enum ExhaustionError {
    /// The strength is 0 or above the number of columns.
    #[error("strength {strength} makes no sense for {columns} columns: write a strength from 1 to {columns}")]
    Strength {
        /// The strength asked for.
        strength: u32,
        /// The number of columns.
        columns: usize,
    },
    /// Too many runs or levels, or a column of fewer than 2 levels.
    #[error("exhaustion takes 1 to {MAX_RUNS} runs and columns of 2 to {MAX_LEVELS} levels")]
    TooLarge,
    /// A state of another question, or one that was changed.
    #[error("this is no state of that search: {0}")]
    State(String),
}
