//! Reading separated cells.

use std::collections::HashMap;

use ::csv::{ReaderBuilder, StringRecord};

use super::scan::{check_quotes, guess_separator};
use crate::exchange::encoding::{decode, line_at};
use crate::exchange::interpret::interpret;
use crate::exchange::table::{Origin, Table, Texts};
use crate::exchange::{Place, ReadError, ReadOptions, Received, Separator};

/// Reads an array from separated cells, whoever wrote them.
///
/// What is read:
///
/// * UTF-8, with or without byte-order mark; lines end with LF, CR or CR LF;
/// * cells separated by commas, semicolons, tabs or blanks, quoted as in RFC 4180; blanks around a
///   cell are no part of it;
/// * any symbols: numbers (compared exactly as written, `1` and `1.0` are one level) or texts;
/// * a header or none, a run-number column or none;
/// * separators at line ends where the header and all other rows have no cell are dropped, blank
///   lines and lines of separators only are skipped;
/// * a line that begins with `#` is a comment, unless it has as many cells as the table: then it is
///   a header when its first cell is just `#`, and refused otherwise.
///
/// What was taken for what stands in [`Received`]. Memory stays proportional to the file.
///
/// # Errors
/// A [`ReadError`] with line and column; [`ReadError::Ambiguous`] when the file can be read in two
/// ways that may lead to different verdicts, with the option that decides.
///
/// ```
/// use trysquare::exchange::{csv, ReadOptions};
/// let file = b"Run;oven;temp\r\n1;low;12,5\r\n2;low;20\r\n3;high;12,5\r\n4;high;20\r\n";
/// let received = csv::read(file, &ReadOptions::default())?;
/// assert_eq!(
///     received.describe(),
///     "header: yes; run column: Run; separator: semicolon; 4 runs × 2 factors; levels 2 2; \
///      factors oven, temp"
/// );
/// # Ok::<(), trysquare::exchange::ReadError>(())
/// ```
pub fn read(bytes: &[u8], options: &ReadOptions) -> Result<Received, ReadError> {
    let text = decode(bytes)?;
    let separator = options.separator.or_else(|| guess_separator(text));
    let parse_as = separator.unwrap_or(Separator::Comma);
    check_quotes(text, parse_as)?;
    let lines = Lines { text, separator: parse_as };
    let shape = lines.shape()?;
    interpret(lines.table(&shape, separator)?, options)
}

struct Lines<'a> {
    text: &'a str,
    separator: Separator,
}

/// One row as it stands in the file.
struct Row<'r> {
    start: usize,
    cells: &'r StringRecord,
    /// The number of cells, blanks separating none that are empty.
    len: usize,
    /// The number of cells up to the last that is not empty.
    filled: usize,
    /// Whether an empty cell stands before a filled one.
    gaps: bool,
    comment: bool,
}

struct Shape {
    width: usize,
    comments: usize,
    /// Rows of separators only.
    bare: usize,
}

