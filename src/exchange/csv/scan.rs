//! A look at the raw bytes before they are parsed: the separator, and quotes that do not fit.
//!
//! The parser is lenient about quotes (an open one swallows the rest of the file); a file in which
//! they do not fit is refused here instead.

use crate::exchange::encoding::line_at;
use crate::exchange::{Place, ReadError, Separator};

/// The separator of a text, `None` when every line is a single cell.
///
/// Tab, semicolon and comma are tried in this order; the first that stands on every line wins
/// (so `12,5;3` has a decimal comma), else the one on the most lines. Blanks separate only where
/// none of these stands anywhere, and when most lines have blanks between cells.
pub(super) fn guess_separator(text: &str) -> Option<Separator> {
    let candidates = [Separator::Tab, Separator::Semicolon, Separator::Comma];
    let tally = tally(text.as_bytes(), false);
    let best = (0..3).rev().max_by_key(|&i| tally.with[i])?;
    if tally.with[best] > 0 {
        return Some(candidates[best]);
    }
    (2 * self::tally(text.as_bytes(), true).with[3] > tally.lines).then_some(Separator::Blank)
}

struct Tally {
    lines: usize,
    /// Lines with a tab, semicolon, comma, inner blank.
    with: [usize; 4],
}

/// Counts the lines with each separator outside quotes, without blank lines and comments.
fn tally(text: &[u8], blanks: bool) -> Tally {
    let mut tally = Tally { lines: 0, with: [0; 4] };
    let (mut quoted, mut cell_start, mut comment) = (false, true, false);
    let (mut text_seen, mut gap, mut seen) = (false, false, [false; 4]);
    for (i, &b) in text.iter().chain(b"\n").enumerate() {
        if quoted && i < text.len() {
            quoted = b != b'"';
            continue;
        }
        match b {
            b'\n' | b'\r' => {
                if text_seen && !comment {
                    tally.lines += 1;
                    for (n, s) in tally.with.iter_mut().zip(seen) {
                        *n += usize::from(s);
                    }
                }
                (cell_start, comment, text_seen, gap, seen) = (true, false, false, false, [false; 4]);
                continue;
            }
            // A doubled quote closes and opens again at once, which comes to the same.
            b'"' if cell_start || (i > 0 && text[i - 1] == b'"') => quoted = true,
            b'#' if !text_seen => comment = true,
            b'\t' => seen[0] = true,
            b';' => seen[1] = true,
            b',' => seen[2] = true,
            b' ' => gap |= text_seen,
            _ => {}
        }
        if b != b' ' {
            seen[3] |= gap;
            text_seen = true;
        }
        cell_start = matches!(b, b'\t' | b';' | b',') || (blanks && b == b' ');
    }
    tally
}

/// Refuses a text in which a quote is never closed, or followed by more text.
pub(super) fn check_quotes(text: &str, separator: Separator) -> Result<(), ReadError> {
    let (bytes, separator_byte) = (text.as_bytes(), separator.byte());
    // Where the row and the cell begin, the number of the cell.
    let (mut row, mut cell, mut column) = (0, 0, 1);
    let place = |row: usize, column| Place::Line { line: line_at(bytes, row), column };
    let mut i = 0;
    while i < bytes.len() {
        match bytes[i] {
            b'\n' | b'\r' => (row, cell, column) = (i + 1, i + 1, 1),
            b if b == separator_byte => {
                let new = separator != Separator::Blank || i > cell;
                (cell, column) = (i + 1, column + usize::from(new));
            }
            b'"' if i == cell => {
                let open = i;
                i = closing_quote(bytes, i + 1)
                    .ok_or_else(|| ReadError::OpenQuote { place: place(open, column) })?;
                let rest = bytes[i + 1..].iter().copied();
                let next = rest.into_iter().find(|&b| b == separator_byte || b != b' ').unwrap_or(b'\n');
                if next != separator_byte && !matches!(next, b'\n' | b'\r') {
                    return Err(ReadError::AfterQuote { place: place(row, column) });
                }
            }
            _ => {}
        }
        i += 1;
    }
    Ok(())
}

/// The place of the quote that closes the cell, from inside it.
fn closing_quote(bytes: &[u8], mut i: usize) -> Option<usize> {
    loop {
        i += bytes.get(i..)?.iter().position(|&b| b == b'"')?;
        if bytes.get(i + 1) != Some(&b'"') {
            return Some(i);
        }
        i += 2;
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn finds_the_separator() {
        for (text, separator) in [
            ("0,1\n1,0\n", Some(Separator::Comma)),
            ("0;1\n1;0\n", Some(Separator::Semicolon)),
            ("12,5;1,0\n7,5;2,0\n", Some(Separator::Semicolon)),
            ("0\t1,5\r\n1\t0,5\r\n", Some(Separator::Tab)),
            ("\"a;b\",1\n\"c;d\",2\n", Some(Separator::Comma)),
            ("\"a\"\";b\",1\n\"c;\nd\",2\n", Some(Separator::Comma)),
            ("low;a,b\nhigh,c\nlow,d\n", Some(Separator::Comma)),
            ("# one, two; three\n0;1\n", Some(Separator::Semicolon)),
            ("0\n1\n", None),
            ("oven temperature\n0\n1\n", None),
            ("run  A  B\n  1  0  0\n", Some(Separator::Blank)),
            ("\"low heat\"\n\"high heat\"\n", None),
            ("\"low heat\" 1\n\"high heat\" 2\n", Some(Separator::Blank)),
            ("", None),
        ] {
            assert_eq!(guess_separator(text), separator, "{text:?}");
        }
    }

    #[test]
    fn refuses_quotes_that_do_not_fit() {
        let message = |text| check_quotes(text, Separator::Comma).unwrap_err().to_string();
        assert_eq!(
            message("A,B\n0,\"1\n1,0\n"),
            "line 2, column 2: the quote that opens here is never closed; close it, or double every quote \
             inside the cell"
        );
        assert_eq!(
            message("A,B\n0,\"on\"off\n"),
            "line 2, column 2: text after the closing quote; double every quote inside the cell, or name \
             the right --separator"
        );
        for text in ["\"a\" ,\"b\"", "a\"b,c", "\"a\"\"b\"\n\"\"", "x,\"two\r\nlines\"\r\n", "\"\"\"\""] {
            assert_eq!(check_quotes(text, Separator::Comma), Ok(()), "{text:?}");
        }
        assert_eq!(check_quotes("  \"a b\"  1", Separator::Blank), Ok(()));
    }
}
