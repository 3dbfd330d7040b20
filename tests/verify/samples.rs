//! Small arrays for the tests, made here from fields, difference schemes and published rows, so
//! that the judges are tested without the constructions they will judge.

use trysquare::algebra::Field;
use trysquare::array::Array;

/// All vectors of GF(q)^n as rows, each column a linear functional.
pub(crate) fn linear(q: u32, n: usize, functionals: &[Vec<u16>]) -> Array {
    let field = Field::new(q).unwrap();
    let runs = (q as usize).pow(n as u32);
    let value = |run: usize, functional: &[u16]| {
        let mut rest = run;
        functional.iter().fold(0, |sum, &c| {
            let v = (rest % q as usize) as u16;
            rest /= q as usize;
            field.add(sum, field.mul(c, v))
        })
    };
    Array::from_fn(runs, vec![q as u16; functionals.len()], |i, j| value(i, &functionals[j])).unwrap()
}

/// The points of PG(n − 1, q), the first non-zero coordinate 1.
pub(crate) fn points(q: u32, n: usize) -> Vec<Vec<u16>> {
    let all = (q as usize).pow(n as u32);
    let vector = |mut i: usize| -> Vec<u16> {
        (0..n)
            .map(|_| {
                let d = (i % q as usize) as u16;
                i /= q as usize;
                d
            })
            .collect()
    };
    (1..all).map(vector).filter(|v| v.iter().find(|&&c| c != 0) == Some(&1)).collect()
}

/// OA(q^n, (q^n − 1)/(q − 1), q, 2), Rao 1947.
pub(crate) fn rao_hamming(q: u32, n: usize) -> Array {
    linear(q, n, &points(q, n))
}

pub(crate) fn full_factorial(levels: &[u16]) -> Array {
    let runs = levels.iter().map(|&s| usize::from(s)).product();
    let weight = |j: usize| levels[j + 1..].iter().map(|&s| usize::from(s)).product::<usize>();
    Array::from_fn(runs, levels.to_vec(), |i, j| (i / weight(j) % usize::from(levels[j])) as u16).unwrap()
}

/// The cyclic design of a row of signs, closed by a run of minus signs.
pub(crate) fn plackett_burman(row: &str) -> Array {
    let signs: Vec<u16> = row.chars().map(|c| u16::from(c == '+')).collect();
    let k = signs.len();
    Array::from_fn(k + 1, vec![2; k], |i, j| if i == k { 0 } else { signs[(j + k - i) % k] }).unwrap()
}

/// Each run twice, the second time with every symbol changed, and a column that tells which.
pub(crate) fn foldover(array: &Array) -> Array {
    let (n, k) = (array.runs(), array.factors());
    let symbol = |i: usize, j: usize| {
        let second = u16::from(i >= n);
        if j == k { second } else { array.get(i % n, j) ^ second }
    };
    Array::from_fn(2 * n, vec![2; k + 1], symbol).unwrap()
}

/// A difference scheme over Z_s as an OA: every row shifted by every group element, and the row's
/// number as one more factor.
pub(crate) fn from_scheme(s: u16, scheme: &str) -> Array {
    let rows: Vec<Vec<u16>> =
        scheme.lines().map(|l| l.split_whitespace().map(|x| x.parse().unwrap()).collect()).collect();
    let (r, c) = (rows.len(), rows[0].len());
    let mut levels = vec![s; c];
    levels.push(r as u16);
    let symbol = |i: usize, j: usize| {
        let (row, shift) = (i / usize::from(s), (i % usize::from(s)) as u16);
        if j == c { row as u16 } else { (rows[row][j] + shift) % s }
    };
    Array::from_fn(r * usize::from(s), levels, symbol).unwrap()
}

/// `array` with column `j` replaced by columns that are functions of it.
pub(crate) fn split(array: &Array, j: usize, parts: &[(u16, &dyn Fn(u16) -> u16)]) -> Array {
    let mut columns = Vec::new();
    for (i, column) in array.columns().enumerate() {
        if i == j {
            columns.extend(parts.iter().map(|(s, f)| (*s, column.iter().map(|&x| f(x)).collect())));
        } else {
            columns.push((array.levels()[i], column.to_vec()));
        }
    }
    Array::from_columns(columns).unwrap()
}

