//! The one way in which the groups of difference schemes are written.

use crate::algebra::{AbelianGroup, AlgebraError, factorise};

/// The abelian group of order `s` whose Sylow subgroups are elementary abelian, its cyclic factors
/// of prime order in ascending order: 6 = Z2×Z3, 12 = Z2×Z2×Z3, 8 = Z2×Z2×Z2.
///
/// Every [`Scheme`](super::Scheme) is over such a group, so that schemes over groups of the same
/// order can be summed. For a prime power it is the additive group of the field, element by
/// element.
///
/// # Errors
/// [`AlgebraError::Group`] when `s` is below 2.
///
/// ```
/// use trysquare::construct::scheme::canonical_group;
/// assert_eq!(canonical_group(12)?.factors(), [2, 2, 3]);
/// # Ok::<(), trysquare::algebra::AlgebraError>(())
/// ```
pub fn canonical_group(s: u16) -> Result<AbelianGroup, AlgebraError> {
    AbelianGroup::new(&primes(s))
}

/// The primes of `s`, ascending, each as often as it divides `s`.
pub(super) fn primes(s: u16) -> Vec<u16> {
    factorise(u64::from(s))
        .into_iter()
        .flat_map(|(p, e)| std::iter::repeat_n(u16::try_from(p).expect("a divisor of a u16"), e as usize))
        .collect()
}

/// For cyclic factors of the prime orders `primes`, in any order, the weight of each digit in the
/// canonical group: equal primes keep their order.
///
/// The product of `primes` must be at most 65,535.
pub(super) fn canonical_weights(primes: &[u16]) -> Vec<u16> {
    (0..primes.len())
        .map(|k| {
            let before = |l: &usize| (primes[*l], *l) < (primes[k], k);
            (0..primes.len()).filter(before).map(|l| primes[l]).product()
        })
        .collect()
}

/// The digits of element `a` of the group with cyclic factors `factors`, first factor first.
pub(super) fn digits<'f>(a: u16, factors: &'f [u16]) -> impl Iterator<Item = u16> + use<'f> {
    let mut rest = a;
    factors.iter().map(move |&n| {
        let digit = rest % n;
        rest /= n;
        digit
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn weights_sort_the_digits() {
        assert_eq!(canonical_weights(&[2, 3, 2]), [1, 4, 2]);
        assert_eq!(canonical_weights(&[5, 3]), [3, 1]);
        assert_eq!(canonical_weights(&primes(360)), [1, 2, 4, 8, 24, 72]);
        assert_eq!(digits(7, &[6, 2]).collect::<Vec<_>>(), [1, 1]);
    }

    #[test]
    fn every_order_from_two_has_a_canonical_group() {
        for s in 0..=u16::MAX {
            match canonical_group(s) {
                Ok(g) => assert_eq!(g.order(), u32::from(s)),
                Err(_) => assert!(s < 2),
            }
        }
    }
}
