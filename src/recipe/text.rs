//! A recipe in one readable line.

use std::fmt;

use super::{Recipe, Signs};
use crate::mix::Mix;

impl fmt::Display for Recipe {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Balanced { .. } => write!(f, "levels in turn"),
            Self::FullFactorial { levels } => match Mix::new(levels.clone()) {
                Ok(mix) => write!(f, "full factorial {mix}"),
                Err(_) => write!(f, "full factorial"),
            },
            Self::RaoHamming { q, n } => write!(f, "all points of PG({},{q})", n.saturating_sub(1)),
            Self::Subspaces { q, n, subspaces, .. } => {
                write!(f, "{} subspaces of GF({q})^{n}", subspaces.len())
            }
            Self::Flats { p, flats, .. } => write!(f, "{} flats over GF({p})", flats.len()),
            Self::DualOfCyclic { q, length, zeros, extended, .. } => {
                let kind = if *extended { "extended cyclic" } else { "cyclic" };
                let zeros: Vec<String> = zeros.iter().map(u32::to_string).collect();
                write!(
                    f,
                    "dual of the {kind} code of length {length} over GF({q}) with zeros {}",
                    zeros.join(", ")
                )
            }
            Self::ReedMuller { r, m } => write!(f, "Reed–Muller code of order {r} and length 2^{m}"),
            Self::Kerdock { m } => write!(f, "Kerdock code of length 2^{m}"),
            Self::LargeAndSmall { p, e, d } => {
                write!(f, "subspaces of dimensions {e} and {d} in GF({p})^{}", e + d)
            }
            Self::Bush { q, t } => write!(f, "polynomials of degree below {t} over GF({q})"),
            Self::Ovoid { q } => write!(f, "elliptic quadric in PG(3,{q})"),
            Self::AddelmanKempthorne { q, n } => write!(f, "Addelman–Kempthorne over GF({q})^{n}"),
            Self::TwoSubspaces { m, d } => write!(f, "two subspaces and points in GF(2)^{}", 2 * m + d),
            Self::CodeCosets { q, n, k } => {
                write!(f, "cosets of a code of length {n} and dimension {k} over GF({q})")
            }
            Self::Hadamard { matrix } => write!(f, "{matrix}"),
            Self::Developed { scheme } => write!(f, "{scheme}, with its rows as a factor"),
            Self::KroneckerSum { of, schemes, beside } => {
                write!(f, "[{of}]")?;
                for scheme in schemes.iter().filter(|s| s.shape().is_some_and(|s| s.columns > 1)) {
                    write!(f, " ⊕ {scheme}")?;
                }
                write!(f, ", beside [{beside}]")
            }
            Self::ZeroColumn { of, schemes } => {
                write!(f, "[{of}]")?;
                for scheme in schemes.iter().filter(|s| s.shape().is_some_and(|s| s.columns > 1)) {
                    write!(f, " ⊕ {scheme}")?;
                }
                write!(f, ", zero columns refined")
            }
            Self::MergingProduct { inner, outer, merged, of, .. } => {
                write!(f, "({inner}) ⊗ ({outer}), {} columns merged with a factor of [{of}]", merged.len())
            }
            Self::Juxtapose { parts } => {
                for (i, part) in parts.iter().enumerate() {
                    write!(f, "{}[{}]", if i > 0 { " over " } else { "" }, part.of)?;
                }
                Ok(())
            }
            Self::LevelProduct { left, right, .. } => write!(f, "[{left}] × [{right}], level by level"),
            Self::Arrange { of, split, merge, .. } => {
                write!(f, "{of}")?;
                for s in split {
                    write!(f, "; column {} split by [{}]", s.column + 1, s.by)?;
                }
                if !merge.is_empty() {
                    write!(f, "; levels merged in {} column{}", merge.len(), plural(merge.len()))?;
                }
                Ok(())
            }
            Self::Group { of, columns } => write!(f, "{of}; {} columns grouped", columns.len()),
            Self::Foldover { of } => write!(f, "[{of}] and its complement"),
            Self::EvenLevel { s, matrix } => write!(f, "{s} slices from {matrix} and its complement"),
            Self::EightRunsPerLevel { s } => write!(f, "{s} slices of 8 runs"),
            Self::TwoGrids { left, right } => {
                let length = |s: &Signs| match s {
                    Signs::Matrix(m) => m.order().unwrap_or(0),
                    Signs::Halves(n) => *n,
                };
                write!(f, "sign grids of {} × {}", length(left), length(right))
            }
            Self::Slices { parts, .. } => write!(f, "{} slices", parts.len()),
            Self::Copies { of, times, .. } => write!(f, "{times} copies of [{of}]"),
        }
    }
}

fn plural(n: usize) -> &'static str {
    if n == 1 { "" } else { "s" }
}
