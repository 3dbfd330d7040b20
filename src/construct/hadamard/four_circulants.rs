//! Four circulants in the array of Goethals and Seidel.

use super::{Hadamard, MAX_ORDER, check_signs};
use crate::construct::ConstructError;

/// The Hadamard matrix of order 4m from the first rows of four circulants A, B, C, D of order m.
///
/// Circulant: A\[i\]\[j\] = a\[(j − i) mod m\]. With R the back-diagonal permutation matrix, H is
///
/// ```text
///    A     BR     CR     DR
///  −BR      A    DᵀR   −CᵀR
///  −CR   −DᵀR      A    BᵀR
///  −DR    CᵀR   −BᵀR      A
/// ```
///
/// `rows` holds a, b, c, d. All of these must hold:
/// * the four rows have the same length m, from 1 to [`MAX_ORDER`]/4,
/// * every entry is ±1,
/// * A·Aᵀ + B·Bᵀ + C·Cᵀ + D·Dᵀ = 4m·I: for every shift k from 1 to m − 1 the periodic
///   autocorrelations sum to zero.
///
/// Guarantee: order 4m. Symmetric rows (a\[k\] = a\[m − k\] and so on) are Williamson's case.
///
/// # Errors
/// [`ConstructError::Condition`] naming the entry or the shift at which a condition fails.
///
/// Cost: 4m² for the conditions, 16m² entries. References: Goethals & Seidel 1967, Canadian Journal
/// of Mathematics 19, 1001–1010; Williamson 1944, Duke Mathematical Journal 11, 65–81.
///
/// ```
/// use trysquare::construct::hadamard::goethals_seidel;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let h = goethals_seidel([&[1, 1, 1], &[1, -1, -1], &[1, -1, -1], &[1, -1, -1]])?;
/// assert!(h.order() == 12 && h.is_hadamard());
/// let judged = certify(&h.to_array()?, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn goethals_seidel(rows: [&[i8]; 4]) -> Result<Hadamard, ConstructError> {
    const NAME: &str = "Goethals-Seidel";
    let m = rows[0].len();
    if rows.iter().any(|r| r.len() != m) || m == 0 || m > MAX_ORDER / 4 {
        let lengths = rows.map(<[i8]>::len);
        return Err(ConstructError::condition(
            NAME,
            format!("the four rows have one length from 1 to {}, not {lengths:?}", MAX_ORDER / 4),
        ));
    }
    for (name, row) in ["A", "B", "C", "D"].iter().zip(rows) {
        check_signs(NAME, name, row)?;
    }
    // The autocorrelation at shift m − k equals the one at k.
    for k in 1..=m / 2 {
        let sum: i64 = rows.iter().map(|r| periodic_autocorrelation(r, k)).sum();
        if sum != 0 {
            return Err(ConstructError::condition(
                NAME,
                format!("the periodic autocorrelations sum to 0 at every shift, but to {sum} at shift {k}"),
            ));
        }
    }
    // Per block: which row of `rows`, and the sign before it.
    const BLOCKS: [[(usize, bool); 4]; 4] = [
        [(0, false), (1, false), (2, false), (3, false)],
        [(1, true), (0, false), (3, false), (2, true)],
        [(2, true), (3, true), (0, false), (1, false)],
        [(3, true), (2, false), (1, true), (0, false)],
    ];
    Hadamard::from_fn(NAME, 4 * m, |row, column| {
        let (u, i, v, j) = (row / m, row % m, column / m, column % m);
        let (which, minus) = BLOCKS[u][v];
        let at = if which == 0 {
            (j + m - i) % m
        } else if u == 0 || v == 0 {
            // (BR)[i][j] = B[i][m − 1 − j]
            (2 * m - 1 - i - j) % m
        } else {
            // (BᵀR)[i][j] = B[m − 1 − j][i]
            (i + j + 1) % m
        };
        (rows[which][at] < 0) ^ minus
    })
}

fn periodic_autocorrelation(row: &[i8], k: usize) -> i64 {
    let m = row.len();
    (0..m).map(|i| i64::from(row[i]) * i64::from(row[(i + k) % m])).sum()
}
