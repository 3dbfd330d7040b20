//! Which engine judges how far.

use serde::{Deserialize, Serialize};

use super::evidence::Witness;
use super::{JudgeError, counting, distance};
use crate::array::Array;

/// Work of so many word operations (some tenths of a second) is done without being asked for.
const AFFORDABLE: u128 = 1 << 28;

/// One of the two judges.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub enum Engine {
    /// [`counting`](super::counting): by the definition.
    Counting,
    /// [`distance`](super::distance): by the dual distribution.
    Distance,
}

/// What the engines found.
pub(super) struct Findings {
    /// A strength that the array has.
    pub(super) strength: usize,
    /// Whether it is the largest.
    pub(super) exact: bool,
    /// B_1, …, of length [`pattern_length`].
    pub(super) pattern: Option<Vec<String>>,
    /// Why `strength` + 1 fails, when counting met the failure.
    pub(super) witness: Option<Witness>,
    /// Who found it, ascending.
    pub(super) engines: Vec<Engine>,
}

/// The entries of a certificate's word-length pattern: `max(strength + 2, min(k, 6))`, at most k.
pub(super) fn pattern_length(strength: usize, factors: usize) -> usize {
    strength.saturating_add(2).max(6).min(factors)
}

/// The largest t for which the t largest numbers of levels have a product of at most N: no array
/// with these levels is stronger.
pub(super) fn strength_ceiling(array: &Array) -> usize {
    let mut levels = array.levels().to_vec();
    levels.sort_unstable();
    let mut left = array.runs();
    levels
        .iter()
        .rev()
        .take_while(|&&s| {
            left /= usize::from(s);
            left > 0
        })
        .count()
}

/// Finds the strength of `array`: whether it reaches `required` at any cost, and a little further
/// as far as this is affordable.
pub(super) fn investigate(array: &Array, required: usize, thorough: bool) -> Result<Findings, JudgeError> {
    let ceiling = strength_ceiling(array);
    let limit = ceiling.min(required.max(3).saturating_add(1));
    let must = required.min(ceiling);
    let counting_cost = counting_cost_to(array, must);
    let degree = pattern_length(limit, array.factors());
    let by_distance = thorough || distance::cost(array, degree) <= counting_cost.max(AFFORDABLE);
    let counted = (thorough || !by_distance).then(|| count(array, must, limit));
    if !by_distance {
        let (strength, witness) = counted.expect("one of the engines runs");
        let exact = witness.is_some() || strength == ceiling;
        return Ok(Findings { strength, exact, pattern: None, witness, engines: vec![Engine::Counting] });
    }
    let dual = distance::dual_distribution(array, degree);
    let strength = dual.strength().min(limit);
    let mut engines = vec![Engine::Distance];
    let mut witness = None;
    if let Some((counting, failure)) = counted {
        if counting > strength || (failure.is_some() && counting != strength) {
            return Err(JudgeError::Disagreement { counting, distance: strength });
        }
        witness = failure;
        engines.insert(0, Engine::Counting);
    }
    let mut pattern = dual.word_length_pattern();
    pattern.truncate(pattern_length(strength, array.factors()));
    let exact = strength < limit || limit == ceiling;
    Ok(Findings { strength, exact, pattern: Some(pattern), witness, engines })
}

/// The strength by counting, up to `must` at any cost, up to `limit` while affordable; and why
/// the next one fails, if it was seen to.
fn count(array: &Array, must: usize, limit: usize) -> (usize, Option<Witness>) {
    let slices = counting::Slices::new(array);
    for t in 1..=limit {
        if t > must && counting_cost(array, t) > AFFORDABLE {
            return (t - 1, None);
        }
        if let Some(witness) = slices.violation(t) {
            return (t - 1, Some(witness));
        }
    }
    (limit, None)
}

/// The witness that strength `t` fails, as [`counting::find_violation`] gives it. Needs strength
/// t − 1. Where counting every set would take long, distances say where the first one begins.
pub(super) fn find_witness(array: &Array, t: usize) -> Option<Witness> {
    let slices = counting::Slices::new(array);
    let evaluations = u128::from(array.factors().ilog2()) + 2;
    let narrowing = distance::cost(array, t).saturating_mul(evaluations);
    if counting_cost(array, t) <= narrowing.max(AFFORDABLE) {
        return slices.violation(t);
    }
    slices.violation_beginning(first_uneven_column(array, t), t)
}

