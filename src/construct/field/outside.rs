//! Checks against facts published outside the project: caps and codes.
//!
//! All values are written down from memory of the sources named beside them.

use std::collections::HashSet;

use super::super::testing::has_strength;
use super::*;
use crate::algebra::{null_space, projective_points, rank, span};

/// The largest number of points of PG(n−1, q) any three of which are independent, by exhaustion.
fn largest_cap(q: u32, n: usize) -> usize {
    let field = Field::new(q).unwrap();
    let all: Vec<_> = projective_points(&field, n).collect();
    fn extend(field: &Field, cap: &mut Vec<Vec<u16>>, rest: &[Vec<u16>], best: &mut usize) {
        *best = (*best).max(cap.len());
        for (i, p) in rest.iter().enumerate() {
            if cap.len() + rest.len() - i <= *best {
                return;
            }
            let lines = cap.iter().enumerate().flat_map(|(j, a)| cap[..j].iter().map(move |b| (a, b)));
            if lines.into_iter().all(|(a, b)| rank(field, &[a.clone(), b.clone(), p.clone()]) == 3) {
                cap.push(p.clone());
                extend(field, cap, &rest[i + 1..], best);
                cap.pop();
            }
        }
    }
    let mut best = 0;
    extend(&field, &mut Vec::new(), &all, &mut best);
    best
}

/// Bush 1952 (Bose 1947): at strength 3 and index 1 there are at most q + 1 factors for odd q and
/// q + 2 for even q; ours have as many, and no linear array has more.
#[test]
fn bush_arrays_of_strength_three_are_as_large_as_can_be() {
    for (q, published) in [(2, 4), (3, 4), (4, 6), (5, 6)] {
        assert_eq!(largest_cap(q, 3), published, "q={q}");
        assert_eq!(bush(q, 3).unwrap().factors(), published, "q={q}");
    }
}

/// Bose 1947, Qvist 1952: an ovoid of PG(3, q), q > 2, is complete, and q² + 1 is the maximum. Here:
/// no point can be added. For q = 2 the maximum is 8, the affine points.
#[test]
fn ovoids_are_complete() {
    for q in [3, 4, 5] {
        let field = Field::new(q).unwrap();
        let quadric = ovoid::elliptic_quadric(&field);
        let mut on_secants: HashSet<Vec<u16>> = HashSet::new();
        for (i, a) in quadric.iter().enumerate() {
            for b in &quadric[..i] {
                on_secants.extend(span(&field, &[a.clone(), b.clone()]));
            }
        }
        assert!(projective_points(&field, 4).all(|p| on_secants.contains(&p)), "q={q}");
    }
    assert_eq!(largest_cap(2, 4), 8);
    assert_eq!(affine_points(4).unwrap().factors(), 8);
}

/// The columns of a matrix.
fn columns(rows: &[Vec<u16>]) -> Vec<Vec<u16>> {
    (0..rows[0].len()).map(|j| rows.iter().map(|r| r[j]).collect()).collect()
}

/// The k × n generator matrix of the cyclic code with the given generator polynomial, constant term
/// first, with a column added that makes every row sum to zero when `extended`.
fn cyclic(q: u16, n: usize, polynomial: &[u16], extended: bool) -> Vec<Vec<u16>> {
    (0..=n - polynomial.len())
        .map(|shift| {
            let mut row = vec![0; n];
            row[shift..shift + polynomial.len()].copy_from_slice(polynomial);
            if extended {
                row.push((q - row.iter().sum::<u16>() % q) % q);
            }
            row
        })
        .collect()
}

/// The minimum distance by looking at every word.
fn minimum_distance(field: &Field, generator: &[Vec<u16>]) -> usize {
    span(field, generator)
        .iter()
        .map(|word| word.iter().filter(|&&x| x != 0).count())
        .filter(|&weight| weight > 0)
        .min()
        .expect("a code with more than one word")
}

/// Builds the array whose runs are the words of the dual of the code with this generator matrix, and
/// compares its strength with the published distance `d` less one (Delsarte 1973).
fn dual_has_strength(q: u32, generator: &[Vec<u16>], d: usize, counted: usize) {
    let field = Field::new(q).unwrap();
    assert_eq!(minimum_distance(&field, generator), d);
    let n = generator[0].len();
    let checks = null_space(&field, generator, n);
    let chosen = columns(&checks);
    let array = points(q, &chosen).unwrap();
    assert_eq!((array.runs(), array.factors()), ((q as usize).pow(checks.len() as u32), n));
    assert!(points_strength(q, &chosen, d as u32 - 1).unwrap());
    assert!(!points_strength(q, &chosen, d as u32).unwrap());
    assert!(has_strength(&array, counted.min(d - 1)));
    if counted >= d {
        assert!(!has_strength(&array, d), "no more than the distance allows");
    }
}

/// MacWilliams & Sloane 1977, chapter 20: the binary Golay codes are [23, 12, 7] and [24, 12, 8], the
/// ternary ones [11, 6, 5] and [12, 6, 6]; generator polynomials from memory, confirmed by distance.
#[test]
fn duals_of_golay_codes() {
    let binary = [1, 0, 1, 0, 1, 1, 1, 0, 0, 0, 1, 1];
    dual_has_strength(2, &cyclic(2, 23, &binary, false), 7, 4);
    dual_has_strength(2, &cyclic(2, 23, &binary, true), 8, 4);
    let ternary = [2, 0, 1, 2, 1, 1];
    dual_has_strength(3, &cyclic(3, 11, &ternary, false), 5, 5);
    dual_has_strength(3, &cyclic(3, 11, &ternary, true), 6, 6);
}

#[test]
#[ignore = "346104 sets of seven factors in 4096 runs: about 20 s of one core"]
fn dual_of_the_extended_binary_golay_code_counted_in_full() {
    dual_has_strength(2, &cyclic(2, 23, &[1, 0, 1, 0, 1, 1, 1, 0, 0, 0, 1, 1], true), 8, 8);
}

/// MacWilliams & Sloane 1977, chapter 1: Hamming codes have distance 3 over every field, the extended
/// binary ones 4; their duals are the arrays of Rao and of the affine points.
#[test]
fn duals_of_hamming_codes() {
    for (q, r) in [(2, 3), (2, 4), (3, 2), (3, 3), (4, 2), (5, 2)] {
        let field = Field::new(q).unwrap();
        let checks: Vec<Vec<u16>> = columns(&projective_points(&field, r).collect::<Vec<_>>());
        dual_has_strength(q, &null_space(&field, &checks, checks[0].len()), 3, 3);
        let array = points(q, &columns(&checks)).unwrap();
        assert_eq!(array, rao_hamming(q, r as u32).unwrap());
    }
    dual_has_strength(2, &cyclic(2, 7, &[1, 1, 0, 1], false), 3, 3);
    dual_has_strength(2, &cyclic(2, 7, &[1, 1, 0, 1], true), 4, 4);
}

/// MacWilliams & Sloane 1977, chapter 11: the hexacode [6, 3, 4] over GF(4) is self-dual in the
/// hermitian sense and maximum distance separable; the array of its dual is that of the hyperoval.
#[test]
fn dual_of_the_hexacode() {
    let field = Field::new(4).unwrap();
    let hyperoval: Vec<Vec<u16>> =
        field.elements().map(|x| vec![1, x, field.mul(x, x)]).chain([vec![0, 0, 1], vec![0, 1, 0]]).collect();
    let code = null_space(&field, &columns(&hyperoval), 6);
    dual_has_strength(4, &code, 4, 4);
    assert_eq!(points(4, &hyperoval).unwrap(), bush(4, 3).unwrap());
}
