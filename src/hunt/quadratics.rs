//! Difference schemes over Z3 in blocks of order 3, one quadratic function for each block.

use std::collections::HashMap;

use rayon::prelude::*;

use super::Random;

/// A hunt for D(3k, 3c, 3) made of k × c circulant blocks of order 3.
///
/// The entry in row (j, y) and column (i, x) is f_ij(x − y) with f_ij(t) = s t² + b t + c, s = ±1.
/// The Fourier transform of ω^f over Z3 has modulus √3 everywhere, so the scheme is one exactly
/// when three matrices of sixth roots of unity have orthogonal rows: s ω^P, s ω^Q and s ω^R with
/// P + Q + R = s modulo 3, one for each character of Z3. Rows of such triples orthogonal to a given
/// first row (P = Q = 0, `minus` of its signs negative) are listed by meeting in the middle, and
/// cliques of them are searched exactly from random starts.
#[derive(Clone, Copy, Debug)]
pub struct Quadratics {
    /// k, even and at most 8: the scheme has 3k rows.
    pub blocks: usize,
    /// c, at most k: the number of blocks of columns wanted.
    pub wanted: usize,
    /// How many signs of the first row are negative.
    pub minus: usize,
    /// The seed of the random numbers.
    pub seed: u64,
    /// How many starts are tried.
    pub starts: u64,
    /// How many steps a clique search may take.
    pub steps: u64,
}

/// One row: for each block the number 6 P + 2 Q + (0 for s = 1, 1 for s = −1), P and Q from 0 to 2.
type Row = [u8; 8];

/// For two block numbers the six coordinates of the three products, packed ten bits apart.
type Products = [[i64; 18]; 18];

impl Quadratics {
    /// The columns of the scheme found, 3 for each block, as many as were met; deterministic for any
    /// number of threads. None when the request makes no sense.
    #[must_use]
    pub fn run(&self) -> Vec<Vec<u16>> {
        let k = self.blocks;
        if !(2..=8).contains(&k) || k % 2 == 1 || self.wanted > k || self.minus > k {
            return Vec::new();
        }
        let products = products();
        let mut first = [0u8; 8];
        first[..self.minus].fill(1);
        let rows = self.beside(&first, &products);
        let mut random = Random::new(self.seed);
        let mut best = vec![first];
        for _ in 0..self.starts {
            if best.len() >= self.wanted || rows.is_empty() {
                break;
            }
            let start = rows[random.below(rows.len())];
            let near: Vec<Row> =
                rows.par_iter().copied().filter(|r| orthogonal(&start, r, k, &products)).collect();
            let mut search =
                Clique { k, wanted: self.wanted, steps: self.steps, products: &products, best: Vec::new() };
            search.grow(&mut vec![first, start], &near);
            if search.best.len() > best.len() {
                best = search.best;
            }
        }
        best.iter().flat_map(|row| (0..3).map(|x| column(row, k, x))).collect()
    }

    /// All rows with P = Q = 0 in the first block that are orthogonal to `first`.
    fn beside(&self, first: &Row, products: &Products) -> Vec<Row> {
        let half = self.blocks / 2;
        let count = 18usize.pow(half as u32);
        let part = |at: usize, mut code: usize| {
            let (mut row, mut sum) = ([0u8; 8], 0i64);
            for j in at..at + half {
                row[j] = (code % 18) as u8;
                code /= 18;
                sum += products[usize::from(row[j])][usize::from(first[j])];
            }
            (row, sum)
        };
        let mut right: HashMap<i64, Vec<Row>> = HashMap::new();
        for code in 0..count {
            let (row, sum) = part(half, code);
            right.entry(-sum).or_default().push(row);
        }
        let mut rows = Vec::new();
        for code in (0..count).filter(|code| code % 18 < 2) {
            let (left, sum) = part(0, code);
            for other in right.get(&sum).into_iter().flatten() {
                let mut row = left;
                row[half..2 * half].copy_from_slice(&other[half..2 * half]);
                rows.push(row);
            }
        }
        rows
    }
}

