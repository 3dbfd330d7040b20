//! Pairs of orthogonal Latin squares of an order up to [`MAX_ORDER`], or the record that there are none.

use serde::{Deserialize, Serialize};

use super::ExhaustionError;
use super::record::{RECORD_VERSION, Record, RecordError};
use super::text::digest;
use crate::array::Array;
use crate::floor::Effort;

/// The largest order.
pub const MAX_ORDER: u16 = 6;

/// The record of a search through all reduced Latin squares of an order (first row and first
/// column in natural order), none of which has an orthogonal mate: there is no array of four
/// factors of n levels in n² runs.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct ByLatinSquares {
    /// [`RECORD_VERSION`].
    pub version: u32,
    /// n, the order of the squares.
    pub order: u16,
    /// How many reduced squares there are.
    pub squares: u64,
    /// How many transversals they have together.
    pub transversals: u64,
    /// How many of the squares are a union of n disjoint transversals: none.
    pub with_mates: u64,
    /// The SHA-256 of the squares in ascending order, one line each: its rows separated by dots, a
    /// blank, its number of transversals.
    pub listing: String,
    /// The SHA-256 of all the above.
    pub digest: String,
}

/// What a search among the Latin squares of an order finds.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Mates {
    /// Two orthogonal squares, as an array of n² runs and four factors of n levels: row, column,
    /// symbol of the first, symbol of the second. To be judged like every array.
    Found(Array),
    /// There are none.
    None(Record),
    /// The budget is used up.
    NotDecided,
}

/// Whether there are two orthogonal Latin squares of order n.
///
/// Permuting rows, columns and symbols keeps orthogonality, so it is enough to look at reduced
/// squares. A square has a mate exactly when its cells are a union of n disjoint transversals
/// (sets of n cells in different rows and columns with different symbols).
///
/// # Parameters
/// * `order`: n, 2 to [`MAX_ORDER`];
/// * `effort`: a step is a cell or a transversal tried.
///
/// # Errors
/// [`ExhaustionError::TooLarge`] for another order.
///
/// # Cost
/// 9,408 squares at order 6: a second.
///
/// # Reference
/// Tarry 1900, 'Le problème des 36 officiers'.
///
/// ```
/// use trysquare::floor::{Effort, exhaustion::latin::{Mates, search}};
/// use trysquare::verify::{Demand, Verdict, certify};
/// let Mates::Found(array) = search(4, &mut Effort::unlimited())? else { panic!("order 4 has mates") };
/// assert_eq!(certify(&array, &Demand::strength(2))?.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn search(order: u16, effort: &mut Effort<'_>) -> Result<Mates, ExhaustionError> {
    if !(2..=MAX_ORDER).contains(&order) {
        return Err(ExhaustionError::TooLarge);
    }
    let n = usize::from(order);
    let Some(squares) = reduced_squares(n, effort) else { return Ok(Mates::NotDecided) };
    let mut lines = Vec::with_capacity(squares.len());
    let mut total = 0;
    for square in &squares {
        let Some(transversals) = transversals(square, n, effort) else { return Ok(Mates::NotDecided) };
        let mut chosen = Vec::new();
        match disjoint(&transversals, n, 0, &mut chosen, effort) {
            None => return Ok(Mates::NotDecided),
            Some(true) => {
                let chosen: Vec<&Transversal> = chosen.iter().map(|&i| &transversals[i]).collect();
                return Ok(Mates::Found(pair(square, &chosen, order)));
            }
            Some(false) => {}
        }
        total += transversals.len() as u64;
        lines.push(line(square, n, transversals.len()));
    }
    let mut record = ByLatinSquares {
        version: RECORD_VERSION,
        order,
        squares: squares.len() as u64,
        transversals: total,
        with_mates: 0,
        listing: digest(lines.iter().map(String::as_str)),
        digest: String::new(),
    };
    record.digest = record.own_digest();
    Ok(Mates::None(Record::LatinSquares(record)))
}

/// The column of the transversal's cell in each row.
type Transversal = Vec<u8>;

