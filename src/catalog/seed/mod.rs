//! Seeds: the starters in the folder `catalog/`, embedded in the crate.
//!
//! The format is described in `catalog/FORMAT.md`. Nothing is read before it is asked for:
//! [`schemes`], [`hadamard_orders`] and [`arrays`] read the keys of the files, [`find`] one whole file.

mod files;
mod parse;

use std::iter;

use crate::algebra::{Field, vector};
use crate::construct::field::Flat;
use crate::construct::hadamard::{Hadamard, goethals_seidel, turyn_type};
use crate::construct::latin::{QuasiDifference, v_vector};
use crate::construct::scheme::{Scheme, from_starter};
use crate::construct::{ConstructError, OrbitColumn};
use crate::recipe::Recipe;

pub use parse::{SeedError, SeedReason};

use parse::{Parameters, Reader};

/// One starter with its origin.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Seed {
    /// The name, also of the file: lower-case letters, digits and hyphens.
    pub name: String,
    /// What it is, with the data.
    pub kind: SeedKind,
    /// A publication, or how it was computed for this project.
    pub source: String,
    /// SHA-256 of the expanded object in the form that `catalog/FORMAT.md` states, in lower-case
    /// hexadecimal digits.
    pub digest: String,
}

/// What a seed is, with its data. Elements of groups are in the encoding of
/// [`AbelianGroup`](crate::algebra::AbelianGroup), elements of fields in that of
/// [`Field`].
#[derive(Clone, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum SeedKind {
    /// A difference scheme.
    DifferenceScheme {
        /// The orders of the cyclic factors of the group.
        group: Vec<u16>,
        /// The columns, all of one length.
        columns: Vec<Vec<u16>>,
    },
    /// First rows of four circulants for the array of Goethals and Seidel.
    FourCirculants {
        /// A group of units modulo the length; every row is constant on its orbits.
        multipliers: Vec<u16>,
        /// The rows A, B, C, D, entries ±1.
        rows: [Vec<i8>; 4],
    },
    /// Turyn-type sequences X, Y, Z (length n) and W (length n − 1), entries ±1.
    TurynType {
        /// X, Y, Z, W.
        sequences: [Vec<i8>; 4],
    },
    /// A vector V(m, t).
    VVector {
        /// The parameter m.
        m: u16,
        /// The parameter t; q = mt + 1 is a prime power.
        t: u16,
        /// a_1 … a_{m+1}, elements of GF(q).
        vector: Vec<u16>,
    },
    /// Base columns of a quasi-difference matrix with λ = μ = 1.
    QuasiDifference {
        /// The orders of the cyclic factors of the group.
        group: Vec<u16>,
        /// u, the number of empty places in each row of the expanded matrix.
        empty: u16,
        /// For each row the row it is taken from.
        permutation: Vec<u16>,
        /// The base columns; `None` is an empty place.
        columns: Vec<Vec<Option<u16>>>,
    },
    /// Subspaces of GF(q)^n, any `strength` of them independent.
    Subspaces {
        /// q.
        order: u16,
        /// n.
        dimension: u16,
        /// How many are independent whichever are taken.
        strength: u16,
        /// A basis of each, every vector by its number in base q, first coordinate least
        /// significant.
        bases: Vec<Vec<u16>>,
    },
    /// Flats over GF(p) whose union is an array.
    Flats {
        /// p.
        prime: u16,
        /// The levels of the factors.
        levels: Vec<u16>,
        /// The strength of the array.
        strength: u16,
        /// The flats.
        flats: Vec<Flat>,
    },
    /// One symbol per orbit of an abelian group that acts on the runs.
    Orbits {
        /// The orders of the cyclic factors of the group, none for no symmetry.
        group: Vec<u16>,
        /// The strength.
        strength: u16,
        /// The columns.
        columns: Vec<OrbitColumn>,
    },
}

impl Seed {
    /// The difference scheme this seed stands for, `None` when it is of another kind.
    ///
    /// # Errors
    /// The inner result is that of [`from_starter`].
    #[must_use]
    pub fn scheme(&self) -> Option<Result<Scheme, ConstructError>> {
        match &self.kind {
            SeedKind::DifferenceScheme { group, columns } => Some(from_starter(group, columns)),
            _ => None,
        }
    }

    /// The Hadamard matrix this seed stands for, `None` when it is of another kind.
    ///
    /// # Errors
    /// The inner result is that of [`goethals_seidel`] or [`turyn_type`].
    #[must_use]
    pub fn hadamard(&self) -> Option<Result<Hadamard, ConstructError>> {
        match &self.kind {
            SeedKind::FourCirculants { rows: [a, b, c, d], .. } => Some(goethals_seidel([a, b, c, d])),
            SeedKind::TurynType { sequences: [x, y, z, w] } => Some(turyn_type(x, y, z, w)),
            _ => None,
        }
    }

    /// The quasi-difference matrix this seed stands for, `None` when it is of another kind.
    ///
    /// # Errors
    /// The inner result is that of [`QuasiDifference::expanded`] or [`v_vector`].
    #[must_use]
    pub fn quasi_difference(&self) -> Option<Result<QuasiDifference, ConstructError>> {
        match &self.kind {
            SeedKind::VVector { m, t, vector } => Some(v_vector(*m, *t, vector)),
            SeedKind::QuasiDifference { group, permutation, columns, .. } => {
                Some(QuasiDifference::expanded(group, permutation, columns))
            }
            _ => None,
        }
    }
}

/// The parameters of a quasi-difference matrix on the shelf.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct QuasiDifferenceEntry {
    /// The name of the seed, for [`find`].
    pub name: &'static str,
    /// n, the order of the group.
    pub order: usize,
    /// k, the number of rows.
    pub rows: usize,
    /// u, the number of empty places in each row.
    pub empty: usize,
}

