//! The little number theory the constructions ask for.

/// The prime factorisation of `n` as (prime, exponent), ascending; empty for 0 and 1.
///
/// Trial division: O(√n).
#[must_use]
pub fn factorise(n: u64) -> Vec<(u64, u32)> {
    let mut out = Vec::new();
    if n < 2 {
        return out;
    }
    let (mut rest, mut p) = (n, 2u64);
    while p.checked_mul(p).is_some_and(|square| square <= rest) {
        let mut e = 0;
        while rest.is_multiple_of(p) {
            rest /= p;
            e += 1;
        }
        if e > 0 {
            out.push((p, e));
        }
        p += if p == 2 { 1 } else { 2 };
    }
    if rest > 1 {
        out.push((rest, 1));
    }
    out
}

/// `Some((p, m))` when `q = p^m`, p prime, m at least 1.
#[must_use]
pub fn prime_power(q: u32) -> Option<(u32, u32)> {
    match factorise(u64::from(q)).as_slice() {
        [(p, m)] => Some((u32::try_from(*p).ok()?, *m)),
        _ => None,
    }
}

/// Whether `n` is a prime number.
#[must_use]
pub fn is_prime(n: u32) -> bool {
    matches!(prime_power(n), Some((_, 1)))
}

/// The divisors of `n`, ascending; empty for 0.
#[must_use]
pub fn divisors(n: u64) -> Vec<u64> {
    if n == 0 {
        return Vec::new();
    }
    let mut out = vec![1u64];
    for (p, e) in factorise(n) {
        let known = out.clone();
        let mut power = 1;
        for _ in 0..e {
            power *= p;
            out.extend(known.iter().map(|d| d * power));
        }
    }
    out.sort_unstable();
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn against_the_plain_definitions() {
        for n in 1u64..2000 {
            let plain: Vec<u64> = (1..=n).filter(|&d| n.is_multiple_of(d)).collect();
            assert_eq!(divisors(n), plain);
            assert_eq!(factorise(n).iter().map(|&(p, e)| p.pow(e)).product::<u64>(), n);
            assert_eq!(is_prime(n as u32), plain.len() == 2);
        }
        assert_eq!(prime_power(4096), Some((2, 12)));
        assert_eq!(prime_power(12), None);
        assert_eq!(prime_power(1), None);
        assert_eq!(divisors(0), Vec::<u64>::new());
    }
}
