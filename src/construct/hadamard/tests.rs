use sha2::{Digest, Sha256};

use super::*;
use crate::algebra::prime_powers;
use crate::array::Array;
use crate::construct::testing::has_strength_two;

/// H·Hᵀ = nI by plain multiplication of the entries.
fn is_hadamard_by_definition(h: &Hadamard) -> bool {
    let n = h.order();
    (0..n).all(|i| {
        (0..n).all(|k| {
            let product: i64 = (0..n).map(|j| i64::from(h.entry(i, j)) * i64::from(h.entry(k, j))).sum();
            product == if i == k { n as i64 } else { 0 }
        })
    })
}

fn check(h: &Hadamard, order: usize) {
    assert_eq!(h.order(), order);
    assert!(is_hadamard_by_definition(h), "order {order}");
    assert!(h.is_hadamard() && h.transposed().is_hadamard());
    let n = h.normalised();
    assert!(n.is_hadamard());
    assert!((0..order).all(|i| n.entry(i, 0) == 1 && n.entry(0, i) == 1));
    if (2..=60).contains(&order) {
        let a = h.to_array().unwrap();
        assert_eq!((a.runs(), a.factors()), (order, order - 1));
        assert!(a.row(0).iter().all(|&e| e == 0));
        assert!(has_strength_two(&a));
    }
}

#[test]
fn sylvester_up_to_256() {
    for k in 0..=8 {
        check(&sylvester(k).unwrap(), 1 << k);
    }
    assert!(sylvester(17).is_err());
    assert!(sylvester(64).is_err());
}

#[test]
fn both_of_paley_for_every_small_field() {
    for q in prime_powers(2, 110) {
        match q % 4 {
            3 => check(&paley_one(q).unwrap(), q as usize + 1),
            1 => check(&paley_two(q).unwrap(), 2 * (q as usize + 1)),
            _ => assert!(paley_one(q).is_err() && paley_two(q).is_err()),
        }
        assert!(paley_one(q).is_ok() != (q % 4 != 3));
        assert!(paley_two(q).is_ok() != (q % 4 != 1));
    }
    for q in [0, 1, 15, 21, 65_536, u32::MAX] {
        assert!(paley_one(q).is_err() && paley_two(q).is_err());
    }
    // The order 2(q + 1) is refused before anything is allocated.
    assert!(matches!(paley_two(65_521), Err(ConstructError::Condition { .. })));
}

#[test]
fn paley_one_is_skew_and_paley_two_symmetric() {
    let (one, two) = (paley_one(23).unwrap(), paley_two(13).unwrap());
    for i in 0..24 {
        for j in 0..24 {
            assert_eq!(one.entry(i, j) + one.entry(j, i), if i == j { 2 } else { 0 });
        }
    }
    assert_eq!(two, two.transposed());
}

#[test]
fn kronecker_multiplies_orders() {
    let parts = [sylvester(0).unwrap(), sylvester(1).unwrap(), sylvester(2).unwrap(), paley_one(11).unwrap()];
    for a in &parts {
        for b in &parts {
            check(&kronecker(a, b).unwrap(), a.order() * b.order());
        }
    }
    assert_eq!(kronecker(&sylvester(2).unwrap(), &sylvester(3).unwrap()).unwrap(), sylvester(5).unwrap());
    let large = sylvester(9).unwrap();
    assert!(kronecker(&large, &large).is_err());
}

#[test]
fn miyamoto_from_smaller_matrices() {
    let inner = |n: usize| match n {
        4 | 8 | 16 => sylvester(n.trailing_zeros()).unwrap(),
        36 => paley_two(17).unwrap(),
        40 => kronecker(&sylvester(1).unwrap(), &paley_one(19).unwrap()).unwrap(),
        _ => paley_one(n as u32 - 1).unwrap(),
    };
    for q in [5u32, 9, 13, 17, 25, 29, 37, 41, 49] {
        let k = inner(q as usize - 1);
        check(&miyamoto(q, &k).unwrap(), 4 * q as usize);
        // A matrix with other signs serves as well.
        check(&miyamoto(q, &k.normalised().transposed()).unwrap(), 4 * q as usize);
    }
    assert!(miyamoto(13, &sylvester(2).unwrap()).is_err());
    assert!(miyamoto(7, &sylvester(1).unwrap()).is_err());
    assert!(miyamoto(21, &paley_one(19).unwrap()).is_err());
}

