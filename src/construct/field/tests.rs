//! Every construction of this room, exhaustively over small parameters: strength counted by the
//! definition, the closed formula of the mix beside a count.

use super::super::testing::has_strength;
use super::*;
use crate::algebra::{dot, prime_powers, projective_points, vector};
use crate::mix::Mix;

/// Checks runs, strength and the closed formula of the mix.
fn check(array: &Array, runs: usize, mix: &[(usize, usize)], t: usize) {
    let asked = Mix::from_counts(mix.iter().map(|&(s, k)| (s as u16, k))).unwrap();
    assert_eq!((array.runs(), array.mix().counts()), (runs, asked.counts()), "{asked} in {runs} runs");
    assert!(has_strength(array, t), "{asked} in {runs} runs has strength {t}");
}

fn saturated(array: &Array) -> bool {
    array.levels().iter().map(|&s| usize::from(s) - 1).sum::<usize>() == array.runs() - 1
}

fn pow(q: u32, n: u32) -> usize {
    (q as usize).pow(n)
}

#[test]
fn full_factorials_hold_every_combination_once() {
    for levels in [&[2u16][..], &[2, 3], &[3, 2, 4], &[6, 2, 2, 5], &[2, 2, 2, 2, 2, 2]] {
        let a = full_factorial(levels).unwrap();
        let runs = levels.iter().map(|&s| usize::from(s)).product();
        assert_eq!((a.runs(), a.levels()), (runs, levels));
        assert!(has_strength(&a, levels.len()));
    }
    assert_eq!(full_factorial(&[3, 2]).unwrap().row(4), [1, 1], "first factor fastest");
}

#[test]
fn rao_hamming_arrays() {
    for (q, n) in
        [(2, 2), (2, 3), (2, 4), (2, 5), (3, 2), (3, 3), (4, 2), (4, 3), (5, 2), (5, 3), (7, 2), (8, 2)]
    {
        let a = rao_hamming(q, n).unwrap();
        check(&a, pow(q, n), &[(q as usize, (pow(q, n) - 1) / (q as usize - 1))], 2);
        assert!(saturated(&a) && !has_strength(&a, 3), "q={q} n={n}");
    }
    for q in prime_powers(9, 32) {
        check(&rao_hamming(q, 2).unwrap(), pow(q, 2), &[(q as usize, q as usize + 1)], 2);
    }
}

#[test]
fn spreads_and_partitions() {
    for q in [2, 3, 4, 5] {
        for n in 2..=7u32 {
            for e in (1..=n / 2).filter(|_| pow(q, n) <= 256) {
                let a = spread(q, n, e).unwrap();
                let (small, large) = (pow(q, e), pow(q, e + n % e));
                let mix = match n % e {
                    0 => vec![(small, (pow(q, n) - 1) / (small - 1))],
                    _ => vec![(large, 1), (small, (pow(q, n) - large) / (small - 1))],
                };
                check(&a, pow(q, n), &mix, 2);
                assert!(saturated(&a));
                assert_eq!(usize::from(a.levels()[0]), large, "the large factor first");
            }
        }
    }
    check(&spread(2, 8, 4).unwrap(), 256, &[(16, 17)], 2);
    check(&spread(2, 8, 3).unwrap(), 256, &[(32, 1), (8, 32)], 2);
}

#[test]
fn large_and_small_factors() {
    for p in [2, 3, 4, 5, 7, 8, 9] {
        for e in 1..=5u32 {
            for d in (1..=e).filter(|d| pow(p, e + d) <= 1024) {
                let a = large_and_small(p, e, d).unwrap();
                check(&a, pow(p, e + d), &[(pow(p, e), 1), (pow(p, d), pow(p, e))], 2);
                assert!(saturated(&a));
            }
        }
    }
}

#[test]
fn bush_arrays_have_index_one() {
    for q in prime_powers(2, 9) {
        for t in (2..=q + 1).filter(|&t| pow(q, t) <= 1000) {
            let k = q as usize + 1 + usize::from(q % 2 == 0 && t == 3);
            check(&bush(q, t).unwrap(), pow(q, t), &[(q as usize, k)], t as usize);
        }
    }
    let a = bush(5, 3).unwrap();
    let f = Field::new(5).unwrap();
    for run in 0..125 {
        let c = vector(&f, 3, run);
        for x in 0..5 {
            let value = f.add(c[0], f.mul(x, f.add(c[1], f.mul(x, c[2]))));
            assert_eq!(a.get(run, usize::from(x)), value);
        }
        assert_eq!(a.get(run, 5), c[2]);
    }
}

#[test]
fn zero_sum_arrays_have_index_one() {
    for s in 2..=10u16 {
        for t in (1..=5).filter(|&t| pow(s.into(), t) <= 1024) {
            check(&zero_sum(s, t).unwrap(), pow(s.into(), t), &[(s.into(), t as usize + 1)], t as usize);
        }
    }
}

