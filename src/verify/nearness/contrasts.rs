//! Orthogonal polynomial contrasts in whole numbers.

use num_integer::Integer;

/// Contrasts are worked out for factors of at most so many levels: beyond, their whole numbers
/// outgrow what sums in 128 bits can hold.
pub(super) const MOST_LEVELS: u16 = 32;

/// The orthogonal polynomial contrasts of `levels` equally spaced level scores, degree 1 first:
/// `contrasts(s)[d − 1][x]` is the value at level x, in whole numbers without a common factor.
///
/// The discrete Chebyshev polynomials: t_d(x) = Σ_j (−1)^(d−j) C(s−1−j, d−j) C(d+j, d) C(x, j).
/// All of these must hold: 2 ≤ levels ≤ 32. Reference: Fisher & Yates, *Statistical Tables*,
/// table XXIII (which tabulates them).
pub(super) fn contrasts(levels: u16) -> Vec<Vec<i64>> {
    let s = u64::from(levels);
    (1..s)
        .map(|d| {
            let value = |x: u64| -> i128 {
                (0..=d.min(x))
                    .map(|j| {
                        let term = choose(s - 1 - j, d - j) * choose(d + j, d) * choose(x, j);
                        if (d - j) % 2 == 0 { term } else { -term }
                    })
                    .sum()
            };
            let values: Vec<i128> = (0..s).map(value).collect();
            let common = values.iter().fold(0, |g: i128, v| g.gcd(v)).max(1);
            values.iter().map(|v| i64::try_from(v / common).unwrap_or(0)).collect()
        })
        .collect()
}

fn choose(n: u64, k: u64) -> i128 {
    (0..k).fold(1, |c, i| c * i128::from(n - i) / i128::from(i + 1))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Fisher & Yates, table XXIII, for 3, 4, 5 and 6 levels.
    #[test]
    fn the_tabulated_values() {
        assert_eq!(contrasts(2), [[-1, 1]]);
        assert_eq!(contrasts(3), [[-1, 0, 1], [1, -2, 1]]);
        assert_eq!(contrasts(4), [[-3, -1, 1, 3], [1, -1, -1, 1], [-1, 3, -3, 1]]);
        assert_eq!(
            contrasts(5),
            [[-2, -1, 0, 1, 2], [2, -1, -2, -1, 2], [-1, 2, 0, -2, 1], [1, -4, 6, -4, 1]]
        );
        assert_eq!(contrasts(6)[1], [5, -1, -4, -4, -1, 5]);
        assert_eq!(contrasts(6)[2], [-5, 7, 4, -4, -7, 5]);
    }

    #[test]
    fn orthogonal_to_the_mean_and_to_one_another() {
        for s in 2..=MOST_LEVELS {
            let all = contrasts(s);
            for (d, a) in all.iter().enumerate() {
                assert_eq!(a.iter().sum::<i64>(), 0, "{s} levels, degree {}", d + 1);
                assert!(a.iter().all(|v| v.abs() < 1 << 40) && a.iter().any(|&v| v != 0));
                for b in &all[..d] {
                    let product: i128 = a.iter().zip(b).map(|(&x, &y)| i128::from(x) * i128::from(y)).sum();
                    assert_eq!(product, 0, "{s} levels");
                }
            }
        }
    }
}
