//! The D-efficiency of the main-effects model, from an exact determinant.

use num_bigint::{BigInt, BigUint};
use serde::{Deserialize, Serialize};

use super::rounded;
use crate::array::Array;

/// The determinant is worked out for models of at most so many parameters.
pub const MOST_PARAMETERS: usize = 120;

/// The D-efficiency of the main-effects model of an array.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Efficiency {
    /// The parameters p of the model: the mean and s − 1 contrasts for each factor of s levels.
    pub parameters: usize,
    /// The determinant of the moment matrix X'X, exact and in full, where X has a column of ones
    /// and one column that marks the runs of each level above the lowest.
    pub determinant: String,
    /// The D-efficiency: 1 for an orthogonal array, 0 when the model cannot be estimated.
    pub value: f64,
}

/// The D-efficiency (det(X'X) / N^p)^(1/p) of the main-effects model, its s − 1 contrasts for each
/// factor orthogonal and of mean square 1 over the s levels; an orthogonal array has 1, by Hadamard's
/// inequality no array with even columns has more.
///
/// The determinant is that of X with columns which mark levels, times ∏ s^s over the factors: the
/// matrix that takes [1, marks] to [1, contrasts] has determinant √(s^s). So it is worked out in whole
/// numbers. `None` when there are more than [`MOST_PARAMETERS`] parameters.
///
/// Reference: J. C. Wang & C. F. J. Wu, *Technometrics* 34 (1992), 409–422, use it for such arrays;
/// E. H. Bareiss, *Mathematics of Computation* 22 (1968), 565–578, the elimination. Cost: N·k² + p³
/// products of numbers of p log2 N bits.
pub(super) fn efficiency(array: &Array) -> Option<Efficiency> {
    let mut starts = Vec::with_capacity(array.factors());
    let mut parameters = 1usize;
    for &s in array.levels() {
        starts.push(parameters);
        parameters = parameters.checked_add(usize::from(s) - 1).filter(|&p| p <= MOST_PARAMETERS)?;
    }
    let singular = |parameters| Efficiency { parameters, determinant: "0".into(), value: 0.0 };
    if parameters > array.runs() {
        return Some(singular(parameters));
    }
    let determinant = determinant(moments(array, &starts, parameters));
    let magnitude = determinant.magnitude();
    if magnitude.bits() == 0 {
        return Some(singular(parameters));
    }
    let scaled =
        array.levels().iter().fold(magnitude.clone(), |d, &s| d * BigUint::from(s).pow(u32::from(s)));
    let exponent = logarithm(&scaled) - parameters as f64 * (array.runs() as f64).ln();
    let value = rounded((exponent / parameters as f64).exp());
    Some(Efficiency { parameters, determinant: determinant.to_string(), value })
}

/// X'X for the columns that mark levels above 0.
fn moments(array: &Array, starts: &[usize], parameters: usize) -> Vec<Vec<BigInt>> {
    let mut sums = vec![vec![0u64; parameters]; parameters];
    let mut marked = Vec::with_capacity(array.factors() + 1);
    for row in array.rows() {
        marked.clear();
        marked.push(0);
        let marks = row.iter().zip(starts).filter(|&(&symbol, _)| symbol > 0);
        marked.extend(marks.map(|(&symbol, &start)| start + usize::from(symbol) - 1));
        for &i in &marked {
            for &j in &marked {
                sums[i][j] += 1;
            }
        }
    }
    sums.into_iter().map(|row| row.into_iter().map(BigInt::from).collect()).collect()
}

/// The determinant of a positive semi-definite matrix, by elimination without fractions. A zero pivot
/// ends it: then a principal minor is zero, and with it the determinant.
fn determinant(mut m: Vec<Vec<BigInt>>) -> BigInt {
    let n = m.len();
    let mut previous = BigInt::from(1);
    for k in 0..n.saturating_sub(1) {
        if m[k][k].bits() == 0 {
            return BigInt::from(0);
        }
        let (above, below) = m.split_at_mut(k + 1);
        let pivot_row = &above[k];
        for (at, row) in (k + 1..).zip(below) {
            let factor = pivot_row[at].clone();
            for j in at..n {
                row[j] = (&row[j] * &pivot_row[k] - &factor * &pivot_row[j]) / &previous;
            }
        }
        previous = m[k][k].clone();
    }
    m[n - 1][n - 1].clone()
}

/// The natural logarithm of a positive whole number, however large.
fn logarithm(n: &BigUint) -> f64 {
    let shift = n.bits().saturating_sub(64);
    let top = (n >> shift).to_u64_digits().first().copied().unwrap_or(0);
    (top as f64).ln() + shift as f64 * std::f64::consts::LN_2
}

#[cfg(test)]
mod tests {
    use super::*;

    fn value(levels: Vec<u16>, rows: &[&[u16]]) -> (String, f64) {
        let found = efficiency(&Array::from_rows(levels, rows).unwrap()).unwrap();
        (found.determinant, found.value)
    }

    #[test]
    fn one_for_orthogonal_arrays_and_zero_for_singular_ones() {
        let half: &[&[u16]] = &[&[0, 0, 0], &[0, 1, 1], &[1, 0, 1], &[1, 1, 0]];
        // Marks (0, 1): 4^4 over 2^2 per factor.
        assert_eq!(value(vec![2; 3], half), ("4".into(), 1.0));
        let full: Vec<Vec<u16>> = (0..6).map(|i| vec![i % 2, i % 3]).collect();
        let full: Vec<&[u16]> = full.iter().map(Vec::as_slice).collect();
        assert_eq!(value(vec![2, 3], &full).1, 1.0);
        assert_eq!(value(vec![2; 2], &[&[0, 0], &[1, 1], &[0, 0], &[1, 1]]), ("0".into(), 0.0));
        assert_eq!(value(vec![2; 3], &half[..3]).1, 0.0);
        assert_eq!(value(vec![3], &[&[0], &[1], &[0], &[1]]).1, 0.0, "a level that does not occur");
    }

    /// Two two-level factors in 3 runs: X'X in −1, 1 has determinant 16, (16/27)^(1/3).
    #[test]
    fn a_case_by_hand() {
        let (determinant, value) = value(vec![2; 2], &[&[0, 0], &[0, 1], &[1, 0]]);
        assert_eq!(determinant, "1");
        assert!((value - (16f64 / 27.0).cbrt()).abs() < 1e-9);
    }

    #[test]
    fn too_many_parameters_are_not_worked_out() {
        let array = Array::from_fn(2, vec![2; MOST_PARAMETERS], |i, _| i as u16).unwrap();
        assert_eq!(efficiency(&array), None);
        let array = Array::from_fn(2, vec![2; MOST_PARAMETERS - 1], |i, _| i as u16).unwrap();
        assert_eq!(efficiency(&array).unwrap().value, 0.0);
    }
}
