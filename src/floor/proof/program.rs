use num_bigint::BigInt;
use num_integer::Integer;
use serde::{Deserialize, Serialize};

use super::error::ExclusionError;
use super::krawtchouk::Krawtchouk;

/// Certificates for more weight tuples than this are neither made nor checked.
pub const MAX_TUPLES: usize = 20_000;

/// Certificates with more (weight tuples × terms) than this are neither made nor checked.
pub const MAX_COST: usize = 4_000_000;

/// Certificates for more factors of one number of levels than this are neither made nor checked.
pub const MAX_FACTORS: u64 = 256;

/// The certificate of the linear programming bound: integers g > 0 and f_j.
///
/// Let the mix have k_m factors of s_m levels, m = 1..v, levels ascending. For an array of N runs
/// let A_i be 1/N times the number of pairs of runs that differ in i_m factors of the m-th kind,
/// B_j = (1/N) Σ_i A_i Π_m K_{j_m}(i_m) its dual distribution and v_j = Π_m K_{j_m}(0). Strength t
/// means B_j = 0 for 0 < |j| ≤ t, and always B_j ≥ 0. Put
///
/// G(i) = g − Σ_j f_j Π_m K_{j_m}(i_m) / v_j.
///
/// If f_j ≥ 0 for |j| > t and G(i) ≥ 0 for i ≠ 0 then, with A_0 ≥ 1 and G(0) ≥ 0,
///
/// G(0) ≤ Σ_i A_i G(i) = N g − N Σ_{|j| > t} f_j B_j / v_j ≤ N g,
///
/// so N ≥ G(0)/g where G(0) = g − Σ_j f_j.
///
/// Reference: Delsarte 1973; Sloane & Stufken, "A linear programming bound for orthogonal arrays
/// with mixed levels", 1996 [the normalisation by v_j is ours].
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Weights {
    /// g.
    pub constant: i64,
    /// The f_j that are not 0, in ascending order of j.
    pub terms: Vec<Term>,
}

/// One f_j.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Term {
    /// j: how many factors of each kind, levels ascending.
    pub at: Vec<u32>,
    /// f_j.
    pub weight: i64,
}

impl Weights {
    /// G(0) = g − Σ f_j.
    #[must_use]
    pub fn at_zero(&self) -> i128 {
        i128::from(self.constant) - self.terms.iter().map(|t| i128::from(t.weight)).sum::<i128>()
    }

    /// The bound that the weights give, if they are a certificate.
    #[must_use]
    pub fn least(&self) -> Option<u64> {
        let constant = i128::from(self.constant);
        (constant > 0).then(|| u64::try_from(Integer::div_ceil(&self.at_zero(), &constant).max(1)).ok())?
    }

    /// Checks that the weights are a certificate for a mix and a strength.
    ///
    /// Cost: weight tuples times terms, in big integers.
    ///
    /// # Errors
    /// The first condition that does not hold.
    pub fn check(&self, counts: &[(u16, u64)], strength: u32) -> Result<(), ExclusionError> {
        if self.constant <= 0 {
            return Err(ExclusionError::Constant);
        }
        self.check_size(counts)?;
        self.check_terms(counts, |size, weight| size <= u64::from(strength) || weight >= 0)?;
        if self.at_zero() < 0 {
            return Err(ExclusionError::Negative(vec![0; counts.len()]));
        }
        match self.negative(counts) {
            Some(at) => Err(ExclusionError::Negative(at)),
            None => Ok(()),
        }
    }

    /// Whether the terms are in order and inside the mix, and `may` allows each |j| its weight.
    pub(super) fn check_terms(
        &self,
        counts: &[(u16, u64)],
        may: impl Fn(u64, i64) -> bool,
    ) -> Result<(), ExclusionError> {
        for (n, term) in self.terms.iter().enumerate() {
            let size: u64 = term.at.iter().map(|&j| u64::from(j)).sum();
            let right = term.at.len() == counts.len()
                && size > 0
                && term.at.iter().zip(counts).all(|(&j, &(_, k))| u64::from(j) <= k)
                && (n == 0 || self.terms[n - 1].at < term.at)
                && may(size, term.weight);
            if !right {
                return Err(ExclusionError::Weight(term.at.clone()));
            }
        }
        Ok(())
    }

