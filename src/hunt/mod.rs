//! Searches for what no theorem gives.
//!
//! | file | what it looks for |
//! | --- | --- |
//! | `beside` | columns of two and three levels beside given ones, under a group that permutes them |
//! | `blocks` | two-level columns beside one p-level column in 4p runs |
//! | `campaign` | a hunt as a list of tasks: several methods and groups in turn, resumable, in parts |
//! | `circulants` | four rows for the array of Goethals and Seidel |
//! | `exact` | arrays with a prescribed group, or the proof that there are none |
//! | `extend` | further columns for a given array, or the proof that there are none |
//! | `flats` | slices, unions of flats, that are an array of strength 3 together |
//! | `latin` | quasi-difference matrices and V vectors |
//! | `near` | plans for a budget that no array fits |
//! | `quadratics` | difference schemes over Z3 in blocks of order 3 |
//! | `schemes` | difference schemes with a prescribed symmetry |
//! | `slices` | slices of 16 runs from Hadamard matrices, an array of strength 3 together |
//! | `subspaces` | subspaces of which any t are independent |
//! | `symmetric` | arrays of strength 2 with a prescribed group |
//! | `t_matrices` | T-matrices, to be multiplied with Williamson's |
//! | `types` | two-level columns beside one p-level column in 4p runs, under a group that turns the types |
//! | `write` | what was found as the text of a seed |
//!
//! `frame` (runs as points of a box), `splits`, `halves` and `clique` serve `beside`.
//!
//! Every search takes a seed and answers the same for the same request on every machine. What was
//! found lies in `catalog/`; the line `source` there names the command, an example of this crate.

pub mod beside;
pub mod blocks;
pub mod campaign;
mod circulants;
mod clique;
pub mod exact;
pub mod extend;
pub mod flats;
mod frame;
mod halves;
pub mod latin;
pub mod near;
mod quadratics;
mod random;
mod schemes;
pub mod slices;
mod splits;
pub mod subspaces;
pub mod symmetric;
mod t_matrices;
pub mod types;
mod write;

pub use crate::floor::Effort;
pub use circulants::FourCirculants;
pub use quadratics::Quadratics;
pub use random::Random;
pub use schemes::{SchemeHunt, Symmetry};
pub use t_matrices::t_matrices;
pub use write::{circulants_seed, orbits_seed, scheme_seed};