/// All reduced squares of order n, row by row, ascending.
fn reduced_squares(n: usize, effort: &mut Effort<'_>) -> Option<Vec<Vec<u8>>> {
    let mut square: Vec<u8> = (0..n * n).map(|i| if i < n { i as u8 } else { (i / n) as u8 }).collect();
    let mut all = Vec::new();
    fill(&mut square, n, n, &mut all, effort).then_some(all)
}

fn fill(square: &mut [u8], n: usize, at: usize, all: &mut Vec<Vec<u8>>, effort: &mut Effort<'_>) -> bool {
    if at == n * n {
        all.push(square.to_vec());
        return true;
    }
    let (row, column) = (at / n, at % n);
    if column == 0 {
        return fill(square, n, at + 1, all, effort);
    }
    for symbol in 0..n as u8 {
        if !effort.spend(1) {
            return false;
        }
        let in_row = square[row * n..at].contains(&symbol);
        if in_row || (0..row).any(|above| square[above * n + column] == symbol) {
            continue;
        }
        square[at] = symbol;
        if !fill(square, n, at + 1, all, effort) {
            return false;
        }
    }
    true
}

/// All transversals of a square.
fn transversals(square: &[u8], n: usize, effort: &mut Effort<'_>) -> Option<Vec<Transversal>> {
    let mut all = Vec::new();
    let mut open: Vec<(Transversal, u32)> = vec![(Vec::new(), 0)];
    while let Some((begun, symbols)) = open.pop() {
        if !effort.spend(1) {
            return None;
        }
        let row = begun.len();
        if row == n {
            all.push(begun);
            continue;
        }
        for column in (0..n as u8).rev().filter(|c| !begun.contains(c)) {
            let symbol = 1 << square[row * n + usize::from(column)];
            if symbols & symbol == 0 {
                open.push((begun.iter().copied().chain([column]).collect(), symbols | symbol));
            }
        }
    }
    Some(all)
}

/// Whether n disjoint transversals can be chosen, the i-th through column i of the first row.
fn disjoint(
    all: &[Transversal],
    n: usize,
    first: usize,
    chosen: &mut Vec<usize>,
    effort: &mut Effort<'_>,
) -> Option<bool> {
    if first == n {
        return Some(true);
    }
    for (i, transversal) in all.iter().enumerate() {
        if !effort.spend(1) {
            return None;
        }
        let meets = |&c: &usize| all[c].iter().zip(transversal).any(|(a, b)| a == b);
        if usize::from(transversal[0]) != first || chosen.iter().any(meets) {
            continue;
        }
        chosen.push(i);
        if disjoint(all, n, first + 1, chosen, effort)? {
            return Some(true);
        }
        chosen.pop();
    }
    Some(false)
}

/// The array of a square and the mate whose symbol i stands on the i-th transversal.
fn pair(square: &[u8], chosen: &[&Transversal], n: u16) -> Array {
    let size = usize::from(n);
    Array::from_fn(size * size, vec![n; 4], |cell, factor| {
        let (row, column) = (cell / size, cell % size);
        let mate = || chosen.iter().position(|t| usize::from(t[row]) == column);
        match factor {
            0 => row as u16,
            1 => column as u16,
            2 => u16::from(square[cell]),
            _ => mate().expect("the transversals cover all cells") as u16,
        }
    })
    .expect("symbols below n")
}

fn line(square: &[u8], n: usize, transversals: usize) -> String {
    let digits = |row: &[u8]| row.iter().map(u8::to_string).collect::<String>();
    format!("{} {transversals}", square.chunks(n).map(digits).collect::<Vec<_>>().join("."))
}

impl ByLatinSquares {
    pub(super) fn own_digest(&self) -> String {
        let Self { version, order, squares, transversals, with_mates, ref listing, .. } = *self;
        digest([format!("{version} {order} {squares} {transversals} {with_mates} {listing}").as_str()])
    }