/// Every set of four circulant rows of order 3, against the definition.
#[test]
fn four_circulants_of_order_three_exhaustively() {
    let rows: Vec<[i8; 3]> =
        (0..8).map(|b| [0, 1, 2].map(|i| if b >> i & 1 == 1 { -1i8 } else { 1 })).collect();
    let mut accepted = 0;
    for a in &rows {
        for b in &rows {
            for c in &rows {
                for d in &rows {
                    let sums: [i32; 4] = [a, b, c, d].map(|r| r.iter().map(|&e| i32::from(e)).sum());
                    match goethals_seidel([a, b, c, d]) {
                        Ok(h) => {
                            accepted += 1;
                            check(&h, 12);
                        }
                        // A·Aᵀ summed over all entries: the squares of the row sums add to 4m.
                        Err(_) => assert_ne!(sums.iter().map(|s| s * s).sum::<i32>(), 12),
                    }
                }
            }
        }
    }
    // One row ±(1, 1, 1), the others with row sum ±1: 4 places, 2 and 6³ choices.
    assert_eq!(accepted, 4 * 2 * 216);
}

#[test]
fn four_circulants_refuse_what_breaks_a_rule() {
    let reason = |rows: [&[i8]; 4]| goethals_seidel(rows).unwrap_err().to_string();
    assert!(reason([&[], &[], &[], &[]]).contains("one length"));
    assert!(reason([&[1, 1], &[1], &[1], &[1]]).contains("one length"));
    assert!(reason([&[1], &[1], &[0], &[1]]).contains("entry 0 of C is 0"));
    assert!(reason([&[1, 1, 1]; 4]).contains("to 12 at shift 1"));
}

/// Every set of Turyn-type sequences with n = 2 and n = 4 (n = 3 has none), against the
/// definition.
#[test]
fn turyn_type_exhaustively() {
    let signs = |bits: u32, n: u32| -> Vec<i8> { (0..n).map(|i| 1 - 2 * (bits >> i & 1) as i8).collect() };
    for n in 1..=4u32 {
        let mut found = 0;
        for bits in 0..1u32 << (4 * n - 1) {
            let part = |k: u32| signs(bits >> (k * n), n);
            let (x, y, z, w) = (part(0), part(1), part(2), signs(bits >> (3 * n), n - 1));
            if let Ok(h) = turyn_type(&x, &y, &z, &w) {
                found += 1;
                if found <= 20 {
                    check(&h, 4 * (3 * n as usize - 1));
                }
            }
        }
        assert_eq!(found > 0, n != 3, "n = {n}");
    }
}

#[test]
fn turyn_type_refuses_what_breaks_a_rule() {
    let reason = |x: &[i8], y: &[i8], z: &[i8], w: &[i8]| turyn_type(x, y, z, w).unwrap_err().to_string();
    assert!(reason(&[], &[], &[], &[]).contains("one length"));
    assert!(reason(&[1, 1], &[1, 1], &[1, -1], &[1, 1]).contains("not 2, 2, 2, 2"));
    assert!(reason(&[1, 1], &[1, 1], &[1, 2], &[1]).contains("entry 1 of Z is 2"));
    assert!(reason(&[1, 1], &[1, 1], &[1, 1], &[1]).contains("4 at shift 1"));
}

#[test]
fn reads_rows_and_refuses_what_is_none() {
    let h = paley_one(11).unwrap();
    let mut rows: Vec<Vec<i8>> = (0..12).map(|i| (0..12).map(|j| h.entry(i, j)).collect()).collect();
    assert_eq!(Hadamard::from_rows(&rows).unwrap(), h);
    let reason = |rows: &[Vec<i8>]| Hadamard::from_rows(rows).unwrap_err().to_string();
    assert!(reason(&[]).contains("order is from 1"));
    assert!(reason(&rows[..11]).contains("row 0 of 11 has 12 entries"));
    for i in 0..12 {
        for j in 0..12 {
            rows[i][j] *= -1;
            let first = if i == 0 { "rows 0 and 1 ".to_owned() } else { format!("rows 0 and {i} ") };
            assert!(reason(&rows).contains(&first));
            rows[i][j] *= -1;
        }
    }
    rows[3][4] = 0;
    assert!(reason(&rows).contains("entry 4 of row 3 is 0"));
    assert!(Hadamard::from_rows(&[[1i8]]).unwrap().to_array().is_err());
}

/// Generating rows of Plackett & Burman 1946 (Biometrika 33, 305–325), written down from memory:
/// developed cyclically, a row of minus added.
#[test]
fn plackett_and_burman_rows() {
    for (runs, row) in [(12, "++-+++---+-"), (20, "++--++++-+-+----++-"), (24, "+++++-+-++--++--+-+----")] {
        let signs: Vec<i8> = row.bytes().map(|b| if b == b'+' { 1 } else { -1 }).collect();
        let k = signs.len();
        assert_eq!(k + 1, runs);
        let mut rows: Vec<Vec<u16>> =
            (0..k).map(|i| (0..k).map(|j| u16::from(signs[(j + k - i) % k] < 0)).collect()).collect();
        rows.push(vec![1; k]);
        let theirs = Array::from_rows(vec![2; k], &rows).unwrap();
        assert!(has_strength_two(&theirs), "{runs}");
        // With a column of + in front it is a Hadamard matrix, of the order ours has.
        let bordered: Vec<Vec<i8>> = rows
            .iter()
            .map(|r| std::iter::once(1).chain(r.iter().map(|&e| 1 - 2 * e as i8)).collect())
            .collect();
        assert_eq!(
            Hadamard::from_rows(&bordered).unwrap().order(),
            paley_one(runs as u32 - 1).unwrap().order()
        );
    }
}

