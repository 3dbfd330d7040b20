//! Separated cells: CSV (RFC 4180) and its relatives with semicolons, tabs or blanks.

mod read;
mod scan;
mod write;

pub use read::read;
pub(super) use write::{hand_on, push_name, push_number};
pub use write::{write, write_separated};
