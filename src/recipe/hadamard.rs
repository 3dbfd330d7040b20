//! Recipes for Hadamard matrices.

use std::fmt;
use std::sync::Arc;

use serde::{Deserialize, Serialize};

use super::RecipeError;
use crate::construct::hadamard::{self, Hadamard};

/// How a Hadamard matrix is built.
#[derive(Clone, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[serde(tag = "make", rename_all = "kebab-case", deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
#[non_exhaustive]
pub enum HadamardRecipe {
    /// Order 2^k (Sylvester 1867).
    Sylvester {
        /// k.
        k: u32,
    },
    /// Order q + 1, q ≡ 3 mod 4 (Paley 1933, first construction).
    PaleyOne {
        /// q.
        q: u32,
    },
    /// Order 2(q + 1), q ≡ 1 mod 4 (Paley 1933, second construction).
    PaleyTwo {
        /// q.
        q: u32,
    },
    /// Order 4q, q ≡ 1 mod 4, from a matrix of order q − 1 (Miyamoto 1991).
    Miyamoto {
        /// q.
        q: u32,
        /// The matrix of order q − 1.
        inner: Arc<HadamardRecipe>,
    },
    /// The Kronecker product of two matrices.
    Kronecker {
        /// The outer matrix.
        left: Arc<HadamardRecipe>,
        /// The inner matrix.
        right: Arc<HadamardRecipe>,
    },
    /// Order 4m from the first rows of four circulants (Goethals & Seidel 1967).
    FourCirculants {
        /// The rows, written with `+` and `-`.
        rows: [String; 4],
    },
    /// Order 4(3n − 1) from Turyn-type sequences (Turyn 1974).
    TurynType {
        /// X, Y, Z (length n) and W (length n − 1), written with `+` and `-`.
        sequences: [String; 4],
    },
}

impl HadamardRecipe {
    /// The order of the matrix, without building it; `None` when the parts make no sense.
    #[must_use]
    pub fn order(&self) -> Option<u32> {
        match self {
            Self::Sylvester { k } => 1u32.checked_shl(*k),
            Self::PaleyOne { q } => q.checked_add(1),
            Self::PaleyTwo { q } => q.checked_add(1)?.checked_mul(2),
            Self::Miyamoto { q, .. } => q.checked_mul(4),
            Self::Kronecker { left, right } => left.order()?.checked_mul(right.order()?),
            Self::FourCirculants { rows } => u32::try_from(rows[0].len()).ok()?.checked_mul(4),
            Self::TurynType { sequences } => {
                u32::try_from(sequences[0].len()).ok()?.checked_mul(3)?.checked_sub(1)?.checked_mul(4)
            }
        }
    }

    /// Builds the matrix.
    ///
    /// # Errors
    /// A [`RecipeError`] when a condition of the construction does not hold.
    pub fn build(&self) -> Result<Hadamard, RecipeError> {
        Ok(match self {
            Self::Sylvester { k } => hadamard::sylvester(*k)?,
            Self::PaleyOne { q } => hadamard::paley_one(*q)?,
            Self::PaleyTwo { q } => hadamard::paley_two(*q)?,
            Self::Miyamoto { q, inner } => hadamard::miyamoto(*q, &inner.build()?)?,
            Self::Kronecker { left, right } => hadamard::kronecker(&left.build()?, &right.build()?)?,
            Self::FourCirculants { rows } => {
                let [a, b, c, d] = rows.each_ref().map(|r| signs(r));
                hadamard::goethals_seidel([&a?, &b?, &c?, &d?])?
            }
            Self::TurynType { sequences } => {
                let [x, y, z, w] = sequences.each_ref().map(|r| signs(r));
                hadamard::turyn_type(&x?, &y?, &z?, &w?)?
            }
        })
    }
}

fn signs(text: &str) -> Result<Vec<i8>, RecipeError> {
    text.chars()
        .map(|c| match c {
            '+' => Ok(1),
            '-' => Ok(-1),
            other => Err(RecipeError::Text(format!("{other:?} in a row of signs; write + and -"))),
        })
        .collect()
}

/// `H(n)` and how it is made.
impl fmt::Display for HadamardRecipe {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(&self.short())?;
        match self {
            Self::Sylvester { .. } => write!(f, " of Sylvester"),
            Self::PaleyOne { q } => write!(f, " of Paley, first kind over GF({q})"),
            Self::PaleyTwo { q } => write!(f, " of Paley, second kind over GF({q})"),
            Self::Miyamoto { q, inner } => write!(f, " of Miyamoto over GF({q}) from {}", inner.short()),
            Self::Kronecker { left, right } => write!(f, " = {} ⊗ {}", left.short(), right.short()),
            Self::FourCirculants { .. } => write!(f, " of Goethals and Seidel"),
            Self::TurynType { .. } => write!(f, " from Turyn-type sequences"),
        }
    }
}

impl HadamardRecipe {
    /// `H(n)`.
    #[must_use]
    pub fn short(&self) -> String {
        format!("H({})", self.order().unwrap_or(0))
    }
}
