//! How near to orthogonal an array is that is not, by stated criteria.
//!
//! | file | what it works out |
//! | --- | --- |
//! | `pairs` | the counts of every pair of columns: the worst pair, the largest correlation |
//! | `bound` | what the sum of squared pair counts cannot fall below |
//! | `contrasts` | orthogonal polynomial contrasts in whole numbers |
//! | `efficiency` | the D-efficiency of the main-effects model |

mod bound;
mod contrasts;
mod efficiency;
mod pairs;

use num_bigint::BigInt;
use num_integer::Integer;
use rayon::prelude::*;
use serde::{Deserialize, Serialize};

pub use efficiency::{Efficiency, MOST_PARAMETERS};
pub use pairs::{Correlation, MOST_STEPS, WorstPair};

use crate::array::Array;

/// How near to orthogonal an array is, by criteria that any array has.
///
/// Columns are counted from 0. `squares` is what the searches make small: the deviation is
/// `squares` less a number that depends on the runs and levels alone.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Nearness {
    /// For each column, how often its most frequent level occurs less how often its rarest does.
    pub level_differences: Vec<u64>,
    /// Σ n_ab² over all pairs of columns and all combinations of their levels, n_ab counting the runs.
    pub squares: u64,
    /// What `squares` is at least, proved, for every array of so many runs with these levels.
    pub least_squares: u64,
    /// Σ (n_ab − N/(rs))² over all pairs of columns, r and s their levels; exact, as `7` or `7/2`.
    pub deviation: String,
    /// What `deviation` is at least, proved, for every array of so many runs with these levels.
    pub least_deviation: String,
    /// The number of pairs of columns.
    pub pairs: u64,
    /// What the pairs show one by one; `None` when going through them takes more than
    /// [`MOST_STEPS`] steps.
    pub by_pairs: Option<ByPairs>,
    /// The D-efficiency of the main-effects model; `None` for more than [`MOST_PARAMETERS`]
    /// parameters.
    pub efficiency: Option<Efficiency>,
}

/// What the pairs of columns show one by one.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct ByPairs {
    /// How many pairs do not show all combinations equally often.
    pub uneven: u64,
    /// The pair with the largest Σ (n_ab − N/(rs))², the first one of several; `None` for one factor.
    pub worst: Option<WorstPair>,
    /// The largest absolute correlation between contrasts of different factors; `None` for one
    /// factor, or when the whole numbers would be too large: more than 32 levels, or a great many runs.
    pub correlation: Option<Correlation>,
}

impl Nearness {
    /// The largest of `level_differences`.
    #[must_use]
    pub fn largest_level_difference(&self) -> u64 {
        self.level_differences.iter().copied().max().unwrap_or(0)
    }

    /// Whether the deviation is the least that any array of this size can have.
    #[must_use]
    pub fn attains_the_bound(&self) -> bool {
        self.squares == self.least_squares
    }
}

/// Works out how near to orthogonal an array is.
///
/// Guarantee: the counts, the sums of squares, their bound, the squared correlation and the
/// determinant are exact; `value`s are rounded to nine decimals and for printing. The result does not
/// depend on the number of threads.
///
/// Cost: N·k² steps, or N²·k when the pairs are too many to go through, and that of the
/// determinant.
///
/// References: H. Xu, *Technometrics* 44 (2002), 356–368; J. C. Wang & C. F. J. Wu, *Technometrics*
/// 34 (1992), 409–422; N.-K. Nguyen, *Technometrics* 38 (1996), 279–283.
///
/// ```
/// use trysquare::{array::Array, verify::nearness};
/// // Three runs of four: each pair of columns misses one combination.
/// let array = Array::from_rows(vec![2, 2, 2], &[[0, 0, 0], [0, 1, 1], [1, 0, 1]])?;
/// let near = nearness(&array);
/// assert_eq!((near.deviation.as_str(), near.least_deviation.as_str()), ("9/4", "9/4"));
/// assert_eq!(near.by_pairs.unwrap().correlation.unwrap().squared, "1/4");
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
#[must_use]
pub fn nearness(array: &Array) -> Nearness {
    let (runs, factors) = (array.runs(), array.factors() as u64);
    let seen = pairs::affordable(array).then(|| pairs::go_through(array));
    let (squares, by_pairs) = match seen {
        Some((squares, by_pairs)) => (squares, Some(by_pairs)),
        None => (squares_by_runs(array), None),
    };
    let least = bound::least_squares(runs, array.levels());
    Nearness {
        level_differences: array
            .columns()
            .zip(array.levels())
            .map(|(column, &s)| {
                let counts = level_counts(column, s);
                counts.iter().max().unwrap_or(&0) - counts.iter().min().unwrap_or(&0)
            })
            .collect(),
        squares: u64::try_from(squares).unwrap_or(u64::MAX),
        least_squares: u64::try_from(least).unwrap_or(u64::MAX),
        deviation: deviation(array, squares),
        least_deviation: deviation(array, least),
        pairs: factors * (factors - 1) / 2,
        by_pairs,
        efficiency: efficiency::efficiency(array),
    }
}

