//! Slices of 16 runs from Hadamard matrices, an array of strength 3 together.
//!
//! Each slice is a choice of signed columns of a Hadamard matrix of order 16, so it has strength 2.
//! The union has strength 3 when for every three columns the sums of their products over the slices
//! cancel. Matrices are made from Sylvester's by switching; columns are exchanged and signs changed
//! as long as the sum of the squares falls, and while the search is warm also when it rises a little.

use super::random::Random;
use crate::construct::field::Flat;

/// What to look for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Wanted {
    /// The number of slices, at least 1.
    pub slices: usize,
    /// The number of two-level factors, 3 to 15.
    pub factors: usize,
    /// How often to start.
    pub tries: u32,
    /// Where the random numbers start.
    pub seed: u64,
}

/// The steps of one start.
const STEPS: u64 = 40_000;

/// The rise of the sum of squares that is accepted at first.
const WARMTH: u64 = 14;

type Signs = Vec<Vec<i32>>;

/// Flats over GF(2) of an OA(16 · slices, slices · 2^factors, 3), the slice being the first factor;
/// `None` when nothing was found or the request makes no sense. The same request gives the same
/// answer.
#[must_use]
pub fn find(wanted: &Wanted) -> Option<Vec<Flat>> {
    if wanted.slices == 0 || wanted.slices > 1 << 12 || !(3..=15).contains(&wanted.factors) {
        return None;
    }
    let mut random = Random::new(wanted.seed);
    let slices = (0..wanted.tries).find_map(|_| Attempt::new(wanted, &mut random).run(&mut random))?;
    // A flat of one direction is any pair of runs, so this ends.
    let parts = |k| slices.iter().map(|s| into_flats(s, k)).collect::<Option<Vec<_>>>();
    let parts = (1..=3).rev().find_map(parts)?;
    let numbered = parts.into_iter().enumerate().flat_map(|(i, flats)| {
        flats.into_iter().map(move |mut flat| {
            flat.base.insert(0, i as u16);
            flat.directions.iter_mut().for_each(|d| d.insert(0, 0));
            flat
        })
    });
    Some(numbered.collect())
}

struct Attempt {
    factors: usize,
    matrices: Vec<Signs>,
    /// An eighth of the sum of the products of three columns, by (a·16 + b)·16 + c.
    products: Vec<Vec<i32>>,
    /// The columns of each matrix, the first of them in use.
    columns: Vec<Vec<usize>>,
    signs: Vec<Vec<i32>>,
}

impl Attempt {
    fn new(wanted: &Wanted, random: &mut Random) -> Self {
        let matrices: Vec<Signs> = (0..wanted.slices)
            .map(|_| {
                let times = random.modulo(6);
                switched(times, random)
            })
            .collect();
        let products = matrices
            .iter()
            .map(|h| {
                let sum = |x: usize| {
                    h.iter().map(|row| row[x / 256] * row[x / 16 % 16] * row[x % 16]).sum::<i32>() / 8
                };
                (0..4096).map(sum).collect()
            })
            .collect();
        let columns = (0..wanted.slices)
            .map(|_| {
                let mut list: Vec<usize> = (1..16).collect();
                for i in (1..15).rev() {
                    list.swap(i, random.modulo(i + 1));
                }
                list
            })
            .collect();
        let signs = vec![vec![1; 16]; wanted.slices];
        Self { factors: wanted.factors, matrices, products, columns, signs }
    }

    /// The sum of squares over the triples of factors, only those with factor x or y when given.
    fn squares(&self, only: Option<(usize, usize)>) -> i32 {
        let mut total = 0;
        for a in 0..self.factors {
            for b in a + 1..self.factors {
                for c in b + 1..self.factors {
                    let touched = |x| x == a || x == b || x == c;
                    if only.is_some_and(|(x, y)| !touched(x) && !touched(y)) {
                        continue;
                    }
                    let term = |k: usize| {
                        let [x, y, z] = [a, b, c].map(|f| self.columns[k][f]);
                        let sign = self.signs[k][x] * self.signs[k][y] * self.signs[k][z];
                        sign * self.products[k][(x * 16 + y) * 16 + z]
                    };
                    total += (0..self.columns.len()).map(term).sum::<i32>().pow(2);
                }
            }
        }
        total
    }

    fn run(mut self, random: &mut Random) -> Option<Vec<Vec<Vec<u16>>>> {
        let mut total = self.squares(None);
        for step in 0..STEPS {
            let top = 1 + (WARMTH * (STEPS - step) / STEPS) as usize;
            let k = random.modulo(self.columns.len());
            let sign = random.modulo(3) == 0;
            let a = random.modulo(self.factors);
            // A change of sign touches one factor, an exchange maybe two.
            let b = if sign { a } else { random.modulo(15) };
            if !sign && a == b {
                continue;
            }
            let before = self.squares(Some((a, b)));
            self.change(k, a, b);
            let rise = self.squares(Some((a, b))) - before;
            if rise <= 0 || rise as usize <= random.modulo(top) {
                total += rise;
            } else {
                self.change(k, a, b);
            }
            if total == 0 {
                return Some(self.runs());
            }
        }
        None
    }