impl SeedKind {
    /// The recipe of the array this seed stands for, `None` when it is of another kind.
    #[must_use]
    pub fn recipe(&self) -> Option<Recipe> {
        match self {
            Self::Subspaces { order, dimension, strength, bases } => {
                let field = Field::new(u32::from(*order)).ok()?;
                let expand = |&v: &u16| vector(&field, usize::from(*dimension), usize::from(v));
                Some(Recipe::Subspaces {
                    q: u32::from(*order),
                    n: u32::from(*dimension),
                    subspaces: bases.iter().map(|b| b.iter().map(expand).collect()).collect(),
                    strength: u32::from(*strength),
                })
            }
            Self::Flats { prime, levels, strength, flats } => Some(Recipe::Flats {
                p: u32::from(*prime),
                levels: levels.clone(),
                flats: flats.clone(),
                strength: u32::from(*strength),
            }),
            Self::Orbits { group, strength, columns } => Some(Recipe::Orbits {
                group: group.clone(),
                columns: columns.clone(),
                strength: u32::from(*strength),
            }),
            _ => None,
        }
    }
}

/// The size of an array on the shelf.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct ArrayEntry {
    /// The name of the seed, for [`find`].
    pub name: &'static str,
    /// The number of runs.
    pub runs: u64,
    /// The strength.
    pub strength: u32,
}

/// The parameters of a difference scheme on the shelf.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct SchemeEntry {
    /// The name of the seed, for [`find`].
    pub name: &'static str,
    /// r, the number of rows.
    pub rows: usize,
    /// c, the number of columns.
    pub columns: usize,
    /// s, the order of the group.
    pub order: u16,
}

/// The order of a Hadamard matrix on the shelf.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct HadamardEntry {
    /// The name of the seed, for [`find`].
    pub name: &'static str,
    /// The order of the matrix.
    pub order: usize,
}

/// The names of all seeds, ascending.
pub fn names() -> impl ExactSizeIterator<Item = &'static str> {
    files::FILES.iter().map(|&(name, _)| name)
}

/// The seed of that name.
///
/// ```
/// use trysquare::catalog::seed::find;
/// let seed = find("scheme-12-06-06").expect("on the shelf");
/// let d = seed.scheme().expect("a difference scheme")?;
/// assert_eq!((d.rows(), d.columns(), d.order()), (12, 6, 6));
/// # Ok::<(), trysquare::construct::ConstructError>(())
/// ```
#[must_use]
pub fn find(name: &str) -> Option<Seed> {
    let at = files::FILES.binary_search_by(|&(n, _)| n.cmp(name)).ok()?;
    Some(files::FILES[at].1.parse().expect("every embedded seed is read in a test"))
}

/// The difference schemes on the shelf, in the order of their names; only keys are read.
pub fn schemes() -> impl Iterator<Item = SchemeEntry> {
    parameters().filter_map(|(name, parameters)| match parameters {
        Parameters::DifferenceScheme { rows, columns, group } => Some(SchemeEntry {
            name,
            rows: usize::from(rows),
            columns: usize::from(columns),
            order: group.iter().product(),
        }),
        _ => None,
    })
}

/// The Hadamard matrices on the shelf, in the order of their names; only keys are read.
pub fn hadamard_orders() -> impl Iterator<Item = HadamardEntry> {
    parameters().filter_map(|(name, parameters)| {
        let order = match parameters {
            Parameters::FourCirculants { length, .. } => 4 * usize::from(length),
            Parameters::TurynType { length } => 4 * (3 * usize::from(length) - 1),
            _ => return None,
        };
        Some(HadamardEntry { name, order })
    })
}

/// The quasi-difference matrices on the shelf, also from V(m, t) vectors, in the order of their names;
/// only keys are read.
pub fn quasi_differences() -> impl Iterator<Item = QuasiDifferenceEntry> {
    parameters().filter_map(|(name, parameters)| match parameters {
        Parameters::VVector { m, t } => {
            let (m, t) = (usize::from(m), usize::from(t));
            Some(QuasiDifferenceEntry { name, order: m * t + 1, rows: m + 2, empty: t })
        }
        Parameters::QuasiDifference { group, rows, empty, .. } => Some(QuasiDifferenceEntry {
            name,
            order: group.iter().map(|&g| usize::from(g)).product(),
            rows: usize::from(rows),
            empty: usize::from(empty),
        }),
        _ => None,
    })
}

/// The arrays on the shelf, in the order of their names; only keys are read.
pub fn arrays() -> impl Iterator<Item = ArrayEntry> {
    parameters().filter_map(|(name, parameters)| {
        let (runs, strength) = match parameters {
            Parameters::Subspaces { order, dimension, strength, .. } => {
                (u64::from(order).pow(u32::from(dimension)), strength)
            }
            Parameters::Flats { prime, flats, directions, strength, .. } => {
                (u64::from(prime).pow(u32::from(directions)) * u64::from(flats), strength)
            }
            Parameters::Orbits { group, orbits, strength, .. } => {
                (group.iter().fold(u64::from(orbits), |n, &g| n * u64::from(g)), strength)
            }
            _ => return None,
        };
        Some(ArrayEntry { name, runs, strength: u32::from(strength) })
    })
}

fn parameters() -> impl Iterator<Item = (&'static str, Parameters)> {
    let mut files = files::FILES.iter();
    iter::from_fn(move || {
        let &(name, text) = files.next()?;
        let (_, parameters) = Reader::new(text).opening().expect("every embedded seed is read in a test");
        Some((name, parameters))
    })
}

#[cfg(test)]
mod tests;
