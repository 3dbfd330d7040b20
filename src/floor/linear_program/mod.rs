//! The linear programming bound, by generation of rows and columns, with an integer certificate.
//!
//! Floating point finds the weights; they count only as rounded integers after the exact check of
//! [`Weights`]. A program that is left early still gives a valid, if weaker, certificate: the
//! constant is set to what the weights need.
//!
//! Reference: Delsarte 1973; Sloane & Stufken 1996.

mod distances;
mod round;
mod solver;
mod space;

use super::proof::{Bound, Subject, Weights, parity_applies, parity_bounds};
use super::{Effort, Reason, confirmed};
use crate::mix::Mix;
pub use distances::distances;
use round::round;
use solver::{Row, minimise};
use space::Space;

/// More rounds of generation are not made.
const ROUNDS: usize = 80;

/// So many rows and so many columns join at the most in one round.
const JOIN: usize = 12;

/// What counts as violated.
const TOLERANCE: f64 = 1e-7;

/// What is asked: to show that there is no array of `above` runs or fewer, or of exactly `above`.
struct Question<'a> {
    counts: &'a [(u16, u64)],
    strength: u32,
    /// With [`parity_bounds`]: about exactly so many runs.
    exactly: Option<u64>,
    space: Space,
}

impl<'a> Question<'a> {
    fn new(counts: &'a [(u16, u64)], strength: u32, exactly: Option<u64>) -> Option<Self> {
        Some(Self { counts, strength, exactly, space: Space::new(counts)? })
    }

    /// The least value of N B_j / v_j.
    fn least(&self, j: usize) -> f64 {
        let sharpened = |_: &u64| parity_bounds(self.space.tuple(j), self.counts, self.strength);
        self.exactly.filter(sharpened).map_or(0.0, |runs| 4f64.powi(self.strength as i32) / runs as f64)
    }

    /// Whether f_j may have either sign.
    fn free(&self, j: usize) -> bool {
        self.space.size(j) <= u64::from(self.strength)
    }

    /// The bound on N from weights f_j for which g is `constant`.
    fn value(&self, weights: &[(usize, f64)], constant: f64) -> f64 {
        let sum: f64 = weights.iter().map(|&(j, f)| f * (1.0 - self.least(j))).sum();
        if constant > 0.0 { (constant - sum) / constant } else { f64::NEG_INFINITY }
    }

    /// What g must be for the weights: the largest Σ f_j q_j(i), i ≠ 0.
    fn constant(&self, weights: &[(usize, f64)]) -> f64 {
        self.space.transform(weights).into_iter().skip(1).fold(f64::NEG_INFINITY, f64::max)
    }
}

/// The linear programming bound for a mix, rounded so as to be of most use with the divisor, with
/// the least certificate that was found; `None` when the mix is too large for one that can be
/// checked, or nothing came of it.
///
/// Cost: some tens of small linear programs; `effort` counts multiplications. With the effort used
/// up the bound is valid but may be weaker.
#[must_use]
pub fn linear_program(mix: &Mix, strength: u32, divisor: u64, effort: &mut Effort<'_>) -> Option<Bound> {
    let counts: Vec<(u16, u64)> = mix.counts().into_iter().map(|(s, k)| (s, k as u64)).collect();
    let question = Question::new(&counts, strength, None).filter(|_| effort.goes_on())?;
    let weights = solve(&question, f64::INFINITY, effort)?;
    let value = question.value(&weights, question.constant(&weights));
    if !(1.0..1e15).contains(&value) {
        return None;
    }
    let divisor = divisor.max(1);
    let goal = ((value - 1e-6).ceil() as u64).max(1).div_ceil(divisor) * divisor;
    let strong = |w: &Weights| w.least().is_some_and(|least| least > goal - divisor);
    let weights = round(&question, &weights, strong)?;
    weights.check(&counts, strength).ok()?;
    Some(Bound::LinearProgram { least: weights.least()?, weights })
}

/// A certificate that a subject has no array, from the linear program sharpened by parity; `None`
/// when parity does not apply or the program does not reach that far.
///
/// Cost: as [`linear_program`].
#[must_use]
pub fn parity(about: &Subject, effort: &mut Effort<'_>) -> Option<Reason> {
    let counts = about.counts();
    let even: u64 = counts.iter().filter(|c| c.0 % 2 == 0).map(|c| c.1).sum();
    if !effort.goes_on() || !parity_applies(about.runs, about.strength) || even <= u64::from(about.strength) {
        return None;
    }
    let question = Question::new(&counts, about.strength, Some(about.runs))?;
    let weights = solve(&question, about.runs as f64 + 1e-3, effort)?;
    let holds = |w: &Weights| confirmed(&Reason::Parity { weights: w.clone() }, about);
    let weights = round(&question, &weights, holds)?;
    let reason = Reason::Parity { weights };
    confirmed(&reason, about).then_some(reason)
}