/// Outside check: `scipy.linalg.hadamard` of SciPy is Sylvester's matrix, sign by sign; the fixture
/// names the command that made it.
#[test]
fn sylvester_equals_scipy() {
    let fixture = include_str!(concat!(env!("CARGO_MANIFEST_DIR"), "/tests/fixtures/scipy_sylvester.txt"));
    let mut compared = 0;
    for line in fixture.lines().filter(|l| !l.starts_with('#')) {
        let (order, digest) = line.split_once(' ').unwrap();
        let order: usize = order.parse().unwrap();
        let h = sylvester(order.trailing_zeros()).unwrap();
        let text: String = (0..order)
            .flat_map(|i| {
                let h = &h;
                (0..order).map(move |j| if h.entry(i, j) > 0 { '+' } else { '-' }).chain(['\n'])
            })
            .collect();
        let ours: String = Sha256::digest(text).iter().map(|byte| format!("{byte:02x}")).collect();
        assert_eq!(ours, digest, "order {order}");
        compared += 1;
    }
    assert_eq!(compared, 9);
}

#[test]
fn cooper_wallis_multiplies_and_refuses() {
    let williamson: [[i8; 3]; 4] = [[1, 1, 1], [1, -1, -1], [1, -1, -1], [1, -1, -1]];
    let w = williamson.each_ref().map(|r| r.as_slice());
    let single: [&[i8]; 4] = [&[1], &[0], &[0], &[0]];
    let mut made = 0;
    // All T-matrices of order 2, and those of order 5 in which each place is any of eight symbols.
    for length in [1usize, 2, 5] {
        for code in 0..8usize.pow(length as u32) {
            let symbol = |i: usize| code / 8usize.pow(i as u32) % 8;
            let rows: [Vec<i8>; 4] = [0, 1, 2, 3].map(|r| {
                (0..length)
                    .map(|i| if symbol(i) / 2 == r { 1 - 2 * (symbol(i) % 2) as i8 } else { 0 })
                    .collect()
            });
            if let Ok(four) = cooper_wallis(rows.each_ref().map(Vec::as_slice), w) {
                made += 1;
                if made <= 60 || code % 64 == 0 {
                    check(&goethals_seidel(four.each_ref().map(Vec::as_slice)).unwrap(), 12 * length);
                }
            }
        }
    }
    assert!(made > 60);
    let reason = |t, w| cooper_wallis(t, w).unwrap_err().to_string();
    assert!(reason([&[], &[], &[], &[]], w).contains("coprime"));
    assert!(reason([&[1, 0, 0], &[0, 1, 0], &[0, 0, 1], &[0, 0, 0]], w).contains("coprime"));
    assert!(reason([&[1], &[1], &[0], &[0]], w).contains("exactly one"));
    assert!(reason([&[2], &[0], &[0], &[0]], w).contains("exactly one"));
    assert!(reason([&[1, 1], &[0, 0], &[0, 0], &[0, 0]], w).contains("T-matrices sum to 0 at shift 1"));
    assert!(reason(single, [&[1, 1, -1], w[1], w[2], w[3]]).contains("symmetric"));
    assert!(reason(single, [&[1, 1, 1]; 4]).contains("Williamson's matrices sum to 0"));
    assert!(reason(single, [&[1, 0, 0], w[1], w[2], w[3]]).contains("entry 1 of A is 0"));
}

/// The Hadamard matrix of T-sequences alone is the one of `turyn_type`'s path.
#[test]
fn t_sequences_fill_each_place_once() {
    let t = t_sequences(&[1, 1], &[1, 1], &[1, -1], &[1]).unwrap();
    assert!((0..5).all(|i| t.iter().filter(|r| r[i] != 0).count() == 1));
    assert!(t_sequences(&[1, 1], &[1, 1], &[1, 1], &[1]).is_err());
    let one: [&[i8]; 4] = [&[1]; 4];
    let rows = cooper_wallis(t.each_ref().map(Vec::as_slice), one).unwrap();
    let h = goethals_seidel(rows.each_ref().map(Vec::as_slice)).unwrap();
    check(&h, 20);
}
