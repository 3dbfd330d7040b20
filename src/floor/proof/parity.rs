/// Whether [`parity_bounds`] may be used: N = 2^t times an odd number.
#[must_use]
pub fn parity_applies(runs: u64, strength: u32) -> bool {
    (1..=20).contains(&strength) && runs > 0 && runs.trailing_zeros() == strength
}

/// Whether N² B_j ≥ 4^t v_j for every array of strength t in N = 2^t·odd runs, j an index of
/// (levels, factors) pairs: when all factors it counts have an even number of levels, and
/// C(|j| − 1, t) is odd.
///
/// Proof. For a set S of two-level factors written ±1 let J_S be the sum over the runs of the
/// product of their entries, J_∅ = N. The runs with a + in all of S number 2^{−|S|} Σ_{T ⊆ S} J_T,
/// so Σ_{T ⊆ S} J_T ≡ 0 mod 2^|S|. Strength t makes J_T = 0 for 0 < |T| ≤ t. By induction over |S|
/// modulo 2^{t+1} follows J_S ≡ N c_|S| for |S| > t with Σ_{j ≤ m} C(m, j) c_j even for m > t,
/// c_0 = 1, c_1 = … = c_t = 0: inverting, c_m ≡ Σ_{j ≤ t} C(m, j) ≡ C(m − 1, t) mod 2. When that is
/// odd, J_S ≡ 2^t mod 2^{t+1}, so |J_S| ≥ 2^t.
///
/// A factor of s levels, s even, becomes a two-level factor for each of the h ways to take half of
/// its levels, and strength t stays. Let w be the vector over its levels of the sums of what the
/// other factors contribute. The h vectors ±1 of the halves are permuted by the symmetric group,
/// which acts irreducibly on the vectors of sum zero, so the mean of their squared inner products
/// with w is s/(s − 1) times the squared length of the part of w of sum zero; an orthogonal basis
/// of contrasts of squared length s gives a sum s times that. The sum over the contrasts is hence
/// s − 1 times the mean over the halves, factor by factor: for a set of factors of s_1 … s_m levels
/// the squared J's sum up to Π(s_i − 1) times a mean of numbers ≥ 4^t. Over all sets that j counts
/// this gives v_j 4^t.
///
/// Reference: for two levels and t = 2 as in Deng & Tang 1999 and Cheng 1995 \[memory\]; the extension to even
/// numbers of levels is proved here.
#[must_use]
pub fn parity_bounds(at: &[u32], counts: &[(u16, u64)], strength: u32) -> bool {
    let size: u64 = at.iter().map(|&j| u64::from(j)).sum();
    let even = at.iter().zip(counts).all(|(&j, &(s, _))| j == 0 || s % 2 == 0);
    // C(m, t) is odd if and only if every binary digit of t is one of m (Lucas).
    even && size > u64::from(strength) && (size - 1) & u64::from(strength) == u64::from(strength)
}

#[cfg(test)]
mod tests {
    use super::*;
    use num_integer::binomial;

    #[test]
    fn the_digits_say_when_a_binomial_is_odd() {
        for t in 1u32..8 {
            for m in 0u32..20 {
                let odd = m > t && binomial(u64::from(m) - 1, u64::from(t)) % 2 == 1;
                assert_eq!(parity_bounds(&[m], &[(2, 20)], t), odd, "{m} {t}");
            }
        }
        assert!(!parity_bounds(&[1, 2], &[(2, 5), (3, 5)], 2));
        assert!(parity_bounds(&[2, 1], &[(2, 5), (6, 5)], 2));
        assert!(parity_applies(12, 2) && parity_applies(24, 3) && !parity_applies(24, 2));
    }
}