/// Weights whose value is optimal, above `enough`, or what the effort allowed.
fn solve(question: &Question<'_>, enough: f64, effort: &mut Effort<'_>) -> Option<Vec<(usize, f64)>> {
    let space = &question.space;
    let len = space.len();
    let mut columns: Vec<usize> = (1..len).filter(|&j| question.free(j)).collect();
    let step = len.div_ceil(40).max(1);
    let mut rows: Vec<usize> = (1..len).step_by(step).chain([len - 1]).collect();
    rows.dedup();
    // No sensible weight is larger; the limit keeps small programs bounded.
    let limit = 64.0 * question.counts.iter().map(|&(s, k)| f64::from(s - 1) * k as f64).sum::<f64>() + 64.0;
    let limit = limit * f64::from(question.strength.max(2) - 1) * len as f64;
    let mut best: Option<(f64, Vec<(usize, f64)>)> = None;
    for _ in 0..ROUNDS {
        let size = rows.len() * columns.len();
        let cost = (size * (rows.len() + columns.len()) + len * (rows.len() + columns.len())) as u64;
        if !effort.spend(cost) {
            break;
        }
        let Some(weights) = weights(question, &rows, &columns, limit) else { break };
        let sums = space.transform(&weights);
        let constant = sums.iter().skip(1).copied().fold(f64::NEG_INFINITY, f64::max);
        let value = question.value(&weights, constant);
        if best.as_ref().is_none_or(|(known, _)| value > *known) {
            best = Some((value, weights.clone()));
        }
        if value >= enough {
            break;
        }
        let Some(pairs) = pairs(question, &rows, &columns, limit) else { break };
        let duals = space.transform(&pairs);
        let broken_rows = worst(len, &rows, |i| sums[i] - 1.0);
        let broken_columns = worst(len, &columns, |j| question.least(j) - 1.0 - duals[j]);
        if broken_rows.is_empty() && broken_columns.is_empty() {
            break;
        }
        rows.extend(broken_rows);
        columns.extend(broken_columns);
    }
    best.map(|(_, weights)| weights)
}

/// The numbers from 1 on, outside `known`, by how much they are violated: the worst ones.
fn worst(len: usize, known: &[usize], by: impl Fn(usize) -> f64) -> Vec<usize> {
    let mut inside = vec![false; len];
    for &n in known {
        inside[n] = true;
    }
    let mut found: Vec<(f64, usize)> =
        (1..len).filter(|&n| !inside[n]).map(|n| (by(n), n)).filter(|f| f.0 > TOLERANCE).collect();
    found.sort_by(|a, b| b.0.total_cmp(&a.0).then(a.1.cmp(&b.1)));
    found.into_iter().take(JOIN).map(|f| f.1).collect()
}

/// The weights that are best for these rows and columns, g = 1.
fn weights(
    question: &Question<'_>,
    rows: &[usize],
    columns: &[usize],
    limit: f64,
) -> Option<Vec<(usize, f64)>> {
    let costs: Vec<f64> = columns.iter().map(|&j| 1.0 - question.least(j)).collect();
    let limits: Vec<(f64, f64)> =
        columns.iter().map(|&j| (if question.free(j) { -limit } else { 0.0 }, limit)).collect();
    let program: Vec<Row> = rows
        .iter()
        .map(|&i| Row {
            coefficients: columns.iter().map(|&j| -question.space.q(j, i)).collect(),
            equal: false,
            right: -1.0,
        })
        .collect();
    let solution = minimise(&costs, &limits, &program)?;
    Some(columns.iter().copied().zip(solution).filter(|f| f.1.abs() > 1e-12).collect())
}

/// The numbers of pairs A_i that are best for these rows and columns: the program whose dual
/// [`weights`] solves.
fn pairs(
    question: &Question<'_>,
    rows: &[usize],
    columns: &[usize],
    limit: f64,
) -> Option<Vec<(usize, f64)>> {
    let (m, n) = (rows.len(), columns.len());
    // After the A_i what a column falls short, after that what it has too much.
    let costs: Vec<f64> = (0..m + 2 * n).map(|v| if v < m { 1.0 } else { limit }).collect();
    let limits = vec![(0.0, f64::INFINITY); m + 2 * n];
    let program: Vec<Row> = columns
        .iter()
        .enumerate()
        .map(|(c, &j)| {
            let mut coefficients: Vec<f64> = rows.iter().map(|&i| question.space.q(j, i)).collect();
            coefficients.resize(m + 2 * n, 0.0);
            coefficients[m + c] = 1.0;
            coefficients[m + n + c] = if question.free(j) { -1.0 } else { 0.0 };
            Row { coefficients, equal: question.free(j), right: question.least(j) - 1.0 }
        })
        .collect();
    let solution = minimise(&costs, &limits, &program)?;
    Some(rows.iter().copied().zip(solution).filter(|a| a.1.abs() > 1e-12).collect())
}
