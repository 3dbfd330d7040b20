//! What is said about the runs themselves: the digest, and how many of them are repeated.

use std::collections::HashSet;
use std::fmt::Write as _;

use sha2::{Digest, Sha256};

use crate::array::Array;

/// The SHA-256 of an array in its canonical form, 64 lower-case hexadecimal digits.
///
/// The canonical form is ASCII text: first one line with the number of levels of each factor, then
/// one line per run with its symbols counted from 0, factors and runs in the order of the array,
/// numbers in plain decimal and separated by one comma, every line (the last too) ended by one
/// line feed. The 4-run array of three two-level factors is `"2,2,2\n0,0,0\n0,1,1\n1,0,1\n1,1,0\n"`.
///
/// ```
/// use trysquare::{array::Array, verify::digest};
/// let array = Array::from_rows(vec![2], &[[0], [1]])?;
/// // printf '2\n0\n1\n' | sha256sum
/// assert_eq!(
///     digest::sha256(&array),
///     "fe6ef8bf7165afee5ad7ea904c5dfa237f986cae437ff744ee3bd775221e41be"
/// );
/// # Ok::<(), trysquare::array::ArrayError>(())
/// ```
#[must_use]
pub fn sha256(array: &Array) -> String {
    let mut hasher = Sha256::new();
    let mut line = String::new();
    let mut feed = |symbols: &[u16]| {
        line.clear();
        for symbol in symbols {
            if !line.is_empty() {
                line.push(',');
            }
            let _ = write!(line, "{symbol}");
        }
        line.push('\n');
        hasher.update(line.as_bytes());
    };
    feed(array.levels());
    for row in array.rows() {
        feed(&row);
    }
    hasher.finalize().iter().fold(String::new(), |mut text, byte| {
        let _ = write!(text, "{byte:02x}");
        text
    })
}

/// The number of runs that repeat an earlier run.
#[must_use]
pub fn repeated_runs(array: &Array) -> u64 {
    let mut seen = HashSet::with_capacity(array.runs());
    array.rows().filter(|row| !seen.insert(row.clone())).count() as u64
}
