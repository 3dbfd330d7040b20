//! [`ReadError`]: why a file is not read as an array.

use std::fmt;

use thiserror::Error;

use crate::array::ArrayError;

/// A place in a received file, all numbers from 1.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Place {
    /// A line of the file (where the row begins, when a quoted cell spans lines) and a cell in it.
    Line {
        /// The line.
        line: usize,
        /// The column of the table, that is the number of the cell.
        column: usize,
    },
    /// A run of a JSON array and a cell in it.
    Run {
        /// The run.
        run: usize,
        /// The column of the table.
        column: usize,
    },
}

impl fmt::Display for Place {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Line { line, column } => write!(f, "line {line}, column {column}"),
            Self::Run { run, column } => write!(f, "run {run}, column {column}"),
        }
    }
}

/// Why a received file is not read as an array: the place, what is wrong, what to do.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[non_exhaustive]
pub enum ReadError {
    /// Nothing, or nothing but blank lines and comments.
    #[error("the file is empty; it should hold one line per run")]
    Empty,
    /// A header, but no run.
    #[error(
        "the file has no runs: its only line, line {line}, seems to name the columns; if that line is a run, say so with --header no"
    )]
    NoRuns {
        /// The line that was found.
        line: usize,
    },
    /// A text encoding other than UTF-8.
    #[error("the file is encoded in {0}; save it as UTF-8")]
    Encoding(&'static str),
    /// Bytes that are no UTF-8 text.
    #[error("line {line}: byte {byte} of the file is {what}; {advice}")]
    NotText {
        /// The line.
        line: usize,
        /// The place of the byte in the file, from 1.
        byte: usize,
        /// What stands there.
        what: &'static str,
        /// What to do.
        advice: &'static str,
    },
    /// A quote that nobody closes.
    #[error(
        "{place}: the quote that opens here is never closed; close it, or double every quote inside the cell"
    )]
    OpenQuote {
        /// Where the quote opens.
        place: Place,
    },
    /// Something between the closing quote and the next separator.
    #[error(
        "{place}: text after the closing quote; double every quote inside the cell, or name the right --separator"
    )]
    AfterQuote {
        /// The cell.
        place: Place,
    },
    /// A row with another number of cells than the others.
    #[error(
        "{place}: the row has {}, the table has {}; every row needs {expected}", count(*found, "cell"), count(*expected, "column")
    )]
    Ragged {
        /// The first cell that is missing or too many.
        place: Place,
        /// The number of columns of the table.
        expected: usize,
        /// The number of cells of the row.
        found: usize,
    },
    /// A cell with nothing in it.
    #[error(
        "{place}: the cell is empty; every run needs a level of every factor, and every column of a header a name"
    )]
    EmptyCell {
        /// The cell.
        place: Place,
    },
    /// A factor whose level never changes.
    #[error("{place}{}: the factor has one level only, {value:?} in every run; leave it out with --leave-out {}, or give the number of levels it should have with --levels", named(.name), call(.name, .column))]
    OneLevel {
        /// Its first cell.
        place: Place,
        /// The column of the table, from 1.
        column: usize,
        /// Its name, if it has one.
        name: Option<String>,
        /// The only level.
        value: String,
    },
    /// A factor with more levels than an array holds.
    #[error("{place}{}: {found} different levels, a factor has at most 65535; if the column is no factor, leave it out with --leave-out {}", named(.name), call(.name, .column))]
    TooManyLevels {
        /// Its first cell.
        place: Place,
        /// The column of the table, from 1.
        column: usize,
        /// Its name, if it has one.
        name: Option<String>,
        /// The number of different levels.
        found: usize,
    },
    /// A factor with more levels than were declared for it.
    #[error("{place}{}: {found} different levels, but {declared} are declared for the factor", named(.name))]
    Declared {
        /// Its first cell.
        place: Place,
        /// Its name, if it has one.
        name: Option<String>,
        /// The number of different levels.
        found: usize,
        /// The number of levels declared.
        declared: u16,
    },
    /// Levels declared for another number of factors than the file has.
    #[error(
        "levels are declared for {declared} factors, the file has {factors}; correct --levels, or name run numbers and responses with --run-column and --leave-out"
    )]
    DeclaredFactors {
        /// The number of factors declared.
        declared: usize,
        /// The number of factors found.
        factors: usize,
    },
    /// Two ways to read the file that could lead to different verdicts.
    #[error("{place}: {what}; {advice}")]
    Ambiguous {
        /// Where the ways part.
        place: Place,
        /// What cannot be told.
        what: String,
        /// What to type.
        advice: String,
    },
    /// An option names a column that is not there.
    #[error("there is no column {wanted:?}; {have}")]
    NoColumn {
        /// The name or number given.
        wanted: String,
        /// What there is.
        have: String,
    },
    /// An option names a column, and several have that name.
    #[error("columns {first} and {second} are both named {wanted:?}; give the number instead")]
    TwoColumns {
        /// The name given.
        wanted: String,
        /// The first such column, from 1.
        first: usize,
        /// The second, from 1.
        second: usize,
    },
    /// The options leave no column.
    #[error("no column is left to be a factor; leave out fewer")]
    NoFactors,
    /// Not the JSON of an array.
    #[error("line {line}, column {column}: {what}")]
    Json {
        /// The line.
        line: usize,
        /// The column, in bytes.
        column: usize,
        /// What is wrong there.
        what: String,
    },
    /// What was read breaks a rule of [`Array`](crate::array::Array).
    #[error(transparent)]
    Array(#[from] ArrayError),
}

fn named(name: &Option<String>) -> String {
    name.as_ref().map_or_else(String::new, |n| format!(" ({})", one_line(n)))
}

/// A text without anything that would break a line or move a cursor.
pub(super) fn one_line(text: &str) -> String {
    text.replace(char::is_control, " ")
}

/// `1 cell`, `2 cells`.
pub(super) fn count(n: usize, what: &str) -> String {
    format!("{n} {what}{}", if n == 1 { "" } else { "s" })
}

fn call(name: &Option<String>, column: &usize) -> String {
    match name {
        Some(n) if n.contains(|c: char| c.is_whitespace() || c.is_control()) => format!("{n:?}"),
        Some(n) => n.clone(),
        None => column.to_string(),
    }
}
