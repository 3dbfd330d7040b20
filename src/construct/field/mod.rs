//! Arrays over finite fields: strength from linear algebra.
//!
//! A *linear* array has one run per vector `v` of GF(q)^n. A factor of q^e levels belongs to an
//! e-dimensional subspace of linear functionals, and its level in run `v` is the tuple of values of
//! a basis of that subspace on `v`. The array has strength t exactly when any t of the subspaces are
//! independent (their sum is direct). All functions of this room but [`full_factorial`],
//! [`zero_sum`], [`addelman_kempthorne`] and [`flats()`] make linear arrays.
//!
//! When to prefer which:
//!
//! | wanted | function |
//! | --- | --- |
//! | every combination once | [`full_factorial`] |
//! | strength 2, q levels, q^n runs, most factors | [`rao_hamming`] |
//! | strength 2, q levels, 2·q^n runs, many factors | [`addelman_kempthorne`] |
//! | strength 2, q^e levels, q^n runs, also when e does not divide n | [`spread`] |
//! | strength 2, one factor of many levels, the others with fewer | [`large_and_small`] |
//! | any strength t, q levels, each t factors in every combination once (index 1) | [`bush`] |
//! | the same for any number of levels, t + 1 factors | [`zero_sum`] |
//! | strength 3, two levels | [`affine_points`] |
//! | strength 3, q levels: q + 1 (q even: q + 2) factors in q^3 runs; q² + 1 in q^4 | [`bush`]; [`ovoid`] |
//! | strength 3, two factors of 2^m levels beside two-level factors | [`two_subspaces`] |
//! | strength 3, one factor of many levels beside q-level factors | [`code_cosets`] |
//! | any strength, q levels, the first points that fit | [`greedy_points`] |
//! | a cap, a code or a set of subspaces of one's own | [`points`], [`subspaces`] |
//! | cosets of one's own, the slices of an array of strength 3 | [`flats()`] |
//!
//! **Order of the runs** of every linear array: run number i is the vector whose coordinates are
//! the base-q digits of i, *first coordinate least significant*. **Levels** of a factor with basis
//! `b_1, …, b_e`: `Σ_j q^(j−1) · <v, b_j>`, elements of GF(q) being numbered as on
//! [`Field`].
//!
//! Numbers of theorems, sections and chapters in the references are given from memory.

mod addelman_kempthorne;
mod affine_points;
mod bush;
mod code_cosets;
mod flats;
mod full_factorial;
mod greedy_points;
mod large_and_small;
mod ovoid;
mod points;
mod rao_hamming;
mod spread;
mod subspaces;
mod two_subspaces;
mod zero_sum;

pub use addelman_kempthorne::addelman_kempthorne;
pub use affine_points::affine_points;
pub use bush::bush;
pub use code_cosets::code_cosets;
pub use flats::{Flat, flats};
pub use full_factorial::full_factorial;
pub use greedy_points::greedy_points;
pub use large_and_small::large_and_small;
pub use ovoid::ovoid;
pub use points::{points, points_strength};
pub use rao_hamming::rao_hamming;
pub use spread::spread;
pub use subspaces::subspaces;
pub use two_subspaces::two_subspaces;
pub use zero_sum::zero_sum;

use rayon::prelude::*;

use super::ConstructError;
use crate::algebra::{AbelianGroup, Field};
use crate::array::{Array, ArrayError};
use crate::mix::MAX_FACTORS;

/// A subspace of functionals, by a basis.
type Subspace = Vec<Vec<u16>>;

/// The memory of a linear array, had before any subspace is enumerated: a request that is too large
/// fails here and not in the enumeration.
struct Room {
    construction: &'static str,
    runs: usize,
    factors: usize,
    cells: Vec<u16>,
}

impl Room {
    /// Room for `q^n` runs of `factors` factors (`None`: a number that does not fit `usize`).
    fn reserve(
        construction: &'static str,
        q: u32,
        n: u32,
        factors: Option<usize>,
    ) -> Result<Self, ConstructError> {
        let runs = power(construction, q, n)?;
        let factors = factors.filter(|&k| k <= MAX_FACTORS).ok_or_else(|| {
            ConstructError::condition(construction, format!("there are more than {MAX_FACTORS} factors"))
        })?;
        let mut cells = Vec::new();
        let fits = runs.checked_mul(factors).is_some_and(|size| cells.try_reserve_exact(size).is_ok());
        if !fits {
            return Err(ArrayError::TooLarge { runs, factors }.into());
        }
        Ok(Self { construction, runs, factors, cells })
    }

