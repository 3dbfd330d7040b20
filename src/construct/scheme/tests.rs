use super::by_definition::is_scheme;
use super::*;
use crate::algebra::{factorise, prime_power, prime_powers};
use crate::construct::ConstructError;
use crate::construct::hadamard::{paley_one, sylvester};
use crate::construct::testing::has_strength_two;

fn check(d: &Scheme, shape: (usize, usize, u16)) {
    assert_eq!((d.rows(), d.columns(), d.order()), shape);
    assert!(is_scheme(d), "D{shape:?}");
    assert!(d.is_difference_scheme());
    let n = d.normalised();
    assert!(n.is_difference_scheme() && n.has_zero_column());
    assert!((0..n.rows()).all(|i| n.entry(i, 0) == 0) && (0..n.columns()).all(|j| n.entry(0, j) == 0));
    assert_eq!(n.normalised(), n);
    if d.rows() == d.columns() {
        assert!(is_scheme(&d.transposed().unwrap()));
    } else {
        assert!(d.transposed().is_err());
    }
    if d.rows() * d.columns() <= 400 {
        check_arrays(d);
    }
}

fn check_arrays(d: &Scheme) {
    let s = usize::from(d.order());
    let a = developed(d).unwrap();
    assert_eq!((a.runs(), a.factors()), (d.rows() * s, d.columns()));
    assert!(a.levels().iter().all(|&l| l == d.order()));
    assert!(has_strength_two(&a));
    assert_eq!((0..d.columns()).map(|j| d.entry(0, j)).collect::<Vec<_>>(), a.row(0));
    if d.rows() > 1 {
        let wide = developed_with_rows(d).unwrap();
        assert_eq!(wide.factors(), d.columns() + 1);
        assert_eq!(usize::from(wide.levels()[d.columns()]), d.rows());
        assert!(has_strength_two(&wide));
        assert_eq!(wide.select(&(0..d.columns()).collect::<Vec<_>>()).unwrap(), a);
    }
}

#[test]
fn field_tables() {
    for q in prime_powers(2, 64) {
        let (p, a) = prime_power(q).unwrap();
        for b in 1..=a {
            let d = field_table(p as u16, a, b).unwrap();
            check(&d, (q as usize, q as usize, p.pow(b) as u16));
            assert_eq!(d, d.normalised());
        }
        assert!(field_table(p as u16, a, 0).is_err() && field_table(p as u16, a, a + 1).is_err());
    }
    for (p, a) in [(0, 1), (1, 1), (4, 1), (4, 2), (6, 1), (2, 16), (3, 40), (u16::MAX, 2)] {
        assert!(field_table(p, a, 1).is_err(), "{p} {a}");
    }
}

#[test]
fn masuyama_for_every_small_field() {
    for q in prime_powers(2, 32) {
        let d = masuyama(q).unwrap();
        check(&d, (2 * q as usize, 2 * q as usize, q as u16));
        assert_eq!(d, d.normalised());
    }
    for q in [0, 1, 6, 32_768, 65_536] {
        assert!(masuyama(q).is_err());
    }
}

#[test]
fn hadamard_matrices() {
    for h in [sylvester(0), sylvester(1), sylvester(3), paley_one(11), paley_one(27)] {
        let h = h.unwrap();
        check(&from_hadamard(&h).unwrap(), (h.order(), h.order(), 2));
    }
}

#[test]
fn kronecker_sums() {
    let over_three = [
        field_table(3, 1, 1).unwrap(),
        masuyama(3).unwrap(),
        field_table(3, 2, 1).unwrap(),
        zero_column(5, 3).unwrap(),
    ];
    for a in &over_three {
        for b in &over_three {
            let shape = (a.rows() * b.rows(), a.columns() * b.columns(), 3);
            check(&kronecker_sum(a, b).unwrap(), shape);
        }
    }
    assert!(kronecker_sum(&over_three[0], &field_table(2, 1, 1).unwrap()).is_err());
}

#[test]
fn images_onto_every_quotient() {
    let d = direct_sum(&field_table(2, 2, 2).unwrap(), &masuyama(3).unwrap()).unwrap();
    for (d, s) in [(d, 12u16), (field_table(2, 4, 4).unwrap(), 16), (masuyama(9).unwrap(), 9)] {
        for t in 0..=s + 1 {
            if t >= 2 && s.is_multiple_of(t) {
                check(&image(&d, t).unwrap(), (d.rows(), d.columns(), t));
            } else {
                assert!(image(&d, t).is_err(), "{s} {t}");
            }
        }
        assert_eq!(image(&d, s).unwrap(), d);
    }
}

