//! A product with a Hadamard matrix in which one factor of the second array grows.

use std::collections::HashMap;

use super::{Levels, as_levels, has_column, has_columns, times};
use crate::array::Array;
use crate::construct::ConstructError;

const NAME: &str = "merging across a product";

/// Where a column of the result comes from.
#[derive(Clone, Copy)]
enum Source {
    Product { a: usize, h: usize },
    Grown,
    Right { b: usize },
}

/// The product of a two-level array with a Hadamard matrix, m of whose columns are given up so
/// that an m-level factor of a third array becomes an nm-level one.
///
/// # Parameters
/// `a`: n runs, 2^k (k = n − 1 is best). `h`: a Hadamard matrix of order M as an array of M
/// two-level columns, the constant one among them (a sign is a symbol 0 or 1). `b`: M runs, m·X,
/// its m-level column being `factor`. `merged`: m columns of `h`. All of these must hold:
/// * all levels of `a` and `h` are 2; `h` has M columns and M runs, `b` has M runs;
/// * the rows of `h` show m different patterns in the `merged` columns, each M/m times;
/// * every level of `factor` occurs M/m times;
/// * n·m ≤ 65,535;
/// * `a` and `b` have strength 2 and `h` is a Hadamard matrix (not checked).
///
/// # Result
/// OA(nM, 2^{k(M−m)} · (nm) · X, 2). Run (i, r) has the number `i·M + r`. Columns: for each column
/// of `a` and each column of `h` that is not merged, in order, their sum modulo 2; the nm-level
/// column, symbol `i·m + b(r)`; the other columns of `b`. The rows of `h` are permuted so that the
/// patterns (by first appearance) stand where the levels of `factor` stand: the columns left in
/// `h` are then orthogonal to every function of that factor, which the merged ones span.
///
/// With n = m = 2: OA(M, 2^a·X) → OA(2M, 2^{M−2+a−1}·4·X).
///
/// # Errors
/// [`ConstructError::Condition`] when a checked condition fails, [`ConstructError::Array`] when
/// the result does not fit into memory.
///
/// # Cost
/// O(cells of the result + M·m).
///
/// # Reference
/// Proved above. For n = 2 it refines the doubling [H H; H −H] by contractive replacement:
/// A. S. Hedayat, N. J. A. Sloane & J. Stufken, *Orthogonal Arrays* (1999), chapter 9.
///
/// ```
/// use trysquare::array::Array;
/// use trysquare::construct::compose::merging_product;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = Array::new(2, vec![2], vec![0, 1])?;
/// let h = Array::new(4, vec![2; 4], vec![0, 0, 0, 0, 0, 1, 0, 1, 0, 0, 1, 1, 0, 1, 1, 0])?;
/// let b = h.select(&[1, 2, 3])?;
/// let array = merging_product(&a, &h, &b, 0, &[0, 1])?;
/// assert_eq!((array.runs(), array.levels()), (8, &[2, 2, 4, 2, 2][..]));
/// let judged = certify(&array, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn merging_product(
    a: &Array,
    h: &Array,
    b: &Array,
    factor: usize,
    merged: &[usize],
) -> Result<Array, ConstructError> {
    let fail = |needs: String| Err(ConstructError::condition(NAME, needs));
    if a.levels().iter().chain(h.levels()).any(|&s| s != 2) {
        return fail("all levels of A and H are 2".to_owned());
    }
    let order = h.runs();
    if h.factors() != order || b.runs() != order {
        return fail(format!("H is M × M and B has M runs, not {order} × {} and {}", h.factors(), b.runs()));
    }
    let levels = merging_product_levels(a.runs(), a.factors(), order, b.levels(), factor)?;
    let given_up = has_columns(NAME, "H", order, merged.iter().copied())?;
    let m = usize::from(b.levels()[factor]);
    let rows = align(h, merged, b.column(factor), m)?;
    let kept: Vec<usize> = (0..order).filter(|&l| !given_up[l]).collect();
    let mut sources = Vec::with_capacity(levels.len());
    for j in 0..a.factors() {
        sources.extend(kept.iter().map(|&l| Source::Product { a: j, h: l }));
    }
    sources.push(Source::Grown);
    sources.extend((0..b.factors()).filter(|&j| j != factor).map(|j| Source::Right { b: j }));
    let runs = times(NAME, a.runs(), order)?;
    Ok(Array::from_fn(runs, levels, |run, j| {
        let (i, r) = (run / order, run % order);
        match sources[j] {
            Source::Product { a: j, h: l } => a.get(i, j) ^ h.get(rows[r], l),
            // Below n·m, which is a number of levels.
            Source::Grown => (i * m) as u16 + b.get(r, factor),
            Source::Right { b: j } => b.get(r, j),
        }
    })?)
}

