//! The contrasts of one factor, as whole numbers and scaled to mean square 1.

use num_bigint::BigInt;
use num_integer::Integer;

use super::Scale;

/// The s − 1 contrasts of a factor of s levels, orthogonal to the mean and to one another.
pub(crate) struct Contrasts {
    /// `exact[d][x]`: contrast d at level x, in whole numbers without a common factor.
    pub(crate) exact: Vec<Vec<BigInt>>,
    /// The same, of mean square 1 over the levels.
    pub(crate) scaled: Vec<Vec<f64>>,
}

/// Orthogonal polynomials of the scores, degree 1 first, or contrasts of each level with the mean of
/// those before it.
///
/// All of these must hold: as many scores as levels, no two of them equal. Cost: s³ products.
pub(crate) fn contrasts(levels: u16, scale: &Scale) -> Contrasts {
    let exact = match scale {
        Scale::Words => against_those_before(usize::from(levels)),
        Scale::Numbers(scores) => polynomials(scores),
    };
    let scaled = exact.iter().map(|contrast| to_mean_square_one(contrast)).collect();
    Contrasts { exact, scaled }
}

fn against_those_before(levels: usize) -> Vec<Vec<BigInt>> {
    let value = |d: usize, x: usize| match x.cmp(&d) {
        std::cmp::Ordering::Less => BigInt::from(-1),
        std::cmp::Ordering::Equal => BigInt::from(d),
        std::cmp::Ordering::Greater => BigInt::ZERO,
    };
    (1..levels).map(|d| (0..levels).map(|x| value(d, x)).collect()).collect()
}

/// Powers of the scores made orthogonal to those of lower degree, highest coefficient positive.
fn polynomials(scores: &[i64]) -> Vec<Vec<BigInt>> {
    let mut basis = vec![vec![BigInt::from(1); scores.len()]];
    for d in 1..scores.len() {
        let before = &basis[d - 1];
        let mut next: Vec<BigInt> = before.iter().zip(scores).map(|(v, &x)| v * BigInt::from(x)).collect();
        for other in &basis {
            let (square, product) = (dot(other, other), dot(&next, other));
            for (v, o) in next.iter_mut().zip(other) {
                *v = &*v * &square - o * &product;
            }
            let common = next.iter().fold(BigInt::ZERO, |g, v| g.gcd(v));
            next.iter_mut().for_each(|v| *v /= &common);
        }
        basis.push(next);
    }
    basis.remove(0);
    basis
}

fn dot(a: &[BigInt], b: &[BigInt]) -> BigInt {
    a.iter().zip(b).map(|(x, y)| x * y).sum()
}

fn to_mean_square_one(contrast: &[BigInt]) -> Vec<f64> {
    let largest = contrast.iter().map(|v| v.magnitude().bits()).max().unwrap_or(0);
    let shift = largest.saturating_sub(500);
    // The nearest double; decimals are read without a second rounding.
    let near = |v: &BigInt| (v >> shift).to_string().parse::<f64>().unwrap_or(0.0);
    let values: Vec<f64> = contrast.iter().map(near).collect();
    let mean_square = values.iter().map(|v| v * v).sum::<f64>() / values.len() as f64;
    values.iter().map(|v| v / mean_square.sqrt()).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn numbers(contrasts: &[Vec<BigInt>]) -> Vec<Vec<i64>> {
        contrasts.iter().map(|c| c.iter().map(|v| v.to_string().parse().unwrap()).collect()).collect()
    }

    /// Fisher & Yates, *Statistical Tables*, table XXIII, for equally spaced levels.
    #[test]
    fn the_tabulated_values() {
        let of = |s: u16| numbers(&contrasts(s, &Scale::even(s)).exact);
        assert_eq!(of(3), [[-1, 0, 1], [1, -2, 1]]);
        assert_eq!(of(4), [[-3, -1, 1, 3], [1, -1, -1, 1], [-1, 3, -3, 1]]);
        assert_eq!(of(5), [[-2, -1, 0, 1, 2], [2, -1, -2, -1, 2], [-1, 2, 0, -2, 1], [1, -4, 6, -4, 1]]);
    }

    /// By hand, scores 0, 1, 3: linear −4, −1, 5; quadratic orthogonal to it and to the mean.
    #[test]
    fn uneven_scores_and_words() {
        let uneven = contrasts(3, &Scale::Numbers(vec![0, 10, 30]));
        assert_eq!(numbers(&uneven.exact), [[-4, -1, 5], [2, -3, 1]]);
        assert_eq!(numbers(&contrasts(3, &Scale::Words).exact), [[-1, 1, 0], [-1, -1, 2]]);
    }

    #[test]
    fn mean_square_one_and_orthogonal_for_many_levels() {
        for scale in [Scale::Words, Scale::even(30)] {
            let all = contrasts(30, &scale).scaled;
            for (i, a) in all.iter().enumerate() {
                assert!(a.iter().sum::<f64>().abs() < 1e-9);
                for (j, b) in all.iter().enumerate() {
                    let product = a.iter().zip(b).map(|(x, y)| x * y).sum::<f64>() / 30.0;
                    assert!((product - f64::from(u8::from(i == j))).abs() < 1e-9, "{i} {j}");
                }
            }
        }
    }
}
