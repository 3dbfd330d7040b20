//! What a plan can tell apart, and how well.
//!
//! | file | what it works out |
//! | --- | --- |
//! | `contrasts` | the contrasts of one factor |
//! | `model` | the terms of a model and their columns |
//! | `rank` | which terms can be estimated, exactly |
//! | `variance` | D- and G-efficiency, variance inflation |
//! | `alias` | which interactions are confused with main effects and with each other |

mod alias;
mod contrasts;
mod model;
#[cfg(test)]
mod outside;
mod rank;
mod variance;

use serde::{Deserialize, Serialize};
use thiserror::Error;

pub(crate) use contrasts::contrasts;

pub use alias::{AliasMatrix, Confusion, Confusions, MOST_COMPARISON_STEPS, MOST_LISTED};
pub use model::Term;
pub use variance::{Inflation, MOST_GRID_STEPS, Model};

use crate::array::Array;
use crate::verify::MOST_PARAMETERS;

/// Two-factor interactions are compared with main effects when the products of contrasts are no more.
pub const MOST_PRODUCTS: usize = 5000;
/// The second-order model is worked out when it has no more terms.
pub const MOST_TERMS: usize = 600;

/// What the levels of a factor mean.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub enum Scale {
    /// Names without an order: any orthonormal contrasts serve.
    Words,
    /// Amounts: the score of each level, in whole numbers in proportion to the settings, lowest level
    /// of the array first. Orthogonal polynomials of the scores serve.
    Numbers(Vec<i64>),
}

impl Scale {
    /// Equally spaced scores 0, 1, …, s − 1.
    #[must_use]
    pub fn even(levels: u16) -> Self {
        Self::Numbers((0..i64::from(levels)).collect())
    }
}

/// What is asked that makes no sense or is too large.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[non_exhaustive]
pub enum EffectsError {
    /// Not one scale for each factor.
    #[error("{factors} factors need as many scales, not {scales}")]
    Scales {
        /// The factors of the array.
        factors: usize,
        /// The scales given.
        scales: usize,
    },
    /// The scores of a factor are not one for each level, each another.
    #[error("factor {factor} has {levels} levels and needs as many scores, all different")]
    Scores {
        /// The factor, from 0.
        factor: usize,
        /// Its number of levels.
        levels: u16,
    },
    /// The main-effects model has too many parameters.
    #[error("the main-effects model has more than {MOST_PARAMETERS} parameters; ask for fewer factors")]
    TooLarge,
}

/// What a plan can tell apart. Factors are counted from 0, in the order of the array's columns.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Effects {
    /// The mean and all contrasts of all factors.
    pub main: Model,
    /// The mean, the linear contrast of each quantitative factor, all contrasts of the others.
    pub linear: Model,
    /// The linear model, the quadratic contrasts of quantitative factors of three levels or more and
    /// the products of the linear model's contrasts of every two factors. `None` when no factor has a
    /// quadratic contrast, or there are more than [`MOST_TERMS`] terms.
    pub second_order: Option<Model>,
    /// The variance inflation of each factor in the main-effects model; `None` when that cannot be
    /// estimated.
    pub inflation: Option<Vec<Inflation>>,
    /// Two-factor interactions in the estimates of the main-effects model; `None` when that cannot be
    /// estimated, there are more than [`MOST_PRODUCTS`] products of contrasts, or fewer than two factors.
    pub alias: Option<AliasMatrix>,
    /// Which of them are confused with which main effects; `None` as `alias`. (Those of an interaction
    /// with its own factors stand in the alias matrix alone.)
    pub with_main: Option<Confusions<usize>>,
    /// Which two-factor interactions are confused with each other: canonical correlations over the
    /// runs, whatever the main effects. `None` beyond [`MOST_COMPARISON_STEPS`] steps or as `alias`
    /// for many products.
    pub among_interactions: Option<Confusions<[usize; 2]>>,
}