/// For each run of B the row of H that goes there: pattern classes of H onto levels of B.
fn align(h: &Array, merged: &[usize], column: &[u16], m: usize) -> Result<Vec<usize>, ConstructError> {
    let fail = |needs: String| Err(ConstructError::condition(NAME, needs));
    let order = column.len();
    if merged.len() != m {
        return fail(format!("as many merged columns as levels, {m}, not {}", merged.len()));
    }
    let mut numbers: HashMap<Vec<u16>, usize> = HashMap::new();
    let mut classes: Vec<Vec<usize>> = Vec::new();
    for r in 0..order {
        let pattern = merged.iter().map(|&l| h.get(r, l)).collect();
        let class = *numbers.entry(pattern).or_insert(classes.len());
        if class == classes.len() {
            classes.push(Vec::new());
        }
        classes[class].push(r);
    }
    if classes.len() != m || classes.iter().any(|c| c.len() != order / m) {
        return fail(format!(
            "the merged columns show {m} patterns, each {order}/{m} times, not {} patterns {:?} times",
            classes.len(),
            classes.iter().map(Vec::len).collect::<Vec<_>>()
        ));
    }
    let mut unused: Vec<_> = classes.into_iter().map(Vec::into_iter).collect();
    let rows: Option<Vec<usize>> = column.iter().map(|&c| unused[usize::from(c)].next()).collect();
    rows.ok_or_else(|| {
        ConstructError::condition(NAME, format!("every level of the factor of B occurs {order}/{m} times"))
    })
}

/// The levels of [`merging_product`], from n runs and k factors of A, M, the levels of B, and the
/// factor of B that grows.
///
/// # Errors
/// [`ConstructError::Condition`] when B has no such factor, its levels are more than M, n times its
/// levels is no number of levels, or the factors are too many.
pub fn merging_product_levels(
    n: usize,
    k: usize,
    order: usize,
    b: &[u16],
    factor: usize,
) -> Result<Vec<u16>, ConstructError> {
    has_column(NAME, "B", b.len(), factor)?;
    let m = usize::from(b[factor]);
    let Some(kept) = order.checked_sub(m) else {
        let needs = format!("at most M levels in the factor of B, not {m} > {order}");
        return Err(ConstructError::condition(NAME, needs));
    };
    let grown = as_levels(NAME, n.checked_mul(m))?;
    let others = b.iter().enumerate().filter(|&(j, _)| j != factor).map(|(_, &s)| s);
    Ok(Levels::new(NAME).repeat(2, k.checked_mul(kept))?.all([grown])?.all(others)?.done())
}

#[cfg(test)]
mod tests {
    use super::super::testing::*;
    use super::*;

    fn mix(array: &Array) -> String {
        array.mix().to_string()
    }

