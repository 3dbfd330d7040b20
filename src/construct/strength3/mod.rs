//! Strength 3 beyond linear arrays, and the ways up and down in strength.
//!
//! Which one to take:
//!
//! * Two-level factors only: [`foldover`] of the best array of strength 2 (and of strength 2u for
//!   2u + 1); [`derived`] is the way back.
//! * One s-level factor beside two-level ones: [`even_level`] for even s takes every Hadamard
//!   order; for odd s, [`eight_runs_per_level`] in 8s runs.
//! * Two factors with many levels: [`two_grids`] beside two-level ones, [`grids`] beside factors
//!   whose levels are the elements of any abelian group.
//! * [`slices`] when arrays of strength 2 are at hand whose union has strength 3 (cosets of a
//!   code, for example).
//! * [`copies`] and [`copies_into`] are always possible and rarely the smallest; any strength.
//!
//! [`split`](super::compose::split) keeps strength 3 when the column is split by an array of
//! strength 3 or by a full factorial of two factors, and
//! [`merge_levels`](super::compose::merge_levels) always does.
//!
//! Every function is accompanied by a `…_levels` function that tells the levels of the result, in
//! column order, from the levels of the inputs, without building anything.

mod copies;
mod derived;
mod eight_runs_per_level;
mod even_level;
mod foldover;
mod grids;
mod slices;

pub use copies::{copies, copies_into, copies_into_levels, copies_levels};
pub use derived::{derived, derived_levels};
pub use eight_runs_per_level::{eight_runs_per_level, eight_runs_per_level_levels};
pub use even_level::{even_level, even_level_levels};
pub use foldover::{foldover, foldover_levels};
pub use grids::{grids, grids_levels, two_grids, two_grids_levels};
pub use slices::{slices, slices_levels};

use super::ConstructError;

/// An error unless all levels are 2.
fn all_two(construction: &'static str, array: &str, levels: &[u16]) -> Result<(), ConstructError> {
    match levels.iter().find(|&&s| s != 2) {
        None => Ok(()),
        Some(s) => {
            Err(ConstructError::condition(construction, format!("all levels of {array} are 2, not {s}")))
        }
    }
}
