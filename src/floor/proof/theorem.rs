//! The values that the cited theorems give, from their statements.

use num_integer::Roots;

/// Rao's bound at `strength` for (levels, factors) pairs, with one factor of `aside` levels set
/// aside at odd strengths; `None` when it does not fit 64 bits.
#[must_use]
pub fn rao_value(counts: &[(u16, u64)], strength: u32, aside: Option<u16>) -> Option<u64> {
    let degree = (strength / 2) as usize;
    // The elementary symmetric polynomials e_0 … e_u of the numbers s_i − 1.
    let mut e = vec![0u64; degree + 1];
    e[0] = 1;
    for &(s, k) in counts {
        let k = k - u64::from(aside == Some(s));
        let mut next = vec![0u64; degree + 1];
        let (mut binomial, mut power) = (1u64, 1u64);
        for i in 0..=degree.min(usize::try_from(k).unwrap_or(usize::MAX)) {
            for j in 0..=degree - i {
                let term = e[j].checked_mul(binomial)?.checked_mul(power)?;
                next[i + j] = next[i + j].checked_add(term)?;
            }
            if i < degree {
                binomial = binomial.checked_mul(k - i as u64)? / (i as u64 + 1);
                power = power.checked_mul(u64::from(s) - 1)?;
            }
        }
        e = next;
    }
    let sum = e.into_iter().try_fold(0u64, u64::checked_add)?;
    sum.checked_mul(u64::from(aside.unwrap_or(1)))
}

/// Whether the theorem of Bose & Bush lets k factors of s levels stand in λ s^t runs, t 2 or 3.
///
/// With λ − 1 = a(s − 1) + b, 0 ≤ b < s − 1, and k one less at strength 3:
/// k ≤ ⌊(λs² − 1)/(s − 1)⌋, and if b > 0 even k ≤ ⌊(λs² − 1)/(s − 1)⌋ − ⌊θ⌋ − 1, where
/// θ = (√(1 + 4s(s − 1 − b)) − (2s − 2b − 1)) / 2.
#[must_use]
pub fn bose_bush_allows(s: u16, k: u64, strength: u32, index: u64) -> bool {
    let (s, k) = (u64::from(s), k - u64::from(strength == 3));
    let Some(top) = index.checked_mul(s * s) else { return true };
    let limit = (top - 1) / (s - 1);
    let b = (index - 1) % (s - 1);
    if b == 0 {
        return k <= limit;
    }
    // ⌊θ⌋ is the largest m ≥ 0 with 2m + 2s − 2b − 1 ≤ √(1 + 4s(s − 1 − b)); where even m = 0
    // fails, θ is negative and the refinement says nothing.
    let root = (1 + 4 * s * (s - 1 - b)).sqrt();
    let offset = 2 * s - 2 * b - 1;
    if root < offset {
        return k <= limit;
    }
    k + (root - offset) / 2 < limit
}

/// The largest number of factors of s levels at index 1 and strength t that Bush's theorem allows.
#[must_use]
pub fn bush_limit(s: u16, strength: u32) -> u64 {
    let (s, t) = (u64::from(s), u64::from(strength));
    if s <= t {
        t + 1
    } else if s % 2 == 1 && t >= 3 {
        s + t - 2
    } else {
        s + t - 1
    }
}
