//! Hadamard matrices from Turyn-type sequences.

use super::{Hadamard, MAX_ORDER, check_signs, goethals_seidel};
use crate::construct::ConstructError;

/// The Hadamard matrix of order 4(3n − 1) from Turyn-type sequences X, Y, Z, W.
///
/// The path of the literature: base sequences A = (Z, W), B = (Z, −W), C = X, D = Y of lengths
/// 2n − 1, 2n − 1, n, n; T-sequences T1 = ((A + B)/2, 0), T2 = ((A − B)/2, 0), T3 = (0, (C + D)/2),
/// T4 = (0, (C − D)/2) of length 3n − 1; their sums T1 + T2 + T3 + T4, −T1 + T2 + T3 − T4,
/// −T1 − T2 + T3 + T4, −T1 + T2 − T3 + T4 as first rows of four circulants in
/// [`goethals_seidel`].
///
/// All of these must hold:
/// * X, Y, Z have one length n, W has length n − 1, n ≥ 1, 4(3n − 1) at most [`MAX_ORDER`],
/// * every entry is ±1,
/// * N_X + N_Y + 2N_Z + 2N_W = 0 at every shift from 1 to n − 1, N the aperiodic
///   autocorrelation.
///
/// Guarantee: order 4(3n − 1).
///
/// # Errors
/// [`ConstructError::Condition`] naming the lengths, the entry or the shift at which a condition
/// fails.
///
/// Cost: 16(3n − 1)² entries. References: Turyn 1974, Journal of Combinatorial Theory A 16,
/// 313–333; Kharaghani & Tayfeh-Rezaie 2005, Journal of Combinatorial Designs 13, 435–440 (n = 36).
///
/// ```
/// use trysquare::construct::hadamard::turyn_type;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let h = turyn_type(&[1, 1], &[1, 1], &[1, -1], &[1])?;
/// assert!(h.order() == 20 && h.is_hadamard());
/// let judged = certify(&h.to_array()?, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn turyn_type(x: &[i8], y: &[i8], z: &[i8], w: &[i8]) -> Result<Hadamard, ConstructError> {
    let [t1, t2, t3, t4] = t_sequences(x, y, z, w)?;
    let row = |s: [i8; 4]| -> Vec<i8> {
        (0..t1.len()).map(|i| s[0] * t1[i] + s[1] * t2[i] + s[2] * t3[i] + s[3] * t4[i]).collect()
    };
    goethals_seidel([&row([1, 1, 1, 1]), &row([-1, 1, 1, -1]), &row([-1, -1, 1, 1]), &row([-1, 1, -1, 1])])
}

/// The T-sequences of length 3n − 1 that [`turyn_type`] makes of Turyn-type sequences X, Y, Z, W.
///
/// Four sequences over 0, ±1, exactly one of them non-zero at each place, whose aperiodic (hence
/// also periodic) autocorrelations sum to zero at every shift.
///
/// # Errors
/// As [`turyn_type`], whose conditions and references apply.
///
/// ```
/// use trysquare::construct::hadamard::t_sequences;
/// let t = t_sequences(&[1, 1], &[1, 1], &[1, -1], &[1])?;
/// assert_eq!(t, [[1, -1, 0, 0, 0], [0, 0, 1, 0, 0], [0, 0, 0, 1, 1], [0, 0, 0, 0, 0]]);
/// # Ok::<(), trysquare::construct::ConstructError>(())
/// ```
pub fn t_sequences(x: &[i8], y: &[i8], z: &[i8], w: &[i8]) -> Result<[Vec<i8>; 4], ConstructError> {
    const NAME: &str = "Turyn-type sequences";
    let n = x.len();
    if n == 0 || y.len() != n || z.len() != n || w.len() != n - 1 || n > MAX_ORDER / 12 {
        return Err(ConstructError::condition(
            NAME,
            format!(
                "X, Y, Z have one length n from 1 to {} and W has n - 1, not {}, {}, {}, {}",
                MAX_ORDER / 12,
                n,
                y.len(),
                z.len(),
                w.len()
            ),
        ));
    }
    for (name, sequence) in [("X", x), ("Y", y), ("Z", z), ("W", w)] {
        check_signs(NAME, name, sequence)?;
    }
    for k in 1..n {
        let sum = autocorrelation(x, k)
            + autocorrelation(y, k)
            + 2 * autocorrelation(z, k)
            + 2 * autocorrelation(w, k);
        if sum != 0 {
            return Err(ConstructError::condition(
                NAME,
                format!("N_X + N_Y + 2N_Z + 2N_W is 0 at every shift, but {sum} at shift {k}"),
            ));
        }
    }
    let mut t = [(); 4].map(|()| vec![0i8; 3 * n - 1]);
    t[0][..n].copy_from_slice(z);
    t[1][n..2 * n - 1].copy_from_slice(w);
    for i in 0..n {
        t[2][2 * n - 1 + i] = (x[i] + y[i]) / 2;
        t[3][2 * n - 1 + i] = (x[i] - y[i]) / 2;
    }
    Ok(t)
}

/// N(k): the sum of s\[i\]·s\[i + k\] over the places where both exist.
fn autocorrelation(s: &[i8], k: usize) -> i64 {
    s.iter().zip(s.iter().skip(k)).map(|(a, b)| i64::from(*a) * i64::from(*b)).sum()
}
