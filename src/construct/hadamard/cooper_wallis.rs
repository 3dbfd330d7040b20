//! T-matrices multiplied with Williamson's.

use num_integer::Integer;

use super::{MAX_ORDER, check_signs};
use crate::construct::ConstructError;

/// The first rows of four circulants of order tw, ready for [`goethals_seidel`], from T-matrices of
/// order t and Williamson's circulants of order w.
///
/// With T_1 … T_4 the circulants of the first rows in `t` and A, B, C, D those in `w`,
///
/// ```text
///   T1⊗A + T2⊗B + T3⊗C + T4⊗D      −T1⊗B + T2⊗A + T3⊗D − T4⊗C
///  −T1⊗C − T2⊗D + T3⊗A + T4⊗B      −T1⊗D + T2⊗C − T3⊗B + T4⊗A
/// ```
///
/// are circulant once Z_t × Z_w is written as Z_tw, and Σ X·Xᵀ = (Σ T·Tᵀ) ⊗ (Σ A·Aᵀ).
///
/// All of these must hold:
/// * the rows of `t` have one length t ≥ 1, entries 0 and ±1, at each place exactly one of the four
///   is not 0, and their periodic autocorrelations sum to 0 at every shift,
/// * the rows of `w` have one length w ≥ 1 and entries ±1, are symmetric (a\[k\] = a\[w − k\]), and
///   their periodic autocorrelations sum to 0 at every shift,
/// * t and w are coprime, 4tw is at most [`MAX_ORDER`].
///
/// Guarantee: four rows that [`goethals_seidel`] accepts, order 4tw.
///
/// # Errors
/// [`ConstructError::Condition`] naming the condition that fails.
///
/// Cost: t² + w² + 16tw. Reference: Cooper & Wallis 1972, Bulletin of the Australian Mathematical
/// Society 7, 269–277.
///
/// [`goethals_seidel`]: super::goethals_seidel
///
/// ```
/// use trysquare::construct::hadamard::{cooper_wallis, goethals_seidel, t_sequences};
/// let t = t_sequences(&[1, 1], &[1, 1], &[1, -1], &[1])?;
/// let w: [&[i8]; 4] = [&[1, 1, 1], &[1, -1, -1], &[1, -1, -1], &[1, -1, -1]];
/// let rows = cooper_wallis(t.each_ref().map(Vec::as_slice), w)?;
/// let h = goethals_seidel(rows.each_ref().map(Vec::as_slice))?;
/// assert!(h.order() == 60 && h.is_hadamard());
/// # Ok::<(), trysquare::construct::ConstructError>(())
/// ```
pub fn cooper_wallis(t: [&[i8]; 4], w: [&[i8]; 4]) -> Result<[Vec<i8>; 4], ConstructError> {
    const NAME: &str = "Cooper-Wallis";
    let fail = |needs: String| Err(ConstructError::condition(NAME, needs));
    let (m, n) = (t[0].len(), w[0].len());
    let lengths = t.iter().all(|r| r.len() == m) && w.iter().all(|r| r.len() == n);
    let size = m.checked_mul(n).filter(|&size| size > 0 && size <= MAX_ORDER / 4);
    let Some(size) = size.filter(|_| lengths && m.gcd(&n) == 1) else {
        return fail(format!("the lengths t and w are coprime and tw at most {}", MAX_ORDER / 4));
    };
    if let Some(i) = (0..m).find(|&i| {
        let mut at: Vec<i8> = t.iter().map(|r| r[i]).filter(|&e| e != 0).collect();
        at.len() != 1 || !matches!(at.pop(), Some(1 | -1))
    }) {
        return fail(format!("exactly one T-matrix is 1 or -1 at place {i}, the others 0"));
    }
    for (name, row) in ["A", "B", "C", "D"].iter().zip(w) {
        check_signs(NAME, name, row)?;
        if let Some(k) = (1..n).find(|&k| row[k] != row[n - k]) {
            return fail(format!(
                "the rows of Williamson's matrices are symmetric, but not {name} at place {k}"
            ));
        }
    }
    for (what, rows) in [("T-matrices", t), ("Williamson's matrices", w)] {
        if let Some(k) = (1..rows[0].len()).find(|&k| autocorrelation(&rows, k) != 0) {
            return fail(format!("the autocorrelations of the {what} sum to 0 at shift {k}"));
        }
    }
    // Which of A, B, C, D stands beside T_1 … T_4, and with which sign.
    const TERMS: [[(usize, i8); 4]; 4] = [
        [(0, 1), (1, 1), (2, 1), (3, 1)],
        [(1, -1), (0, 1), (3, 1), (2, -1)],
        [(2, -1), (3, -1), (0, 1), (1, 1)],
        [(3, -1), (2, 1), (1, -1), (0, 1)],
    ];
    Ok(TERMS.map(|terms| {
        let entry = |i: usize| (0..4).map(|k| t[k][i % m] * terms[k].1 * w[terms[k].0][i % n]).sum();
        (0..size).map(entry).collect()
    }))
}

fn autocorrelation(rows: &[&[i8]; 4], k: usize) -> i64 {
    let n = rows[0].len();
    let at = |r: &[i8], i: usize| i64::from(r[i]) * i64::from(r[(i + k) % n]);
    rows.iter().map(|r| (0..n).map(|i| at(r, i)).sum::<i64>()).sum()
}
