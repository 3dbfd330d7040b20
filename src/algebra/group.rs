//! Finite abelian groups, written additively.

use std::fmt;

use num_integer::Integer;

use super::AlgebraError;

/// A finite abelian group given as a direct sum of cyclic groups.
///
/// Elements are the integers `0..order`, read in mixed radix with the *first* cyclic factor as
/// the least significant digit; `0` is the identity. For the elementary abelian group `p^m` this
/// is the encoding of [`Field`](super::Field), so the additive group of GF(p^m) and
/// `AbelianGroup::elementary(p, m)` agree element by element (for `p = 2`, addition is XOR).
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
pub struct AbelianGroup {
    factors: Vec<u16>,
    order: u32,
}

impl AbelianGroup {
    /// The direct sum of cyclic groups of the given orders (each at least 2).
    ///
    /// # Errors
    /// [`AlgebraError::Group`] when there is no factor, a factor is below 2 or the order is above
    /// 65,535.
    pub fn new(factors: &[u16]) -> Result<Self, AlgebraError> {
        let bad = || AlgebraError::Group { factors: factors.to_vec() };
        if factors.is_empty() || factors.iter().any(|&f| f < 2) {
            return Err(bad());
        }
        let order = factors
            .iter()
            .try_fold(1u32, |n, &f| n.checked_mul(u32::from(f)))
            .filter(|&n| n <= u32::from(u16::MAX))
            .ok_or_else(bad)?;
        Ok(Self { factors: factors.to_vec(), order })
    }

    /// The cyclic group of order `n`.
    ///
    /// # Errors
    /// As [`AbelianGroup::new`].
    pub fn cyclic(n: u16) -> Result<Self, AlgebraError> {
        Self::new(&[n])
    }

    /// The elementary abelian group of order `p^m`, the additive group of GF(p^m).
    ///
    /// # Errors
    /// As [`AbelianGroup::new`].
    pub fn elementary(p: u16, m: u32) -> Result<Self, AlgebraError> {
        if m > 16 {
            return Err(AlgebraError::Group { factors: vec![p] });
        }
        Self::new(&vec![p; m as usize])
    }

    /// The direct sum of two groups; element `(a, b)` is encoded as `a + self.order() * b`.
    ///
    /// # Errors
    /// As [`AbelianGroup::new`].
    pub fn direct_sum(&self, other: &Self) -> Result<Self, AlgebraError> {
        let mut factors = self.factors.clone();
        factors.extend_from_slice(&other.factors);
        Self::new(&factors)
    }

    /// The number of elements.
    #[must_use]
    pub fn order(&self) -> u32 {
        self.order
    }

    /// The orders of the cyclic factors, least significant digit first.
    #[must_use]
    pub fn factors(&self) -> &[u16] {
        &self.factors
    }

    /// `a + b`. Arguments are reduced to digits, so any `u16` is accepted.
    #[must_use]
    pub fn add(&self, a: u16, b: u16) -> u16 {
        self.digitwise(a, b, |x, y, n| (x + y) % n)
    }

    /// `a - b`.
    #[must_use]
    pub fn sub(&self, a: u16, b: u16) -> u16 {
        self.digitwise(a, b, |x, y, n| (x + n - y) % n)
    }

    /// `-a`.
    #[must_use]
    pub fn neg(&self, a: u16) -> u16 {
        self.sub(0, a)
    }

    fn digitwise(&self, a: u16, b: u16, f: impl Fn(u32, u32, u32) -> u32) -> u16 {
        let (mut a, mut b, mut weight, mut sum) = (u32::from(a), u32::from(b), 1u32, 0u32);
        for &n in &self.factors {
            let n = u32::from(n);
            let (qa, ra) = a.div_rem(&n);
            let (qb, rb) = b.div_rem(&n);
            sum += weight * f(ra, rb, n);
            weight *= n;
            (a, b) = (qa, qb);
        }
        u16::try_from(sum).expect("below the order, which fits u16")
    }
}

impl fmt::Display for AbelianGroup {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        for (i, n) in self.factors.iter().enumerate() {
            if i > 0 {
                f.write_str("x")?;
            }
            write!(f, "Z{n}")?;
        }
        Ok(())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn axioms_of_small_groups() {
        for factors in [&[2u16][..], &[7], &[2, 2], &[3, 3], &[6, 2], &[2, 2, 2], &[4, 3]] {
            let g = AbelianGroup::new(factors).unwrap();
            let n = u16::try_from(g.order()).unwrap();
            for a in 0..n {
                assert_eq!(g.add(a, 0), a);
                assert_eq!(g.add(a, g.neg(a)), 0);
                for b in 0..n {
                    assert!(g.add(a, b) < n);
                    assert_eq!(g.add(a, b), g.add(b, a));
                    assert_eq!(g.sub(g.add(a, b), b), a);
                    for c in 0..n {
                        assert_eq!(g.add(g.add(a, b), c), g.add(a, g.add(b, c)));
                    }
                }
            }
        }
    }

    #[test]
    fn refuses_what_is_no_group() {
        assert!(AbelianGroup::new(&[]).is_err());
        assert!(AbelianGroup::new(&[1]).is_err());
        assert!(AbelianGroup::new(&[300, 300]).is_err());
        assert!(AbelianGroup::elementary(2, 17).is_err());
    }
}
