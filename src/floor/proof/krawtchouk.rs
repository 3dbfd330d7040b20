use num_bigint::BigInt;

/// The Krawtchouk values K_j(x; k, s) of k factors of s levels, 0 ≤ j, x ≤ k.
///
/// K_j(x) is the coefficient of z^j in (1 + (s − 1)z)^(k−x) (1 − z)^x; K_j(0) = C(k, j)(s − 1)^j is
/// the largest in absolute value.
///
/// Reference: Delsarte, "An algebraic approach to the association schemes of coding theory", 1973.
#[derive(Clone, Debug)]
pub struct Krawtchouk {
    factors: usize,
    values: Vec<BigInt>,
}

impl Krawtchouk {
    /// The values for `factors` factors of `levels` levels. Cost: factors² additions.
    #[must_use]
    pub fn new(levels: u16, factors: usize) -> Self {
        let k = factors;
        let s1 = BigInt::from(levels - 1);
        let mut values = vec![BigInt::ZERO; (k + 1) * (k + 1)];
        values[0] = BigInt::from(1);
        for j in 1..=k {
            values[j] = &values[j - 1] * BigInt::from(k - j + 1) * &s1 / BigInt::from(j);
        }
        // From x to x + 1 the generating function is multiplied by (1 − z)/(1 + (s − 1)z).
        for x in 1..=k {
            let (before, row) = values.split_at_mut(x * (k + 1));
            let before = &before[(x - 1) * (k + 1)..];
            row[0] = BigInt::from(1);
            for j in 1..=k {
                row[j] = &before[j] - &before[j - 1] - &s1 * &row[j - 1];
            }
        }
        Self { factors, values }
    }

    /// K_j(x); both at most the number of factors.
    #[must_use]
    pub fn value(&self, j: usize, x: usize) -> &BigInt {
        &self.values[x * (self.factors + 1) + j]
    }

    /// The number of factors.
    #[must_use]
    pub fn factors(&self) -> usize {
        self.factors
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use num_integer::binomial;

    #[test]
    fn equals_the_sum() {
        for (s, k) in [(2u16, 7usize), (3, 5), (6, 4), (11, 3)] {
            let table = Krawtchouk::new(s, k);
            for j in 0..=k {
                for x in 0..=k {
                    let sum: i128 = (0..=j.min(x))
                        .filter(|h| j - h <= k - x)
                        .map(|h| {
                            let size =
                                binomial(x as i128, h as i128) * binomial((k - x) as i128, (j - h) as i128);
                            let power = i128::from(s - 1).pow((j - h) as u32);
                            if h % 2 == 0 { size * power } else { -size * power }
                        })
                        .sum();
                    assert_eq!(*table.value(j, x), BigInt::from(sum));
                }
            }
        }
    }
}
