//! Writing arrays as separated cells.

use std::io::{self, Write};

use crate::array::Array;
use crate::exchange::{Header, Separator, Symbols};

/// Bytes gathered before they are handed on.
const BUFFER: usize = 1 << 16;

/// Writes an array as CSV (RFC 4180 with LF line ends): one line per run, cells separated by
/// commas.
///
/// # Errors
/// What `out` reports; `InvalidInput` when the header has not one name per factor.
///
/// ```
/// use trysquare::array::Array;
/// use trysquare::exchange::{csv, Header, Symbols};
/// let array = Array::from_rows(vec![2, 3], &[[0, 0], [1, 2]])?;
/// let mut out = Vec::new();
/// csv::write(&array, Symbols::Coded, Header::Default, &mut out)?;
/// assert_eq!(out, b"F1,F2\n-1,-1\n1,1\n");
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn write(array: &Array, symbols: Symbols, header: Header<'_>, out: impl Write) -> io::Result<()> {
    write_separated(array, symbols, header, Separator::Comma, out)
}

/// As [`write()`], with a separator of choice ([`Separator::Blank`]: one blank).
///
/// # Errors
/// As [`write()`].
pub fn write_separated(
    array: &Array,
    symbols: Symbols,
    header: Header<'_>,
    separator: Separator,
    mut out: impl Write,
) -> io::Result<()> {
    let separator = separator.byte();
    let mut buffer = Vec::with_capacity(BUFFER + 64);
    if let Some(names) = header.names(array.factors())? {
        for (j, name) in names.iter().enumerate() {
            if j > 0 {
                buffer.push(separator);
            }
            push_name(&mut buffer, name, separator);
            hand_on(&mut buffer, &mut out)?;
        }
        buffer.push(b'\n');
    }
    let columns: Vec<(&[u16], (i32, i32))> =
        array.columns().zip(array.levels()).map(|(c, &s)| (c, symbols.line(s))).collect();
    for i in 0..array.runs() {
        for (j, &(column, (step, start))) in columns.iter().enumerate() {
            if j > 0 {
                buffer.push(separator);
            }
            push_number(&mut buffer, step * i32::from(column[i]) + start);
            hand_on(&mut buffer, &mut out)?;
        }
        buffer.push(b'\n');
    }
    out.write_all(&buffer)?;
    out.flush()
}

/// Hands the buffer on once it is full.
pub(in crate::exchange) fn hand_on(buffer: &mut Vec<u8>, out: &mut impl Write) -> io::Result<()> {
    if buffer.len() >= BUFFER {
        out.write_all(buffer)?;
        buffer.clear();
    }
    Ok(())
}

/// Appends `value` in decimal digits.
pub(in crate::exchange) fn push_number(buffer: &mut Vec<u8>, value: i32) {
    if value < 0 {
        buffer.push(b'-');
    }
    let mut rest = value.unsigned_abs();
    if rest < 10 {
        buffer.push(b'0' + rest as u8);
        return;
    }
    let mut digits = [0u8; 10];
    let mut at = digits.len();
    while rest > 0 {
        at -= 1;
        digits[at] = b'0' + (rest % 10) as u8;
        rest /= 10;
    }
    buffer.extend_from_slice(&digits[at..]);
}

/// Appends a name, in quotes where a reader would not take it for one plain cell.
pub(in crate::exchange) fn push_name(buffer: &mut Vec<u8>, name: &str, separator: u8) {
    let plain = !name.is_empty()
        && !name.starts_with('#')
        && name.trim().len() == name.len()
        && !name.bytes().any(|b| matches!(b, b'"' | b'\n' | b'\r') || b == separator);
    if plain {
        buffer.extend_from_slice(name.as_bytes());
    } else {
        buffer.push(b'"');
        buffer.extend_from_slice(name.replace('"', "\"\"").as_bytes());
        buffer.push(b'"');
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn text(symbols: Symbols, header: Header<'_>) -> String {
        let array = Array::from_rows(vec![2, 3, 4], &[[0, 0, 0], [1, 1, 1], [0, 2, 3]]).unwrap();
        let mut out = Vec::new();
        write(&array, symbols, header, &mut out).unwrap();
        String::from_utf8(out).unwrap()
    }

    #[test]
    fn symbols_and_headers() {
        assert_eq!(text(Symbols::Zero, Header::None), "0,0,0\n1,1,1\n0,2,3\n");
        assert_eq!(text(Symbols::One, Header::Default), "F1,F2,F3\n1,1,1\n2,2,2\n1,3,4\n");
        assert_eq!(text(Symbols::Coded, Header::None), "-1,-1,-3\n1,0,-1\n-1,1,3\n");
        let names = ["a,b", "say \"hi\"", "# 3"].map(String::from);
        assert_eq!(
            text(Symbols::Zero, Header::Names(&names)),
            "\"a,b\",\"say \"\"hi\"\"\",\"# 3\"\n0,0,0\n1,1,1\n0,2,3\n"
        );
    }

    #[test]
    fn a_header_has_one_name_per_factor() {
        let array = Array::from_rows(vec![2, 2], &[[0, 0]]).unwrap();
        let e = write(&array, Symbols::Zero, Header::Names(&[]), Vec::new()).unwrap_err();
        assert_eq!(e.to_string(), "0 names for 2 factors; give one name per factor");
    }

    #[test]
    fn numbers_are_those_of_the_standard_library() {
        let mut ours = Vec::new();
        let mut theirs = String::new();
        for v in (-131_072..131_072).chain([i32::MIN, i32::MAX]) {
            push_number(&mut ours, v);
            theirs.push_str(&v.to_string());
        }
        assert_eq!(ours, theirs.as_bytes());
    }

    #[test]
    fn more_than_a_buffer_arrives_whole() {
        let array = Array::from_fn(3000, vec![1000; 50], |i, j| ((7 * i + j) % 1000) as u16).unwrap();
        let mut out = Vec::new();
        write_separated(&array, Symbols::One, Header::None, Separator::Tab, &mut out).unwrap();
        let lines: Vec<String> = array
            .rows()
            .map(|r| r.iter().map(|c| (c + 1).to_string()).collect::<Vec<_>>().join("\t"))
            .collect();
        assert_eq!(String::from_utf8(out).unwrap(), lines.join("\n") + "\n");
    }
}
