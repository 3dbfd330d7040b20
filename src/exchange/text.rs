//! A plain table for people.

use std::io::{self, Write};

use super::csv::{hand_on, push_name, push_number};
use super::{Header, Symbols};
use crate::array::Array;

/// Writes an aligned table: a column `run` that counts from 1, then one column per factor, all
/// right-aligned and two blanks apart. [`Header::None`] leaves out the names and the run numbers.
///
/// The table can be read again as cells separated by blanks
/// ([`Separator::Blank`](super::Separator::Blank)).
///
/// # Errors
/// What `out` reports; `InvalidInput` when the header has not one name per factor.
///
/// ```
/// use trysquare::array::Array;
/// use trysquare::exchange::{text, Header, Symbols};
/// let array = Array::from_rows(vec![2, 3], &[[0, 0], [1, 2]])?;
/// let mut out = Vec::new();
/// text::write(&array, Symbols::Coded, Header::Default, &mut out)?;
/// assert_eq!(out, b"run  F1  F2\n  1  -1  -1\n  2   1   1\n");
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn write(array: &Array, symbols: Symbols, header: Header<'_>, mut out: impl Write) -> io::Result<()> {
    let names = header.names(array.factors())?;
    let quoted: Option<Vec<String>> = names.map(|names| names.iter().map(|n| quote(n)).collect());
    let widths: Vec<usize> = (0..array.factors())
        .map(|j| {
            let s = array.levels()[j];
            let ends = [symbols.value(0, s), symbols.value(s - 1, s)].map(|v| v.to_string().len());
            ends[0].max(ends[1]).max(quoted.as_ref().map_or(0, |q| q[j].chars().count()))
        })
        .collect();
    let mut buffer = Vec::new();
    let run_width = array.runs().to_string().len().max("run".len());
    if let Some(names) = &quoted {
        pad(&mut buffer, run_width, "run".len());
        buffer.extend_from_slice(b"run");
        for (name, width) in names.iter().zip(&widths) {
            pad(&mut buffer, width + 2, name.chars().count());
            buffer.extend_from_slice(name.as_bytes());
            hand_on(&mut buffer, &mut out)?;
        }
        buffer.push(b'\n');
    }
    let columns: Vec<(&[u16], usize, (i32, i32))> = array
        .columns()
        .zip(&widths)
        .zip(array.levels())
        .map(|((column, &width), &s)| (column, width, symbols.line(s)))
        .collect();
    let mut number = Vec::new();
    for i in 0..array.runs() {
        if quoted.is_some() {
            let run = (i + 1).to_string();
            pad(&mut buffer, run_width, run.len());
            buffer.extend_from_slice(run.as_bytes());
        }
        for (j, &(column, width, (step, start))) in columns.iter().enumerate() {
            number.clear();
            push_number(&mut number, step * i32::from(column[i]) + start);
            let gap = if j > 0 || quoted.is_some() { 2 } else { 0 };
            pad(&mut buffer, width + gap, number.len());
            buffer.extend_from_slice(&number);
            hand_on(&mut buffer, &mut out)?;
        }
        buffer.push(b'\n');
    }
    out.write_all(&buffer)?;
    out.flush()
}

fn pad(buffer: &mut Vec<u8>, width: usize, used: usize) {
    buffer.resize(buffer.len() + width.saturating_sub(used), b' ');
}

fn quote(name: &str) -> String {
    let separator = if name.contains('\t') { b'\t' } else { b' ' };
    let mut cell = Vec::new();
    push_name(&mut cell, name, separator);
    String::from_utf8_lossy(&cell).into_owned()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn aligns_names_and_numbers() {
        let array = Array::from_rows(vec![2, 12], &[[0, 0], [1, 11]]).unwrap();
        let names = ["oven".to_owned(), "Temperatur °C".to_owned()];
        let mut out = Vec::new();
        write(&array, Symbols::One, Header::Names(&names), &mut out).unwrap();
        assert_eq!(
            String::from_utf8(out).unwrap(),
            "run  oven  \"Temperatur °C\"\n  1     1                1\n  2     2               12\n"
        );
        let mut out = Vec::new();
        write(&array, Symbols::Zero, Header::None, &mut out).unwrap();
        assert_eq!(out, b"0   0\n1  11\n");
    }
}
