//! Runs, levels and guaranteed strength of a recipe, without building it.

use std::sync::Arc;

use super::build::{MAX_DEPTH, indices, level, named_column, pair_indices};
use super::{Recipe, RecipeError, SchemeRecipe, Shape, Signs, Split};
use crate::construct::{compose, latin, strength3};
use crate::mix::Mix;

fn wrong(what: impl Into<String>) -> RecipeError {
    RecipeError::Text(what.into())
}

impl Recipe {
    /// The levels of the columns, in order.
    ///
    /// # Errors
    /// A [`RecipeError`] when the parts do not fit together. (That they do fit does not yet mean
    /// that every condition of every construction holds.)
    pub fn levels(&self) -> Result<Vec<u16>, RecipeError> {
        self.levels_at(0)
    }

    /// The mix, in column order.
    ///
    /// # Errors
    /// As [`Recipe::levels`].
    pub fn mix(&self) -> Result<Mix, RecipeError> {
        Mix::new(self.levels()?).map_err(|e| wrong(e.to_string()))
    }

    fn levels_at(&self, depth: usize) -> Result<Vec<u16>, RecipeError> {
        if depth > MAX_DEPTH {
            return Err(RecipeError::Depth(MAX_DEPTH));
        }
        let sub = |recipe: &Recipe| recipe.levels_at(depth + 1);
        Ok(match self {
            Self::Balanced { levels, .. } | Self::FullFactorial { levels } => levels.clone(),
            Self::RaoHamming { q, n } => vec![level(*q)?; points(*q, *n)?],
            Self::Subspaces { q, subspaces, .. } => {
                subspaces.iter().map(|s| power(*q, s.len() as u32)).collect::<Result<_, _>>()?
            }
            Self::Flats { levels, .. } => levels.clone(),
            Self::DualOfCyclic { q, length, extended, .. } => {
                vec![level(*q)?; usize::from(level(*length)?) + usize::from(*extended)]
            }
            Self::ReedMuller { m, .. } | Self::Kerdock { m } => vec![2; usize::from(power(2, *m)?)],
            Self::LargeAndSmall { p, e, d } => {
                let mut levels = vec![power(*p, *e)?];
                levels.extend(std::iter::repeat_n(power(*p, *d)?, usize::from(levels[0])));
                levels
            }
            Self::Bush { q, t } => {
                let hyperoval = *t == 3 && q.is_multiple_of(2);
                vec![level(*q)?; *q as usize + 1 + usize::from(hyperoval)]
            }
            Self::Ovoid { q } => vec![level(*q)?; usize::from(level(*q)?).pow(2) + 1],
            Self::AddelmanKempthorne { q, n } => {
                let factors = points(*q, *n)?.checked_mul(2).ok_or_else(|| wrong("too many factors"))?;
                vec![level(*q)?; factors - 1]
            }
            Self::TwoSubspaces { m, d } => {
                let large = power(2, *m)?;
                let small = usize::from(large) * (usize::from(power(2, *d)?) - 1);
                let mut levels = vec![large, large];
                levels.extend(std::iter::repeat_n(2, small));
                levels
            }
            Self::CodeCosets { q, n, k } => {
                let large = n.checked_sub(*k).ok_or_else(|| wrong("length below dimension"))?;
                let mut levels = vec![power(*q, large)?];
                levels.extend(std::iter::repeat_n(level(*q)?, *n as usize));
                levels
            }
            Self::BlockTypes { vectors } => {
                let blocks = vectors.first().map_or(0, Vec::len);
                let mut levels = vec![2; vectors.len()];
                levels.push(u16::try_from(blocks).map_err(|_| wrong("more than 65535 blocks"))?);
                levels
            }
            Self::ConferenceBlocks { q } => {
                let blocks = level(*q)?;
                let mut levels = vec![2; usize::from(blocks).saturating_sub(1) * 2];
                levels.push(blocks);
                levels
            }
            Self::Orbits { columns, .. } => columns.iter().map(|c| c.levels).collect(),
            Self::Hadamard { matrix } => vec![2; order(matrix.order())? - 1],
            Self::Developed { scheme } => {
                let Shape { rows, columns, order } = shape(scheme)?;
                let mut levels = vec![level(order)?; columns as usize];
                levels.push(level(rows)?);
                levels
            }
            Self::QuasiDifference { permutation, .. } => {
                let (n, u) = quasi_difference_shape(self)?;
                latin::quasi_difference_levels(n, u, permutation.len())?
            }
            Self::VVector { m, t, .. } => {
                let (m, t) = (usize::from(*m), usize::from(*t));
                latin::quasi_difference_levels(m * t + 1, t, m + 2)?
            }
            Self::Wilson { factors, master, truncated, parts, .. } => {
                let first = |recipe: &Recipe| -> Result<usize, RecipeError> {
                    sub(recipe)?.first().map(|&s| usize::from(s)).ok_or_else(|| wrong("no factor"))
                };
                let m = first(parts.first().ok_or_else(|| wrong("no part"))?)?;
                latin::wilson_levels(*factors as usize, first(master)?, m, truncated)?
            }
            Self::KroneckerSum { of, schemes, beside } => {
                compose::kronecker_sum_levels(&sub(of)?, &block_shapes(schemes)?, &sub(beside)?)?
            }
            Self::ZeroColumn { of, schemes } => {
                let rows = schemes.first().map(|s| shape(s)).ok_or_else(|| wrong("no scheme"))??.rows;
                let n1 = of.runs()?;
                let blocks = block_shapes(schemes)?;
                compose::zero_column_refinement_levels(n1, &sub(of)?, &blocks, rows as usize)?
            }
            Self::MergingProduct { inner, outer, of, factor, .. } => {
                let n = order(inner.order())?;
                let big = order(outer.columns().map(|n| n as u32))?;
                compose::merging_product_levels(n, n - 1, big, &sub(of)?, *factor as usize)?
            }
            Self::Juxtapose { parts } => {
                let levels = parts.iter().map(|p| sub(&p.of)).collect::<Result<Vec<_>, _>>()?;
                let parts: Vec<(&[u16], Option<usize>)> =
                    levels.iter().zip(parts).map(|(l, p)| (l.as_slice(), named_column(p))).collect();
                compose::juxtapose_levels(&parts)?
            }
            Self::LevelProduct { left, right, pairs } => {
                compose::level_product_levels(&sub(left)?, &sub(right)?, &pair_indices(pairs))?
            }
            Self::Arrange { of, split, take, merge } => {
                let splits = split.iter().map(|s| sub(&s.by)).collect::<Result<Vec<_>, _>>()?;
                arranged(sub(of)?, split, &splits, take.as_deref(), merge)?
            }
            Self::Group { of, columns } => compose::group_levels(&sub(of)?, &indices(columns))?,
            Self::Foldover { of } => strength3::foldover_levels(sub(of)?.len())?,
            Self::EvenLevel { s, matrix } => {
                strength3::even_level_levels(level(*s)?, order(matrix.order())? - 1)?
            }
            Self::EightRunsPerLevel { s } => strength3::eight_runs_per_level_levels(level(*s)?)?,
            Self::TwoGrids { left, right } => {
                let ((s1, m1), (s2, m2)) = (left.shape()?, right.shape()?);
                strength3::two_grids_levels(s1, s2, m1.min(m2))?
            }
            Self::Slices { parts, .. } => {
                let first = parts.first().ok_or_else(|| wrong("no slice"))?;
                strength3::slices_levels(parts.len(), &sub(first)?)?
            }
            Self::Copies { of, times, column: None } => strength3::copies_levels(&sub(of)?, level(*times)?)?,
            Self::Copies { of, times, column: Some(column) } => {
                strength3::copies_into_levels(&sub(of)?, *column as usize, level(*times)?)?
            }
        })
    }

