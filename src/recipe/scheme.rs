//! Recipes for difference schemes.

use std::fmt;
use std::sync::Arc;

use serde::{Deserialize, Serialize};

use super::{HadamardRecipe, RecipeError};
use crate::algebra::AbelianGroup;
use crate::construct::scheme::{self, Scheme};

/// How a difference scheme D(r, c, s) is built.
#[derive(Clone, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[serde(tag = "make", rename_all = "kebab-case", deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
#[non_exhaustive]
pub enum SchemeRecipe {
    /// The r × 1 scheme of zeros over a group given by its cyclic factors.
    Zero {
        /// r.
        rows: u32,
        /// The cyclic factors of the group.
        group: Vec<u16>,
    },
    /// D(p^a, p^a, p^b): the multiplication table of GF(p^a), projected (Bose & Bush 1952).
    FieldTable {
        /// The characteristic.
        p: u32,
        /// The degree of the field.
        a: u32,
        /// The number of digits kept, 1 to a.
        b: u32,
    },
    /// D(2q, 2q, q) (Masuyama 1957, Jungnickel 1979).
    Masuyama {
        /// q.
        q: u32,
    },
    /// D(4q, 4q, q) (Dawson 1985, de Launey 1986).
    DawsonDeLauney {
        /// q.
        q: u32,
    },
    /// D(n, n, 2) from a Hadamard matrix.
    Hadamard {
        /// The matrix.
        matrix: Arc<HadamardRecipe>,
    },
    /// The Kronecker sum of two schemes over the same group (Shrikhande 1964).
    KroneckerSum {
        /// The left scheme.
        left: Arc<SchemeRecipe>,
        /// The right scheme.
        right: Arc<SchemeRecipe>,
    },
    /// The direct sum of two schemes: rows multiply, the smaller number of columns stays.
    DirectSum {
        /// The left scheme.
        left: Arc<SchemeRecipe>,
        /// The right scheme.
        right: Arc<SchemeRecipe>,
    },
    /// The image under the homomorphism onto a quotient of the group.
    Image {
        /// The scheme.
        of: Arc<SchemeRecipe>,
        /// The order of the quotient.
        order: u32,
    },
    /// The columns of a stored scheme.
    Starter {
        /// The cyclic factors of the group.
        group: Vec<u16>,
        /// The columns, each of length r.
        columns: Vec<Vec<u16>>,
    },
}

/// The shape of a difference scheme: r × c over a group of order s.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Shape {
    /// The number of rows.
    pub rows: u32,
    /// The number of columns.
    pub columns: u32,
    /// The order of the group.
    pub order: u32,
}

impl SchemeRecipe {
    /// The shape of the scheme, without building it; `None` when the parts make no sense.
    #[must_use]
    pub fn shape(&self) -> Option<Shape> {
        let order = |group: &[u16]| group.iter().try_fold(1u32, |n, &g| n.checked_mul(u32::from(g)));
        Some(match self {
            Self::Zero { rows, group } => Shape { rows: *rows, columns: 1, order: order(group)? },
            Self::FieldTable { p, a, b } => {
                let q = p.checked_pow(*a)?;
                Shape { rows: q, columns: q, order: p.checked_pow(*b)? }
            }
            Self::Masuyama { q } => {
                let r = q.checked_mul(2)?;
                Shape { rows: r, columns: r, order: *q }
            }
            Self::DawsonDeLauney { q } => {
                let r = q.checked_mul(4)?;
                Shape { rows: r, columns: r, order: *q }
            }
            Self::Hadamard { matrix } => {
                let n = matrix.order()?;
                Shape { rows: n, columns: n, order: 2 }
            }
            Self::KroneckerSum { left, right } => {
                let (l, r) = (left.shape()?, right.shape()?);
                Shape {
                    rows: l.rows.checked_mul(r.rows)?,
                    columns: l.columns.checked_mul(r.columns)?,
                    order: (l.order == r.order).then_some(l.order)?,
                }
            }
            Self::DirectSum { left, right } => {
                let (l, r) = (left.shape()?, right.shape()?);
                Shape {
                    rows: l.rows.checked_mul(r.rows)?,
                    columns: l.columns.min(r.columns),
                    order: l.order.checked_mul(r.order)?,
                }
            }
            Self::Image { of, order } => {
                let of = of.shape()?;
                let divides = *order >= 2 && of.order.is_multiple_of(*order);
                Shape { order: divides.then_some(*order)?, ..of }
            }
            Self::Starter { group, columns } => Shape {
                rows: u32::try_from(columns.first()?.len()).ok()?,
                columns: u32::try_from(columns.len()).ok()?,
                order: order(group)?,
            },
        })
    }

    /// Builds the scheme.
    ///
    /// # Errors
    /// A [`RecipeError`] when a condition of the construction does not hold.
    pub fn build(&self) -> Result<Scheme, RecipeError> {
        Ok(match self {
            Self::Zero { rows, group } => {
                let order = AbelianGroup::new(group)?.order();
                scheme::zero_column(*rows as usize, super::build::level(order)?)?
            }
            Self::FieldTable { p, a, b } => scheme::field_table(super::build::level(*p)?, *a, *b)?,
            Self::Masuyama { q } => scheme::masuyama(*q)?,
            Self::DawsonDeLauney { q } => scheme::dawson_de_launey(*q)?,
            Self::Hadamard { matrix } => scheme::from_hadamard(&matrix.build()?)?,
            Self::KroneckerSum { left, right } => scheme::kronecker_sum(&left.build()?, &right.build()?)?,
            Self::DirectSum { left, right } => scheme::direct_sum(&left.build()?, &right.build()?)?,
            Self::Image { of, order } => scheme::image(&of.build()?, super::build::level(*order)?)?,
            Self::Starter { group, columns } => scheme::from_starter(group, columns)?,
        })
    }
}

/// `D(r,c,s)` and how it is made.
impl fmt::Display for SchemeRecipe {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(&self.short())?;
        match self {
            Self::Zero { .. } => Ok(()),
            Self::FieldTable { p, a, .. } => write!(f, " over GF({})", p.saturating_pow(*a)),
            Self::Masuyama { .. } => write!(f, " of Masuyama"),
            Self::DawsonDeLauney { .. } => write!(f, " of Dawson and de Launey"),
            Self::Hadamard { matrix } => write!(f, " from {matrix}"),
            Self::KroneckerSum { left, right } => write!(f, " = {} ⊕ {}", left.short(), right.short()),
            Self::DirectSum { left, right } => write!(f, " = {} × {}", left.short(), right.short()),
            Self::Image { of, .. } => write!(f, " as the image of {}", of.short()),
            Self::Starter { .. } => write!(f, ", stored"),
        }
    }
}

impl SchemeRecipe {
    /// `D(r,c,s)`.
    #[must_use]
    pub fn short(&self) -> String {
        match self.shape() {
            Some(Shape { rows, columns, order }) => format!("D({rows},{columns},{order})"),
            None => "D(?)".to_owned(),
        }
    }
}
