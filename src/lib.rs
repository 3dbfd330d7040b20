//! Trysquare makes the smallest orthogonal array for a list of factors and certifies arrays, its
//! own and other people's.
//!
//! An orthogonal array of strength t is a list of N runs of k factors in which, for every t of the
//! factors, every combination of their levels occurs equally often. The factors may have different
//! numbers of levels; their multiset is the [`mix`].
//!
//! * Ask for an array: [`seek::seek`]. The answer holds the [`array`](mod@array), the
//!   [`recipe`] that built it, the [`floor`] that bounds it from below, with its proof, and the
//!   certificate of the judges.
//! * Judge an array: [`verify::certify`]; check a certificate again: [`verify::recheck`].
//! * Read and write: [`exchange`].
//! * Build one yourself: [`construct`], one construction per file, named as in the literature.
//! * See what can be had at N runs: [`catalog::Shelf`].
//!
//! ```
//! use trysquare::seek::{Outcome, Request, Verdict, seek};
//!
//! let Outcome::Found(answer) = seek(&Request::new("2^1 3^7".parse()?))? else { panic!() };
//! assert_eq!(answer.array.runs(), 18);
//! assert_eq!(answer.verdict, Verdict::ProvedSmallest);
//! # Ok::<(), Box<dyn std::error::Error>>(())
//! ```
//!
//! No function keeps global state; a [`catalog::Shelf`] may be shared between threads. The same
//! request gives the same bytes for any number of threads. Outcomes are values; errors are for
//! input that cannot be read and requests that make no sense.
#![forbid(unsafe_code)]

pub mod algebra;
pub mod array;
pub mod catalog;
#[cfg(feature = "cli")]
pub mod cli;
pub mod construct;
pub mod exchange;
pub mod floor;
pub mod hunt;
pub mod mix;
#[cfg(feature = "plan")]
pub mod plan;
pub mod recipe;
pub mod report;
pub mod seek;
pub mod verify;
