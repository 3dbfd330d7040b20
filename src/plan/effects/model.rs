//! The columns of a model: the mean, contrasts of factors, products of two of them.

use nalgebra::DMatrix;
use num_bigint::BigInt;
use serde::{Deserialize, Serialize};

use super::Scale;
use super::contrasts::{Contrasts, contrasts};
use crate::array::Array;

/// One column of a model: the mean (no factor), a contrast of a factor, or the product of contrasts
/// of two factors.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord, Serialize, Deserialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Term {
    /// The factors, from 0, ascending; none for the mean, the same one is not there twice.
    pub factors: Vec<usize>,
    /// The contrast of each of them, from 1; of a quantitative factor its degree: 1 linear, 2
    /// quadratic, …
    pub contrasts: Vec<u16>,
}

impl Term {
    pub(super) fn mean() -> Self {
        Self { factors: Vec::new(), contrasts: Vec::new() }
    }

    pub(super) fn single(factor: usize, contrast: u16) -> Self {
        Self { factors: vec![factor], contrasts: vec![contrast] }
    }

    pub(super) fn product(first: (usize, u16), second: (usize, u16)) -> Self {
        Self { factors: vec![first.0, second.0], contrasts: vec![first.1, second.1] }
    }

    pub(super) fn parts(&self) -> impl Iterator<Item = (usize, usize)> + '_ {
        self.factors.iter().zip(&self.contrasts).map(|(&f, &d)| (f, usize::from(d) - 1))
    }
}

/// An array with the contrasts of its factors.
pub(super) struct Coded<'a> {
    pub(super) array: &'a Array,
    pub(super) scales: &'a [Scale],
    pub(super) contrasts: Vec<Contrasts>,
}

impl<'a> Coded<'a> {
    pub(super) fn new(array: &'a Array, scales: &'a [Scale]) -> Self {
        let contrasts = array.levels().iter().zip(scales).map(|(&s, scale)| contrasts(s, scale)).collect();
        Self { array, scales, contrasts }
    }

    /// The values of a term over the runs, of mean square 1 over all combinations of levels.
    pub(super) fn values(&self, term: &Term) -> Vec<f64> {
        let mut values = vec![1.0; self.array.runs()];
        for (factor, d) in term.parts() {
            let contrast = &self.contrasts[factor].scaled[d];
            for (v, &x) in values.iter_mut().zip(self.array.column(factor)) {
                *v *= contrast[usize::from(x)];
            }
        }
        values
    }

    /// The same in whole numbers, up to a factor.
    pub(super) fn exact(&self, term: &Term) -> Vec<BigInt> {
        let mut values = vec![BigInt::from(1); self.array.runs()];
        for (factor, d) in term.parts() {
            let contrast = &self.contrasts[factor].exact[d];
            for (v, &x) in values.iter_mut().zip(self.array.column(factor)) {
                *v *= &contrast[usize::from(x)];
            }
        }
        values
    }

    pub(super) fn matrix(&self, terms: &[Term]) -> DMatrix<f64> {
        let values: Vec<f64> = terms.iter().flat_map(|term| self.values(term)).collect();
        DMatrix::from_vec(self.array.runs(), terms.len(), values)
    }

    fn all_contrasts(&self, factor: usize) -> std::ops::RangeInclusive<u16> {
        1..=self.array.levels()[factor] - 1
    }

    /// The contrasts that stand for the factor in the linear model.
    fn linear_part(&self, factor: usize) -> std::ops::RangeInclusive<u16> {
        match self.scales[factor] {
            Scale::Numbers(_) => 1..=1,
            Scale::Words => self.all_contrasts(factor),
        }
    }

    /// The mean and all contrasts of all factors.
    pub(super) fn main_effects(&self) -> Vec<Term> {
        let singles =
            (0..self.array.factors()).flat_map(|f| self.all_contrasts(f).map(move |d| Term::single(f, d)));
        std::iter::once(Term::mean()).chain(singles).collect()
    }

    /// The mean, the linear contrast of quantitative factors and all contrasts of the others.
    pub(super) fn linear(&self) -> Vec<Term> {
        let singles =
            (0..self.array.factors()).flat_map(|f| self.linear_part(f).map(move |d| Term::single(f, d)));
        std::iter::once(Term::mean()).chain(singles).collect()
    }

    /// The linear model, the quadratic contrasts of quantitative factors of three levels or more, and
    /// the products of the linear parts of every two factors; `None` when no factor has a quadratic
    /// contrast or there are more than `most` terms.
    pub(super) fn second_order(&self, most: usize) -> Option<Vec<Term>> {
        let factors = self.array.factors();
        let curved = |f: &usize| matches!(self.scales[*f], Scale::Numbers(_)) && self.array.levels()[*f] > 2;
        let quadratic: Vec<Term> = (0..factors).filter(curved).map(|f| Term::single(f, 2)).collect();
        if quadratic.is_empty() {
            return None;
        }
        let mut terms = self.linear();
        terms.extend(quadratic);
        for i in 0..factors {
            for j in i + 1..factors {
                for d in self.linear_part(i) {
                    terms.extend(self.linear_part(j).map(|e| Term::product((i, d), (j, e))));
                }
                if terms.len() > most {
                    return None;
                }
            }
        }
        Some(terms)
    }

    /// All products of contrasts of two factors.
    pub(super) fn interaction(&self, first: usize, second: usize) -> Vec<Term> {
        self.all_contrasts(first)
            .flat_map(|d| self.all_contrasts(second).map(move |e| Term::product((first, d), (second, e))))
            .collect()
    }
}
