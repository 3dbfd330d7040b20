//! [`Recipe`]: the tree that says how an array is built.
//!
//! A recipe holds everything that is needed: stored starters ride in it, so it can be built where
//! no catalog is at hand. Building it again gives the same bytes.

mod build;
mod hadamard;
mod scheme;
mod shape;
mod text;

use std::sync::Arc;

use serde::{Deserialize, Serialize};
use thiserror::Error;

use crate::algebra::AlgebraError;
use crate::array::ArrayError;
use crate::construct::field::Flat;
use crate::construct::{ConstructError, OrbitColumn};

pub use hadamard::HadamardRecipe;
pub use scheme::{SchemeRecipe, Shape};

/// How an array is built.
///
/// The columns of the array stand in the order that the variant states; [`Recipe::levels`] gives
/// their levels and [`Recipe::strength`] the strength that the cited theorems guarantee, both
/// without building. Neither replaces the judges.
#[derive(Clone, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[serde(tag = "make", rename_all = "kebab-case", deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
#[non_exhaustive]
pub enum Recipe {
    /// The levels of every factor in turn: strength 1.
    Balanced {
        /// The number of runs, a multiple of every factor's levels.
        runs: u32,
        /// The levels of the factors.
        levels: Vec<u16>,
    },
    /// All level combinations once.
    FullFactorial {
        /// The levels of the factors.
        levels: Vec<u16>,
    },
    /// All points of PG(n − 1, q): (q^n − 1)/(q − 1) q-level factors, strength 2 (Rao 1947).
    RaoHamming {
        /// The number of levels, a prime power.
        q: u32,
        /// The exponent of the number of runs q^n.
        n: u32,
    },
    /// Subspaces of GF(q)^n, one factor each, any `strength` of them independent.
    Subspaces {
        /// The order of the field.
        q: u32,
        /// The dimension of the space; q^n runs.
        n: u32,
        /// A basis of each subspace; a subspace of dimension e gives q^e levels.
        subspaces: Vec<Vec<Vec<u16>>>,
        /// How many subspaces are independent whichever are taken.
        strength: u32,
    },
    /// Flats over GF(p), of as many directions each, one after the other.
    Flats {
        /// The characteristic.
        p: u32,
        /// The levels of the factors.
        levels: Vec<u16>,
        /// The flats.
        flats: Vec<Flat>,
        /// The strength that holds together, found by search.
        strength: u32,
    },
    /// The words of the dual of a cyclic code (BCH, quadratic residue, Golay): `length` q-level
    /// factors, one more when extended.
    DualOfCyclic {
        /// The order of the field.
        q: u32,
        /// The length of the cyclic code.
        length: u32,
        /// The exponents of its zeros, one of each cyclotomic coset or more.
        zeros: Vec<u32>,
        /// Whether a parity check is added to it.
        extended: bool,
        /// The strength, below the minimum distance; computed again when the array is built.
        strength: u32,
    },
    /// The Reed–Muller code of order r and length 2^m: strength 2^(r+1) − 1.
    ReedMuller {
        /// r.
        r: u32,
        /// m.
        m: u32,
    },
    /// The Kerdock code of length 2^m, for m = 4 that of Nordstrom and Robinson: 2^m two-level
    /// factors in 4^m runs, strength 5.
    Kerdock {
        /// m, even.
        m: u32,
    },
    /// One p^e-level and p^e p^d-level factors in p^(e+d) runs, e ≥ d, strength 2.
    LargeAndSmall {
        /// A prime power.
        p: u32,
        /// The dimension of the large subspace.
        e: u32,
        /// The dimension of the small ones.
        d: u32,
    },
    /// Polynomials of degree below t: q + 1 q-level factors, q + 2 for even q and t = 3, in q^t
    /// runs (Bush 1952).
    Bush {
        /// The number of levels, a prime power.
        q: u32,
        /// The strength.
        t: u32,
    },
    /// The elliptic quadric: q² + 1 q-level factors in q^4 runs, strength 3.
    Ovoid {
        /// The number of levels, a prime power.
        q: u32,
    },
    /// 2(q^n − 1)/(q − 1) − 1 q-level factors in 2q^n runs, strength 2 (Addelman & Kempthorne
    /// 1961).
    AddelmanKempthorne {
        /// The number of levels, a prime power.
        q: u32,
        /// n.
        n: u32,
    },
    /// Two 2^m-level factors and 2^m (2^d − 1) two-level factors in 2^(2m+d) runs, strength 3.
    TwoSubspaces {
        /// m.
        m: u32,
        /// d.
        d: u32,
    },
    /// One q^(n−k)-level and n q-level factors in q^n runs, strength 3: the cosets of a code.
    CodeCosets {
        /// The order of the field.
        q: u32,
        /// The length of the code.
        n: u32,
        /// Its dimension; n is at most (q^k − 1)/(q − 1).
        k: u32,
    },
    /// Two-level factors and, last, one p-level factor in 4p runs from orthogonal vectors of block
    /// types, strength 2 (DeCock & Stufken 2000).
    BlockTypes {
        /// The vectors, each of length p, over ±1, ±2, ±3.
        vectors: Vec<Vec<i8>>,
    },
    /// 2(q − 1) two-level factors and, last, one q-level factor in 4q runs, strength 2: block types
    /// from conference matrices of the orders q − 1 and q + 1, see
    /// [`conference_blocks`](crate::construct::conference_blocks).
    ConferenceBlocks {
        /// The number of levels, odd.
        q: u32,
    },
    /// One symbol per orbit of an abelian group that acts freely on the runs and by translation on
    /// the levels, see [`orbit_array`](crate::construct::orbit_array).
    Orbits {
        /// The cyclic factors of the group; empty for no symmetry.
        #[serde(default, skip_serializing_if = "Vec::is_empty")]
        group: Vec<u16>,
        /// The columns.
        columns: Vec<OrbitColumn>,
        /// The strength for which they were chosen.
        strength: u32,
    },
    /// N − 1 two-level factors from a Hadamard matrix of order N, strength 2.
    Hadamard {
        /// The matrix.
        matrix: Arc<HadamardRecipe>,
    },
    /// c s-level factors and, last, one r-level factor in rs runs from a difference scheme
    /// D(r, c, s), strength 2 (Bose & Bush 1952).
    Developed {
        /// The scheme.
        scheme: Arc<SchemeRecipe>,
    },
    /// k factors of n + u levels in (n + u)² runs from an (n, k; 1, 1; u) quasi-difference matrix,
    /// strength 2.
    QuasiDifference {
        /// The cyclic factors of the group of order n.
        group: Vec<u16>,
        /// For each row of an image of a column the row it is taken from.
        permutation: Vec<u16>,
        /// The base columns, which stand for their images under the powers of the permutation;
        /// null is an empty place.
        columns: Vec<Vec<Option<u16>>>,
        /// For u ≥ 2 the array on u levels that fills the hole.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        fill: Option<Arc<Recipe>>,
    },
    /// m + 2 factors of n = (m + 1)t + 1 levels in n² runs from a V(m, t) vector, strength 2.
    VVector {
        /// m.
        m: u16,
        /// t.
        t: u16,
        /// a_1 … a_{m+1}, elements of GF(mt + 1).
        vector: Vec<u16>,
        /// For t ≥ 2 the array on t levels that fills the hole.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        fill: Option<Arc<Recipe>>,
    },
    /// Factors of n = mt + u_1 + … + u_r levels in n² runs, r = 1 or 2: a transversal design on t
    /// points inflated m times with r more groups truncated (Wilson 1974). Strength 2.
    Wilson {
        /// The number of factors.
        factors: u32,
        /// The design on t points; its first factors are the groups of the result, then come
        /// those that are truncated.
        master: Arc<Recipe>,
        /// u_1 … u_r.
        truncated: Vec<u16>,
        /// The arrays on m, m + 1, …, m + r levels.
        parts: Vec<Arc<Recipe>>,
        /// The arrays on u_1 … u_r levels, absent for one level.
        fills: Vec<Option<Arc<Recipe>>>,
    },
    /// The generalised Kronecker sum (Wang & Wu 1991): each column of `of` times the columns of
    /// the scheme over a group of its order, then the columns of `beside`. Strength 2.
    KroneckerSum {
        /// The array A.
        of: Arc<Recipe>,
        /// At most one scheme for each number of levels in A, all with M rows; a level without
        /// one has the zero column.
        schemes: Vec<Arc<SchemeRecipe>>,
        /// The array B with M runs.
        beside: Arc<Recipe>,
    },
    /// The generalised Kronecker sum with its zero columns given up for one factor of N1 levels,
    /// N1 the runs of `of`; then one factor of M levels. Strength 2.
    ZeroColumn {
        /// The array A.
        of: Arc<Recipe>,
        /// One scheme for each number of levels in A, all with M rows and a zero column.
        schemes: Vec<Arc<SchemeRecipe>>,
    },
    /// OA(n, 2^(n−1)) ⊗ H(M) with m columns of H(M) merged into the m-level factor of `of`:
    /// (n − 1)(M − m) two-level factors, one of nm levels, then the other columns of `of`.
    MergingProduct {
        /// The Hadamard matrix of order n.
        inner: Arc<HadamardRecipe>,
        /// The Hadamard matrix of order M.
        outer: Arc<HadamardRecipe>,
        /// The m columns of H(M), the constant one among them, that become one factor.
        merged: Vec<u32>,
        /// The array B with M runs.
        of: Arc<Recipe>,
        /// The m-level factor of B.
        factor: u32,
    },
    /// Arrays with the same levels beside one named column, on top of each other; the named
    /// columns become the first factor, of as many levels as they have together.
    Juxtapose {
        /// The arrays, top to bottom.
        parts: Vec<Part>,
    },
    /// All pairs of a run of `left` and a run of `right`; a pair of columns becomes one factor
    /// whose levels multiply (Bush 1952), unpaired columns stay. Order: as in
    /// [`level_product`](crate::construct::compose::level_product).
    LevelProduct {
        /// The left array.
        left: Arc<Recipe>,
        /// The right array.
        right: Arc<Recipe>,
        /// Pairs (column of left, column of right).
        pairs: Vec<(u32, u32)>,
    },
    /// Splitting, merging, dropping and reordering of columns.
    Arrange {
        /// The array.
        of: Arc<Recipe>,
        /// Columns that are replaced, in place, by the columns of an array with as many runs as
        /// the column has levels; ascending.
        #[serde(default, skip_serializing_if = "Vec::is_empty")]
        split: Vec<Split>,
        /// The columns kept after splitting, in order; absent: all.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        take: Option<Vec<u32>>,
        /// Columns (numbered after taking) merged to fewer levels: (column, levels).
        #[serde(default, skip_serializing_if = "Vec::is_empty")]
        merge: Vec<(u32, u16)>,
    },
    /// Columns that form copies of a saturated array become one factor, which stands last.
    Group {
        /// The array.
        of: Arc<Recipe>,
        /// The columns.
        columns: Vec<u32>,
    },
    /// OA(N, 2^k, t), t even, and its complement: OA(2N, 2^(k+1), t + 1).
    Foldover {
        /// The array.
        of: Arc<Recipe>,
    },
    /// s·2^(N/s−1) in N runs, s even, strength 3: half the slices a saturated array, half its
    /// complement.
    EvenLevel {
        /// The levels of the large factor.
        s: u32,
        /// The Hadamard matrix of order N/s.
        matrix: Arc<HadamardRecipe>,
    },
    /// s·2^6 (s = 3: 3·2^4) in 8s runs, s odd, strength 3.
    EightRunsPerLevel {
        /// The levels of the large factor.
        s: u32,
    },
    /// s1·s2·2^m in 2·s1·s2 runs, strength 3.
    TwoGrids {
        /// Mutually orthogonal sign vectors of length s1.
        left: Signs,
        /// Mutually orthogonal sign vectors of length s2.
        right: Signs,
    },
    /// Arrays with the same levels on top of each other, with one more factor that numbers them;
    /// it stands first.
    Slices {
        /// The arrays.
        parts: Vec<Arc<Recipe>>,
        /// The strength that holds together, by the theorem that chose the parts.
        strength: u32,
    },
    /// `times` copies on top of each other. Without a column one more factor numbers the copies
    /// and stands first; with a column of s levels that column gets s·`times` levels.
    Copies {
        /// The array.
        of: Arc<Recipe>,
        /// The number of copies.
        times: u32,
        /// The column whose levels multiply.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        column: Option<u32>,
    },
}