#[test]
fn ovoids() {
    for q in [2, 3, 4, 5] {
        let a = ovoid(q).unwrap();
        check(&a, pow(q, 4), &[(q as usize, pow(q, 2) + 1)], 3);
    }
    // Larger fields by linear algebra alone, and the stated equation.
    for q in [2, 3, 4, 7, 8, 9] {
        let f = Field::new(q).unwrap();
        let quadric = ovoid::elliptic_quadric(&f);
        let fits = |b: u16, c: u16| {
            quadric.iter().all(|p| {
                let [s, t, x, y] = p[..] else { return false };
                let cross = f.add(f.mul(b, f.mul(x, y)), f.mul(c, f.mul(y, y)));
                f.add(f.mul(s, t), f.add(f.mul(x, x), cross)) == 0
            })
        };
        assert!(f.elements().any(|b| f.elements().any(|c| fits(b, c))), "q={q}");
        assert_eq!(quadric.len(), pow(q, 2) + 1);
        assert!(points_strength(q, &quadric, 3).unwrap());
    }
}

#[test]
fn affine_geometries() {
    for n in 3..=6 {
        let a = affine_points(n).unwrap();
        check(&a, pow(2, n), &[(2, pow(2, n - 1))], 3);
        assert!(!has_strength(&a, 4), "n={n}: four points of a plane have sum 0");
    }
}

#[test]
fn addelman_kempthorne_arrays() {
    let all =
        [(2, 2), (2, 3), (2, 4), (2, 5), (3, 2), (3, 3), (3, 4), (4, 2), (4, 3), (5, 2), (5, 3), (7, 2)];
    let squares = [(8, 2), (9, 2), (11, 2), (13, 2), (16, 2), (25, 2), (27, 2)];
    for (q, n) in all.into_iter().chain(squares) {
        let a = addelman_kempthorne(q, n).unwrap();
        check(&a, 2 * pow(q, n), &[(q as usize, 2 * (pow(q, n) - 1) / (q as usize - 1) - 1)], 2);
    }
}

#[test]
fn two_subspaces_and_points() {
    for m in 1..=3 {
        for d in (1..=4).filter(|d| 2 * m + d <= 7) {
            let mix = [(pow(2, m), 2), (2, pow(2, m) * (pow(2, d) - 1))];
            check(&two_subspaces(m, d).unwrap(), pow(2, 2 * m + d), &mix, 3);
        }
    }
}

#[test]
fn cosets_of_codes() {
    for q in [2, 3, 4, 5, 7, 8] {
        for k in 2..=4u32 {
            let points = (pow(q, k) - 1) / (q as usize - 1);
            for n in (k + 1..=10).filter(|&n| n as usize <= points && pow(q, n) <= 4096) {
                let a = code_cosets(q, n, k).unwrap();
                check(&a, pow(q, n), &[(pow(q, n - k), 1), (q as usize, n as usize)], 3);
                assert_eq!(usize::from(a.levels()[0]), pow(q, n - k));
            }
            assert!(code_cosets(q, points as u32 + 1, k).is_err(), "no more points than PG(k-1, q) has");
        }
    }
}

#[test]
fn linear_arrays_follow_their_stated_conventions() {
    for (q, n) in [(2, 4), (3, 3), (4, 2), (9, 2)] {
        let f = Field::new(q).unwrap();
        let all: Vec<_> = projective_points(&f, n).collect();
        let a = points(q, &all).unwrap();
        for (j, p) in all.iter().enumerate() {
            for run in 0..a.runs() {
                assert_eq!(a.get(run, j), dot(&f, &vector(&f, n, run), p));
            }
        }
        let plane = vec![all[0].clone(), all[all.len() - 1].clone()];
        let b = subspaces(q, n as u32, std::slice::from_ref(&plane), 1).unwrap();
        for run in 0..b.runs() {
            let v = vector(&f, n, run);
            let level = u32::from(dot(&f, &v, &plane[0])) + q * u32::from(dot(&f, &v, &plane[1]));
            assert_eq!(u32::from(b.get(run, 0)), level);
        }
    }
}

/// Independence says strength, no more and no less: all sets of three points of small planes.
#[test]
fn independence_is_strength() {
    for q in [2, 3] {
        let f = Field::new(q).unwrap();
        let all: Vec<_> = projective_points(&f, 3).collect();
        for a in 0..all.len() {
            for b in a + 1..all.len() {
                for c in b + 1..all.len() {
                    let chosen = [a, b, c].map(|i| all[i].clone());
                    let array = points(q, &chosen).unwrap();
                    for t in 1..=3 {
                        assert_eq!(has_strength(&array, t), points_strength(q, &chosen, t as u32).unwrap());
                    }
                }
            }
        }
    }
}

fn needs(result: Result<Array, ConstructError>) -> String {
    result.expect_err("a condition is broken").to_string()
}

