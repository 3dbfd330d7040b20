//! Arrays in and out of files, one file per format.
//!
//! * [`csv`]: separated cells, the form to hand on and the form in which arrays arrive;
//! * [`json`]: arrays of arrays, and the objects that Trysquare prints;
//! * [`text`]: an aligned table for people;
//! * [`document`]: the JSON objects that the commands print, for programs;
//! * [`read_any`]: whatever it is.
//!
//! Reading guesses what a file is, says so in [`Received`], and refuses to guess where a wrong
//! guess could change the verdict on the array.

mod columns;
pub mod csv;
mod decimal;
mod detect;
pub mod document;
mod encoding;
mod error;
mod interpret;
pub mod json;
mod options;
mod received;
mod separator;
mod symbols;
mod table;
pub mod text;

pub use error::{Place, ReadError};
pub use options::{Header, HeaderOption, ReadOptions, RunColumn, default_name};
pub use received::Received;
pub use separator::{Separator, SeparatorError};
pub use symbols::{Symbols, SymbolsError};

/// Reads an array from a file of unknown format: JSON when the text begins like a JSON array of
/// runs or an object, separated cells otherwise.
///
/// # Errors
/// As [`json::read`] or [`csv::read`].
pub fn read_any(bytes: &[u8], options: &ReadOptions) -> Result<Received, ReadError> {
    if json::looks_like_json(encoding::decode(bytes)?) {
        json::read(bytes, options)
    } else {
        csv::read(bytes, options)
    }
}