    /// The number of runs.
    ///
    /// # Errors
    /// As [`Recipe::levels`].
    pub fn runs(&self) -> Result<usize, RecipeError> {
        self.runs_at(0)
    }

    fn runs_at(&self, depth: usize) -> Result<usize, RecipeError> {
        if depth > MAX_DEPTH {
            return Err(RecipeError::Depth(MAX_DEPTH));
        }
        let sub = |recipe: &Recipe| recipe.runs_at(depth + 1);
        let too_many = || wrong("too many runs");
        let raise = |base: u32, e: u32| (base as usize).checked_pow(e).ok_or_else(too_many);
        let times = |a: usize, b: usize| a.checked_mul(b).ok_or_else(too_many);
        match self {
            Self::Balanced { runs, .. } => Ok(*runs as usize),
            Self::FullFactorial { levels } => {
                levels.iter().try_fold(1usize, |n, &s| times(n, usize::from(s)))
            }
            Self::RaoHamming { q, n } | Self::Subspaces { q, n, .. } | Self::CodeCosets { q, n, .. } => {
                raise(*q, *n)
            }
            Self::Flats { p, flats, .. } => {
                let directions = flats.first().map_or(0, |f| f.directions.len() as u32);
                times(flats.len(), raise(*p, directions)?)
            }
            Self::DualOfCyclic { q, length, zeros, extended, .. } => {
                let cosets = coset_elements(*q, *length, zeros).ok_or_else(too_many)?;
                raise(*q, cosets + u32::from(*extended))
            }
            Self::ReedMuller { r, m } => {
                let dimension = (0..=*r.min(m)).map(|i| num_integer::binomial((*m).min(16), i)).sum();
                raise(2, dimension)
            }
            Self::Kerdock { m } => raise(4, *m),
            Self::LargeAndSmall { p, e, d } => raise(*p, e.checked_add(*d).ok_or_else(too_many)?),
            Self::Bush { q, t } => raise(*q, *t),
            Self::Ovoid { q } => raise(*q, 4),
            Self::AddelmanKempthorne { q, n } => times(2, raise(*q, *n)?),
            Self::TwoSubspaces { m, d } => {
                raise(2, m.checked_mul(2).and_then(|m| m.checked_add(*d)).ok_or_else(too_many)?)
            }
            Self::BlockTypes { vectors } => times(4, vectors.first().map_or(0, Vec::len)),
            Self::ConferenceBlocks { q } => times(4, *q as usize),
            Self::Orbits { group, columns, .. } => group
                .iter()
                .try_fold(columns.first().map_or(0, |c| c.base.len()), |n, &g| times(n, usize::from(g))),
            Self::Hadamard { matrix } => order(matrix.order()),
            Self::Developed { scheme } => {
                let shape = shape(scheme)?;
                times(shape.rows as usize, shape.order as usize)
            }
            Self::QuasiDifference { .. } | Self::VVector { .. } | Self::Wilson { .. } => {
                let levels = self.levels_at(depth)?;
                let n = usize::from(*levels.first().ok_or_else(|| wrong("no factor"))?);
                times(n, n)
            }
            Self::KroneckerSum { of, beside, .. } => times(sub(of)?, sub(beside)?),
            Self::ZeroColumn { of, schemes } => {
                let rows = schemes.first().map(|s| shape(s)).ok_or_else(|| wrong("no scheme"))??.rows;
                times(sub(of)?, rows as usize)
            }
            Self::MergingProduct { inner, of, .. } => times(order(inner.order())?, sub(of)?),
            Self::Juxtapose { parts } => {
                parts.iter().try_fold(0usize, |n, p| n.checked_add(sub(&p.of)?).ok_or_else(too_many))
            }
            Self::LevelProduct { left, right, .. } => times(sub(left)?, sub(right)?),
            Self::Arrange { of, .. } | Self::Group { of, .. } => sub(of),
            Self::Foldover { of } => times(2, sub(of)?),
            Self::EvenLevel { s, matrix } => times(*s as usize, order(matrix.order())?),
            Self::EightRunsPerLevel { s } => times(8, *s as usize),
            Self::TwoGrids { left, right } => times(2, times(left.shape()?.0, right.shape()?.0)?),
            Self::Slices { parts, .. } => {
                parts.iter().try_fold(0usize, |n, p| n.checked_add(sub(p)?).ok_or_else(too_many))
            }
            Self::Copies { of, times: c, .. } => times(*c as usize, sub(of)?),
        }
    }

