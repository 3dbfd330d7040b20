use num_integer::Integer;

use super::FloorError;
use super::proof::Divisor;
use crate::mix::Mix;

/// The number that divides N: the least common multiple of the products of every t factors'
/// levels, with t-sets of factors whose products it is the least common multiple of.
///
/// Cost: only the t-multisets of distinct levels are looked at, and those are grown prime by
/// prime, so thousands of factors are no matter.
///
/// Reference: the definition of strength t (each combination occurs N / product times).
///
/// # Errors
/// [`FloorError::TooLarge`] when the multiple does not fit 64 bits.
pub fn divisibility(mix: &Mix, strength: u32) -> Result<Divisor, FloorError> {
    let counts: Vec<(u16, u32)> = mix
        .counts()
        .into_iter()
        .map(|(s, k)| (s, u32::try_from(k).unwrap_or(u32::MAX).min(strength)))
        .collect();
    let mut divisor = Divisor { divisor: 1, sets: Vec::new() };
    // For each prime the t factors that hold its highest power: their product alone brings that
    // power into the multiple, so these sets are enough.
    for p in primes(&counts) {
        let mut ranked: Vec<(u32, u16, u32)> = counts.iter().map(|&(s, k)| (exponent(s, p), s, k)).collect();
        ranked.sort_by_key(|&(e, s, _)| (std::cmp::Reverse(e), s));
        let mut set = Vec::new();
        for (_, s, k) in ranked {
            let more = (strength as usize - set.len()).min(k as usize);
            set.extend(std::iter::repeat_n(s, more));
        }
        set.sort_unstable();
        if divisor.sets.contains(&set) {
            continue;
        }
        let product =
            set.iter().try_fold(1u64, |n, &s| n.checked_mul(u64::from(s))).ok_or(FloorError::TooLarge)?;
        let shared = divisor.divisor.gcd(&product);
        divisor.divisor = divisor.divisor.checked_mul(product / shared).ok_or(FloorError::TooLarge)?;
        divisor.sets.push(set);
    }
    divisor.sets.sort();
    Ok(divisor)
}

fn primes(counts: &[(u16, u32)]) -> Vec<u16> {
    let mut primes: Vec<u16> = Vec::new();
    for &(s, _) in counts {
        let (mut rest, mut p) = (s, 2u16);
        while u32::from(p) * u32::from(p) <= u32::from(rest) {
            if rest.is_multiple_of(p) {
                primes.push(p);
                while rest.is_multiple_of(p) {
                    rest /= p;
                }
            }
            p += 1;
        }
        if rest > 1 {
            primes.push(rest);
        }
    }
    primes.sort_unstable();
    primes.dedup();
    primes
}

fn exponent(s: u16, p: u16) -> u32 {
    let (mut rest, mut e) = (s, 0);
    while rest.is_multiple_of(p) {
        rest /= p;
        e += 1;
    }
    e
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn by_definition(levels: &[u16], t: usize, from: usize, product: u64, lcm: &mut u64) {
        if t == 0 {
            *lcm = lcm.lcm(&product);
            return;
        }
        for i in from..levels.len() {
            by_definition(levels, t - 1, i + 1, product * u64::from(levels[i]), lcm);
        }
    }

    proptest! {
        #[test]
        fn equals_the_definition(levels in prop::collection::vec(2u16..40, 1..7), t in 1usize..4) {
            let t = t.min(levels.len());
            let mut lcm = 1;
            by_definition(&levels, t, 0, 1, &mut lcm);
            let mix = Mix::new(levels).unwrap();
            prop_assert_eq!(divisibility(&mix, t as u32).unwrap().divisor, lcm);
        }
    }

    #[test]
    fn refuses_what_overflows() {
        let mix: Mix = "65521^9 65519^9".parse().unwrap();
        assert_eq!(divisibility(&mix, 9), Err(FloorError::TooLarge));
    }
}