pub(crate) const D_6_6_3: &str =
    "0 0 0 0 0 0\n0 0 1 1 2 2\n0 2 2 1 1 0\n0 1 0 2 1 2\n0 2 1 2 0 1\n0 1 2 0 2 1";

pub(crate) const D_12_12_3: &str = "\
0 0 0 0 0 0 0 0 0 0 0 0
0 0 0 0 1 1 1 1 2 2 2 2
0 1 0 0 2 2 0 2 2 1 1 1
0 0 1 2 0 1 2 2 0 2 1 1
0 1 2 2 0 2 1 1 0 1 2 0
0 0 2 1 2 0 1 2 1 0 2 1
0 2 2 1 1 1 0 2 0 1 0 2
0 2 1 2 1 2 1 0 2 0 0 1
0 2 1 0 2 1 2 0 1 1 2 0
0 2 0 1 0 2 2 1 1 0 1 2
0 1 2 1 1 0 2 0 2 2 1 0
0 1 1 2 2 0 0 1 1 2 0 2";

/// Plackett & Burman, "The design of optimum multifactorial experiments", Biometrika 33 (1946),
/// the rows for 12, 20 and 24 runs; written down from memory.
pub(crate) const PLACKETT_BURMAN: [&str; 3] =
    ["++-+++---+-", "++--++++-+-+----++-", "+++++-+-++--++--+-+----"];

/// 2^1 3^7 in 18 runs.
pub(crate) fn eighteen() -> Array {
    split(&from_scheme(3, D_6_6_3), 6, &[(2, &|x| x % 2), (3, &|x| x / 2)])
}

/// Orthogonal arrays with the strength they have.
pub(crate) fn sample() -> Vec<(&'static str, Array, usize)> {
    let eight = rao_hamming(2, 3);
    let four = |a: u16, b: u16| 2 * a + b;
    let merged: Vec<u16> = eight.column(0).iter().zip(eight.column(1)).map(|(&a, &b)| four(a, b)).collect();
    // Columns 0, 1, 2 of the points are a line: 001, 010, 011 read as integers.
    let mixed = Array::from_columns(
        std::iter::once((4, merged)).chain((3..7).map(|j| (2, eight.column(j).to_vec()))).collect(),
    );
    vec![
        ("2^3 full", full_factorial(&[2, 2, 2]), 3),
        ("3·2·2 full", full_factorial(&[3, 2, 2]), 3),
        ("12·10 full", full_factorial(&[12, 10]), 2),
        ("8: 2^7", eight.clone(), 2),
        ("8: 4·2^4", mixed.unwrap(), 2),
        ("9: 3^4", rao_hamming(3, 2), 2),
        ("12: 2^11", plackett_burman(PLACKETT_BURMAN[0]), 2),
        ("16: 4^5", rao_hamming(4, 2), 2),
        ("16: 2^8", foldover(&eight), 3),
        ("18: 2·3^7", eighteen(), 2),
        ("18: 3^6·6", from_scheme(3, D_6_6_3), 2),
        ("24: 2^12", foldover(&plackett_burman(PLACKETT_BURMAN[0])), 3),
        ("27: 3^13", rao_hamming(3, 3), 2),
        ("36: 3^12·12", from_scheme(3, D_12_12_3), 2),
        ("64: 8^9", rao_hamming(8, 2), 2),
        ("64: 4^21", rao_hamming(4, 3), 2),
    ]
}

/// `array` with one cell changed.
pub(crate) fn with_cell(array: &Array, run: usize, factor: usize, symbol: u16) -> Array {
    let change = |i, j| if (i, j) == (run, factor) { symbol } else { array.get(i, j) };
    Array::from_fn(array.runs(), array.levels().to_vec(), change).unwrap()
}