#[test]
fn direct_sums() {
    let parts = [
        field_table(2, 1, 1).unwrap(),
        field_table(2, 2, 2).unwrap(),
        masuyama(3).unwrap(),
        field_table(5, 1, 1).unwrap(),
        zero_column(2, 3).unwrap(),
    ];
    for a in &parts {
        for b in &parts {
            let d = direct_sum(a, b).unwrap();
            check(&d, (a.rows() * b.rows(), a.columns().min(b.columns()), a.order() * b.order()));
            let primes: Vec<u64> = factorise(u64::from(d.order()))
                .into_iter()
                .flat_map(|(p, e)| std::iter::repeat_n(p, e as usize))
                .collect();
            assert!(d.group().factors().iter().map(|&f| u64::from(f)).eq(primes));
        }
    }
    let wide = zero_column(1, 300).unwrap();
    assert!(direct_sum(&wide, &wide).is_err());
}

#[test]
fn zero_columns_of_any_shape() {
    for r in 1..6 {
        for s in 2..6 {
            check(&zero_column(r, s).unwrap(), (r, 1, s));
        }
    }
    assert!(zero_column(0, 2).is_err() && zero_column(1, 1).is_err() && zero_column(1, 0).is_err());
    assert!(matches!(
        developed_with_rows(&zero_column(1, 3).unwrap()),
        Err(ConstructError::Condition { .. })
    ));
    assert!(matches!(
        developed_with_rows(&zero_column(65_536, 2).unwrap()),
        Err(ConstructError::Condition { .. })
    ));
}

#[test]
fn bose_bush_arrays_for_small_fields() {
    for (lambda, s) in [
        (1, 2),
        (2, 2),
        (4, 2),
        (8, 2),
        (1, 3),
        (3, 3),
        (9, 3),
        (1, 4),
        (2, 4),
        (4, 4),
        (1, 5),
        (5, 5),
        (2, 8),
        (3, 9),
        (1, 16),
    ] {
        let a = bose_bush(lambda, s).unwrap();
        let (l, t) = (usize::from(lambda), usize::from(s));
        assert_eq!((a.runs(), a.factors()), (l * t * t, l * t + 1));
        assert!(a.levels().iter().all(|&x| x == s));
        assert!(has_strength_two(&a), "{lambda} {s}");
    }
    for (lambda, s) in [(0, 2), (1, 1), (1, 0), (2, 3), (3, 2), (1, 6), (6, 6), (256, 256), (6, 2)] {
        assert!(bose_bush(lambda, s).is_err(), "{lambda} {s}");
    }
}

#[test]
fn starters_over_other_groups() {
    // Z_n written over the canonical group: two columns, every squarefree n.
    for n in 2..40u16 {
        let columns = [vec![0; n as usize], (0..n).collect()];
        let squarefree = factorise(u64::from(n)).iter().all(|&(_, e)| e == 1);
        match from_starter(&[n], &columns) {
            Ok(d) => {
                assert!(squarefree);
                check(&d, (n as usize, 2, n));
            }
            Err(e) => assert!(!squarefree && e.to_string().contains("squarefree")),
        }
    }
    // The conversion is a homomorphism from Z6 × Z2 onto 12 canonical elements.
    let source = crate::algebra::AbelianGroup::new(&[6, 2]).unwrap();
    let all: Vec<u16> = (0..12).collect();
    let d = from_starter(&[6, 2], &[all]).unwrap();
    for a in 0..12 {
        for b in 0..12 {
            let sum = source.add(a, b) as usize;
            assert_eq!(d.group().add(d.entry(a as usize, 0), d.entry(b as usize, 0)), d.entry(sum, 0));
        }
    }
}

