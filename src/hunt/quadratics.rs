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
/// cliques of them are searched exactly from random starts. Single columns without that form are then
/// solved for, by backtracking with counters, until there are `extra` of them.
#[derive(Clone, Copy, Debug)]
pub struct Quadratics {
    /// k, even and at most 8: the scheme has 3k rows.
    pub blocks: usize,
    /// c, at most k: the number of blocks of columns wanted.
    pub wanted: usize,
    /// How many single columns are wanted beside the blocks.
    pub extra: usize,
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
    /// The columns of the scheme found, 3 for each block and then the single ones, as many as were
    /// met; deterministic for any number of threads. None when the request makes no sense.
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
        let mut best = columns(&[first], k);
        for _ in 0..self.starts {
            if best.len() >= 3 * self.wanted + self.extra || rows.is_empty() {
                break;
            }
            let start = rows[random.below(rows.len())];
            let near: Vec<Row> =
                rows.par_iter().copied().filter(|r| orthogonal(&start, r, k, &products)).collect();
            let mut search = Clique { hunt: self, steps: self.steps, products: &products, best: Vec::new() };
            search.grow(&mut vec![first, start], &near);
            if search.best.len() > best.len() {
                best = search.best;
            }
        }
        best
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
    let (s, p, q) = (if code.is_multiple_of(2) { 1i64 } else { -1 }, code / 6, code / 2 % 3);
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

/// The columns of some rows of blocks.
fn columns(rows: &[Row], k: usize) -> Vec<Vec<u16>> {
    rows.iter().flat_map(|row| (0..3).map(|x| column(row, k, x))).collect()
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
    hunt: &'a Quadratics,
    steps: u64,
    products: &'a Products,
    /// The most columns met.
    best: Vec<Vec<u16>>,
}

impl Clique<'_> {
    /// Extends the clique by rows of `near`; true when there are as many columns as wanted.
    fn grow(&mut self, clique: &mut Vec<Row>, near: &[Row]) -> bool {
        let Quadratics { blocks, wanted, extra, .. } = *self.hunt;
        if 3 * clique.len() > self.best.len() {
            self.best = columns(clique, blocks);
        }
        if clique.len() >= wanted {
            let mut all = columns(clique, blocks);
            complete(&mut all, extra);
            if all.len() > self.best.len() {
                self.best = all;
            }
            return self.best.len() >= 3 * wanted + extra;
        }
        if clique.len() + near.len() < wanted || self.steps == 0 {
            return false;
        }
        self.steps -= 1;
        for (i, row) in near.iter().enumerate() {
            let next: Vec<Row> =
                near[i + 1..].iter().copied().filter(|r| orthogonal(row, r, blocks, self.products)).collect();
            clique.push(*row);
            if self.grow(clique, &next) {
                return true;
            }
            clique.pop();
        }
        false
    }
}

/// Adds up to `extra` single columns to a scheme over Z3: the ones that fit all columns there are
/// are listed, and taken one after the other.
fn complete(columns: &mut Vec<Vec<u16>>, extra: usize) {
    /// Steps of the backtracking, and columns listed.
    const LIMITS: (u64, usize) = (1_000_000, 200);
    let rows = columns[0].len();
    let mut search = Completion {
        index: (rows / 3) as u32,
        counts: vec![[0; 3]; columns.len()],
        column: Vec::with_capacity(rows),
        found: Vec::new(),
        steps: LIMITS.0,
        most: LIMITS.1,
    };
    if extra > 0 {
        search.walk(columns);
    }
    let fits = |a: &[u16], b: &[u16]| {
        let count = |d: u16| a.iter().zip(b).filter(|(x, y)| (*x + 3 - *y) % 3 == d).count();
        (0..3).all(|d| 3 * count(d) == rows)
    };
    let first = columns.len();
    for column in search.found {
        if columns.len() < first + extra && columns[first..].iter().all(|c| fits(c, &column)) {
            columns.push(column);
        }
    }
}

struct Completion {
    index: u32,
    /// For each column how often each difference has occurred.
    counts: Vec<[u32; 3]>,
    column: Vec<u16>,
    found: Vec<Vec<u16>>,
    steps: u64,
    most: usize,
}

impl Completion {
    fn walk(&mut self, columns: &[Vec<u16>]) {
        let row = self.column.len();
        if row == columns[0].len() {
            self.found.push(self.column.clone());
            return;
        }
        // The first entry may be 0: a constant can be added to a column.
        for value in 0..if row == 0 { 1 } else { 3u16 } {
            if self.steps == 0 || self.found.len() >= self.most {
                return;
            }
            self.steps -= 1;
            let difference = |c: &[u16]| usize::from((value + 3 - c[row]) % 3);
            for (count, c) in self.counts.iter_mut().zip(columns) {
                count[difference(c)] += 1;
            }
            let within = self.counts.iter().zip(columns).all(|(count, c)| count[difference(c)] <= self.index);
            if within {
                self.column.push(value);
                self.walk(columns);
                self.column.pop();
            }
            for (count, c) in self.counts.iter_mut().zip(columns) {
                count[difference(c)] -= 1;
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::construct::scheme::from_starter;

    #[test]
    fn what_is_found_is_a_difference_scheme() {
        // D(12,12,3) and D(18,18,3) come out whole, D(24,21,3) nearly so.
        for (blocks, wanted, extra, minus, columns) in
            [(4, 4, 0, 1, 12), (4, 3, 3, 2, 12), (6, 6, 0, 2, 18), (8, 7, 0, 4, 21)]
        {
            let hunt = Quadratics { blocks, wanted, extra, minus, seed: 1, starts: 60, steps: 100_000 };
            let found = hunt.run();
            let scheme = from_starter(&[3], &found).unwrap();
            assert_eq!((scheme.rows(), scheme.columns()), (3 * blocks, columns));
            assert_eq!(hunt.run(), found);
        }
    }

    #[test]
    fn requests_that_make_no_sense_find_nothing() {
        for (blocks, wanted, minus) in [(0, 0, 0), (3, 3, 1), (10, 2, 1), (4, 5, 1), (4, 4, 5)] {
            let hunt = Quadratics { blocks, wanted, extra: 0, minus, seed: 1, starts: 5, steps: 100 };
            assert!(hunt.run().is_empty());
        }
    }
}
