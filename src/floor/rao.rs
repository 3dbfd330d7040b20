use super::FloorError;
use super::proof::{Bound, rao_value};
use crate::mix::Mix;

/// Rao's bound for mixed levels, the best over all strengths up to t.
///
/// For even t = 2u: N ≥ Σ_{j ≤ u} e_j(s_1 − 1, …, s_k − 1), e_j the elementary symmetric
/// polynomials; for odd t one factor of x levels is set aside: N ≥ x times the bound of the others
/// at strength t − 1.
///
/// Cost: O(d·t²) for d distinct numbers of levels.
///
/// Reference: Rao 1947; mixed levels as in Hedayat, Sloane & Stufken 1999, ch. 9.
///
/// # Errors
/// [`FloorError::TooLarge`] when the bound does not fit 64 bits.
pub fn rao(mix: &Mix, strength: u32) -> Result<Bound, FloorError> {
    let counts: Vec<(u16, u64)> = mix.counts().into_iter().map(|(s, k)| (s, k as u64)).collect();
    let mut best: Option<Bound> = None;
    for t in 1..=strength {
        let aside = counts.iter().map(|&(s, _)| s).filter(|_| t % 2 == 1).map(Some);
        let choices: Vec<Option<u16>> = if t % 2 == 1 { aside.collect() } else { vec![None] };
        for aside in choices {
            let least = rao_value(&counts, t, aside).ok_or(FloorError::TooLarge)?;
            let better = match &best {
                Some(Bound::Rao { least: known, .. }) => least > *known,
                _ => true,
            };
            if better {
                best = Some(Bound::Rao { strength: t, aside, least });
            }
        }
    }
    best.ok_or(FloorError::Strength { strength, factors: mix.factors() })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn least(mix: &str, t: u32) -> u64 {
        match rao(&mix.parse().unwrap(), t).unwrap() {
            Bound::Rao { least, .. } => least,
            other => panic!("{other:?}"),
        }
    }

    #[test]
    fn known_values() {
        // Hedayat, Sloane & Stufken 1999, Theorem 2.1 (values worked out by hand).
        assert_eq!(least("2^11", 2), 12);
        assert_eq!(least("3^4", 2), 9);
        assert_eq!(least("2^12", 3), 24);
        assert_eq!(least("2^1 3^7", 2), 16);
        assert_eq!(least("2^23", 4), 1 + 23 + 253);
        assert_eq!(least("2^24", 5), 2 * (1 + 23 + 253));
        assert_eq!(least("2^5 7^1", 3), 7 * 6);
        assert_eq!(least("2^3", 1), 2);
    }

    #[test]
    fn a_lower_strength_can_be_stronger_than_the_plain_odd_one() {
        // One factor aside never loses against the even bound below it, but is checked to be so.
        for mix in ["2^3 9^1", "2^7", "3^5 2^2", "2^1 3^1 30^1"] {
            assert!(least(mix, 3) >= least(mix, 2));
        }
    }
}
