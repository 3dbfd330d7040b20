//! Exact decisions: whether an array with a prescribed group of symmetries exists at all.
//!
//! | file | what it does |
//! | --- | --- |
//! | `action` | the group on the runs, the kinds of columns, dimensions taken and left |
//! | `shares` | how many columns of each kind: every way that the dimensions allow |
//! | `generate` | all columns of a kind orthogonal to given ones, up to renaming of levels |
//! | `classes` | the symmetries that are left when columns are chosen |
//! | `search` | branching over the orbits of these symmetries |
//! | `matrix` | cliques on bit sets with colour bounds |
//! | `meter` | a share of a budget |
//! | `decide` | the first two columns, then the lists |

mod action;
mod classes;
mod decide;
mod generate;
mod matrix;
mod meter;
mod search;
mod shares;

pub use decide::{ExactHunt, Outcome, decide};

pub(super) use action::{Action, Column, Kind, fits};
pub(super) use meter::Meter;
pub(super) use search::{Answer, Search, Store, joint};

/// The largest number of runs that is searched.
pub const MAX_RUNS: u32 = 128;
