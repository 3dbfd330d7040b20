//! What is confused with what: interactions with main effects and with each other.

use nalgebra::DMatrix;
use rayon::prelude::*;
use serde::{Deserialize, Serialize};

use super::model::{Coded, Term};
use super::rounded;

/// So many of the worst are kept.
pub const MOST_LISTED: usize = 200;
/// Interactions are compared with each other when this takes no more steps, some seconds.
pub const MOST_COMPARISON_STEPS: u64 = 1 << 33;
/// What is smaller counts as nothing.
const NOTHING: f64 = 1e-9;

/// The matrix (X'X)⁻¹X'Z: what the estimates of the main-effects model X gain from two-factor
/// interactions Z that it leaves out.
///
/// All columns have mean square 1 over all combinations of levels, so an entry a says: an
/// interaction of this root mean square moves the estimate by a times as much.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct AliasMatrix {
    /// The columns of X: the mean, then all contrasts of all factors.
    pub rows: Vec<Term>,
    /// The columns of Z: the products of contrasts of every two factors.
    pub columns: Vec<Term>,
    /// `entries[r][c]`, rounded to nine decimals.
    pub entries: Vec<Vec<f64>>,
}

/// How much of a two-factor interaction is in the estimates of a main effect, or in another
/// interaction.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Confusion<T> {
    /// The factor of the main effect, or the factors of the other interaction.
    pub with: T,
    /// The factors of the interaction, ascending.
    pub interaction: [usize; 2],
    /// The most that any direction of the one has in any direction of the other: 0 clear, 1 one and
    /// the same.
    pub largest: f64,
    /// The sum of squares over all directions.
    pub total: f64,
}

/// A list of confusions, worst first: by `largest`, then `total`, then the factors.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Confusions<T> {
    /// How many pairs were looked at.
    pub pairs: u64,
    /// How many of them are not clear of each other.
    pub confused: u64,
    /// The sum of `total` over all of them.
    pub total: f64,
    /// The worst, at most [`MOST_LISTED`].
    pub worst: Vec<Confusion<T>>,
}

/// All pairs of factors, ascending.
fn interactions(factors: usize) -> Vec<[usize; 2]> {
    (0..factors).flat_map(|i| (i + 1..factors).map(move |j| [i, j])).collect()
}

/// The alias matrix and what it says about every main effect of a factor and interaction of two
/// other factors; `inverse` is N (X'X)⁻¹.
///
/// The largest singular value and the sum of squares of a block do not depend on the choice of
/// orthonormal contrasts. In an array of strength 2 the totals sum to 3 A₃ of the generalised
/// word-length pattern (Xu & Wu 2001). Reference: G. E. P. Box & K. B. Wilson, *Journal of the Royal
/// Statistical Society B* 13 (1951), 1–45. Cost: N·p·q, q the columns of Z.
pub(super) fn onto_main(
    coded: &Coded<'_>,
    main: &[Term],
    inverse: &DMatrix<f64>,
) -> (AliasMatrix, Confusions<usize>) {
    let x = coded.matrix(main);
    let pairs = interactions(coded.array.factors());
    let half = inverse * x.transpose() / x.nrows() as f64;
    let block = |&[i, j]: &[usize; 2]| {
        let terms = coded.interaction(i, j);
        let entries = &half * coded.matrix(&terms);
        (terms, entries)
    };
    let blocks: Vec<(Vec<Term>, DMatrix<f64>)> = pairs.par_iter().map(block).collect();
    let mut found = Vec::new();
    for (&pair, (_, entries)) in pairs.iter().zip(&blocks) {
        let mut start = 1;
        for (factor, &s) in coded.array.levels().iter().enumerate() {
            let size = usize::from(s) - 1;
            if !pair.contains(&factor) {
                found.push(confusion(factor, pair, &entries.rows(start, size).into_owned()));
            }
            start += size;
        }
    }
    let columns = blocks.iter().flat_map(|(terms, _)| terms.iter().cloned()).collect();
    let row = |r: usize| {
        let entries = blocks.iter().flat_map(|(_, m)| m.row(r).iter().copied().collect::<Vec<f64>>());
        entries.map(rounded).collect()
    };
    let entries = (0..main.len()).map(row).collect();
    (AliasMatrix { rows: main.to_vec(), columns, entries }, ranked(found))
}

