//! Quasi-difference matrices.

use super::is_square;
use crate::algebra::AbelianGroup;
use crate::array::{Array, ArrayError};
use crate::construct::ConstructError;
use crate::construct::compose::{Levels, as_levels};

const NAME: &str = "quasi-difference matrix";

/// An (n, k; 1, 1; u) quasi-difference matrix over an abelian group of order n, that is λ = μ = 1.
///
/// Every value of this type was checked by the definition:
/// * k ≥ 2 rows and n + 2u columns, whose places hold a group element or are empty;
/// * every row has u empty places, no column more than one;
/// * the differences of any two rows, where both places are filled, are every group element once.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct QuasiDifference {
    group: AbelianGroup,
    empty: usize,
    columns: Vec<Vec<Option<u16>>>,
}

impl QuasiDifference {
    /// The matrix with the given columns over the given group.
    ///
    /// Cost: k² group operations for each column.
    ///
    /// # Errors
    /// [`ConstructError::Condition`] when the columns break the definition.
    pub fn new(group: AbelianGroup, columns: Vec<Vec<Option<u16>>>) -> Result<Self, ConstructError> {
        let fail = |needs: String| Err(ConstructError::condition(NAME, needs));
        let n = group.order() as usize;
        let k = columns.first().map_or(0, Vec::len);
        if k < 2 || columns.iter().any(|c| c.len() != k) {
            return fail("columns of one length, at least 2".to_owned());
        }
        if let Some(e) = columns.iter().flatten().flatten().find(|&&e| usize::from(e) >= n) {
            return fail(format!("entries are below {n}, not {e}"));
        }
        if let Some(j) = columns.iter().position(|c| c.iter().filter(|e| e.is_none()).count() > 1) {
            return fail(format!("a column has at most one empty place, but column {j} has more"));
        }
        let empty = columns.len().saturating_sub(n) / 2;
        for r in 0..k {
            let found = columns.iter().filter(|c| c[r].is_none()).count();
            if found != empty || columns.len() != n + 2 * empty {
                let needs = format!(
                    "n + 2u columns and u empty places in each row, not {} columns and {found} in row {r}",
                    columns.len()
                );
                return fail(needs);
            }
        }
        for (i, j) in (0..k).flat_map(|j| (0..j).map(move |i| (i, j))) {
            let mut seen = vec![false; n];
            for c in &columns {
                let (Some(a), Some(b)) = (c[i], c[j]) else { continue };
                if std::mem::replace(&mut seen[usize::from(group.sub(a, b))], true) {
                    return fail(format!("the differences of rows {i} and {j} are every element once"));
                }
            }
        }
        Ok(Self { group, empty, columns })
    }

    /// The matrix whose columns are `base` and their images under the powers of `permutation`, as
    /// `catalog/FORMAT.md` says: row r of an image is row `permutation[r]` of the column before.
    ///
    /// # Errors
    /// [`ConstructError::Condition`] when `permutation` is none of the rows or the columns break
    /// the definition, [`ConstructError::Algebra`] when `group` are no cyclic orders.
    ///
    /// ```
    /// use trysquare::construct::latin::QuasiDifference;
    /// let base = [vec![None, Some(0), Some(1)], vec![None, Some(0), Some(2)]];
    /// let matrix = QuasiDifference::expanded(&[3], &[1, 2, 0], &base);
    /// assert!(matrix.is_err(), "the difference 0 is missing");
    /// let base = [[0, 0, 0], [0, 1, 2], [0, 2, 1]].map(|c| c.map(Some).to_vec());
    /// assert_eq!(QuasiDifference::expanded(&[3], &[0, 1, 2], &base)?.empty(), 0);
    /// # Ok::<(), trysquare::construct::ConstructError>(())
    /// ```
    pub fn expanded(
        group: &[u16],
        permutation: &[u16],
        base: &[Vec<Option<u16>>],
    ) -> Result<Self, ConstructError> {
        let group = AbelianGroup::new(group)?;
        let k = permutation.len();
        let mut sorted = permutation.to_vec();
        sorted.sort_unstable();
        if !sorted.iter().copied().map(usize::from).eq(0..k) || base.iter().any(|c| c.len() != k) {
            return Err(ConstructError::condition(NAME, "a permutation of the rows of every column"));
        }
        // Column lengths bound the order of the permutation only by Landau's function; the number of
        // columns that can be right bounds it better.
        let most = 3 * group.order() as usize + 1;
        let mut columns = Vec::new();
        for column in base {
            let mut power: Vec<u16> = (0..k as u16).collect();
            loop {
                columns.push(power.iter().map(|&r| column[usize::from(r)]).collect());
                if columns.len() > most {
                    return Err(ConstructError::condition(NAME, "at most 3n columns"));
                }
                power = power.iter().map(|&r| permutation[usize::from(r)]).collect();
                if power.iter().copied().map(usize::from).eq(0..k) {
                    break;
                }
            }
        }
        Self::new(group, columns)
    }