    /// The strength that the cited theorems guarantee (capped at the number of factors where a
    /// full factorial is concerned). Nothing but the judges decides.
    #[must_use]
    pub fn strength(&self) -> u32 {
        match self {
            Self::Balanced { .. } => 1,
            Self::FullFactorial { levels } => u32::try_from(levels.len()).unwrap_or(u32::MAX),
            Self::RaoHamming { .. }
            | Self::LargeAndSmall { .. }
            | Self::AddelmanKempthorne { .. }
            | Self::BlockTypes { .. }
            | Self::ConferenceBlocks { .. }
            | Self::Hadamard { .. }
            | Self::Developed { .. }
            | Self::QuasiDifference { .. }
            | Self::VVector { .. }
            | Self::Wilson { .. }
            | Self::KroneckerSum { .. }
            | Self::ZeroColumn { .. }
            | Self::MergingProduct { .. }
            | Self::Group { .. } => 2,
            Self::Bush { t, .. } => *t,
            Self::Ovoid { .. }
            | Self::TwoSubspaces { .. }
            | Self::CodeCosets { .. }
            | Self::EvenLevel { .. }
            | Self::EightRunsPerLevel { .. }
            | Self::TwoGrids { .. } => 3,
            Self::Subspaces { strength, .. }
            | Self::Orbits { strength, .. }
            | Self::Flats { strength, .. }
            | Self::DualOfCyclic { strength, .. }
            | Self::Slices { strength, .. } => *strength,
            Self::ReedMuller { r, .. } => {
                r.checked_add(1).and_then(|r| 2u32.checked_pow(r)).map_or(u32::MAX, |d| d - 1)
            }
            Self::Kerdock { .. } => 5,
            Self::Juxtapose { parts } => parts.iter().map(|p| p.of.strength()).min().unwrap_or(0),
            Self::LevelProduct { left, right, .. } => self.capped(guaranteed(left).min(guaranteed(right))),
            Self::Arrange { of, split, .. } => {
                self.capped(split.iter().map(|s| guaranteed(&s.by)).fold(guaranteed(of), u32::min))
            }
            Self::Foldover { of } => of.strength() + 1,
            Self::Copies { of, .. } => of.strength(),
        }
    }
}

