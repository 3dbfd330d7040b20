use sha2::{Digest, Sha256};

use super::sketch::{MAX_RUNS, Sketch};

/// A form as text: columns separated by dots, a digit (0-9, a-z) for every run. The texts of
/// forms of equal shape sort as the forms do.
pub(super) fn to_text(form: &[u8], runs: usize) -> String {
    let digit = |&x: &u8| char::from_digit(u32::from(x), 36).unwrap_or('?');
    form.chunks(runs).map(|column| column.iter().map(digit).collect::<String>()).collect::<Vec<_>>().join(".")
}

/// The array that a text stands for, its columns having the given levels; `None` when it is none.
pub(super) fn from_text(text: &str, levels: &[u16], runs: usize) -> Option<Sketch> {
    let columns: Vec<Vec<u8>> = text
        .split('.')
        .map(|column| column.chars().map(|c| c.to_digit(36).map(|x| x as u8)).collect::<Option<Vec<u8>>>())
        .collect::<Option<_>>()?;
    let fits = columns.len() == levels.len()
        && runs <= MAX_RUNS
        && columns
            .iter()
            .zip(levels)
            .all(|(column, &s)| column.len() == runs && column.iter().all(|&x| u16::from(x) < s));
    let row = |r: usize| (columns.iter().map(|column| column[r]).collect(), 1);
    fits.then(|| Sketch::from_rows(levels.to_vec(), (0..runs).map(row)))
}

/// The SHA-256 of lines, each ended by a line feed, in hexadecimal digits.
pub(super) fn digest<'a>(lines: impl IntoIterator<Item = &'a str>) -> String {
    let mut hasher = Sha256::new();
    for line in lines {
        hasher.update(line);
        hasher.update("\n");
    }
    hasher.finalize().iter().map(|byte| format!("{byte:02x}")).collect()
}
