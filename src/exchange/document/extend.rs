use serde::Serialize;

use super::seek::Rows;
use crate::array::Array;
use crate::exchange::Symbols;
use crate::hunt::extend::{Extended, Standing, Wanted};
use crate::mix::Mix;
use crate::verify::Certificate;

/// Which more columns fit beside given ones.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct ExtendDocument<'a> {
    /// The number of runs.
    pub runs: usize,
    /// The strength that is kept.
    pub strength: u32,
    /// What became of it.
    pub verdict: ExtendVerdict,
    /// How many factors were given; they come first.
    pub given: usize,
    /// What was looked for, and how many columns of it could be added.
    pub kinds: &'a [KindPart],
    /// The number of levels of each factor, the new ones last.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub levels: Option<&'a [u16]>,
    /// One array of level symbols per run.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub array: Option<Rows<'a>>,
    /// What the judges found.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub certificate: Option<&'a Certificate>,
}

/// What became of an extension.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
#[serde(rename_all = "kebab-case")]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub enum ExtendVerdict {
    /// At least one column was added.
    Extended,
    /// Proved: no column of what was looked for exists.
    NoneExists,
    /// The search ended before a column was found or excluded.
    LimitReached,
}

/// How many columns of a kind could be added.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct KindPart {
    /// What was looked for: a mix, or a number of levels.
    pub wanted: String,
    /// How many columns were added.
    pub added: usize,
    /// What is proved about that number.
    pub standing: KindStanding,
}

/// What is proved about a number of columns.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
#[serde(rename_all = "kebab-case")]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub enum KindStanding {
    /// All that were wanted.
    Complete,
    /// Proved to be the largest number.
    Maximum,
    /// Proved that no further column fits beside these; other columns may be more.
    Maximal,
    /// The most that were met; more may exist.
    Met,
}

impl KindPart {
    /// What became of one request.
    #[must_use]
    pub fn new(wanted: &[Wanted], found: &Extended) -> Self {
        let levels: Vec<u16> =
            wanted.iter().flat_map(|w| std::iter::repeat_n(w.levels, w.most.unwrap_or(1))).collect();
        let open = wanted.iter().all(|w| w.most.is_none());
        let wanted = match (wanted, open) {
            ([one], true) => format!("columns of {} levels", one.levels),
            _ => Mix::new(levels).map_or_else(|_| String::new(), |m| m.to_string()),
        };
        let (added, standing) = match found {
            Extended::Found { added, standing, .. } => (added.len(), *standing),
            Extended::NoneExists => (0, Standing::Maximum),
            Extended::GaveUp => (0, Standing::Met),
        };
        let standing = match standing {
            Standing::Complete => KindStanding::Complete,
            Standing::Maximum => KindStanding::Maximum,
            Standing::Maximal => KindStanding::Maximal,
            Standing::Met => KindStanding::Met,
        };
        Self { wanted, added, standing }
    }

    /// The same in words.
    #[must_use]
    pub fn words(&self) -> String {
        match (self.added, self.standing) {
            (0, KindStanding::Maximum) => "none exists (proved)".to_owned(),
            (0, _) => "none met; not decided".to_owned(),
            (n, KindStanding::Complete) => format!("{n} added, as asked"),
            (n, KindStanding::Maximum) => format!("{n} added, more are impossible (proved)"),
            (n, KindStanding::Maximal) => {
                format!("{n} added, none fits beside these (proved); others may be more")
            }
            (n, KindStanding::Met) => format!("{n} added, the most that were met"),
        }
    }
}

impl<'a> ExtendDocument<'a> {
    /// The document of what was found for `given`.
    #[must_use]
    pub fn new(
        given: &'a Array,
        strength: u32,
        kinds: &'a [KindPart],
        found: &'a Extended,
        certificate: Option<&'a Certificate>,
        symbols: Symbols,
    ) -> Self {
        let array = match found {
            Extended::Found { array, .. } => Some(array),
            _ => None,
        };
        Self {
            runs: given.runs(),
            strength,
            verdict: match found {
                Extended::Found { .. } => ExtendVerdict::Extended,
                Extended::NoneExists => ExtendVerdict::NoneExists,
                Extended::GaveUp => ExtendVerdict::LimitReached,
            },
            given: given.factors(),
            kinds,
            levels: array.map(Array::levels),
            array: array.map(|array| Rows { array, symbols }),
            certificate,
        }
    }
}