    /// Whether the check is short enough to be made.
    pub(super) fn check_size(&self, counts: &[(u16, u64)]) -> Result<(), ExclusionError> {
        let tuples = counts
            .iter()
            .try_fold(1u64, |n, &(_, k)| n.checked_mul(k.checked_add(1)?))
            .and_then(|n| usize::try_from(n).ok())
            .filter(|&n| n <= MAX_TUPLES && n.saturating_mul(self.terms.len()) <= MAX_COST)
            .filter(|_| counts.iter().all(|&(_, k)| k <= MAX_FACTORS));
        tuples.map(|_| ()).ok_or(ExclusionError::TooLarge)
    }

    /// A place i ≠ 0 with G(i) < 0.
    fn negative(&self, counts: &[(u16, u64)]) -> Option<Vec<u32>> {
        let mut found = None;
        self.visit(counts, &mut |at, value| {
            let wrong = *value < BigInt::ZERO && at.iter().any(|&x| x > 0);
            if wrong {
                found = Some(at.to_vec());
            }
            !wrong
        });
        found
    }

    /// Calls `with` for all i in ascending order with m·G(i), m a common multiple of the v_j that
    /// is returned, until it says false. The sizes and the terms must have been checked.
    pub(super) fn visit(
        &self,
        counts: &[(u16, u64)],
        with: &mut dyn FnMut(&[u32], &BigInt) -> bool,
    ) -> BigInt {
        let tables: Vec<Krawtchouk> = counts.iter().map(|&(s, k)| Krawtchouk::new(s, k as usize)).collect();
        let size = |term: &Term| -> BigInt {
            term.at.iter().zip(&tables).map(|(&j, table)| table.value(j as usize, 0)).product()
        };
        // Everything times the least common multiple of the v_j.
        let multiple = self.terms.iter().fold(BigInt::from(1), |m, t| m.lcm(&size(t)));
        let parts: Vec<(&[u32], BigInt)> =
            self.terms.iter().map(|t| (&t.at[..], BigInt::from(t.weight) * (&multiple / size(t)))).collect();
        let constant = BigInt::from(self.constant) * &multiple;
        walk(&tables, &parts, &constant, &mut Vec::new(), with);
        multiple
    }
}

/// Visits all places that begin with `at`, false when told to stop; `parts` are the terms with the
/// factors of that beginning multiplied in, those of equal remaining index added up.
fn walk(
    tables: &[Krawtchouk],
    parts: &[(&[u32], BigInt)],
    constant: &BigInt,
    at: &mut Vec<u32>,
    with: &mut dyn FnMut(&[u32], &BigInt) -> bool,
) -> bool {
    let Some((table, rest)) = tables.split_first() else {
        let sum: BigInt = parts.iter().map(|p| &p.1).sum();
        return with(at, &(constant - sum));
    };
    // Terms that agree in the rest stand together, so that they can be added up.
    let mut order: Vec<usize> = (0..parts.len()).collect();
    order.sort_by_key(|&n| &parts[n].0[1..]);
    for x in 0..=table.factors() {
        let mut next: Vec<(&[u32], BigInt)> = Vec::new();
        for &n in &order {
            let (index, coefficient) = &parts[n];
            let value = coefficient * table.value(index[0] as usize, x);
            match next.last_mut() {
                Some(last) if last.0 == &index[1..] => last.1 += value,
                _ => next.push((&index[1..], value)),
            }
        }
        at.push(x as u32);
        let goes_on = walk(rest, &next, constant, at, with);
        at.pop();
        if !goes_on {
            return false;
        }
    }
    true
}
