//! Carrying a recipe out.

use super::{HadamardRecipe, Part, Recipe, RecipeError, SchemeRecipe, Signs, Split};
use crate::array::Array;
use crate::construct::compose::{self, DifferenceBlock};
use crate::construct::hadamard::Hadamard;
use crate::construct::scheme::{self, Scheme};
use crate::construct::{code, field, latin, orbit_array, strength3};

/// A recipe nested deeper than this is refused.
pub(super) const MAX_DEPTH: usize = 64;

impl Recipe {
    /// Builds the array: the same bytes every time, for any number of threads. It is *not* judged
    /// here; pass it to [`verify`](crate::verify) before it goes anywhere.
    ///
    /// # Errors
    /// A [`RecipeError`] when the parts do not fit together, a condition of a construction does
    /// not hold, or the array does not fit into memory.
    pub fn build(&self) -> Result<Array, RecipeError> {
        self.levels()?;
        self.build_at(0)
    }

    fn build_at(&self, depth: usize) -> Result<Array, RecipeError> {
        if depth > MAX_DEPTH {
            return Err(RecipeError::Depth(MAX_DEPTH));
        }
        let sub = |recipe: &Recipe| recipe.build_at(depth + 1);
        Ok(match self {
            Self::Balanced { runs, levels } => balanced(*runs, levels)?,
            Self::FullFactorial { levels } => field::full_factorial(levels)?,
            Self::RaoHamming { q, n } => field::rao_hamming(*q, *n)?,
            Self::Subspaces { q, n, subspaces, strength } => field::subspaces(*q, *n, subspaces, *strength)?,
            Self::Flats { p, levels, flats, .. } => field::flats(*p, levels, flats)?,
            Self::DualOfCyclic { q, length, zeros, extended, strength } => {
                code::dual_of_cyclic(*q, *length, zeros, *extended)?.array_of_strength(*strength)?
            }
            Self::ReedMuller { r, m } => code::reed_muller(*r, *m)?.array()?,
            Self::Kerdock { m } => code::kerdock(*m)?,
            Self::LargeAndSmall { p, e, d } => field::large_and_small(*p, *e, *d)?,
            Self::Bush { q, t } => field::bush(*q, *t)?,
            Self::Ovoid { q } => field::ovoid(*q)?,
            Self::AddelmanKempthorne { q, n } => field::addelman_kempthorne(*q, *n)?,
            Self::TwoSubspaces { m, d } => field::two_subspaces(*m, *d)?,
            Self::CodeCosets { q, n, k } => field::code_cosets(*q, *n, *k)?,
            Self::BlockTypes { vectors } => crate::construct::block_types(vectors)?,
            Self::ConferenceBlocks { q } => crate::construct::conference_blocks(*q)?,
            Self::Orbits { group, columns, .. } => orbit_array(group, columns)?,
            Self::Hadamard { matrix } => matrix.build()?.to_array()?,
            Self::Developed { scheme } => scheme::developed_with_rows(&scheme.build()?)?,
            Self::QuasiDifference { group, permutation, columns, fill } => {
                let fill = fill.as_deref().map(sub).transpose()?;
                let matrix = latin::QuasiDifference::expanded(group, permutation, columns)?;
                latin::quasi_difference(&matrix, fill.as_ref())?
            }
            Self::VVector { m, t, vector, fill } => {
                let fill = fill.as_deref().map(sub).transpose()?;
                latin::quasi_difference(&latin::v_vector(*m, *t, vector)?, fill.as_ref())?
            }
            Self::Wilson { factors, master, truncated, parts, fills } => {
                let parts = parts.iter().map(|p| sub(p)).collect::<Result<Vec<_>, _>>()?;
                let fills =
                    fills.iter().map(|f| f.as_deref().map(sub).transpose()).collect::<Result<Vec<_>, _>>()?;
                let (parts, fills): (Vec<_>, Vec<_>) =
                    (parts.iter().collect(), fills.iter().map(Option::as_ref).collect());
                latin::wilson(*factors as usize, &sub(master)?, truncated, &parts, &fills)?
            }
            Self::KroneckerSum { of, schemes, beside } => {
                let schemes = build_schemes(schemes)?;
                let blocks = blocks(&schemes)?;
                compose::kronecker_sum(&sub(of)?, &blocks, Some(&sub(beside)?))?
            }
            Self::ZeroColumn { of, schemes } => {
                let schemes = build_schemes(schemes)?;
                let blocks = blocks(&schemes)?;
                compose::zero_column_refinement(&sub(of)?, &blocks)?
            }
            Self::MergingProduct { inner, outer, merged, of, factor } => {
                let merged = indices(merged);
                let (a, h) = (inner.build()?.to_array()?, sign_array(&outer.build()?.normalised())?);
                compose::merging_product(&a, &h, &sub(of)?, *factor as usize, &merged)?
            }
            Self::Juxtapose { parts } => {
                let built = parts.iter().map(|p| sub(&p.of)).collect::<Result<Vec<_>, _>>()?;
                let parts: Vec<(&Array, Option<usize>)> =
                    built.iter().zip(parts).map(|(a, p)| (a, named_column(p))).collect();
                compose::juxtapose(&parts)?
            }
            Self::LevelProduct { left, right, pairs } => {
                compose::level_product(&sub(left)?, &sub(right)?, &pair_indices(pairs))?
            }
            Self::Arrange { of, split, take, merge } => {
                let splits = split.iter().map(|s| sub(&s.by)).collect::<Result<Vec<_>, _>>()?;
                arrange(sub(of)?, split, &splits, take.as_deref(), merge)?
            }
            Self::Group { of, columns } => compose::group(&sub(of)?, &indices(columns))?,
            Self::Foldover { of } => strength3::foldover(&sub(of)?)?,
            Self::EvenLevel { s, matrix } => strength3::even_level(level(*s)?, &matrix.build()?.to_array()?)?,
            Self::EightRunsPerLevel { s } => strength3::eight_runs_per_level(level(*s)?)?,
            Self::TwoGrids { left, right } => {
                let (u, v) = (left.build()?, right.build()?);
                let shared = u.factors().min(v.factors());
                let first: Vec<usize> = (0..shared).collect();
                strength3::two_grids(&u.select(&first)?, &v.select(&first)?)?
            }
            Self::Slices { parts, .. } => {
                let built = parts.iter().map(|p| sub(p)).collect::<Result<Vec<_>, _>>()?;
                strength3::slices(&built.iter().collect::<Vec<_>>())?
            }
            Self::Copies { of, times, column: None } => strength3::copies(&sub(of)?, level(*times)?)?,
            Self::Copies { of, times, column: Some(column) } => {
                strength3::copies_into(&sub(of)?, *column as usize, level(*times)?)?
            }
        })
    }
}

