//! A proved lower bound on the sum of squared pair counts.

use std::collections::BTreeMap;

/// A number that Σ n_ab², taken over all pairs of columns and all combinations a, b of their
/// levels, cannot fall below, whatever the plan of `runs` runs with factors of these `levels`.
///
/// The largest of these, each proved:
///
/// * *by pairs*: a pair with r and s levels has rs counts that sum to N, so Σ n_ab² is at least
///   that of rs whole numbers as even as possible.
/// * *by runs* (Xu 2002, J2): let δ_ij count the factors in which runs i < j agree. Counting the
///   pairs of runs in each combination, Σ n_ab² = Σ_{i<j} δ_ij (δ_ij − 1) + N k(k−1)/2. The function
///   x(x − 1) is convex and does not decrease on the whole numbers x ≥ 0, and Σ δ_ij is at least
///   what columns with level counts as even as possible give; so the sum is at least that of
///   N(N−1)/2 whole numbers, as even as possible, of that total. It holds for uneven columns too:
///   they only raise the total.
/// * *both*: by runs over some of the factors, by pairs over all other pairs. The factors are taken
///   in order of their levels, from either end.
///
/// References: H. Xu, *Technometrics* 44 (2002), 356–368, Theorem 2 (for N divisible by all levels);
/// N.-K. Nguyen, *Technometrics* 38 (1996), 69–73, for two levels. Cost: k steps.
pub(super) fn least_squares(runs: usize, levels: &[u16]) -> u128 {
    let mut groups: BTreeMap<u16, u128> = BTreeMap::new();
    for &s in levels {
        *groups.entry(s).or_default() += 1;
    }
    let up: Vec<(u16, u128)> = groups.into_iter().collect();
    let down: Vec<(u16, u128)> = up.iter().rev().copied().collect();
    by_prefixes(runs as u128, &up).max(by_prefixes(runs as u128, &down))
}

/// The best bound that takes some first factors by runs and the other pairs by pairs.
fn by_prefixes(runs: u128, groups: &[(u16, u128)]) -> u128 {
    let pair = |r: u16, s: u16| even_squares(runs, u128::from(r) * u128::from(s));
    let mut all = 0;
    for (i, &(s, count)) in groups.iter().enumerate() {
        all += count * (count - 1) / 2 * pair(s, s);
        all += groups[..i].iter().map(|&(r, other)| other * count * pair(r, s)).sum::<u128>();
    }
    let (mut best, mut inside, mut factors, mut total) = (all, 0, 0, 0);
    for (i, &(s, count)) in groups.iter().enumerate() {
        let before: u128 = groups[..i].iter().map(|&(r, other)| other * pair(r, s)).sum();
        // Pairs of runs that agree in an even column.
        let agree = (even_squares(runs, u128::from(s)) - runs) / 2;
        for own in 0..count {
            inside += before + own * pair(s, s);
            factors += 1;
            total += agree;
            best = best.max(by_runs(runs, factors, total) + (all - inside));
        }
    }
    best
}

fn by_runs(runs: u128, factors: u128, total: u128) -> u128 {
    let pairs = runs * (runs - 1) / 2;
    let fixed = runs * (factors * (factors - 1) / 2);
    if pairs == 0 {
        return fixed;
    }
    fixed + even_squares(total, pairs) - total
}

/// The sum of the squares of `parts` whole numbers with sum `total`, as even as possible.
pub(super) fn even_squares(total: u128, parts: u128) -> u128 {
    let (each, more) = (total / parts, total % parts);
    (parts - more) * each * each + more * (each + 1) * (each + 1)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The least Σ n_ab² over all arrays, by trying them all, column by column.
    fn least_of_all(runs: usize, levels: &[u16]) -> u128 {
        let columns = |s: u16| -> Vec<Vec<u16>> {
            let count = usize::from(s).pow(runs as u32);
            (0..count)
                .map(|mut code| {
                    let mut column = Vec::with_capacity(runs);
                    for _ in 0..runs {
                        column.push((code % usize::from(s)) as u16);
                        code /= usize::from(s);
                    }
                    column
                })
                .collect()
        };
        fn extend(
            levels: &[u16],
            so_far: &mut Vec<Vec<u16>>,
            sum: u128,
            best: &mut u128,
            all: &[Vec<Vec<u16>>],
        ) {
            let k = so_far.len();
            if k == levels.len() {
                *best = sum.min(*best);
                return;
            }
            for column in &all[k] {
                let mut more = 0;
                for (j, other) in so_far.iter().enumerate() {
                    let mut counts = vec![0u128; usize::from(levels[k]) * usize::from(levels[j])];
                    for (&a, &b) in column.iter().zip(other) {
                        counts[usize::from(a) * usize::from(levels[j]) + usize::from(b)] += 1;
                    }
                    more += counts.iter().map(|c| c * c).sum::<u128>();
                }
                if sum + more < *best {
                    so_far.push(column.clone());
                    extend(levels, so_far, sum + more, best, all);
                    so_far.pop();
                }
            }
        }
        let all: Vec<Vec<Vec<u16>>> = levels.iter().map(|&s| columns(s)).collect();
        let mut best = u128::MAX;
        extend(levels, &mut Vec::new(), 0, &mut best, &all);
        best
    }

    #[test]
    fn no_array_at_all_falls_below_it() {
        let mut attained = 0;
        let cases: &[(usize, &[u16])] = &[
            (1, &[2, 3, 2]),
            (2, &[2, 2, 2]),
            (2, &[2, 3, 3]),
            (3, &[2, 2, 2, 2]),
            (3, &[3, 3, 2]),
            (4, &[2, 2, 2, 2]),
            (4, &[3, 2, 2]),
            (4, &[3, 3, 3]),
            (5, &[2, 2, 2, 2]),
            (5, &[3, 2, 2]),
            (6, &[2, 2, 2]),
            (6, &[3, 2, 2]),
            (4, &[5, 2]),
            (5, &[3, 3]),
            (7, &[2, 2, 2]),
        ];
        for &(runs, levels) in cases {
            let (least, bound) = (least_of_all(runs, levels), least_squares(runs, levels));
            assert!(bound <= least, "{runs} runs, {levels:?}: {bound} > {least}");
            attained += usize::from(bound == least);
        }
        assert!(attained >= 10, "the bound is attained in {attained} cases only");
    }

    /// For balanced two-level columns Σ n_ab² = Σ (N² + s_ij²)/4, and the mean of s_ij² is at least
    /// N²(k − N + 1)/((N − 1)(k − 1)): Nguyen 1996; Tang & Wu 1997.
    #[test]
    fn the_published_bound_for_two_levels() {
        for (runs, factors, numerator, denominator) in [(6, 10, 4, 1), (10, 18, 100, 17), (12, 22, 144, 21)] {
            let pairs: u128 = factors * (factors - 1) / 2;
            let squares = 4 * least_squares(runs, &vec![2; factors as usize]) - pairs * (runs * runs) as u128;
            assert!(squares * denominator >= pairs * numerator, "{runs} runs, {factors} factors");
        }
    }

    #[test]
    fn an_orthogonal_array_attains_it() {
        assert_eq!(least_squares(4, &[2, 2, 2]), 3 * 4);
        assert_eq!(least_squares(18, &[2, 3, 3, 3, 3, 3, 3, 3]), 7 * 6 * 9 + 21 * 9 * 4);
        assert_eq!(least_squares(1, &[2]), 0);
    }
}