#[test]
fn checked_doors_refuse_what_breaks_a_rule() {
    let reason =
        |factors: &[u16], columns: &[Vec<u16>]| from_starter(factors, columns).unwrap_err().to_string();
    assert!(reason(&[4], &[vec![0]]).contains("4 is not"));
    assert!(reason(&[], &[vec![0]]).contains("no group"));
    assert!(reason(&[3], &[]).contains("at least one row"));
    assert!(reason(&[3], &[vec![]]).contains("at least one row"));
    assert!(reason(&[3], &[vec![0, 3]]).contains("row 1, column 0 is 3"));
    assert!(reason(&[3], &[vec![0, 0], vec![0]]).contains("column 1 has 1"));
    assert!(reason(&[3], &[vec![0, 0], vec![0, 1]]).contains("columns 0 and 1"));
    assert!(reason(&[3], &[vec![0, 0, 0], vec![0, 1, 1]]).contains("columns 0 and 1"));
    assert!(Scheme::new(3, &[[0, 0, 3]]).unwrap_err().to_string().contains("row 2, column 0 is 3"));
    assert!(Scheme::new(1, &[[0]]).is_err());
    let d = masuyama(3).unwrap();
    assert!(d.select(&[]).is_err() && d.select(&[1, 2, 1]).is_err());
    check(&d.select(&[5, 0, 3]).unwrap(), (6, 3, 3));
    // Every change of one cell is seen.
    let columns: Vec<Vec<u16>> = (0..6).map(|j| d.column(j).to_vec()).collect();
    for j in 0..6 {
        for i in 0..6 {
            let mut changed = columns.clone();
            changed[j][i] = (changed[j][i] + 1) % 3;
            assert!(Scheme::new(3, &changed).is_err());
        }
    }
    assert_eq!(Scheme::new(3, &columns).unwrap(), d);
}

#[test]
fn dawson_and_de_launey_for_every_field_admitted() {
    for q in prime_powers(2, 33) {
        match dawson_de_launey(q) {
            Ok(d) => {
                let shape = (4 * q as usize, 4 * q as usize, q as u16);
                assert_eq!((d.rows(), d.columns(), d.order()), shape);
                assert!(d.is_difference_scheme() && d == d.normalised());
                if q <= 9 {
                    check(&d, shape);
                }
            }
            Err(_) => assert_eq!(q, 3),
        }
    }
    for q in [0, 1, 6, 37, 16_384, 65_521] {
        assert!(dawson_de_launey(q).is_err(), "{q}");
    }
}

/// All 2 × 2 squares of forms over GF(3) with α_u1 = 0 and γ_00 = γ_10 = γ_01 = 1, β_u1 = 0 for u = 0:
/// accepted exactly when the table of values is a difference scheme.
#[test]
fn quadratic_forms_accept_what_is_a_scheme() {
    let value = |f: [u16; 3], x: u16, y: u16| (f[0] * x * x + f[1] * x * y + f[2] * y * y) % 3;
    let mut accepted = 0;
    for code in 0..3u16.pow(6) {
        let digit = |k: u32| code / 3u16.pow(k) % 3;
        let forms = [
            [[digit(0), 1, digit(1)], [0, 1, 0]],
            [[digit(2), 1, digit(3)], [0, 1 + digit(4) % 2, digit(5)]],
        ];
        let columns: Vec<Vec<u16>> = (0..6u16)
            .map(|j| {
                (0..6u16)
                    .map(|i| value(forms[usize::from(i / 3)][usize::from(j / 3)], i % 3, j % 3))
                    .collect()
            })
            .collect();
        let result = quadratic_forms(3, &forms);
        assert_eq!(result.is_ok(), Scheme::new(3, &columns).is_ok(), "{forms:?}");
        accepted += usize::from(result.is_ok());
    }
    assert!(accepted > 0);
}

#[test]
fn quadratic_forms_refuse_what_breaks_a_rule() {
    let good = [[[1, 1, 2], [0, 1, 0]], [[2, 1, 0], [0, 2, 2]]];
    let reason = |q, forms: &[[[u16; 3]; 2]]| quadratic_forms(q, forms).unwrap_err().to_string();
    assert!(quadratic_forms(3, &good).is_ok());
    assert!(reason(4, &good).contains("odd"));
    assert!(reason(6, &good).contains("no field"));
    assert!(reason(3, &good[..1]).contains("square"));
    assert!(reason(3, &[]).contains("square"));
    assert!(reason(3, &[good[0], [[2, 0, 0], [0, 2, 2]]]).contains("form (1, 0)"));
    assert!(reason(3, &[good[0], [[2, 1, 3], [0, 2, 2]]]).contains("form (1, 0)"));
    assert!(reason(3, &[good[0], [[0, 1, 0], [0, 2, 2]]]).contains("columns 0 and 1"));
    assert!(reason(3, &[good[0], good[0]]).contains("columns 0 and 1"));
    check(&quadratic_forms(5, &[[[3, 2, 4]]]).unwrap(), (5, 5, 5));
}
