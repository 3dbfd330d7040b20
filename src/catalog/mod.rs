//! The shelf: what can be had at N runs.
//!
//! | file | what lives there |
//! | --- | --- |
//! | `seed` | the stored starters of the folder `catalog/` |
//! | `books` | which Hadamard matrices and difference schemes can be had |
//! | `latin_book` | how many mutually orthogonal Latin squares can be had |
//! | `strength_two`, `strength_three`, `strength_any` | the families and compositions offered at N runs |
//! | `stored` | stored arrays and codes |
//! | `compositions` | products and juxtaposition, which keep any strength |
//! | `fit` | the exact packing of a mix into a parent |
//! | `candidates` | the maximal ones among the mixes offered |
//! | `arrange` | from a packing to a recipe |
//! | `beyond` | the page of mixes beyond the published ones known here |
//! | `shelf` | all of it together, worked out on demand |

mod arrange;
mod bag;
mod beyond;
mod books;
mod candidates;
mod compositions;
mod fit;
mod latin_book;
mod page;
pub mod seed;
mod shelf;
mod stored;
mod strength_any;
mod strength_three;
mod strength_two;

pub use arrange::arrange;
pub use bag::Bag;
pub use beyond::beyond_page;
pub use books::{Best, HadamardBook, SchemeBook, standard_group};
pub use fit::{Host, Packer, Placement};
pub use latin_book::LatinBook;
pub use page::page;
pub use shelf::{CLOSED, Parent, Shelf, Variant};
