//! Searches for what no recipe yields.
//!
//! | file | looks for |
//! | --- | --- |
//! | `subspaces` | subspaces any t of which are independent: linear arrays of strength t |
//! | `flats` | slices, unions of flats, that are an array of strength 3 together |
//! | `slices` | slices of 16 runs from Hadamard matrices, an array of strength 3 together |

pub mod flats;
mod random;
pub mod slices;
pub mod subspaces;
