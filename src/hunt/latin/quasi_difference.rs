//! Quasi-difference matrices by exact cover of differences under prescribed symmetries.

use super::Symmetry;
use super::cover::{candidates, cover};
use super::random::Random;
use super::space::{Column, Space};
use crate::algebra::AbelianGroup;

/// What to look for and how long.
#[derive(Clone, Debug)]
pub struct QuasiDifferenceSearch {
    /// The group, of order n, at most 256.
    pub group: AbelianGroup,
    /// k, the number of rows, 2 to 32.
    pub rows: usize,
    /// u, the number of empty places of each row; 0 asks for a difference matrix of index 1.
    pub empty: usize,
    /// Generators of the group of symmetries that the matrix shall have.
    pub symmetries: Vec<Symmetry>,
    /// The seed of the random choices.
    pub seed: u64,
    /// The number of columns tried before an attempt is given up.
    pub nodes: u64,
    /// The number of attempts.
    pub attempts: u64,
}

/// The columns of an (n, k; 1, 1; u) quasi-difference matrix that the symmetries map to itself (up
/// to constants added to columns), or `None` when no attempt finds one.
///
/// Every orbit of differences under the symmetries must be covered by one orbit of columns: an exact
/// cover. An attempt chooses at random the columns that a symmetry fixes, so that the short orbits
/// are covered, then the others depth first from a list of all columns, always covering the
/// difference that the fewest columns left over have (Knuth 2000, *Dancing links*).
///
/// There is no answer when the symmetries have more than 256 orbits of differences or the list
/// would have more than 2^24 columns.
///
/// Guarantee: the differences of any two rows, where both are there, are every group element once;
/// every row has u empty places and no column more than one. There are n + 2u columns.
///
/// # Reference
/// R. J. R. Abel, C. J. Colbourn & J. H. Dinitz, *Mutually orthogonal Latin squares*, in *Handbook of
/// Combinatorial Designs*, second edition 2007, section III.3.6 (the matrices; searching under
/// prescribed symmetries is common practice).
///
/// ```
/// use trysquare::algebra::AbelianGroup;
/// use trysquare::hunt::latin::{QuasiDifferenceSearch, Symmetry, quasi_difference_matrix};
/// let group = AbelianGroup::cyclic(7)?;
/// let rotation = Symmetry::new(&group, &[1, 2, 3, 0], &[1], &[0; 4]).expect("a symmetry");
/// let search = QuasiDifferenceSearch {
///     group, rows: 4, empty: 3, symmetries: vec![rotation], seed: 1, nodes: 10_000, attempts: 10,
/// };
/// assert_eq!(quasi_difference_matrix(&search).expect("two squares of order 10").len(), 13);
/// # Ok::<(), trysquare::algebra::AlgebraError>(())
/// ```
#[must_use]
pub fn quasi_difference_matrix(search: &QuasiDifferenceSearch) -> Option<Vec<Column>> {
    let space = Space::new(search)?;
    let list = candidates(&space)?;
    let mut random = Random::new(search.seed);
    (0..search.attempts).find_map(|_| {
        let bases = cover(&space, &list, &mut random, search.nodes)?;
        Some(bases.iter().flat_map(|c| space.orbit(c)).collect())
    })
}
