//! Arrays made by SciPy (committed fixtures whose first line names the command that made them),
//! read into [`Array`] and judged.

use trysquare::array::Array;
use trysquare::verify::{Demand, Verdict, certify};

const HADAMARD: &str = include_str!("fixtures/scipy_hadamard.txt");
const LATIN_HYPERCUBE: &str = include_str!("fixtures/scipy_latin_hypercube.txt");

/// The blocks of a fixture: the number after the heading letter, and the rows of integers.
fn blocks(text: &str, heading: &str) -> Vec<(usize, Vec<Vec<i32>>)> {
    assert!(text.starts_with("# made by: python3 tests/fixtures/make_fields.py"));
    let mut out: Vec<(usize, Vec<Vec<i32>>)> = Vec::new();
    for line in text.lines().skip(1) {
        if let Some(n) = line.strip_prefix(heading) {
            out.push((n.parse().unwrap(), Vec::new()));
        } else {
            let row = line.split(' ').map(|n| n.parse().unwrap()).collect();
            out.last_mut().expect("a heading first").1.push(row);
        }
    }
    out
}

fn array(levels: u16, rows: &[Vec<u16>]) -> Array {
    Array::from_rows(vec![levels; rows[0].len()], rows).unwrap()
}

/// Both engines say yes at strength 2 (1 for a single factor).
fn accepted(a: &Array) -> bool {
    let demand = Demand::strength(a.factors().min(2)).thorough();
    certify(a, &demand).unwrap().verdict == Verdict::Orthogonal
}

#[test]
fn hadamard_matrices_of_scipy_without_the_first_column() {
    let found = blocks(HADAMARD, "n ");
    assert_eq!(found.iter().map(|b| b.0).collect::<Vec<_>>(), [2, 4, 8, 16, 32]);
    for (n, rows) in found {
        assert!(rows.iter().all(|r| r.len() == n && r[0] == 1) && rows.len() == n);
        let symbols: Vec<Vec<u16>> =
            rows.iter().map(|r| r[1..].iter().map(|&x| u16::from(x == -1)).collect()).collect();
        assert!(accepted(&array(2, &symbols)), "order {n}");
    }
}

#[test]
fn strength_two_latin_hypercubes_of_scipy() {
    let found = blocks(LATIN_HYPERCUBE, "p ");
    assert_eq!(found.iter().map(|b| b.0).collect::<Vec<_>>(), [5, 7, 11]);
    for (p, rows) in found {
        let symbols: Vec<Vec<u16>> =
            rows.iter().map(|r| r.iter().map(|&x| u16::try_from(x).unwrap()).collect()).collect();
        let a = array(p as u16, &symbols);
        assert_eq!((a.runs(), a.factors()), (p * p, p + 1));
        assert!(accepted(&a), "p = {p}");

        let mut spoilt = symbols;
        spoilt[3][2] = (spoilt[3][2] + 1) % p as u16;
        assert!(!accepted(&array(p as u16, &spoilt)), "the judges notice one changed cell");
    }
}