#[test]
fn broken_conditions_are_named() {
    let p = |v: &[u16]| v.to_vec();
    assert!(needs(points(6, &[p(&[1])])).contains("no field with 6 elements"));
    assert!(needs(points(2, &[])).contains("at least one point"));
    assert!(needs(points(2, &[p(&[])])).contains("at least one coordinate"));
    assert!(needs(points(2, &[p(&[1, 0]), p(&[1])])).contains("point 1 has 1 coordinates"));
    assert!(needs(points(3, &[p(&[1, 3])])).contains("coordinates below 3"));
    assert!(needs(points(3, &[p(&[1, 1]), p(&[0, 0])])).contains("zero vector: point 1"));
    assert!(needs(points(2, &[vec![1; 64]])).contains("2^64 runs"));
    assert!(points_strength(2, &[p(&[1])], 2).is_err() && points_strength(2, &[p(&[1])], 0).is_err());

    let line = vec![p(&[1, 0, 0]), p(&[0, 1, 0])];
    assert!(needs(subspaces(2, 3, &[vec![p(&[1, 0, 0]); 2]], 1)).contains("subspace 0 are not"));
    assert!(needs(subspaces(2, 3, &[line.clone(), vec![p(&[1, 1, 0])]], 2)).contains("[0, 1] are not"));
    assert!(needs(subspaces(2, 3, &[vec![p(&[1, 0])]], 2)).contains("subspace 0 has others"));
    assert!(needs(subspaces(2, 3, &[vec![p(&[1, 0, 2])]], 2)).contains("below 2"));
    assert!(needs(subspaces(2, 3, &[vec![]], 2)).contains("2^0 levels"));
    assert!(needs(subspaces(2, 3, std::slice::from_ref(&line), 0)).contains("t = 0"));
    assert!(needs(subspaces(2, 0, &[line], 1)).contains("n = 0"));
    assert!(matches!(subspaces(2, 3, &[], 2), Err(ConstructError::Array(ArrayError::Levels(_)))));
    let wide: Subspace = (0..16).map(|i| crate::algebra::unit(17, i)).collect();
    assert!(needs(subspaces(2, 17, &[wide], 1)).contains("2^16 levels"));

    assert!(needs(full_factorial(&[])).contains("no factor"));
    assert!(needs(full_factorial(&[2, 1])).contains("at least 2 levels"));
    assert!(needs(full_factorial(&[65535; 5])).contains("65535^5"));
    assert!(needs(rao_hamming(2, 1)).contains("n of at least 2"));
    assert!(needs(spread(2, 3, 2)).contains("2e ≤ n"));
    assert!(needs(spread(2, 32, 16)).contains("2^16 levels"));
    assert!(needs(spread(6, 4, 2)).contains("no field"));
    assert!(needs(large_and_small(2, 1, 2)).contains("e ≥ d"));
    assert!(needs(large_and_small(2, 2, 0)).contains("d ≥ 1"));
    assert!(needs(bush(3, 5)).contains("q + 1 = 4"));
    assert!(needs(bush(3, 1)).contains("2 ≤ t"));
    assert!(needs(zero_sum(1, 2)).contains("s ≥ 2"));
    assert!(needs(affine_points(2)).contains("at least 3"));
    assert!(needs(addelman_kempthorne(3, 1)).contains("at least 2"));
    assert!(needs(addelman_kempthorne(32768, 2)).contains("no field with 65536"));
    assert!(needs(two_subspaces(0, 1)).contains("m = 0"));
    assert!(needs(code_cosets(2, 4, 2)).contains("n = 4, k = 2"));
    assert!(needs(code_cosets(2, 60, 6)).contains("2^54 levels"));
}

/// Sizes beyond any memory are errors at once, whatever the numbers.
#[test]
fn absurd_sizes_are_errors() {
    let big = u32::MAX;
    for q in [0, 1, 6, 65535, 65536, big] {
        for n in [0, 1, 2, 3, 64, big] {
            assert!(rao_hamming(q, n).is_err() && bush(q, n).is_err() && ovoid(q).is_err());
            assert!(addelman_kempthorne(q, n).is_err() && spread(q, n, 1).is_err());
            assert!(large_and_small(q, n, n).is_err() && code_cosets(q, n, 2).is_err());
        }
    }
    for q in [2, 3, 4, 65521] {
        for n in [64, 1000, big] {
            assert!(rao_hamming(q, n).is_err() && bush(q, n).is_err() && addelman_kempthorne(q, n).is_err());
            assert!(spread(q, n, 1).is_err() && spread(q, n, n / 2).is_err() && spread(q, n, big).is_err());
            assert!(large_and_small(q, n, 1).is_err() && large_and_small(q, n, n).is_err());
            assert!(code_cosets(q, n, 2).is_err() && code_cosets(q, n, n - 1).is_err());
            assert!(
                affine_points(n).is_err() && two_subspaces(3, n).is_err() && two_subspaces(n, 1).is_err()
            );
            assert!(zero_sum(q as u16, n).is_err());
        }
    }
    assert!(matches!(rao_hamming(2, 24), Err(ConstructError::Array(ArrayError::TooLarge { .. }))));
    assert!(needs(rao_hamming(2, 25)).contains("more than 16777216 factors"));
    assert!(
        ovoid(65521).is_err() && rao_hamming(65521, 2).is_err() && addelman_kempthorne(65521, 2).is_err()
    );
}