/// What interactions have in common with each other over the runs, the mean taken out: canonical
/// correlations between their columns; `None` beyond [`MOST_COMPARISON_STEPS`].
///
/// An interaction of which nothing is left beside the mean is clear of all others. Cost: N·q², q the
/// products of contrasts. Reference: H. Hotelling, *Biometrika* 28 (1936), 321–377.
pub(super) fn among(coded: &Coded<'_>) -> Option<Confusions<[usize; 2]>> {
    let pairs = interactions(coded.array.factors());
    let size = |&[i, j]: &[usize; 2]| {
        let levels = coded.array.levels();
        (u64::from(levels[i]) - 1) * (u64::from(levels[j]) - 1)
    };
    let columns: u64 = pairs.iter().map(size).try_fold(0u64, u64::checked_add)?;
    let steps = columns.checked_mul(columns)?.checked_mul(coded.array.runs() as u64)?;
    if steps > MOST_COMPARISON_STEPS {
        return None;
    }
    let bases: Vec<DMatrix<f64>> =
        pairs.par_iter().map(|&[i, j]| basis(coded.matrix(&coded.interaction(i, j)))).collect();
    let of_one = |a: usize| {
        let compare = |b: usize| confusion(pairs[a], pairs[b], &bases[a].tr_mul(&bases[b]));
        ranked((a + 1..pairs.len()).map(compare).collect())
    };
    let all: Vec<Confusions<[usize; 2]>> = (0..pairs.len()).into_par_iter().map(of_one).collect();
    let mut together = Confusions { pairs: 0, confused: 0, total: 0.0, worst: Vec::new() };
    for one in all {
        together.pairs += one.pairs;
        together.confused += one.confused;
        together.total += one.total;
        together.worst.extend(one.worst);
    }
    sort(&mut together.worst);
    together.total = rounded(together.total);
    Some(together)
}

/// An orthonormal basis of the span of the columns, each less its mean.
fn basis(mut m: DMatrix<f64>) -> DMatrix<f64> {
    let runs = m.nrows();
    for mut column in m.column_iter_mut() {
        let mean = column.iter().sum::<f64>() / runs as f64;
        column.add_scalar_mut(-mean);
    }
    if m.ncols() == 1 {
        let norm = m.norm();
        return if norm > NOTHING * runs as f64 { m / norm } else { DMatrix::zeros(runs, 0) };
    }
    let svd = m.svd(true, false);
    let kept = svd.singular_values.iter().filter(|&&v| v > NOTHING * runs as f64).count();
    // Singular values come in descending order.
    svd.u.map_or_else(|| DMatrix::zeros(runs, 0), |u| u.columns(0, kept).into_owned())
}

fn confusion<T>(with: T, interaction: [usize; 2], block: &DMatrix<f64>) -> Confusion<T> {
    let total = block.iter().map(|v| v * v).sum::<f64>();
    let largest = if total < NOTHING * NOTHING {
        0.0
    } else if block.nrows() == 1 || block.ncols() == 1 {
        total.sqrt()
    } else {
        block.singular_values().max()
    };
    Confusion { with, interaction, largest: rounded(largest), total: rounded(total) }
}

fn ranked<T: Ord>(all: Vec<Confusion<T>>) -> Confusions<T> {
    let pairs = all.len() as u64;
    let total = rounded(all.iter().map(|c| c.total).sum());
    let mut worst: Vec<Confusion<T>> = all.into_iter().filter(|c| c.largest > 0.0).collect();
    let confused = worst.len() as u64;
    sort(&mut worst);
    Confusions { pairs, confused, total, worst }
}

fn sort<T: Ord>(worst: &mut Vec<Confusion<T>>) {
    worst.sort_by(|a, b| {
        let numbers = b.largest.total_cmp(&a.largest).then(b.total.total_cmp(&a.total));
        numbers.then_with(|| (&a.with, a.interaction).cmp(&(&b.with, b.interaction)))
    });
    worst.truncate(MOST_LISTED);
}
