//! How well the terms of a model are estimated: D- and G-efficiency, variance inflation.

use nalgebra::DMatrix;
use rayon::prelude::*;
use serde::{Deserialize, Serialize};

use super::model::{Coded, Term};
use super::rank::determined;
use super::rounded;

/// The variance of prediction is sought over all combinations of levels when this takes no more steps.
pub const MOST_GRID_STEPS: u64 = 1 << 30;

/// What a plan can say about a model.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Model {
    /// The number p of parameters, the mean among them.
    pub parameters: usize,
    /// The rank of the model matrix, exact: the degrees of freedom used.
    pub rank: usize,
    /// The degrees of freedom left for error: runs less rank.
    pub left: usize,
    /// The terms that can be estimated beside all others of the model, exact.
    pub estimable: Vec<Term>,
    /// The terms that cannot: their column is a combination of other columns of the model.
    pub not_estimable: Vec<Term>,
    /// (det(X'X)/N^p)^(1/p), every column of X of mean square 1 over all combinations of levels; 0
    /// when not all terms can be estimated. 1 is the full factorial's; the main-effects model has no
    /// more, a model with quadratic terms may have.
    pub d_efficiency: f64,
    /// p/(N·d), d the largest f'(X'X)⁻¹f, where f holds the terms at a combination of levels; at
    /// most 1 (Kiefer & Wolfowitz); 0 when not all terms can be estimated.
    pub g_efficiency: f64,
    /// Whether d was sought over all combinations of levels; otherwise they were too many, it was
    /// sought over the runs, and `g_efficiency` is an upper bound.
    pub g_over_all_combinations: bool,
}

/// How much the variances of one factor's main effect are inflated by the other factors.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Inflation {
    /// The factor, from 0.
    pub factor: usize,
    /// Of each contrast, 1/(1 − R²), R² of its regression on all other columns; those of a factor
    /// that is not quantitative depend on the choice of its contrasts.
    pub contrasts: Vec<f64>,
    /// det R_f · det R_rest / det R for the correlation matrix R of all contrasts: the inflation of the
    /// area of the joint confidence region; it does not depend on the choice of contrasts (Fox &
    /// Monette 1992). 1 for a factor orthogonal to all others.
    pub generalised: f64,
}

/// Works a model out, with (X'X)⁻¹ where there is one.
///
/// Cost: the exact elimination N·p·rank products; the grid ∏ s · p² steps, if no more than
/// [`MOST_GRID_STEPS`]. References: J. Kiefer & J. Wolfowitz, *Canadian Journal of Mathematics* 12
/// (1960), 363–366.
pub(super) fn model(coded: &Coded<'_>, terms: &[Term]) -> (Model, Option<DMatrix<f64>>) {
    let exact: Vec<_> = terms.iter().map(|term| coded.exact(term)).collect();
    let found = determined(&exact);
    let (runs, p) = (coded.array.runs(), terms.len());
    let pick = |wanted: bool| -> Vec<Term> {
        terms.iter().zip(&found.columns).filter(|&(_, &d)| d == wanted).map(|(t, _)| t.clone()).collect()
    };
    let mut model = Model {
        parameters: p,
        rank: found.rank,
        left: runs - found.rank,
        estimable: pick(true),
        not_estimable: pick(false),
        d_efficiency: 0.0,
        g_efficiency: 0.0,
        g_over_all_combinations: true,
    };
    if found.rank < p {
        return (model, None);
    }
    let x = coded.matrix(terms);
    let moments = x.tr_mul(&x) / runs as f64;
    let Some(cholesky) = moments.cholesky() else { return (model, None) };
    let logarithm: f64 = cholesky.l_dirty().diagonal().iter().map(|v| 2.0 * v.ln()).sum();
    model.d_efficiency = rounded((logarithm / p as f64).exp());
    // N (X'X)⁻¹.
    let inverse = cholesky.inverse();
    let largest = largest_over_all(coded, terms, &inverse);
    model.g_over_all_combinations = largest.is_some();
    let largest = largest.unwrap_or_else(|| {
        x.row_iter().map(|f| quadratic_form(&inverse, f.transpose().as_slice())).fold(0.0, f64::max)
    });
    model.g_efficiency = rounded(p as f64 / largest);
    (model, Some(inverse))
}

/// The largest f'Mf over all combinations of levels.
fn largest_over_all(coded: &Coded<'_>, terms: &[Term], inverse: &DMatrix<f64>) -> Option<f64> {
    let points = coded.array.levels().iter().try_fold(1u64, |n, &s| n.checked_mul(u64::from(s)))?;
    let square = (terms.len() as u64).checked_mul(terms.len() as u64)?;
    points.checked_mul(square).filter(|&steps| steps <= MOST_GRID_STEPS)?;
    let at = |point: u64| {
        let mut rest = point;
        let mut levels = Vec::with_capacity(coded.array.factors());
        for &s in coded.array.levels() {
            levels.push((rest % u64::from(s)) as usize);
            rest /= u64::from(s);
        }
        let value =
            |term: &Term| term.parts().map(|(f, d)| coded.contrasts[f].scaled[d][levels[f]]).product::<f64>();
        let f: Vec<f64> = terms.iter().map(value).collect();
        quadratic_form(inverse, &f)
    };
    Some((0..points).into_par_iter().map(at).reduce(|| 0.0, f64::max))
}

fn quadratic_form(m: &DMatrix<f64>, f: &[f64]) -> f64 {
    let row = |(j, &v): (usize, &f64)| v * m.column(j).iter().zip(f).map(|(a, b)| a * b).sum::<f64>();
    f.iter().enumerate().map(row).sum()
}

/// The inflation of each factor in the main-effects model `terms` with `inverse` = N (X'X)⁻¹.
pub(super) fn inflation(coded: &Coded<'_>, terms: &[Term], inverse: &DMatrix<f64>) -> Vec<Inflation> {
    let x = coded.matrix(&terms[1..]);
    let runs = x.nrows() as f64;
    let means = x.row_mean();
    // N times the covariance of the contrasts, and the inverse of the covariance.
    let covariance = x.tr_mul(&x) / runs - means.transpose() * &means;
    let precision = inverse.view((1, 1), covariance.shape()).into_owned();
    let mut start = 0;
    let of_factor = |factor: usize| {
        let size = usize::from(coded.array.levels()[factor]) - 1;
        let own = covariance.view((start, start), (size, size));
        let contrasts = (start..start + size).map(|j| rounded(covariance[(j, j)] * precision[(j, j)]));
        let contrasts = contrasts.collect();
        // det R_rest / det R is the determinant of this block of R⁻¹.
        let block = precision.view((start, start), (size, size)).into_owned();
        let generalised = rounded((own.into_owned() * block).determinant());
        start += size;
        Inflation { factor, contrasts, generalised }
    };
    (0..coded.array.factors()).map(of_factor).collect()
}