/// One array of a [`Recipe::Juxtapose`].
#[derive(Clone, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Part {
    /// The array.
    pub of: Arc<Recipe>,
    /// The named column; absent: the whole array is one level.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub column: Option<u32>,
}

/// A column to be replaced by the columns of an array.
#[derive(Clone, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Split {
    /// The column.
    pub column: u32,
    /// The array, with as many runs as the column has levels.
    pub by: Arc<Recipe>,
}

/// Mutually orthogonal sign vectors of one length, the constant one first.
#[derive(Clone, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case", deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub enum Signs {
    /// The columns of a normalised Hadamard matrix.
    Matrix(Arc<HadamardRecipe>),
    /// For an even length: the constant vector, and one that is + on the first half.
    Halves(u32),
}

/// Why a recipe cannot be built.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[non_exhaustive]
pub enum RecipeError {
    /// A condition of a construction does not hold.
    #[error(transparent)]
    Construct(#[from] ConstructError),
    /// The parts do not fit together.
    #[error("the recipe does not fit together: {0}")]
    Text(String),
    /// The recipe is nested too deeply.
    #[error("the recipe is nested more than {0} deep")]
    Depth(usize),
}

impl From<AlgebraError> for RecipeError {
    fn from(e: AlgebraError) -> Self {
        Self::Construct(e.into())
    }
}

impl From<ArrayError> for RecipeError {
    fn from(e: ArrayError) -> Self {
        Self::Construct(e.into())
    }
}
