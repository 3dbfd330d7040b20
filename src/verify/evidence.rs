//! What a verdict rests on: the [`Witness`] of a broken strength, and exact ratios as text.

use std::fmt;

use num_bigint::BigInt;
use num_integer::Integer;
use serde::{Deserialize, Serialize};

use crate::array::Array;

/// One level combination that occurs too often or too rarely: a proof that an array does not have
/// a strength.
///
/// Columns and symbols are counted from 0, columns ascending; `combination[i]` is the symbol of
/// column `columns[i]`.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Witness {
    /// The columns, from 0, ascending; as many as the strength that fails.
    pub columns: Vec<usize>,
    /// The symbols, from 0, one per column.
    pub combination: Vec<u16>,
    /// How many runs show the combination.
    pub count: u64,
    /// How many runs would have to: N over the product of the columns' levels.
    pub expected: Ratio,
}

impl Witness {
    /// Whether the witness is true of `array`: the columns and symbols exist, and the stated count
    /// and expectation are the real ones and differ. Cost: N times the number of columns.
    #[must_use]
    pub fn holds_for(&self, array: &Array) -> bool {
        let ascending = self.columns.windows(2).all(|w| w[0] < w[1]);
        let in_range = self.columns.iter().all(|&c| c < array.factors());
        if self.columns.len() != self.combination.len() || self.columns.is_empty() || !ascending || !in_range
        {
            return false;
        }
        let levels = || self.columns.iter().map(|&c| array.levels()[c]);
        if levels().zip(&self.combination).any(|(s, &symbol)| symbol >= s) {
            return false;
        }
        let Some(product) = levels().try_fold(1u128, |p, s| p.checked_mul(u128::from(s))) else {
            return false;
        };
        self.count == count_runs(array, &self.columns, &self.combination)
            && self.expected == Ratio::new(array.runs() as u64, product)
            && self.expected != Ratio::new(self.count, 1)
    }
}

/// How many runs show `combination` in `columns`.
pub(super) fn count_runs(array: &Array, columns: &[usize], combination: &[u16]) -> u64 {
    let columns: Vec<&[u16]> = columns.iter().map(|&c| array.column(c)).collect();
    let shows = |&run: &usize| columns.iter().zip(combination).all(|(c, &symbol)| c[run] == symbol);
    (0..array.runs()).filter(shows).count() as u64
}

/// A non-negative rational number in lowest terms. In JSON a whole value is a number, any other a
/// text such as `"9/4"`.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(try_from = "RatioForm", into = "RatioForm")]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
#[cfg_attr(feature = "schema", schemars(with = "RatioForm"))]
pub struct Ratio {
    numerator: u64,
    denominator: u128,
}

impl Ratio {
    /// `numerator / denominator`, reduced.
    ///
    /// # Panics
    /// When the denominator is zero.
    #[must_use]
    pub fn new(numerator: u64, denominator: u128) -> Self {
        assert!(denominator > 0, "a ratio needs a denominator above zero");
        let common = u128::from(numerator).gcd(&denominator);
        Self { numerator: (u128::from(numerator) / common) as u64, denominator: denominator / common }
    }

    /// The numerator in lowest terms.
    #[must_use]
    pub fn numerator(&self) -> u64 {
        self.numerator
    }

    /// The denominator in lowest terms, at least 1.
    #[must_use]
    pub fn denominator(&self) -> u128 {
        self.denominator
    }
}

impl fmt::Display for Ratio {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self.denominator {
            1 => write!(f, "{}", self.numerator),
            d => write!(f, "{}/{d}", self.numerator),
        }
    }
}

#[derive(Serialize, Deserialize)]
#[serde(untagged)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
enum RatioForm {
    Whole(u64),
    Fraction(String),
}

impl From<Ratio> for RatioForm {
    fn from(ratio: Ratio) -> Self {
        match ratio.denominator {
            1 => Self::Whole(ratio.numerator),
            _ => Self::Fraction(ratio.to_string()),
        }
    }
}

impl TryFrom<RatioForm> for Ratio {
    type Error = String;

    fn try_from(form: RatioForm) -> Result<Self, String> {
        let text = match form {
            RatioForm::Whole(n) => return Ok(Self::new(n, 1)),
            RatioForm::Fraction(text) => text,
        };
        let parse = || {
            let (numerator, denominator) = text.split_once('/')?;
            let denominator = denominator.parse().ok().filter(|&d: &u128| d > 1)?;
            Some(Self::new(numerator.parse().ok()?, denominator))
        };
        parse()
            .filter(|r| r.to_string() == text)
            .ok_or_else(|| format!("{text:?} is not a fraction in lowest terms, such as \"9/4\""))
    }
}

/// `numerator / denominator` in lowest terms as text, the form of a word-length pattern's entries:
/// `"0"`, `"35"`, `"55/3"`.
pub(super) fn ratio_text(numerator: &BigInt, denominator: &BigInt) -> String {
    let common = numerator.gcd(denominator);
    let (n, d) = (numerator / &common, denominator / &common);
    if d == BigInt::from(1) { n.to_string() } else { format!("{n}/{d}") }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_ratio_is_a_number_when_whole_and_a_text_otherwise() {
        for (ratio, json) in
            [(Ratio::new(18, 9), "2"), (Ratio::new(18, 8), "\"9/4\""), (Ratio::new(0, 5), "0")]
        {
            assert_eq!(serde_json::to_string(&ratio).unwrap(), json);
            assert_eq!(serde_json::from_str::<Ratio>(json).unwrap(), ratio);
        }
        for bad in ["\"18/8\"", "\"4/1\"", "\"1/0\"", "\"/\"", "\"+9/4\"", "-1", "1.5", "null"] {
            assert!(serde_json::from_str::<Ratio>(bad).is_err(), "{bad}");
        }
    }

    #[test]
    fn a_false_witness_does_not_hold() {
        let array = Array::from_rows(vec![2, 2], &[[0, 0], [1, 1]]).unwrap();
        let good =
            Witness { columns: vec![0, 1], combination: vec![0, 0], count: 1, expected: Ratio::new(2, 4) };
        assert!(good.holds_for(&array));
        let wrong = [
            Witness { columns: vec![1, 0], ..good.clone() },
            Witness { columns: vec![0, 2], ..good.clone() },
            Witness { columns: vec![0], ..good.clone() },
            Witness { combination: vec![0, 2], ..good.clone() },
            Witness { count: 0, ..good.clone() },
            Witness { expected: Ratio::new(1, 1), ..good.clone() },
            Witness { columns: vec![0], combination: vec![0], count: 1, expected: Ratio::new(1, 1) },
            Witness { columns: vec![], combination: vec![], count: 2, expected: Ratio::new(2, 1) },
        ];
        for witness in wrong {
            assert!(!witness.holds_for(&array), "{witness:?}");
        }
    }
}