/// Works out what a plan can tell apart, and how well.
///
/// `scales` says of each factor what its levels mean. All of these must hold: one scale per factor;
/// one score per level, all different; at most [`MOST_PARAMETERS`] parameters in the main-effects model.
///
/// Guarantee: ranks and which terms can be estimated are exact, by elimination in whole numbers; other
/// values are floats rounded to nine decimals. The result does not depend on the number of threads.
///
/// # Errors
/// An [`EffectsError`] naming the first condition that does not hold.
///
/// Cost: N·p·rank products of whole numbers for each model, and the limits named at the fields.
///
/// References: H. Xu & C. F. J. Wu, *Annals of Statistics* 29 (2001), 1066–1077; J. Fox &
/// G. Monette, *Journal of the American Statistical Association* 87 (1992), 178–183.
///
/// ```
/// use trysquare::{array::Array, plan::effects::{Scale, effects}, verify::{Demand, certify}};
/// // Half of 2³: each interaction is one and the same as the third main effect.
/// let array = Array::from_rows(vec![2, 2, 2], &[[0, 0, 0], [0, 1, 1], [1, 0, 1], [1, 1, 0]])?;
/// let found = effects(&array, &[Scale::Words, Scale::Words, Scale::even(2)])?;
/// assert_eq!((found.main.rank, found.main.left, found.main.d_efficiency), (4, 0, 1.0));
/// let with_main = found.with_main.unwrap();
/// assert_eq!((with_main.confused, with_main.worst[0].largest), (3, 1.0));
/// assert_eq!(certify(&array, &Demand::strength(2))?.certificate.strength, 2);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn effects(array: &Array, scales: &[Scale]) -> Result<Effects, EffectsError> {
    check(array, scales)?;
    let coded = model::Coded::new(array, scales);
    let terms = coded.main_effects();
    let (main, inverse) = variance::model(&coded, &terms);
    let (linear, _) = variance::model(&coded, &coded.linear());
    let second_order = coded.second_order(MOST_TERMS).map(|terms| variance::model(&coded, &terms).0);
    let few = array.factors() > 1 && products(array) <= MOST_PRODUCTS;
    let aliased = inverse.as_ref().filter(|_| few).map(|m| alias::onto_main(&coded, &terms, m));
    let (alias, with_main) = aliased.unzip();
    Ok(Effects {
        main,
        linear,
        second_order,
        inflation: inverse.map(|m| variance::inflation(&coded, &terms, &m)),
        alias,
        with_main,
        among_interactions: few.then(|| alias::among(&coded)).flatten(),
    })
}

fn check(array: &Array, scales: &[Scale]) -> Result<(), EffectsError> {
    if scales.len() != array.factors() {
        return Err(EffectsError::Scales { factors: array.factors(), scales: scales.len() });
    }
    for (factor, (&levels, scale)) in array.levels().iter().zip(scales).enumerate() {
        if let Scale::Numbers(scores) = scale {
            let mut sorted = scores.clone();
            sorted.sort_unstable();
            sorted.dedup();
            if sorted.len() != scores.len() || scores.len() != usize::from(levels) {
                return Err(EffectsError::Scores { factor, levels });
            }
        }
    }
    let parameters = array.levels().iter().fold(1usize, |p, &s| p.saturating_add(usize::from(s) - 1));
    if parameters > MOST_PARAMETERS { Err(EffectsError::TooLarge) } else { Ok(()) }
}

/// The number of products of contrasts of two factors.
fn products(array: &Array) -> usize {
    let (mut sum, mut products) = (0, 0);
    for &s in array.levels() {
        let contrasts = usize::from(s) - 1;
        products += sum * contrasts;
        sum += contrasts;
    }
    products
}

/// Nine decimals, so that the last bits show on no machine; no negative zero.
fn rounded(value: f64) -> f64 {
    (value * 1e9).round() / 1e9 + 0.0
}
