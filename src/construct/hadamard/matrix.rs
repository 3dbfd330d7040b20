//! The type [`Hadamard`].

use rayon::prelude::*;

use crate::array::{Array, ArrayError};
use crate::construct::ConstructError;

/// The largest order a [`Hadamard`] has here (512 MiB of signs).
pub const MAX_ORDER: usize = 1 << 16;

const WORD: usize = 64;

/// A Hadamard matrix of order n: entries ±1, H·Hᵀ = nI.
///
/// Every value of this type is one, either by the theorem behind the construction that made it or
/// because [`Hadamard::from_rows`] checked it; [`Hadamard::is_hadamard`] checks again.
///
/// Storage: row by row, one bit per entry, a set bit for −1, each row padded to whole words.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct Hadamard {
    order: usize,
    words: Vec<u64>,
}

impl Hadamard {
    /// The matrix with −1 where `negative(i, j)` holds. The caller owes the proof.
    pub(super) fn from_fn(
        construction: &'static str,
        order: usize,
        negative: impl Fn(usize, usize) -> bool + Sync,
    ) -> Result<Self, ConstructError> {
        if order == 0 || order > MAX_ORDER {
            return Err(ConstructError::condition(
                construction,
                format!("the order is from 1 to {MAX_ORDER}, not {order}"),
            ));
        }
        let stride = order.div_ceil(WORD);
        let mut words = Vec::new();
        if words.try_reserve_exact(stride * order).is_err() {
            return Err(ArrayError::TooLarge { runs: order, factors: order }.into());
        }
        words.resize(stride * order, 0u64);
        words.par_chunks_mut(stride).enumerate().for_each(|(i, row)| {
            for j in 0..order {
                row[j / WORD] |= u64::from(negative(i, j)) << (j % WORD);
            }
        });
        Ok(Self { order, words })
    }

    /// The Hadamard matrix with the given rows.
    ///
    /// Cost: n³/64 word operations for the check.
    ///
    /// # Errors
    /// [`ConstructError::Condition`] when there is no row or more than [`MAX_ORDER`], a row does not
    /// have n entries, an entry is not ±1, or two rows are not orthogonal.
    ///
    /// ```
    /// use trysquare::construct::hadamard::Hadamard;
    /// assert!(Hadamard::from_rows(&[[1, 1], [1, -1]]).is_ok());
    /// assert!(Hadamard::from_rows(&[[1, 1], [1, 1]]).is_err());
    /// ```
    pub fn from_rows<R: AsRef<[i8]> + Sync>(rows: &[R]) -> Result<Self, ConstructError> {
        const NAME: &str = "Hadamard matrix";
        for (i, row) in rows.iter().enumerate() {
            let row = row.as_ref();
            if row.len() != rows.len() {
                let needs = format!("row {i} of {} has {} entries", rows.len(), row.len());
                return Err(ConstructError::condition(NAME, needs));
            }
            super::check_signs(NAME, &format!("row {i}"), row)?;
        }
        let matrix = Self::from_fn(NAME, rows.len(), |i, j| rows[i].as_ref()[j] < 0)?;
        match matrix.first_defect() {
            None => Ok(matrix),
            Some((i, k)) => {
                Err(ConstructError::condition(NAME, format!("rows {i} and {k} are not orthogonal")))
            }
        }
    }

    /// n, the number of rows.
    #[must_use]
    pub fn order(&self) -> usize {
        self.order
    }

    /// The entry in row `i` and column `j`, 1 or −1.
    ///
    /// # Panics
    /// When there is no such row or column.
    #[must_use]
    pub fn entry(&self, i: usize, j: usize) -> i8 {
        if self.negative(i, j) { -1 } else { 1 }
    }

    pub(super) fn negative(&self, i: usize, j: usize) -> bool {
        assert!(i < self.order && j < self.order, "no entry ({i}, {j}) in order {}", self.order);
        self.row(i)[j / WORD] >> (j % WORD) & 1 == 1
    }

    fn row(&self, i: usize) -> &[u64] {
        let stride = self.order.div_ceil(WORD);
        &self.words[i * stride..(i + 1) * stride]
    }

    /// The first two rows that are not orthogonal.
    fn first_defect(&self) -> Option<(usize, usize)> {
        (0..self.order).into_par_iter().find_map_first(|i| {
            let differ = |k: usize| -> u32 {
                self.row(i).iter().zip(self.row(k)).map(|(a, b)| (a ^ b).count_ones()).sum()
            };
            (i + 1..self.order).find(|&k| 2 * differ(k) as usize != self.order).map(|k| (i, k))
        })
    }

    /// Whether H·Hᵀ = nI, checked exactly. Cost: n³/64 word operations.
    #[must_use]
    pub fn is_hadamard(&self) -> bool {
        self.first_defect().is_none()
    }

    /// The equivalent matrix whose first row and first column are all +1: columns, then rows, are
    /// negated where they begin with −1.
    #[must_use]
    pub fn normalised(&self) -> Self {
        let corner = self.negative(0, 0);
        Self::from_fn("normalised Hadamard matrix", self.order, |i, j| {
            self.negative(i, j) ^ self.negative(i, 0) ^ self.negative(0, j) ^ corner
        })
        .expect("the order was admitted before")
    }

    /// The transpose, a Hadamard matrix as well.
    #[must_use]
    pub fn transposed(&self) -> Self {
        Self::from_fn("transposed Hadamard matrix", self.order, |i, j| self.negative(j, i))
            .expect("the order was admitted before")
    }

    /// The saturated two-level array: normalise, drop the constant first column, + ↦ 0, − ↦ 1.
    ///
    /// Guarantee: OA(n, 2^{n−1}, 2), index n/4 (for n = 2 one factor of two levels); run i is row
    /// i, factor j is column j + 1, the first run is all 0. Cost: n² cells.
    ///
    /// # Errors
    /// [`ConstructError::Array`] when n = 1, which leaves no factor, or memory cannot be had.
    ///
    /// ```
    /// use trysquare::construct::hadamard::paley_one;
    /// use trysquare::verify::{Demand, Verdict, certify};
    /// let a = paley_one(11)?.to_array()?;
    /// assert_eq!((a.runs(), a.mix().to_string().as_str()), (12, "2^11"));
    /// let judged = certify(&a, &Demand::strength(2))?;
    /// assert_eq!(judged.verdict, Verdict::Orthogonal);
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn to_array(&self) -> Result<Array, ConstructError> {
        let h = self.normalised();
        Ok(Array::from_fn(self.order, vec![2; self.order - 1], |i, j| u16::from(h.negative(i, j + 1)))?)
    }
}