pub(super) fn level(s: u32) -> Result<u16, RecipeError> {
    u16::try_from(s).map_err(|_| RecipeError::Text(format!("{s} levels are more than 65535")))
}

pub(super) fn indices(columns: &[u32]) -> Vec<usize> {
    columns.iter().map(|&c| c as usize).collect()
}

pub(super) fn pair_indices(pairs: &[(u32, u32)]) -> Vec<(usize, usize)> {
    pairs.iter().map(|&(i, j)| (i as usize, j as usize)).collect()
}

pub(super) fn named_column(part: &Part) -> Option<usize> {
    part.column.map(|c| c as usize)
}

/// Every factor's levels in turn, over and over.
fn balanced(runs: u32, levels: &[u16]) -> Result<Array, RecipeError> {
    if let Some(s) = levels.iter().find(|&&s| s == 0 || !runs.is_multiple_of(u32::from(s))) {
        return Err(RecipeError::Text(format!("{s} levels do not divide {runs} runs")));
    }
    Ok(Array::from_fn(runs as usize, levels.to_vec(), |i, j| (i % usize::from(levels[j])) as u16)?)
}

fn build_schemes(schemes: &[std::sync::Arc<SchemeRecipe>]) -> Result<Vec<Scheme>, RecipeError> {
    schemes.iter().map(|s| s.build().map(|s| s.normalised())).collect()
}

fn blocks(schemes: &[Scheme]) -> Result<Vec<DifferenceBlock<'_>>, RecipeError> {
    let block = |s| Ok(DifferenceBlock::of_scheme(s)?);
    schemes.iter().map(block).collect()
}

/// The columns of the matrix as two-level columns, + as 0; the constant one first.
fn sign_array(matrix: &Hadamard) -> Result<Array, RecipeError> {
    let n = matrix.order();
    Ok(Array::from_fn(n, vec![2; n], |i, j| u16::from(matrix.entry(i, j) < 0))?)
}

impl Signs {
    fn build(&self) -> Result<Array, RecipeError> {
        match self {
            Self::Matrix(matrix) => sign_array(&matrix.build()?.normalised()),
            Self::Halves(n) => {
                let n = *n as usize;
                Ok(Array::from_fn(n, vec![2, 2], |i, j| u16::from(j == 1 && 2 * i >= n))?)
            }
        }
    }
}

impl HadamardRecipe {
    /// The sign columns of the matrix, the constant one first.
    pub(super) fn columns(&self) -> Option<usize> {
        self.order().map(|n| n as usize)
    }
}

fn arrange(
    mut of: Array,
    split: &[Split],
    by: &[Array],
    take: Option<&[u32]>,
    merge: &[(u32, u16)],
) -> Result<Array, RecipeError> {
    // From the right, so that the columns still to be replaced keep their numbers.
    for (s, by) in split.iter().zip(by).rev() {
        of = compose::split(&of, s.column as usize, by)?;
    }
    if let Some(take) = take {
        if let Some(missing) = take.iter().find(|&&c| c as usize >= of.factors()) {
            return Err(RecipeError::Text(format!("column {missing} of {}", of.factors())));
        }
        of = of.select(&indices(take))?;
    }
    for &(column, r) in merge {
        of = compose::merge_levels(&of, column as usize, r)?;
    }
    Ok(of)
}
