//! Cells as they were received, before anybody says what they mean.

use std::collections::HashMap;
use std::sync::Arc;

use rayon::prelude::*;

use super::decimal::Decimal;
use super::encoding::line_at;
use super::{Place, Separator};

/// Columns that are filled together.
const TILE: usize = 32;

/// A rectangle of cells. Equal texts have equal numbers; the cells stand column by column.
pub(super) struct Table<'a> {
    pub(super) texts: Vec<Arc<str>>,
    cells: Vec<u32>,
    pub(super) rows: usize,
    pub(super) width: usize,
    origin: Origin<'a>,
    /// Names that are no part of the cells (keys of JSON objects).
    pub(super) names: Option<Vec<String>>,
    /// The levels which the file itself declares for its columns.
    pub(super) levels: Option<Vec<u16>>,
    pub(super) remarks: Vec<String>,
}

/// Where a table comes from.
pub(super) enum Origin<'a> {
    /// Lines of separated cells: the text, where each row begins in it, the separator.
    Lines(&'a str, Vec<usize>, Option<Separator>),
    /// JSON.
    Json,
}

impl<'a> Table<'a> {
    /// A table from its cells row by row.
    pub(super) fn new(texts: Texts, by_row: &[u32], width: usize, origin: Origin<'a>) -> Self {
        let rows = by_row.len().checked_div(width).unwrap_or(0);
        let mut cells = vec![0; rows * width];
        // A few columns at a time: each row is then read, and each column written, in whole cache lines.
        cells.par_chunks_mut((rows * TILE).max(1)).enumerate().for_each(|(tile, columns)| {
            for (i, row) in by_row.chunks_exact(width).enumerate() {
                for (column, &cell) in columns.chunks_exact_mut(rows).zip(&row[tile * TILE..]) {
                    column[i] = cell;
                }
            }
        });
        let texts = texts.into_list();
        Self { texts, cells, rows, width, origin, names: None, levels: None, remarks: Vec::new() }
    }

    pub(super) fn column(&self, j: usize) -> &[u32] {
        &self.cells[j * self.rows..(j + 1) * self.rows]
    }

    pub(super) fn text(&self, row: usize, column: usize) -> &str {
        &self.texts[self.column(column)[row] as usize]
    }

    pub(super) fn is_json(&self) -> bool {
        matches!(self.origin, Origin::Json)
    }

    pub(super) fn separator(&self) -> Option<Separator> {
        match self.origin {
            Origin::Lines(_, _, separator) => separator,
            Origin::Json => None,
        }
    }

    pub(super) fn place(&self, row: usize, column: usize) -> Place {
        match &self.origin {
            Origin::Lines(text, starts, _) => {
                Place::Line { line: line_at(text.as_bytes(), starts[row]), column: column + 1 }
            }
            Origin::Json => Place::Run { run: row + 1, column: column + 1 },
        }
    }
}

/// Numbers texts in the order of their first appearance.
pub(super) struct Texts {
    numbers: HashMap<Arc<str>, u32>,
    /// The numbers of one-byte texts, plus one: most cells are such.
    short: Box<[u32; 128]>,
}

impl Texts {
    pub(super) fn new() -> Self {
        Self { numbers: HashMap::new(), short: Box::new([0; 128]) }
    }

    pub(super) fn number(&mut self, text: &str) -> u32 {
        if let &[byte] = text.as_bytes() {
            let known = self.short[usize::from(byte)];
            if known > 0 {
                return known - 1;
            }
            let number = self.slow_number(text);
            self.short[usize::from(byte)] = number + 1;
            return number;
        }
        self.slow_number(text)
    }

    fn slow_number(&mut self, text: &str) -> u32 {
        if let Some(&number) = self.numbers.get(text) {
            return number;
        }
        let number = u32::try_from(self.numbers.len()).expect("fewer than 2^32 different cells");
        self.numbers.insert(text.into(), number);
        number
    }

    fn into_list(self) -> Vec<Arc<str>> {
        let mut list: Vec<(u32, Arc<str>)> = self.numbers.into_iter().map(|(t, n)| (n, t)).collect();
        list.sort_unstable_by_key(|&(n, _)| n);
        list.into_iter().map(|(_, t)| t).collect()
    }
}

/// What the texts of a table mean as numbers.
pub(super) struct Values {
    pub(super) numbers: Vec<Option<Decimal>>,
    pub(super) integers: Vec<Option<i32>>,
    /// For each text the first one that means the same: itself, unless both are equal numbers.
    pub(super) same: Vec<u32>,
    /// Whether any two texts mean the same.
    pub(super) any_same: bool,
}

impl Values {
    pub(super) fn of(texts: &[Arc<str>]) -> Self {
        let numbers: Vec<Option<Decimal>> = texts.iter().map(|t| Decimal::parse(t)).collect();
        let integers = numbers.iter().map(|n| n.as_ref().and_then(Decimal::to_i32)).collect();
        let mut first = HashMap::new();
        let same: Vec<u32> = (0u32..)
            .zip(&numbers)
            .map(|(i, n)| n.as_ref().map_or(i, |n| *first.entry(n).or_insert(i)))
            .collect();
        let any_same = (0u32..).zip(&same).any(|(i, &s)| i != s);
        Self { integers, same, any_same, numbers }
    }

    pub(super) fn is_number(&self, text: u32) -> bool {
        self.numbers[text as usize].is_some()
    }
}

/// How a column runs from top to bottom.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Sequence {
    /// 0, 1, 2, … or 1, 2, 3, …
    InOrder,
    /// These numbers in another order.
    Permutation,
    /// Any other cells, all different.
    Different,
    /// Some cell occurs twice.
    Repeating,
}

/// Counts cells by what they mean; one counter serves all columns of a table.
pub(super) struct Counter<'v> {
    values: &'v Values,
    counts: Vec<u32>,
}

impl<'v> Counter<'v> {
    pub(super) fn new(values: &'v Values) -> Self {
        Self { values, counts: vec![0; values.same.len()] }
    }

    /// The different meanings among `cells` in the order of appearance, each with its count.
    pub(super) fn count(&mut self, cells: &[u32]) -> Vec<(u32, u32)> {
        let mut found = Vec::new();
        for &cell in cells {
            let meaning = self.values.same[cell as usize];
            let count = &mut self.counts[meaning as usize];
            if *count == 0 {
                found.push((meaning, 0));
            }
            *count = count.saturating_add(1);
        }
        for (meaning, count) in &mut found {
            *count = std::mem::take(&mut self.counts[*meaning as usize]);
        }
        found
    }

    pub(super) fn sequence(&mut self, cells: &[u32]) -> Sequence {
        let found = self.count(cells);
        if found.len() < cells.len() {
            return Sequence::Repeating;
        }
        let integers: Option<Vec<i32>> = cells.iter().map(|&c| self.values.integers[c as usize]).collect();
        let Some(integers) = integers else { return Sequence::Different };
        let low = integers.iter().min().copied().unwrap_or(0);
        let high = integers.iter().max().copied().unwrap_or(0);
        // All different, so the span decides whether a number is missing.
        if !(0..=1).contains(&low) || i64::from(high) - i64::from(low) + 1 != integers.len() as i64 {
            Sequence::Different
        } else if integers.is_sorted() {
            Sequence::InOrder
        } else {
            Sequence::Permutation
        }
    }
}