    /// Changes the sign of column a (a = b) or exchanges two; its own inverse.
    fn change(&mut self, k: usize, a: usize, b: usize) {
        if a == b {
            let column = self.columns[k][a];
            self.signs[k][column] *= -1;
        } else {
            self.columns[k].swap(a, b);
        }
    }

    fn runs(&self) -> Vec<Vec<Vec<u16>>> {
        let run = |k: usize, row: &Vec<i32>| {
            self.columns[k][..self.factors]
                .iter()
                .map(|&c| u16::from(row[c] * self.signs[k][c] < 0))
                .collect()
        };
        self.matrices.iter().enumerate().map(|(k, h)| h.iter().map(|row| run(k, row)).collect()).collect()
    }
}

/// Sylvester's matrix of order 16 after `times` switchings, sometimes transposed, its first column
/// made positive. In four rows whose product is constant the columns that are equal up to sign are
/// changed in sign; this keeps the matrix a Hadamard matrix (switching a closed quadruple).
fn switched(times: usize, random: &mut Random) -> Signs {
    let sign = |i: u32, j: u32| if (i & j).count_ones().is_multiple_of(2) { 1 } else { -1 };
    let mut h: Signs = (0..16).map(|i| (0..16).map(|j| sign(i, j)).collect()).collect();
    let mut done = 0;
    for _ in 0..100_000 {
        if done == times {
            break;
        }
        let rows: [usize; 4] = std::array::from_fn(|_| random.modulo(16));
        if (0..4).any(|i| rows[..i].contains(&rows[i])) {
            continue;
        }
        let product = |c: usize| rows.iter().map(|&r| h[r][c]).product::<i32>();
        if (1..16).any(|c| product(c) != product(0)) {
            continue;
        }
        let kind = |c: usize| [1, 2, 3].map(|i| h[rows[i]][c] * h[rows[0]][c]);
        let like = kind(random.modulo(16));
        let columns: Vec<usize> = (0..16).filter(|&c| kind(c) == like).collect();
        for (&c, &r) in columns.iter().flat_map(|c| rows.iter().map(move |r| (c, r))) {
            h[r][c] *= -1;
        }
        if random.modulo(2) == 0 {
            h = (0..16).map(|i| h.iter().map(|row| row[i]).collect()).collect();
        }
        done += 1;
    }
    for row in h.iter_mut().filter(|row| row[0] < 0) {
        row.iter_mut().for_each(|x| *x *= -1);
    }
    h
}

/// The runs as flats of k directions, if they are a union of such.
fn into_flats(runs: &[Vec<u16>], k: usize) -> Option<Vec<Flat>> {
    let Some((base, rest)) = runs.split_first() else { return Some(Vec::new()) };
    let add = |a: &[u16], b: &[u16]| -> Vec<u16> { a.iter().zip(b).map(|(x, y)| x ^ y).collect() };
    let mut stack: Vec<(Vec<Vec<u16>>, usize)> = vec![(Vec::new(), 0)];
    while let Some((directions, from)) = stack.pop() {
        if directions.len() < k {
            for (i, run) in rest.iter().enumerate().skip(from).rev() {
                let mut more = directions.clone();
                more.push(add(base, run));
                stack.push((more, i + 1));
            }
            continue;
        }
        let mut flat = vec![base.clone()];
        for d in &directions {
            flat.extend(flat.clone().iter().map(|x| add(x, d)));
        }
        let mut left = runs.to_vec();
        let inside =
            flat.iter().all(|x| left.iter().position(|r| r == x).map(|at| left.remove(at)).is_some());
        if inside && let Some(mut others) = into_flats(&left, k) {
            others.insert(0, Flat { base: base.clone(), directions });
            return Some(others);
        }
    }
    None
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::construct::field::flats;
    use crate::verify::{Demand, Verdict, certify};

    #[test]
    fn what_is_found_has_strength_three() {
        for (slices, factors) in [(1, 8), (2, 6), (3, 6)] {
            let wanted = Wanted { slices, factors, tries: 50, seed: 1 };
            let found = find(&wanted).unwrap_or_else(|| panic!("{slices} {factors}"));
            assert_eq!(Some(&found), find(&wanted).as_ref());
            let mut levels = vec![2; factors + 1];
            levels[0] = if slices == 1 { 2 } else { slices as u16 };
            let array = flats(2, &levels, &found).unwrap();
            assert_eq!(array.runs(), 16 * slices);
            let judged = match slices {
                1 => array.select(&(1..=factors).collect::<Vec<_>>()).unwrap(),
                _ => array,
            };
            assert_eq!(certify(&judged, &Demand::strength(3)).unwrap().verdict, Verdict::Orthogonal);
        }
        assert_eq!(find(&Wanted { slices: 0, factors: 9, tries: 1, seed: 1 }), None);
        assert_eq!(find(&Wanted { slices: 1, factors: 16, tries: 1, seed: 1 }), None);
        assert_eq!(find(&Wanted { slices: 1, factors: 9, tries: 1, seed: 1 }), None, "Rao's bound");
    }
}