/// The column with which the lexicographically first uneven set of `t` columns begins.
///
/// Given strength t − 1, B_t is a sum over the sets of t columns, positive exactly for the uneven
/// ones. So leaving out the columns 0..=c makes B_t smaller as soon as an uneven set begins
/// with one of them: the first such c is found by bisection.
fn first_uneven_column(array: &Array, t: usize) -> usize {
    let numerator = |from: usize| {
        let columns: Vec<usize> = (from..array.factors()).collect();
        let rest = array.select(&columns).ok()?;
        distance::dual_distribution(&rest, t).numerators().get(t).cloned()
    };
    let all = numerator(0);
    let (mut low, mut high) = (0, array.factors() - t);
    while low < high {
        let middle = low + (high - low) / 2;
        if numerator(middle + 1) == all {
            low = middle + 1;
        } else {
            high = middle;
        }
    }
    low
}

/// Whether both engines can judge strength `required` without anybody waiting long.
pub(super) fn both_affordable(array: &Array, required: usize) -> bool {
    let degree = pattern_length(required.max(3).saturating_add(1), array.factors());
    counting_cost_to(array, required.min(strength_ceiling(array))) <= AFFORDABLE
        && distance::cost(array, degree) <= AFFORDABLE
}

/// An estimate of the word operations of counting all sets of up to `top` columns.
fn counting_cost_to(array: &Array, top: usize) -> u128 {
    (1..=top).fold(0, |sum, t| sum.saturating_add(counting_cost(array, t)))
}

/// An estimate of the word operations of counting all sets of `t` columns.
fn counting_cost(array: &Array, t: usize) -> u128 {
    let runs = array.runs() as u128;
    let elementary = |weight: &dyn Fn(u16) -> u128| {
        let mut sums = vec![0u128; t + 1];
        sums[0] = 1;
        for &s in array.levels() {
            for j in (1..=t).rev() {
                sums[j] = sums[j].saturating_add(sums[j - 1].saturating_mul(weight(s)));
            }
        }
        sums[t]
    };
    let by_histogram = elementary(&|_| 1).saturating_mul(2 * runs);
    if array.levels().iter().any(|&s| s > counting::SLICED_LEVELS) {
        return by_histogram;
    }
    let by_slices = elementary(&|s| u128::from(s - 1)).saturating_mul(runs.div_ceil(64) + 2);
    by_histogram.min(by_slices)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The runs are the vectors of GF(2)^6, the columns these functionals.
    fn parities(functionals: &[u32]) -> Array {
        let symbol = |i: usize, j: usize| ((i as u32 & functionals[j]).count_ones() % 2) as u16;
        Array::from_fn(64, vec![2; functionals.len()], symbol).unwrap()
    }

    #[test]
    fn distances_say_where_the_first_uneven_set_begins() {
        let cases: [(&[u32], usize, usize); 6] = [
            (&[1, 2, 3, 4, 8, 12, 16], 3, 0),
            (&[1, 2, 4, 8, 16, 24], 3, 3),
            (&[1, 2, 4, 8, 16, 28, 32], 4, 2),
            (&[1, 2, 3, 4, 1], 2, 0),
            (&[1, 2, 3, 4, 4], 2, 3),
            (&[1, 2, 0, 4], 1, 2),
        ];
        for (functionals, t, first) in cases {
            let array = parities(functionals);
            assert_eq!(first_uneven_column(&array, t), first, "{functionals:?}");
            let slices = counting::Slices::new(&array);
            let witness = slices.violation(t).unwrap();
            assert_eq!(witness.columns[0], first);
            assert_eq!(slices.violation_beginning(first, t), Some(witness.clone()));
            assert_eq!(find_witness(&array, t), Some(witness));
        }
    }

    #[test]
    fn the_ceiling_is_what_the_largest_levels_allow() {
        let ceiling = |runs, levels: &[u16]| {
            strength_ceiling(&Array::from_fn(runs, levels.to_vec(), |_, _| 0).unwrap())
        };
        assert_eq!(ceiling(1, &[2, 2]), 0);
        assert_eq!(ceiling(5, &[2, 3]), 1);
        assert_eq!(ceiling(6, &[2, 3]), 2);
        assert_eq!(ceiling(64, &[2; 9]), 6);
        assert_eq!(ceiling(64, &[2; 4]), 4);
    }

    /// The cost of counting small cases beside their number of column sets.
    #[test]
    fn counting_costs_what_its_column_sets_cost() {
        let array = parities(&[1, 2, 4, 8, 16, 32]);
        assert_eq!(counting_cost(&array, 3), 20 * 3);
        let wide = Array::from_fn(100, vec![10; 5], |_, _| 0).unwrap();
        assert_eq!(counting_cost(&wide, 2), 10 * 200);
    }
}
