use std::collections::BTreeMap;

use num_bigint::BigInt;
use serde::{Deserialize, Serialize};

use super::error::ExclusionError;
use super::program::Weights;
use super::subject::Subject;

/// More branches than this are neither made nor checked.
pub const MAX_BRANCHES: usize = 32;

/// Why the distances from one run to all runs cannot be: a tree of cases.
///
/// Fix a run of an array of strength t in N runs, and let n_i be the number of runs, itself
/// included, that differ from it in i_m factors of the m-th kind; i and K as in [`Weights`]. Then
/// n_i ≥ 0, n_0 ≥ 1, Σ n_i = N, and Σ_i n_i Π_m K_{j_m}(i_m) = 0 for 0 < |j| ≤ t, as the sum over
/// the runs of the products of the contrasts of at most t factors is zero, whatever the fixed run
/// contributes to it. And the n_i are integers, so n_i ≤ c or n_i ≥ c + 1 for every c.
///
/// At a leaf let P(i) = g − Σ_{0 < |j| ≤ t} f_j Π K_{j_m}(i_m)/v_j for any integers g and f_j. Then
/// Σ n_i P(i) = N g. The case n_i ≥ l_i, n_i ≤ u_i where a limit was set, makes the left side at
/// least Σ l_i P(i) over P(i) > 0 plus Σ u_i P(i) over P(i) < 0. When that is above N g the case is
/// impossible.
///
/// Reference: Delsarte 1973 for the equations \[memory\]; the cases are branch and bound.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(tag = "case", rename_all = "kebab-case", deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub enum Distances {
    /// An impossible case.
    Leaf {
        /// g and the f_j.
        weights: Weights,
    },
    /// Two cases.
    Branch {
        /// i.
        at: Vec<u32>,
        /// c.
        most: u64,
        /// The case n_i ≤ c.
        low: Box<Distances>,
        /// The case n_i ≥ c + 1.
        high: Box<Distances>,
    },
}

/// The limits l_i and u_i that cases have set.
pub(super) type Limits = BTreeMap<Vec<u32>, (u64, Option<u64>)>;

impl Distances {
    /// Checks that no run of an array for the subject can have distances.
    ///
    /// # Errors
    /// The first condition that does not hold.
    pub fn check(&self, about: &Subject) -> Result<(), ExclusionError> {
        let counts = about.counts();
        if about.runs == 0 || self.branches(MAX_BRANCHES).is_none() {
            return Err(ExclusionError::TooLarge);
        }
        let limits = Limits::from([(vec![0; counts.len()], (1, None))]);
        self.case(about, &counts, &limits)
    }

    /// The number of branches, `None` when it is above `most`.
    fn branches(&self, most: usize) -> Option<usize> {
        match self {
            Self::Leaf { .. } => Some(0),
            Self::Branch { low, high, .. } => {
                let most = most.checked_sub(1)?;
                let low = low.branches(most)?;
                Some(1 + low + high.branches(most - low)?)
            }
        }
    }

    fn case(&self, about: &Subject, counts: &[(u16, u64)], limits: &Limits) -> Result<(), ExclusionError> {
        match self {
            Self::Leaf { weights } => leaf(weights, about, counts, limits),
            Self::Branch { at, most, low, high } => {
                let inside =
                    at.len() == counts.len() && at.iter().zip(counts).all(|(&x, &(_, k))| u64::from(x) <= k);
                let above = most.checked_add(1).filter(|_| inside);
                let above = above.ok_or_else(|| ExclusionError::Weight(at.clone()))?;
                let (least, limit) = limits.get(at).copied().unwrap_or((0, None));
                let mut case = limits.clone();
                case.insert(at.clone(), (least, Some(limit.map_or(*most, |u| u.min(*most)))));
                low.case(about, counts, &case)?;
                case.insert(at.clone(), (least.max(above), limit));
                high.case(about, counts, &case)
            }
        }
    }
}

fn leaf(
    weights: &Weights,
    about: &Subject,
    counts: &[(u16, u64)],
    limits: &Limits,
) -> Result<(), ExclusionError> {
    if limits.values().any(|&(least, most)| most.is_some_and(|u| u < least)) {
        return Ok(());
    }
    weights.check_size(counts)?;
    weights.check_terms(counts, |size, _| size <= u64::from(about.strength))?;
    let mut sum = BigInt::ZERO;
    let mut unbounded = None;
    let multiple = weights.visit(counts, &mut |at, value| {
        let (least, most) = limits.get(at).copied().unwrap_or((0, None));
        if *value >= BigInt::ZERO {
            sum += value * least;
        } else if let Some(most) = most {
            sum += value * most;
        } else {
            unbounded = Some(at.to_vec());
        }
        unbounded.is_none()
    });
    if let Some(at) = unbounded {
        return Err(ExclusionError::Negative(at));
    }
    let right = multiple * weights.constant * about.runs;
    if sum > right { Ok(()) } else { Err(ExclusionError::Weak) }
}