fn level_counts(column: &[u16], levels: u16) -> Vec<u64> {
    let mut counts = vec![0; usize::from(levels)];
    for &symbol in column {
        counts[usize::from(symbol)] += 1;
    }
    counts
}

/// Σ n_ab² from the numbers δ_ij of factors in which two runs agree: Σ_{i<j} δ_ij(δ_ij − 1) +
/// N·k(k − 1)/2.
fn squares_by_runs(array: &Array) -> u128 {
    let rows: Vec<Vec<u16>> = array.rows().collect();
    let k = array.factors() as u128;
    let agreeing = |i: usize| -> u128 {
        let agree = |other: &Vec<u16>| rows[i].iter().zip(other).map(|(a, b)| u64::from(a == b)).sum::<u64>();
        rows[..i].iter().map(|other| u128::from(agree(other))).map(|d| d * d.saturating_sub(1)).sum()
    };
    (0..rows.len()).into_par_iter().map(agreeing).sum::<u128>() + array.runs() as u128 * (k * (k - 1) / 2)
}

/// `squares` less Σ N²/(rs) over the pairs of columns.
fn deviation(array: &Array, squares: u128) -> String {
    let one = BigInt::from(1);
    let common = array.mix().counts().keys().fold(one, |l, &s| l.lcm(&BigInt::from(s)));
    let part = |s: u16| &common / BigInt::from(s);
    let (mut sum, mut own) = (BigInt::from(0), BigInt::from(0));
    for (s, count) in array.mix().counts() {
        sum += part(s) * BigInt::from(count);
        own += part(s) * part(s) * BigInt::from(count);
    }
    // Σ 1/(rs) = ((Σ 1/s)² − Σ 1/s²)/2.
    let denominator = BigInt::from(2) * &common * &common;
    let expected = (&sum * &sum - own) * BigInt::from(array.runs()).pow(2);
    fraction(BigInt::from(squares) * &denominator - expected, denominator)
}

/// A fraction in lowest terms as text.
fn fraction(numerator: BigInt, denominator: BigInt) -> String {
    let common = numerator.gcd(&denominator);
    let (n, d) = (numerator / &common, denominator / &common);
    if d == BigInt::from(1) { n.to_string() } else { format!("{n}/{d}") }
}

/// Nine decimals, so that the last bits of a logarithm show on no machine.
fn rounded(value: f64) -> f64 {
    (value * 1e9).round() / 1e9
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn both_ways_of_counting_agree() {
        let mut state = 1u64;
        for levels in [vec![2, 3, 4], vec![2; 5], vec![7, 2, 3, 3], vec![5]] {
            for runs in [1, 2, 5, 9] {
                let mut rows = Vec::new();
                for _ in 0..runs {
                    let mut row = Vec::new();
                    for &s in &levels {
                        state = state.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695);
                        row.push(((state >> 33) % u64::from(s)) as u16);
                    }
                    rows.push(row);
                }
                let array = Array::from_rows(levels.clone(), &rows).unwrap();
                assert_eq!(pairs::go_through(&array).0, squares_by_runs(&array));
                let near = nearness(&array);
                assert!(near.least_squares <= near.squares);
            }
        }
    }

    #[test]
    fn an_orthogonal_array_is_as_near_as_can_be() {
        let rows: Vec<[u16; 4]> =
            (0..9).map(|i| [i / 3, i % 3, (i / 3 + i) % 3, (2 * (i / 3) + i) % 3]).collect();
        let near = nearness(&Array::from_rows(vec![3; 4], &rows).unwrap());
        assert_eq!((near.deviation.as_str(), near.attains_the_bound()), ("0", true));
        assert_eq!(near.largest_level_difference(), 0);
        assert_eq!(near.efficiency.unwrap().value, 1.0);
        let by_pairs = near.by_pairs.unwrap();
        assert_eq!((by_pairs.uneven, by_pairs.correlation.unwrap().squared.as_str()), (0, "0"));
    }

    #[test]
    fn one_factor_has_no_pairs() {
        let near = nearness(&Array::from_rows(vec![3], &[[0], [1]]).unwrap());
        assert_eq!((near.pairs, near.deviation.as_str(), near.level_differences[0]), (0, "0", 1));
        assert_eq!(near.by_pairs.unwrap(), ByPairs { uneven: 0, worst: None, correlation: None });
    }
}
