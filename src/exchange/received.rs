//! [`Received`]: an array from elsewhere, and what the file was taken to be.

use std::fmt::Write as _;
use std::sync::Arc;

use super::Separator;
use super::error::{count, one_line};
use crate::array::Array;

/// An array from elsewhere, with what the file was taken to be, so that a person can disagree.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Received {
    /// The factors in the order of the file (or of [`ReadOptions::only`](super::ReadOptions::only)).
    pub array: Array,
    /// The names of the factors, if the file has names.
    pub names: Option<Vec<String>>,
    /// For each factor the levels that occur, as (symbol in the array, cell in the file), by
    /// symbol.
    ///
    /// The symbols follow the numbers in ascending order, then the texts in the order of their
    /// code points: whatever the order of the runs, the same cell gets the same symbol.
    pub level_names: Vec<Vec<(u16, Arc<str>)>>,
    /// The columns that number the runs, by name or as `column 1`.
    pub run_columns: Vec<String>,
    /// The columns left out on demand, by name or as `column 1`.
    pub left_out: Vec<String>,
    /// Whether the first line was taken as a header.
    pub header: bool,
    /// The separator; `None` when every line is one cell, and for JSON.
    pub separator: Option<Separator>,
    /// Whether the file is JSON.
    pub json: bool,
    /// Anything else that was decided about the file and might surprise.
    pub remarks: Vec<String>,
}

impl Received {
    /// The cell in the file that stands for a symbol of the array; `None` when the level does not
    /// occur.
    #[must_use]
    pub fn level_name(&self, factor: usize, symbol: u16) -> Option<&str> {
        let levels = self.level_names.get(factor)?;
        let at = levels.binary_search_by_key(&symbol, |&(s, _)| s).ok()?;
        Some(&levels[at].1)
    }

    /// What the file was taken to be, in one line.
    #[must_use]
    pub fn describe(&self) -> String {
        const SHOWN: usize = 24;
        let list = |items: &[String], none: &str| {
            let more = if items.len() > SHOWN { ", …" } else { "" };
            let shown = items[..items.len().min(SHOWN)].join(", ");
            if items.is_empty() { none.to_owned() } else { shown + more }
        };
        let mut text = if self.json {
            "JSON".to_owned()
        } else {
            format!("header: {}", if self.header { "yes" } else { "no" })
        };
        if !self.json || !self.run_columns.is_empty() {
            let _ = write!(text, "; run column: {}", list(&self.run_columns, "none"));
        }
        if !self.left_out.is_empty() {
            let _ = write!(text, "; left out: {}", list(&self.left_out, "none"));
        }
        if !self.json {
            let separator = self.separator.map_or("none".to_owned(), |s| s.to_string());
            let _ = write!(text, "; separator: {separator}");
        }
        let (runs, factors) = (self.array.runs(), self.array.factors());
        let _ = write!(text, "; {} × {}; levels ", count(runs, "run"), count(factors, "factor"));
        if factors <= SHOWN {
            let levels: Vec<String> = self.array.levels().iter().map(u16::to_string).collect();
            text.push_str(&levels.join(" "));
        } else {
            let _ = write!(text, "{}", self.array.mix());
        }
        if let Some(names) = &self.names {
            let _ = write!(text, "; factors {}", list(names, "none"));
        }
        one_line(&text)
    }
}