/// s, P, Q, R of a block number.
fn parts(code: u8) -> (i64, [u8; 3]) {
    let (s, p, q) = (if code % 2 == 0 { 1i64 } else { -1 }, code / 6, code / 2 % 3);
    (s, [p, q, (s - i64::from(p) - i64::from(q)).rem_euclid(3) as u8])
}

fn products() -> Products {
    let mut table = [[0i64; 18]; 18];
    for a in 0..18u8 {
        for b in 0..18u8 {
            let ((s, p), (s2, p2)) = (parts(a), parts(b));
            for character in 0..3 {
                // ω^d in the basis 1, ω.
                let (one, omega) =
                    [(1, 0), (0, 1), (-1, -1)][usize::from((p[character] + 3 - p2[character]) % 3)];
                let packed = (one << (20 * character)) + (omega << (20 * character + 10));
                table[usize::from(a)][usize::from(b)] += s * s2 * packed;
            }
        }
    }
    table
}

fn orthogonal(a: &Row, b: &Row, k: usize, products: &Products) -> bool {
    let sum: i64 = (0..k).map(|j| products[usize::from(a[j])][usize::from(b[j])]).sum();
    // Each coordinate is below 2^9 in size, so the packed sum is 0 only if all are.
    sum == 0
}

/// Column (i, x) of the scheme, the rows (j, y) in order.
fn column(row: &Row, k: usize, x: i64) -> Vec<u16> {
    let entry = |j: usize, y: i64| {
        let (s, [p, q, _]) = parts(row[j]);
        let beta = i64::from(q) - i64::from(p) + s;
        let b = -beta * s;
        let c = i64::from(p) + s * b * b;
        let t = x - y;
        (s * t * t + b * t + c).rem_euclid(3) as u16
    };
    (0..k).flat_map(|j| (0..3).map(move |y| (j, y))).map(|(j, y)| entry(j, y)).collect()
}

struct Clique<'a> {
    k: usize,
    wanted: usize,
    steps: u64,
    products: &'a Products,
    best: Vec<Row>,
}

impl Clique<'_> {
    /// Extends the clique by rows of `near`; true when it is large enough.
    fn grow(&mut self, clique: &mut Vec<Row>, near: &[Row]) -> bool {
        if clique.len() > self.best.len() {
            self.best.clone_from(clique);
        }
        if clique.len() >= self.wanted {
            return true;
        }
        if clique.len() + near.len() < self.wanted.min(self.best.len() + 1) || self.steps == 0 {
            return false;
        }
        self.steps -= 1;
        for (i, row) in near.iter().enumerate() {
            let next: Vec<Row> =
                near[i + 1..].iter().copied().filter(|r| orthogonal(row, r, self.k, self.products)).collect();
            clique.push(*row);
            if self.grow(clique, &next) {
                return true;
            }
            clique.pop();
        }
        false
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::construct::scheme::from_starter;

    #[test]
    fn what_is_found_is_a_difference_scheme() {
        // D(12,12,3) and D(18,18,3) come out whole, D(24,21,3) nearly so.
        for (blocks, wanted, minus, columns) in [(4, 4, 1, 12), (6, 6, 2, 18), (8, 7, 4, 21)] {
            let hunt = Quadratics { blocks, wanted, minus, seed: 1, starts: 60, steps: 100_000 };
            let found = hunt.run();
            let scheme = from_starter(&[3], &found).unwrap();
            assert_eq!((scheme.rows(), scheme.columns()), (3 * blocks, columns));
            assert_eq!(hunt.run(), found);
        }
    }

    #[test]
    fn requests_that_make_no_sense_find_nothing() {
        for (blocks, wanted, minus) in [(0, 0, 0), (3, 3, 1), (10, 2, 1), (4, 5, 1), (4, 4, 5)] {
            let hunt = Quadratics { blocks, wanted, minus, seed: 1, starts: 5, steps: 100 };
            assert!(hunt.run().is_empty());
        }
    }
}