impl<'a> Lines<'a> {
    /// Hands every row to `take`, blank ones with no cell filled.
    fn each(&self, mut take: impl FnMut(Row<'_>) -> Result<(), ReadError>) -> Result<(), ReadError> {
        let bytes = self.text.as_bytes();
        let mut reader = ReaderBuilder::new()
            .has_headers(false)
            .flexible(true)
            .delimiter(self.separator.byte())
            .from_reader(bytes);
        let mut record = StringRecord::new();
        loop {
            let from = reader.position().byte() as usize;
            // Neither I/O nor UTF-8 can fail: the text is in memory, and is one.
            if !reader.read_record(&mut record).unwrap_or(false) {
                return Ok(());
            }
            let ends = bytes[from..].iter().take_while(|b| matches!(b, b'\n' | b'\r')).count();
            let start = from + ends;
            let (mut len, mut filled, mut full) = (0, 0, 0);
            for cell in cells(&record, self.separator) {
                len += 1;
                if !cell.is_empty() {
                    filled = len;
                    full += 1;
                }
            }
            let comment = bytes.get(start) == Some(&b'#');
            take(Row { start, cells: &record, len, filled, gaps: full < filled, comment })?;
        }
    }

    /// The width is the most frequent number of cells, the first of them in case of a tie.
    fn shape(&self) -> Result<Shape, ReadError> {
        let mut widths: HashMap<usize, (usize, usize)> = HashMap::new();
        let mut hashed: HashMap<usize, usize> = HashMap::new();
        let mut bare = 0;
        self.each(|row| {
            if row.filled == 0 {
                bare += usize::from(row.len > 1);
            } else if row.comment {
                *hashed.entry(row.filled).or_insert(0) += 1;
            } else {
                let order = widths.len();
                widths.entry(row.filled).or_insert((0, order)).0 += 1;
            }
            Ok(())
        })?;
        let most = widths.iter().max_by_key(|(_, (count, order))| (*count, std::cmp::Reverse(*order)));
        let Some((&width, _)) = most else { return Err(ReadError::Empty) };
        let comments = hashed.iter().filter(|(w, _)| **w != width).map(|(_, n)| n).sum();
        Ok(Shape { width, comments, bare })
    }

    fn table(&self, shape: &Shape, separator: Option<Separator>) -> Result<Table<'a>, ReadError> {
        let width = shape.width;
        let mut trailing = 0;
        let (mut texts, mut by_row, mut starts) = (Texts::new(), Vec::new(), Vec::new());
        self.each(|row| {
            if row.filled == 0 || (row.comment && row.filled != width) {
                return Ok(());
            }
            self.check(&row, width, starts.is_empty())?;
            trailing += usize::from(row.len > width);
            starts.push(row.start);
            by_row.extend(cells(row.cells, self.separator).take(width).map(|cell| texts.number(cell)));
            Ok(())
        })?;
        let mut table = Table::new(texts, &by_row, width, Origin::Lines(self.text, starts, separator));
        if shape.comments > 0 {
            table.remarks.push(format!("lines that begin with #, taken as comments: {}", shape.comments));
        }
        if shape.bare > 0 {
            table.remarks.push(format!("lines without any filled cell, skipped: {}", shape.bare));
        }
        if trailing > 0 {
            table.remarks.push(format!("lines with empty cells at the end, left out: {trailing}"));
        }
        Ok(table)
    }

    /// The first row may have empty cells: it may be a header.
    fn check(&self, row: &Row<'_>, width: usize, first: bool) -> Result<(), ReadError> {
        let line = || line_at(self.text.as_bytes(), row.start);
        if row.filled > width || row.len < width {
            let column = width.min(row.len) + 1;
            let place = Place::Line { line: line(), column };
            let found = if row.filled > width { row.filled } else { row.len };
            return Err(ReadError::Ragged { place, expected: width, found });
        }
        if (row.gaps || row.filled < width) && !first {
            let empty = cells(row.cells, self.separator).position(str::is_empty);
            let place = Place::Line { line: line(), column: empty.map_or(width, |j| j + 1) };
            return Err(ReadError::EmptyCell { place });
        }
        if row.comment && row.cells.get(0).is_some_and(|c| c.trim() != "#") {
            return Err(ReadError::Ambiguous {
                place: Place::Line { line: line(), column: 1 },
                what: format!("the line begins with # and has {width} cells, as many as the table"),
                advice: "delete it if it is a comment, put the first cell in quotes if it is not".into(),
            });
        }
        Ok(())
    }
}

fn cells(record: &StringRecord, separator: Separator) -> impl Iterator<Item = &str> {
    let blank = separator == Separator::Blank;
    record.iter().map(trim).filter(move |cell| !blank || !cell.is_empty())
}

/// [`str::trim`], at once for the cells of one character that most cells are.
fn trim(cell: &str) -> &str {
    match cell.as_bytes() {
        [byte] if byte.is_ascii_graphic() => cell,
        _ => cell.trim(),
    }
}
