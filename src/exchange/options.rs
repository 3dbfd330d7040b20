//! What a caller can say about the writing and reading of files.

use std::borrow::Cow;
use std::io;

use super::Separator;
use crate::mix::Mix;

/// The first line of a written file.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Header<'a> {
    /// No line of names.
    None,
    /// The names `F1, F2, …, Fk`.
    #[default]
    Default,
    /// These names, one per factor.
    Names(&'a [String]),
}

impl<'a> Header<'a> {
    /// The names for `factors` factors.
    pub(super) fn names(self, factors: usize) -> io::Result<Option<Cow<'a, [String]>>> {
        match self {
            Self::None => Ok(None),
            Self::Default => Ok(Some((1..=factors).map(default_name).collect())),
            Self::Names(names) if names.len() == factors => Ok(Some(names.into())),
            Self::Names(names) => Err(io::Error::new(
                io::ErrorKind::InvalidInput,
                format!("{} names for {factors} factors; give one name per factor", names.len()),
            )),
        }
    }
}

/// The name a factor gets when nobody names it, `number` counting from 1.
#[must_use]
pub fn default_name(number: usize) -> String {
    format!("F{number}")
}

/// Whether a name is one that [`default_name`] gives.
pub(super) fn is_default_name(name: &str) -> bool {
    name.strip_prefix('F').is_some_and(|n| !n.is_empty() && n.bytes().all(|b| b.is_ascii_digit()))
}

/// Whether the first line names the columns.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum HeaderOption {
    /// Find out; a file that can be read both ways is refused.
    #[default]
    Auto,
    /// It does.
    Yes,
    /// It is a run.
    No,
}

/// Which column numbers the runs and is no factor.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub enum RunColumn {
    /// Find out; a file that can be read both ways is refused.
    #[default]
    Auto,
    /// None: every column is a factor.
    No,
    /// The first column.
    First,
    /// The column of this name, or of this number counted from 1.
    Column(String),
}

/// What the caller knows about a received file; the default knows nothing and finds out.
///
/// Columns are named as in the header or by their number, counted from 1 over the columns of the
/// file; where both fit, the name wins.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct ReadOptions {
    /// Whether the first line is a header (`--header yes|no`).
    pub header: HeaderOption,
    /// The run-number column (`--run-column no|first|NAME`).
    pub run_column: RunColumn,
    /// The separator (`--separator comma|semicolon|tab|blank`), found out when `None`.
    pub separator: Option<Separator>,
    /// Columns which are no factors, responses for example (`--leave-out NAME`).
    pub leave_out: Vec<String>,
    /// The factors, in this order, when only some columns are (`--only NAME`).
    pub only: Option<Vec<String>>,
    /// The number of levels of each factor (`--levels MIX`), in the order of the factors; without
    /// it a factor has the levels that occur.
    pub levels: Option<Mix>,
}
