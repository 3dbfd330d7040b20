//! Dual distances against published minimum distances, and every array counted.

use super::super::testing::has_strength;
use super::*;
use crate::algebra::Field;

/// q, n, zeros, extended, dimension of the cyclic code, its minimum distance.
type Published = (u32, u32, &'static [u32], bool, usize, usize);

/// MacWilliams & Sloane 1977, chapters 7, 9 and 16 and appendix A, from memory.
const PUBLISHED: &[Published] = &[
    (2, 7, &[1], false, 4, 3),
    (2, 15, &[1, 3], false, 7, 5),
    (2, 15, &[1, 3, 5], false, 5, 7),
    (2, 17, &[1], false, 9, 5),
    (2, 31, &[1, 3], false, 21, 5),
    (2, 31, &[1, 3, 5], false, 16, 7),
    (2, 63, &[1, 3], false, 51, 5),
    (2, 15, &[1, 3], true, 7, 6),
    (2, 31, &[1, 3, 5], true, 16, 8),
    (3, 13, &[1], false, 10, 3),
    (4, 17, &[1], false, 13, 4),
];

#[test]
fn bch_distances() {
    for &(q, n, zeros, extended, k, d) in PUBLISHED {
        let code = dual_of_cyclic(q, n, zeros, extended).unwrap();
        assert_eq!(code.length() - code.dimension(), k, "{q} {n} {zeros:?}");
        assert_eq!(code.dual_distance().unwrap(), d, "{q} {n} {zeros:?}");
    }
    // Designed distances are reached by these: the zeros 3, 5 follow from 1, 2 by conjugation.
    for (n, t, d) in [(15, 4, 5), (31, 4, 5), (31, 6, 7), (63, 4, 5)] {
        assert_eq!(bch(2, n, t, false).unwrap().dual_distance().unwrap(), d);
        assert_eq!(bch(2, n, t, true).unwrap().dual_distance().unwrap(), d + 1);
    }
}

#[test]
fn quadratic_residue_distances() {
    // (q, p, minimum distance of the code and of the extended one): MacWilliams & Sloane 1977,
    // chapter 16, from memory.
    for (q, p, d, extended) in [
        (2, 7, 3, 4),
        (2, 17, 5, 6),
        (2, 23, 7, 8),
        (2, 31, 7, 8),
        (3, 11, 5, 6),
        (4, 5, 3, 4),
        (4, 11, 5, 6),
    ] {
        let code = quadratic_residue(q, p, false).unwrap();
        assert_eq!(code.dimension(), (p as usize - 1) / 2);
        assert_eq!(code.dual_distance().unwrap(), d, "{q} {p}");
        assert_eq!(quadratic_residue(q, p, true).unwrap().dual_distance().unwrap(), extended, "{q} {p}");
    }
    for (q, p) in [(2, 11), (2, 2), (2, 9), (3, 0), (3, 7), (6, 5)] {
        assert!(quadratic_residue(q, p, false).is_err(), "{q} {p}");
    }
}

#[test]
fn reed_muller_distances() {
    for m in 1..=5u32 {
        for r in 0..=m {
            let code = reed_muller(r, m).unwrap();
            let k: u32 = (0..=r).map(|i| num_integer::binomial(m, i)).sum();
            assert_eq!((code.length(), code.dimension()), (1 << m, k as usize));
            if k <= 16 {
                let expected = if r == m { (1 << m) + 1 } else { 1 << (r + 1) };
                assert_eq!(code.dual_distance().unwrap(), expected, "{r} {m}");
            }
        }
    }
    assert!(reed_muller(3, 2).is_err() && reed_muller(1, 17).is_err());
}

/// The computed dual distance is the strength that counting finds, plus 1.
#[test]
fn dual_distance_and_counting_agree() {
    let codes = [
        dual_of_cyclic(2, 7, &[1, 3], false),
        dual_of_cyclic(2, 9, &[1], false),
        dual_of_cyclic(2, 15, &[0, 5], true),
        dual_of_cyclic(2, 17, &[1], false),
        dual_of_cyclic(3, 8, &[1, 2], false),
        quadratic_residue(3, 11, false),
        quadratic_residue(4, 5, true),
        bch(3, 8, 3, true),
        bch(5, 6, 2, false),
        bch(8, 9, 2, false),
        bch(9, 10, 2, false),
        reed_muller(1, 4),
        reed_muller(2, 3),
    ];
    for code in codes.map(Result::unwrap) {
        let (array, d) = (code.array().unwrap(), code.dual_distance().unwrap());
        assert_eq!(array.runs(), (code.order() as usize).pow(code.dimension() as u32));
        assert_eq!(array.levels(), vec![code.order() as u16; code.length()]);
        assert!(has_strength(&array, d - 1), "q = {} n = {}", code.order(), code.length());
        assert!(d > code.length() || !has_strength(&array, d), "q = {} n = {}", code.order(), code.length());
        assert_eq!(code.array_of_strength(d as u32 - 1).unwrap(), array);
        assert_eq!(code.array_of_strength(d as u32).is_err(), d <= code.length());
    }
}

#[test]
fn kerdock_arrays() {
    let array = kerdock(4).unwrap();
    assert_eq!((array.runs(), array.levels()), (256, &[2; 16][..]));
    assert!(has_strength(&array, 5) && !has_strength(&array, 6));
    // The weights of the Nordstrom–Robinson code: 1, 112, 30, 112, 1 words of weight 0, 6, 8, 10,
    // 16 (MacWilliams & Sloane 1977, chapter 2, § 8, from memory).
    let mut weights = std::collections::BTreeMap::new();
    array.rows().for_each(|row| *weights.entry(row.iter().sum::<u16>()).or_insert(0) += 1);
    assert!(weights.into_iter().eq([(0, 1), (6, 112), (8, 30), (10, 112), (16, 1)]));
    for m in [0, 2, 3, 5, 16] {
        assert!(kerdock(m).is_err());
    }
}

#[test]
fn refusals() {
    let field = || Field::new(2).unwrap();
    for rows in
        [vec![], vec![vec![]], vec![vec![1], vec![1, 0]], vec![vec![2]], vec![vec![1, 0]], vec![vec![1]; 2]]
    {
        assert!(LinearCode::new(field(), rows.clone()).is_err(), "{rows:?}");
    }
    for (q, n, zeros) in
        [(6, 5, &[1u32][..]), (2, 6, &[1]), (2, 1, &[0]), (2, 7, &[]), (2, 7, &[7]), (2, 65_537, &[1])]
    {
        assert!(dual_of_cyclic(q, n, zeros, false).is_err(), "{q} {n} {zeros:?}");
    }
    assert!(bch(2, 7, 0, false).is_err() && bch(2, 7, 7, false).is_err());
}