impl Recipe {
    /// `strength`, at most the number of factors: that of a full factorial.
    fn capped(&self, strength: u32) -> u32 {
        let factors = self.levels().map_or(0, |levels| u32::try_from(levels.len()).unwrap_or(u32::MAX));
        strength.min(factors)
    }
}

/// The strength of a part: an array with as many factors as its strength is a full factorial (or
/// copies of one) and limits nothing.
fn guaranteed(recipe: &Recipe) -> u32 {
    let t = recipe.strength();
    match recipe.levels() {
        Ok(levels) if levels.len() <= t as usize => u32::MAX,
        _ => t,
    }
}

/// The number of elements of the q-cyclotomic cosets of the zeros modulo n; `None` when a zero is
/// out of range or q is not prime to n.
fn coset_elements(q: u32, n: u32, zeros: &[u32]) -> Option<u32> {
    if n == 0 || n > u32::from(u16::MAX) || num_integer::gcd(q, n) != 1 {
        return None;
    }
    let mut seen = vec![false; n as usize];
    for &z in zeros {
        let mut at = z;
        while !std::mem::replace(seen.get_mut(at as usize)?, true) {
            // Below 2^32 because at and the remainder of q are below n.
            at = at * (q % n) % n;
        }
    }
    u32::try_from(seen.into_iter().filter(|&s| s).count()).ok()
}

