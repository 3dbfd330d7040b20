//! The columns of a model, one by one: whether each is independent of those before, and the determinant.

/// Primes below 2^57, …, 2^62; a unit test checks them.
const PRIMES: [u64; 6] =
    [(1 << 62) - 57, (1 << 61) - 1, (1 << 60) - 93, (1 << 59) - 55, (1 << 58) - 27, (1 << 57) - 13];
/// A squared residual of a column of mean square about 1 that rounding cannot have made.
const CLEAR: f64 = 1e-6;

/// A column of a model: contrasts as floats, and marks (0, 1) that span the same with those before.
#[derive(Clone)]
pub(super) struct Column {
    pub(super) values: Vec<f64>,
    pub(super) marks: Vec<bool>,
}

impl Column {
    pub(super) fn times(&self, other: &Self) -> Self {
        Self {
            values: self.values.iter().zip(&other.values).map(|(a, b)| a * b).collect(),
            marks: self.marks.iter().zip(&other.marks).map(|(a, b)| a & b).collect(),
        }
    }
}

/// Columns made orthonormal, and the logarithm of det(X'X/N).
///
/// A column is taken as dependent only on proof: when it is so modulo primes whose product exceeds
/// every minor of so many columns of noughts and ones, (r+1)^((r+1)/2)/2^r (Hadamard). That
/// elimination is made as far as somebody asks.
pub(super) struct State {
    basis: Vec<Vec<f64>>,
    logarithms: Vec<f64>,
    marks: Vec<Vec<bool>>,
    /// For each prime, the reduced columns with the place of a one, of the first `marks`.
    reduced: Vec<Vec<(usize, Vec<u64>)>>,
}

impl State {
    /// Room for `most` columns of a model.
    pub(super) fn new(most: usize) -> Self {
        let r = most as f64;
        let bits = (r + 1.0) / 2.0 * (r + 1.0).log2() - r;
        let primes = (bits.max(0.0) / 56.0) as usize + 1;
        Self {
            basis: Vec::new(),
            logarithms: vec![0.0],
            marks: Vec::new(),
            reduced: vec![Vec::new(); primes.min(PRIMES.len())],
        }
    }

    pub(super) fn len(&self) -> usize {
        self.basis.len()
    }

    pub(super) fn logarithm(&self) -> f64 {
        self.logarithms.last().copied().unwrap_or(0.0)
    }

    pub(super) fn truncate(&mut self, columns: usize) {
        self.basis.truncate(columns);
        self.marks.truncate(columns);
        self.logarithms.truncate(columns + 1);
        self.reduced.iter_mut().for_each(|r| r.truncate(columns));
    }

    /// Adds a column; false, and nothing is added, when it is dependent.
    pub(super) fn push(&mut self, column: &Column) -> bool {
        let runs = column.values.len() as f64;
        let mut rest = column.values.clone();
        // Twice is enough.
        for _ in 0..2 {
            for b in &self.basis {
                let along = dot(b, &rest);
                rest.iter_mut().zip(b).for_each(|(v, w)| *v -= along * w);
            }
        }
        let square = dot(&rest, &rest);
        if square < CLEAR * runs && !self.independent(&column.marks) {
            return false;
        }
        let norm = square.max(f64::MIN_POSITIVE).sqrt();
        rest.iter_mut().for_each(|v| *v /= norm);
        self.basis.push(rest);
        self.marks.push(column.marks.clone());
        self.logarithms.push(self.logarithm() + 2.0 * norm.ln() - runs.ln());
        true
    }

    fn independent(&mut self, marks: &[bool]) -> bool {
        let known = &self.marks;
        self.reduced.iter_mut().zip(PRIMES).any(|(reduced, p)| {
            while reduced.len() < known.len() {
                // What is independent may be dependent modulo one prime: no place then.
                let next = reduce(reduced, &known[reduced.len()], p).unwrap_or((usize::MAX, Vec::new()));
                reduced.push(next);
            }
            reduce(reduced, marks, p).is_some()
        })
    }
}

/// What is left of a column modulo p, scaled to a one at its first place; `None` for nothing.
fn reduce(reduced: &[(usize, Vec<u64>)], marks: &[bool], p: u64) -> Option<(usize, Vec<u64>)> {
    let mut rest: Vec<u64> = marks.iter().map(|&m| u64::from(m)).collect();
    for (place, column) in reduced.iter().filter(|(place, _)| *place != usize::MAX) {
        let factor = rest[*place];
        if factor != 0 {
            for (v, &c) in rest.iter_mut().zip(column) {
                *v = (*v + p - multiply(factor, c, p)) % p;
            }
        }
    }
    let place = rest.iter().position(|&v| v != 0)?;
    let inverse = power(rest[place], p - 2, p);
    rest.iter_mut().for_each(|v| *v = multiply(*v, inverse, p));
    Some((place, rest))
}

fn multiply(a: u64, b: u64, p: u64) -> u64 {
    (u128::from(a) * u128::from(b) % u128::from(p)) as u64
}

fn power(mut base: u64, mut exponent: u64, p: u64) -> u64 {
    let mut product = 1;
    while exponent > 0 {
        if exponent & 1 == 1 {
            product = multiply(product, base, p);
        }
        base = multiply(base, base, p);
        exponent >>= 1;
    }
    product
}

pub(super) fn dot(a: &[f64], b: &[f64]) -> f64 {
    a.iter().zip(b).map(|(x, y)| x * y).sum()
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Miller–Rabin with the first twelve primes decides below 2^64 (Sorenson & Webster 2015).
    #[test]
    fn the_primes_are_primes() {
        for p in PRIMES {
            let odd = (p - 1) >> (p - 1).trailing_zeros();
            for a in [2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37] {
                let mut x = power(a, odd, p);
                let mut passed = x == 1;
                for _ in 0..(p - 1).trailing_zeros() {
                    passed |= x == p - 1;
                    x = multiply(x, x, p);
                }
                assert!(passed, "{p} to base {a}");
            }
            assert!(p > 1 << 56);
        }
    }

    #[test]
    fn dependent_columns_are_refused_and_nothing_is_added() {
        let column = |marks: [u8; 4]| Column {
            values: marks.iter().map(|&m| f64::from(m)).collect(),
            marks: marks.iter().map(|&m| m == 1).collect(),
        };
        let mut state = State::new(4);
        assert!(state.push(&column([1, 1, 1, 1])) && state.push(&column([1, 1, 0, 0])));
        assert!(!state.push(&column([0, 0, 1, 1])));
        assert_eq!(state.len(), 2);
        assert!(state.push(&column([1, 0, 1, 0])));
        // det X'X = 4·(2 − 1)·(1) for the marks: 4, over 4³.
        assert!((state.logarithm() - (4.0f64 / 64.0).ln()).abs() < 1e-12);
        state.truncate(1);
        assert!(state.push(&column([0, 0, 1, 1])));
    }
}