    pub(super) fn check_light(&self) -> Result<(), RecordError> {
        if self.version != RECORD_VERSION {
            return Err(RecordError::Version(self.version));
        }
        if !(2..=MAX_ORDER).contains(&self.order) {
            return Err(ExhaustionError::TooLarge.into());
        }
        if self.squares == 0 || self.with_mates != 0 {
            return Err(RecordError::Squares);
        }
        if self.digest != self.own_digest() {
            return Err(RecordError::Digest);
        }
        Ok(())
    }

    pub(super) fn replay(&self, effort: &mut Effort<'_>) -> Result<(), RecordError> {
        match search(self.order, effort)? {
            Mates::None(Record::LatinSquares(again)) if again == *self => Ok(()),
            Mates::NotDecided => Err(RecordError::Unfinished),
            _ => Err(RecordError::Differs { stage: None }),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::floor::exhaustion::canonical::{canonical, canonical_of_kinds};
    use crate::floor::exhaustion::sketch::Sketch;
    use crate::verify::{Demand, Verdict, certify};
    use std::collections::BTreeSet;

    /// Numbers of reduced squares, isotopy classes and main classes: McKay & Wanless 2005, 'On the
    /// number of Latin squares', table 1 \[memory\].
    #[test]
    fn squares_and_their_classes_are_as_many_as_published() {
        for (n, reduced, isotopy, main) in [(2, 1, 1, 1), (3, 1, 1, 1), (4, 4, 2, 2), (5, 56, 2, 2)] {
            assert_eq!(classes_of_squares(n), (reduced, isotopy, main), "order {n}");
        }
    }

    #[test]
    #[ignore = "9,408 canonical forms, twice"]
    fn squares_of_order_six_fall_into_22_isotopy_and_12_main_classes() {
        assert_eq!(classes_of_squares(6), (9408, 22, 12));
    }

    fn classes_of_squares(n: usize) -> (usize, usize, usize) {
        let squares = reduced_squares(n, &mut Effort::unlimited()).unwrap();
        let (mut isotopy, mut main) = (BTreeSet::new(), BTreeSet::new());
        for square in &squares {
            let rows = (0..n * n).map(|i| (vec![(i / n) as u8, (i % n) as u8, square[i]], 1));
            let sketch = Sketch::from_rows(vec![n as u16; 3], rows);
            main.insert(canonical(&sketch, &mut |_| true).unwrap().form);
            isotopy.insert(canonical_of_kinds(&sketch, &[3, 2, 1], &mut |_| true).unwrap().form);
        }
        (squares.len(), isotopy.len(), main.len())
    }

    #[test]
    fn mates_are_found_for_three_four_five() {
        for n in 3..=5 {
            let Mates::Found(array) = search(n, &mut Effort::unlimited()).unwrap() else {
                panic!("order {n} has mates")
            };
            assert_eq!(certify(&array, &Demand::strength(2)).unwrap().verdict, Verdict::Orthogonal);
        }
    }

    /// Tarry 1900: none of order 6; and none of order 2.
    #[test]
    fn order_six_has_none_and_its_record_replays() {
        for n in [2, 6] {
            let Mates::None(record) = search(n, &mut Effort::unlimited()).unwrap() else {
                panic!("order {n} has no mates")
            };
            record.replay(&mut Effort::unlimited()).unwrap();
            assert_eq!(record.replay(&mut Effort::new(1, &|| false)), Err(RecordError::Unfinished));
            let Record::LatinSquares(mut by) = record else { panic!("made of squares") };
            by.transversals += 1;
            assert_eq!(by.replay(&mut Effort::unlimited()), Err(RecordError::Differs { stage: None }));
        }
    }

    #[test]
    fn a_budget_ends_the_search() {
        assert_eq!(search(6, &mut Effort::new(100_000, &|| false)), Ok(Mates::NotDecided));
        assert_eq!(search(7, &mut Effort::unlimited()), Err(ExhaustionError::TooLarge));
        assert_eq!(search(1, &mut Effort::unlimited()), Err(ExhaustionError::TooLarge));
    }
}