fn power(q: u32, e: u32) -> Result<u16, RecipeError> {
    q.checked_pow(e).ok_or_else(|| wrong("more than 65535 levels")).and_then(level)
}

/// The number of points of PG(n − 1, q).
fn points(q: u32, n: u32) -> Result<usize, RecipeError> {
    let too_many = || wrong("too many factors");
    if q < 2 || n == 0 {
        return Err(wrong("no points"));
    }
    let vectors = (q as usize).checked_pow(n).ok_or_else(too_many)?;
    let points = (vectors - 1) / (q as usize - 1);
    if points > crate::mix::MAX_FACTORS { Err(too_many()) } else { Ok(points) }
}

fn order(order: Option<u32>) -> Result<usize, RecipeError> {
    order
        .filter(|&n| (2..=1 << 24).contains(&n))
        .map(|n| n as usize)
        .ok_or_else(|| wrong("a Hadamard matrix of an order that is no number from 2 to 2^24"))
}

fn shape(scheme: &SchemeRecipe) -> Result<Shape, RecipeError> {
    scheme
        .shape()
        .filter(|s| s.columns as usize <= crate::mix::MAX_FACTORS)
        .ok_or_else(|| wrong("a difference scheme whose parts do not fit together"))
}

/// n and u of a [`Recipe::QuasiDifference`]: an image of a base column has its empty place in each row
/// of one cycle of the permutation as often as the order of the permutation says.
fn quasi_difference_shape(recipe: &Recipe) -> Result<(usize, usize), RecipeError> {
    let Recipe::QuasiDifference { group, permutation, columns, .. } = recipe else {
        return Err(wrong("no quasi-difference matrix"));
    };
    let n = group.iter().try_fold(1usize, |n, &g| n.checked_mul(usize::from(g)));
    let n = n.filter(|&n| n <= usize::from(u16::MAX)).ok_or_else(|| wrong("no group"))?;
    let k = permutation.len();
    let mut power: Vec<usize> = (0..k).collect();
    let mut empty = 0;
    for _ in 0..3 * n {
        empty += columns.iter().filter(|c| power.first().is_some_and(|&r| c.get(r) == Some(&None))).count();
        for r in &mut power {
            *r = permutation.get(*r).map_or(k, |&to| usize::from(to));
        }
        if power.iter().copied().eq(0..k) {
            return Ok((n, empty));
        }
    }
    Err(wrong("a permutation of an order that does not fit the columns"))
}

fn block_shapes(schemes: &[Arc<SchemeRecipe>]) -> Result<Vec<(u16, usize)>, RecipeError> {
    schemes
        .iter()
        .map(|s| {
            let shape = shape(s)?;
            Ok((level(shape.order)?, shape.columns as usize))
        })
        .collect()
}

fn arranged(
    mut levels: Vec<u16>,
    split: &[Split],
    by: &[Vec<u16>],
    take: Option<&[u32]>,
    merge: &[(u32, u16)],
) -> Result<Vec<u16>, RecipeError> {
    if !split.is_sorted_by(|a, b| a.column < b.column) {
        return Err(wrong("columns to split must stand in ascending order, each once"));
    }
    for (s, by) in split.iter().zip(by).rev() {
        levels = compose::split_levels(&levels, s.column as usize, by)?;
    }
    if let Some(take) = take {
        let pick = |&c: &u32| levels.get(c as usize).copied().ok_or_else(|| wrong(format!("no column {c}")));
        levels = take.iter().map(pick).collect::<Result<_, _>>()?;
    }
    for &(column, r) in merge {
        levels = compose::merge_levels_levels(&levels, column as usize, r)?;
    }
    Ok(levels)
}

impl Signs {
    /// The length of the vectors and their number.
    fn shape(&self) -> Result<(usize, usize), RecipeError> {
        match self {
            Self::Matrix(matrix) => {
                let n = order(matrix.order())?;
                Ok((n, n))
            }
            Self::Halves(n) => Ok((*n as usize, 2)),
        }
    }
}
