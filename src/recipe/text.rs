//! A recipe in one readable line.

use std::fmt;

use super::{Recipe, Signs};
use crate::mix::Mix;

impl fmt::Display for Recipe {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Balanced { .. } => write!(f, "levels in turn"),
            Self::FullFactorial { levels } if levels.len() == 1 => write!(f, "{} runs in order", levels[0]),
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
            Self::BlockTypes { vectors } => {
                write!(f, "block types, {} blocks of 4 runs", vectors.first().map_or(0, Vec::len))
            }
            Self::ConferenceBlocks { q } => {
                write!(
                    f,
                    "{q} blocks of 4 runs from conference matrices C({}) and C({})",
                    q.saturating_sub(1),
                    q.saturating_add(1)
                )
            }
            Self::Orbits { group, columns, .. } => {
                let orbits = columns.first().map_or(0, |c| c.base.len());
                write!(f, "stored array, {orbits} orbits")?;
                for (i, n) in group.iter().enumerate() {
                    write!(f, "{}Z{n}", if i > 0 { " × " } else { " of " })?;
                }
                Ok(())
            }
            Self::Hadamard { matrix } => write!(f, "{matrix}"),
            Self::Developed { scheme } => match scheme.shape() {
                Some(shape) if shape.columns == 1 => {
                    write!(f, "full factorial {}^1 {}^1", shape.order, shape.rows)
                }
                _ => write!(f, "{scheme}, with its rows as a factor"),
            },
            Self::QuasiDifference { group, permutation, fill, .. } => {
                let group: Vec<String> = group.iter().map(|n| format!("Z{n}")).collect();
                write!(f, "quasi-difference matrix of {} rows over {}", permutation.len(), group.join("x"))?;
                filled(f, fill.as_deref())
            }
            Self::VVector { m, t, fill, .. } => {
                write!(f, "V({m},{t}) vector")?;
                filled(f, fill.as_deref())
            }
            Self::Wilson { master, truncated, parts, .. } => {
                write!(f, "Wilson's inflation of [{master}], truncated to ")?;
                for (i, u) in truncated.iter().enumerate() {
                    write!(f, "{}{u}", if i > 0 { " and " } else { "" })?;
                }
                write!(f, ", by ")?;
                for (i, part) in parts.iter().enumerate() {
                    write!(f, "{}[{part}]", if i > 0 { ", " } else { "" })?;
                }
                Ok(())
            }
            Self::KroneckerSum { of, schemes, beside } => {
                write!(f, "[{of}]")?;
                for scheme in schemes.iter().filter(|s| s.shape().is_some_and(|s| s.columns > 1)) {
                    write!(f, " ⊕ {}", scheme.short())?;
                }
                write!(f, ", beside [{beside}]")
            }
            Self::ZeroColumn { of, schemes } => {
                write!(f, "[{of}]")?;
                for scheme in schemes.iter().filter(|s| s.shape().is_some_and(|s| s.columns > 1)) {
                    write!(f, " ⊕ {}", scheme.short())?;
                }
                write!(f, ", zero columns refined")
            }
            Self::MergingProduct { inner, outer, merged, of, .. } => {
                let (n, columns) = (merged.len(), if merged.len() == 1 { "column" } else { "columns" });
                write!(
                    f,
                    "{} ⊗ {}, {n} {columns} merged with a factor of [{of}]",
                    inner.short(),
                    outer.short()
                )
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
            Self::EvenLevel { s, matrix } => {
                write!(f, "{s} slices from {} and its complement", matrix.short())
            }
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

fn filled(f: &mut fmt::Formatter<'_>, fill: Option<&Recipe>) -> fmt::Result {
    fill.map_or(Ok(()), |fill| write!(f, ", its hole filled by [{fill}]"))
}

fn plural(n: usize) -> &'static str {
    if n == 1 { "" } else { "s" }
}
