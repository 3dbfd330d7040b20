use super::round::MAX_SCALE;
use super::solver::{Row, minimise};
use super::space::Space;
use crate::floor::proof::{Distances, Reason, Subject, Term, Weights};
use crate::floor::{Effort, confirmed};

/// More branches than this are not tried.
const BRANCHES: usize = 9;

/// More weight tuples than this are not tried.
const TUPLES: usize = 400;

/// So many places are compared before a branch is made.
const COMPARED: usize = 6;

/// How far from an integer counts as not being one, and from zero as being above it.
const TOLERANCE: f64 = 1e-6;

/// A tree of cases that shows that no run can have distances to the others: branch and bound on
/// the equations of [`Distances`], at most nine branches; `None` when that does not do.
///
/// Cost: two small linear programs for every case looked at.
#[must_use]
pub fn distances(about: &Subject, effort: &mut Effort<'_>) -> Option<Reason> {
    if !effort.goes_on() {
        return None;
    }
    let counts = about.counts();
    let space = Space::new(&counts).filter(|s| s.len() <= TUPLES)?;
    let few = |&j: &usize| space.size(j) <= u64::from(about.strength);
    let columns: Vec<usize> = (1..space.len()).filter(few).collect();
    let mut limits = vec![(0.0, f64::INFINITY); space.len()];
    limits[0].0 = 1.0;
    let search = Search { space: &space, columns: &columns, runs: about.runs as f64 };
    let cases = search.cases(&mut limits, &mut { BRANCHES }, effort)?;
    let reason = Reason::Distances { cases };
    confirmed(&reason, about).then_some(reason)
}

struct Search<'a> {
    space: &'a Space,
    columns: &'a [usize],
    runs: f64,
}

impl Search<'_> {
    fn cases(
        &self,
        limits: &mut Vec<(f64, f64)>,
        branches: &mut usize,
        effort: &mut Effort<'_>,
    ) -> Option<Distances> {
        if let Some(weights) = self.leaf(limits, effort)? {
            return Some(Distances::Leaf { weights });
        }
        let numbers = self.numbers(limits, effort)?;
        let mut broken: Vec<(f64, usize)> = (0..self.space.len())
            .map(|i| ((numbers[i] - numbers[i].round()).abs(), i))
            .filter(|b| b.0 > TOLERANCE)
            .collect();
        broken.sort_by(|a, b| b.0.total_cmp(&a.0).then(a.1.cmp(&b.1)));
        *branches = branches.checked_sub(1)?;
        // The place of which most sides are impossible at once.
        let mut best: Option<(usize, usize)> = None;
        for &(_, i) in broken.iter().take(COMPARED) {
            let mut closed = 0;
            for side in [(limits[i].0, numbers[i].floor()), (numbers[i].floor() + 1.0, limits[i].1)] {
                let before = std::mem::replace(&mut limits[i], side);
                closed += usize::from(self.leaf(limits, effort)?.is_some());
                limits[i] = before;
            }
            if best.is_none_or(|(known, _)| closed > known) {
                best = Some((closed, i));
            }
        }
        let (_, i) = best?;
        let most = numbers[i].floor();
        let before = limits[i];
        limits[i] = (before.0, most);
        let low = Box::new(self.cases(limits, branches, effort)?);
        limits[i] = (most + 1.0, before.1);
        let high = Box::new(self.cases(limits, branches, effort)?);
        limits[i] = before;
        Some(Distances::Branch { at: self.space.tuple(i).to_vec(), most: most as u64, low, high })
    }

    /// Weights that show a case to be impossible, `Some(None)` when there are none.
    fn leaf(&self, limits: &[(f64, f64)], effort: &mut Effort<'_>) -> Option<Option<Weights>> {
        let len = self.space.len();
        if !effort.spend((len * (self.columns.len() + 1) * 20) as u64) {
            return None;
        }
        let capped: Vec<usize> = (0..len).filter(|&i| limits[i].1.is_finite()).collect();
        // g, the f_j, and for every place with an upper limit what P falls below zero there; what
        // is maximised is Σ l (P + below) − Σ u below − N g.
        let width = 1 + self.columns.len();
        let p = |i: usize| -> Vec<f64> {
            let mut row = vec![1.0];
            row.extend(self.columns.iter().map(|&j| -self.space.q(j, i)));
            row.resize(width + capped.len(), 0.0);
            row
        };
        let mut costs = vec![0.0; width + capped.len()];
        costs[0] = self.runs;
        let mut rows = Vec::with_capacity(len);
        for (i, &(least, most)) in limits.iter().enumerate() {
            let mut coefficients = p(i);
            if least > 0.0 {
                costs.iter_mut().zip(&coefficients).for_each(|(c, x)| *c -= least * x);
            }
            if let Ok(n) = capped.binary_search(&i) {
                coefficients[width + n] = 1.0;
                costs[width + n] += most - least;
            }
            rows.push(Row { coefficients, equal: false, right: 0.0 });
        }
        let ranges: Vec<(f64, f64)> =
            (0..costs.len()).map(|n| if n < width { (-1.0, 1.0) } else { (0.0, 4.0) }).collect();
        let Some(solution) = minimise(&costs, &ranges, &rows) else { return Some(None) };
        let value: f64 = -costs.iter().zip(&solution).map(|(c, x)| c * x).sum::<f64>();
        if value < TOLERANCE {
            return Some(None);
        }
        Some(self.round(&solution[..width], limits))
    }

    /// Integer weights near real ones that still show the case to be impossible.
    fn round(&self, real: &[f64], limits: &[(f64, f64)]) -> Option<Weights> {
        let mut scale = 1.0;
        while scale < MAX_SCALE {
            for quarter in 4..8 {
                let by = scale * f64::from(quarter) / 4.0;
                let weights: Vec<(usize, f64)> = self
                    .columns
                    .iter()
                    .zip(&real[1..])
                    .map(|(&j, f)| (j, (f * by).round()))
                    .filter(|f| f.1 != 0.0)
                    .collect();
                let sums = self.space.transform(&weights);
                let open = (0..sums.len()).filter(|&i| limits[i].1.is_infinite());
                let needed = open.map(|i| sums[i]).fold(f64::NEG_INFINITY, f64::max);
                let constant = (needed - 1e-9 * by).ceil();
                let left: f64 = (0..sums.len())
                    .map(|i| constant - sums[i])
                    .zip(limits)
                    .map(|(p, l)| {
                        if p >= 0.0 {
                            p * l.0
                        } else if l.1.is_finite() {
                            p * l.1
                        } else {
                            0.0
                        }
                    })
                    .sum();
                if left > self.runs * constant + 1e-6 * by {
                    let terms = weights
                        .iter()
                        .map(|&(j, f)| Term { at: self.space.tuple(j).to_vec(), weight: f as i64 })
                        .collect();
                    return Some(Weights { constant: constant as i64, terms });
                }
            }
            scale *= 2.0;
        }
        None
    }

    /// Real numbers n_i that satisfy the equations and limits of a case.
    fn numbers(&self, limits: &[(f64, f64)], effort: &mut Effort<'_>) -> Option<Vec<f64>> {
        let len = self.space.len();
        if !effort.spend((len * (self.columns.len() + 1) * 20) as u64) {
            return None;
        }
        let mut rows = vec![Row { coefficients: vec![1.0; len], equal: true, right: self.runs }];
        rows.extend(self.columns.iter().map(|&j| Row {
            coefficients: (0..len).map(|i| self.space.q(j, i)).collect(),
            equal: true,
            right: 0.0,
        }));
        minimise(&vec![0.0; len], limits, &rows)
    }
}
