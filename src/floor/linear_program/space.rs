use num_bigint::BigInt;
use num_traits::ToPrimitive;

use crate::floor::proof::{Krawtchouk, MAX_FACTORS, MAX_TUPLES};

/// All weight tuples of a mix with the scaled Krawtchouk values q_j(i) = Π_m K_{j_m}(i_m) / v_j, in
/// floating point. They lie in [−1, 1] and are symmetric in i and j.
pub(super) struct Space {
    widths: Vec<usize>,
    tables: Vec<Vec<f64>>,
    /// The tuples one after the other, the last index running fastest.
    tuples: Vec<u32>,
    len: usize,
}

impl Space {
    /// The space of (levels, factors) pairs; `None` when a certificate could not be checked.
    pub(super) fn new(counts: &[(u16, u64)]) -> Option<Self> {
        let widths: Vec<usize> = counts.iter().map(|&(_, k)| (k.min(MAX_FACTORS + 1) + 1) as usize).collect();
        let len = widths.iter().try_fold(1usize, |n, &w| n.checked_mul(w)).filter(|&n| n <= MAX_TUPLES)?;
        if counts.iter().any(|&(_, k)| k > MAX_FACTORS) {
            return None;
        }
        let mut tuples = Vec::with_capacity(len * widths.len());
        for n in 0..len {
            let mut rest = n;
            let start = tuples.len();
            for &w in widths.iter().rev() {
                tuples.push((rest % w) as u32);
                rest /= w;
            }
            tuples[start..].reverse();
        }
        let tables = counts.iter().map(|&(s, k)| table(s, k as usize)).collect();
        Some(Self { widths, tables, tuples, len })
    }

    /// The number of tuples.
    pub(super) fn len(&self) -> usize {
        self.len
    }

    /// The tuple of a number.
    pub(super) fn tuple(&self, n: usize) -> &[u32] {
        let v = self.widths.len();
        &self.tuples[n * v..(n + 1) * v]
    }

    /// |j|.
    pub(super) fn size(&self, n: usize) -> u64 {
        self.tuple(n).iter().map(|&j| u64::from(j)).sum()
    }

    /// q_j(i).
    pub(super) fn q(&self, j: usize, i: usize) -> f64 {
        let (a, b) = (self.tuple(j), self.tuple(i));
        (0..self.widths.len())
            .map(|m| self.tables[m][a[m] as usize * self.widths[m] + b[m] as usize])
            .product()
    }

    /// Σ weight · q_j(i) over the given (j, weight), for every i.
    pub(super) fn transform(&self, weights: &[(usize, f64)]) -> Vec<f64> {
        let mut sums = vec![0.0; self.len];
        for &(j, weight) in weights {
            // The products for all tuples are grown index by index.
            let mut products = vec![weight];
            for (m, &width) in self.widths.iter().enumerate() {
                let start = self.tuple(j)[m] as usize * width;
                let row = &self.tables[m][start..start + width];
                products = products.iter().flat_map(|p| row.iter().map(move |q| p * q)).collect();
            }
            for (sum, product) in sums.iter_mut().zip(&products) {
                *sum += product;
            }
        }
        sums
    }
}

/// K_j(x)/K_j(0) at j·(k + 1) + x.
fn table(levels: u16, factors: usize) -> Vec<f64> {
    let exact = Krawtchouk::new(levels, factors);
    let mut out = Vec::with_capacity((factors + 1) * (factors + 1));
    for j in 0..=factors {
        for x in 0..=factors {
            let scaled: BigInt = (exact.value(j, x) << 60) / exact.value(j, 0);
            out.push(scaled.to_f64().unwrap_or(0.0) / (1u64 << 60) as f64);
        }
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_transform_is_the_sum_and_the_values_are_symmetric() {
        let space = Space::new(&[(2, 5), (3, 4), (7, 2)]).unwrap();
        assert_eq!(space.len(), 90);
        let weights = [(3, 0.5), (17, -2.0), (89, 1.25)];
        let sums = space.transform(&weights);
        for (i, sum) in sums.iter().enumerate() {
            let plain: f64 = weights.iter().map(|&(j, w)| w * space.q(j, i)).sum();
            assert!((plain - sum).abs() < 1e-12);
            for j in 0..space.len() {
                assert!((space.q(j, i) - space.q(i, j)).abs() < 1e-12 && space.q(i, j).abs() <= 1.0);
            }
        }
        assert!(Space::new(&[(2, 300)]).is_none() && Space::new(&[(2, 200), (3, 200)]).is_none());
    }
}