    /// The linear array of the given subspaces, columns filled in parallel.
    fn fill(mut self, field: &Field, subspaces: &[Subspace]) -> Result<Array, ConstructError> {
        assert_eq!(subspaces.len(), self.factors, "the closed formula for the number of factors");
        let mut additions = Vec::with_capacity(self.factors);
        for basis in subspaces {
            additions.push(Addition::new(self.construction, field, basis.len())?);
        }
        self.cells.resize(self.runs * self.factors, 0);
        self.cells
            .par_chunks_mut(self.runs)
            .zip(subspaces.par_iter().zip(&additions))
            .for_each(|(column, (basis, addition))| fill_column(field, column, basis, addition));
        let levels = additions.iter().map(|a| a.levels).collect();
        Ok(Array::new(self.runs, levels, self.cells)?)
    }
}

/// Addition of the levels of one factor: digit by digit in base p.
struct Addition {
    levels: u16,
    group: AbelianGroup,
}

impl Addition {
    fn new(construction: &'static str, field: &Field, dimension: usize) -> Result<Self, ConstructError> {
        let too_many = || {
            let q = field.order();
            ConstructError::condition(
                construction,
                format!("{q}^{dimension} levels: a factor has 2 to 65535 levels"),
            )
        };
        let levels = u32::try_from(dimension)
            .ok()
            .and_then(|e| field.order().checked_pow(e))
            .and_then(|s| u16::try_from(s).ok())
            .filter(|&s| s >= 2)
            .ok_or_else(too_many)?;
        let group = AbelianGroup::elementary(
            u16::try_from(field.characteristic()).map_err(|_| too_many())?,
            field.degree() * u32::try_from(dimension).map_err(|_| too_many())?,
        )?;
        Ok(Self { levels, group })
    }

    fn add(&self, a: u16, b: u16) -> u16 {
        if self.levels.is_power_of_two() { a ^ b } else { self.group.add(a, b) }
    }
}

/// Fills the column by doubling: the part for the vectors with digit `d` at the next coordinate is
/// the part filled so far plus a constant.
fn fill_column(field: &Field, column: &mut [u16], basis: &Subspace, addition: &Addition) {
    let q = field.order();
    let coordinates = basis.first().map_or(0, Vec::len);
    let mut filled = 1;
    for coordinate in 0..coordinates {
        let (source, rest) = column.split_at_mut(filled);
        for (digit, target) in (1..q as u16).zip(rest.chunks_exact_mut(filled)) {
            let constant =
                basis.iter().rev().fold(0u32, |sum, b| sum * q + u32::from(field.mul(digit, b[coordinate])));
            let constant = constant as u16;
            if constant == 0 {
                target.copy_from_slice(source);
            } else if filled > 4 * usize::from(addition.levels) {
                let moved: Vec<u16> = (0..addition.levels).map(|a| addition.add(a, constant)).collect();
                target.iter_mut().zip(&*source).for_each(|(t, &s)| *t = moved[usize::from(s)]);
            } else {
                target.iter_mut().zip(&*source).for_each(|(t, &s)| *t = addition.add(s, constant));
            }
        }
        filled *= q as usize;
    }
}

/// `q^n` as a number of runs.
fn power(construction: &'static str, q: u32, n: u32) -> Result<usize, ConstructError> {
    usize::try_from(q).ok().and_then(|q| q.checked_pow(n)).ok_or_else(|| {
        ConstructError::condition(construction, format!("{q}^{n} runs are more than memory can hold"))
    })
}

/// An error unless `holds`.
fn require(
    construction: &'static str,
    holds: bool,
    needs: impl FnOnce() -> String,
) -> Result<(), ConstructError> {
    if holds { Ok(()) } else { Err(ConstructError::condition(construction, needs())) }
}

/// Points as one-dimensional subspaces.
fn as_subspaces(points: impl IntoIterator<Item = Vec<u16>>) -> Vec<Subspace> {
    points.into_iter().map(|p| vec![p]).collect()
}

#[cfg(test)]
mod outside;
#[cfg(test)]
mod tests;