    #[test]
    fn four_levels_in_twenty_four_runs_then_eight_in_forty_eight() {
        let (two, h12, b) = (full(&[2]), twelve_signs(), twelve());
        let a24 = merging_product(&two, &h12, &b, 3, &[0, 7]).unwrap();
        assert_eq!((a24.runs(), mix(&a24).as_str()), (24, "2^20 4^1"));
        assert_eq!(a24.levels(), merging_product_levels(2, 1, 12, &[2; 11], 3).unwrap());
        assert!(has_strength(&a24, 2));

        // H(2) ⊗ H(12): the constant column, two others and their product make four patterns.
        let h24 = doubled(&h12);
        let factor = a24.levels().iter().position(|&s| s == 4).unwrap();
        let a48 = merging_product(&two, &h24, &a24, factor, &[0, 5, 12, 17]).unwrap();
        assert_eq!((a48.runs(), mix(&a48).as_str()), (48, "2^40 8^1"));
        assert!(has_strength(&a48, 2));
    }

    #[test]
    fn a_larger_first_array() {
        for n in [2u32, 3] {
            let array = merging_product(&sylvester(n), &twelve_signs(), &twelve(), 0, &[1, 0]).unwrap();
            let k = (1 << n) - 1;
            assert_eq!(mix(&array), format!("2^{} {}^1", k * 10 + 10, 2 << n));
            assert!(has_strength(&array, 2));
        }
        // Four runs, four levels: 2^{3·12}·16·4^4 in 64.
        let h16 = sylvester_signs(4);
        let array = merging_product(&sylvester(2), &h16, &plane(4), 2, &[0, 3, 5, 6]).unwrap();
        assert_eq!((array.runs(), mix(&array).as_str()), (64, "2^36 4^4 16^1"));
        assert!(has_strength(&array, 2));
    }

    #[test]
    fn every_pair_of_columns_of_four_runs() {
        let h = sylvester_signs(2);
        for factor in 0..3 {
            for other in 1..4 {
                let array = merging_product(&full(&[2]), &h, &sylvester(2), factor, &[0, other]).unwrap();
                assert_eq!(mix(&array), "2^4 4^1");
                assert!(has_strength(&array, 2));
            }
        }
    }

    #[test]
    fn refuses_what_does_not_fit() {
        let (two, h, b) = (full(&[2]), sylvester_signs(2), sylvester(2));
        refused(merging_product(&full(&[3]), &h, &b, 0, &[0, 1]), "all levels of A and H are 2");
        refused(merging_product(&two, &full(&[4]), &b, 0, &[0]), "all levels of A and H are 2");
        refused(merging_product(&two, &b, &b, 0, &[0, 1]), "H is M × M and B has M runs, not 4 × 3 and 4");
        refused(merging_product(&two, &h, &twelve(), 0, &[0, 1]), "not 4 × 4 and 12");
        refused(merging_product(&two, &h, &b, 3, &[0, 1]), "B has factors 0 to 2, not 3");
        refused(merging_product(&two, &h, &b, 0, &[0, 4]), "H has factors 0 to 3, not 4");
        refused(merging_product(&two, &h, &b, 0, &[1, 1]), "named twice");
        refused(merging_product(&two, &h, &b, 0, &[0]), "as many merged columns as levels, 2, not 1");
        refused(merging_product(&two, &h, &b, 0, &[1, 2]), "not 4 patterns");
        let skew = Array::new(4, vec![2; 4], [0, 0, 0, 0, 0, 0, 0, 1].repeat(2)).unwrap();
        refused(merging_product(&two, &skew, &b, 0, &[0, 1]), "not 2 patterns [3, 1] times");
        let lopsided = Array::new(4, vec![2], vec![0, 0, 0, 1]).unwrap();
        refused(merging_product(&two, &h, &lopsided, 0, &[0, 1]), "every level of the factor of B");
        let five = Array::new(4, vec![5], vec![0, 1, 2, 3]).unwrap();
        refused(merging_product(&two, &h, &five, 0, &[0, 1]), "not 5 > 4");
        let tall = Array::new(32_768, vec![2], vec![0; 32_768]).unwrap();
        refused(merging_product(&tall, &h, &b, 0, &[0, 1]), "not 65536");
        for order in [usize::MAX, 1 << 24] {
            let error = merging_product_levels(4, 3, order, &[2], 0).unwrap_err();
            assert!(error.to_string().contains("at most 16777216 factors"));
        }
    }
}