    /// The group.
    #[must_use]
    pub fn group(&self) -> &AbelianGroup {
        &self.group
    }

    /// k, the number of rows.
    #[must_use]
    pub fn rows(&self) -> usize {
        self.columns[0].len()
    }

    /// u, the number of empty places in each row.
    #[must_use]
    pub fn empty(&self) -> usize {
        self.empty
    }

    /// The columns; `None` is an empty place.
    #[must_use]
    pub fn columns(&self) -> &[Vec<Option<u16>>] {
        &self.columns
    }
}

/// The transversal design with a hole that a quasi-difference matrix develops into, its hole filled.
///
/// # Parameters
/// `matrix`: an (n, k; 1, 1; u) quasi-difference matrix. `fill`: for u ≥ 2 an array. All of these
/// must hold:
/// * for u ≥ 2 `fill` is there, has u² runs and begins with k factors of u levels; they have
///   strength 2 (not checked);
/// * n + u ≤ 65,535.
///
/// # Result
/// OA((n + u)², (n + u)^k, 2), index 1. For each column in turn and each group element g in turn a
/// run: the entries plus g, and for the l-th empty place of row r (from 0) the level n + l of factor
/// r. Then the fill with n added to its levels; for u = 1 the run of the level n.
///
/// A factor with a filled and one with an empty place meet once for every g; two filled ones once
/// for every difference; two levels from n on meet in the fill.
///
/// For u = 0, a difference matrix of index 1,
/// [`developed_with_rows`](crate::construct::scheme::developed_with_rows) has one factor more.
///
/// # Errors
/// [`ConstructError::Condition`] when a checked condition fails, [`ConstructError::Array`] when the
/// result does not fit into memory.
///
/// # Cost
/// O(cells of the result).
///
/// # Reference
/// R. J. R. Abel, C. J. Colbourn & J. H. Dinitz, *Mutually orthogonal Latin squares*, in *Handbook of
/// Combinatorial Designs*, second edition 2007, section III.3.
///
/// ```
/// use trysquare::construct::field::bush;
/// use trysquare::construct::latin::{quasi_difference, v_vector};
/// use trysquare::verify::{Demand, Verdict, certify};
/// let array = quasi_difference(&v_vector(2, 3, &[0, 1, 4])?, Some(&bush(3, 2)?))?;
/// assert_eq!(array.mix().to_string(), "10^4");
/// assert_eq!(certify(&array, &Demand::strength(2))?.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn quasi_difference(matrix: &QuasiDifference, fill: Option<&Array>) -> Result<Array, ConstructError> {
    let (n, u, k) = (matrix.group.order() as usize, matrix.empty, matrix.rows());
    let levels = quasi_difference_levels(n, u, k)?;
    let fill = match fill {
        Some(array) if u > 1 => {
            is_square(NAME, "the fill", array, k, u)?;
            Some(array)
        }
        None if u > 1 => {
            return Err(ConstructError::condition(NAME, format!("a fill for the hole of size {u}")));
        }
        _ => None,
    };
    let mut met = vec![0; k];
    let infinity: Vec<u16> = matrix
        .columns
        .iter()
        .map(|c| {
            let Some(row) = c.iter().position(Option::is_none) else { return 0 };
            met[row] += 1;
            (n + met[row] - 1) as u16
        })
        .collect();
    let developed = n * matrix.columns.len();
    let runs = (n + u).checked_mul(n + u).ok_or(ArrayError::TooLarge { runs: developed, factors: k })?;
    Ok(Array::from_fn(runs, levels, |run, j| {
        if run < developed {
            let (c, g) = (run / n, run % n);
            return matrix.columns[c][j].map_or(infinity[c], |e| matrix.group.add(e, g as u16));
        }
        n as u16 + fill.map_or(0, |fill| fill.get(run - developed, j))
    })?)
}

/// The levels of [`quasi_difference`], from n, u and k.
///
/// # Errors
/// [`ConstructError::Condition`] when n + u is no number of levels.
pub fn quasi_difference_levels(n: usize, u: usize, k: usize) -> Result<Vec<u16>, ConstructError> {
    let levels = as_levels(NAME, n.checked_add(u))?;
    Ok(Levels::new(NAME).repeat(levels, Some(k))?.done())
}
