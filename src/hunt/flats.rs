//! Slices of flats that are an array of strength 3 together.
//!
//! An array of strength 3 with an s-level factor consists of s slices of strength 2 whose union has
//! strength 3. Here every slice is a union of flats over GF(p) with the same directions within the
//! slice, so that a p-level column is an affine functional on each slice, with a constant of its own
//! on each flat. Columns are taken at random among those that still fit, from the start again when
//! none is left.

use super::random::Random;
use crate::algebra::prime_power;
use crate::construct::field::Flat;

/// What to look for.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Wanted {
    /// The characteristic.
    pub p: u16,
    /// The number of directions of each flat.
    pub directions: u32,
    /// The number of slices.
    pub slices: usize,
    /// The number of flats in each slice.
    pub flats: usize,
    /// The levels of the factors beside the slices, powers of p; those of many levels first.
    pub levels: Vec<u16>,
    /// How often to start.
    pub tries: u32,
    /// Where the random numbers start.
    pub seed: u64,
}

/// No more candidates for a column than this are listed.
const MAX_CANDIDATES: usize = 1 << 18;

/// A p-level column: on each flat a functional (base-p digits are its coefficients) and a constant.
#[derive(Clone, Debug)]
struct Column {
    functional: Vec<u32>,
    constant: Vec<u16>,
}

/// All nonzero combinations of the e columns that are a factor of p^e levels; the columns
/// themselves first.
type Factor = Vec<Column>;

/// Flats of an OA(N, slices · levels, 3), N = slices · flats · p^directions, the slice being the
/// first factor; `None` when nothing was found, or the request makes no sense or is too large. The
/// array is that of [`flats`](crate::construct::field::flats()). The same request gives the same
/// answer.
///
/// ```
/// use trysquare::hunt::flats::{Wanted, find};
/// let wanted =
///     Wanted { p: 2, directions: 4, slices: 3, flats: 1, levels: vec![4, 2, 2, 2, 2], tries: 99, seed: 1 };
/// let flats = find(&wanted).expect("found at once");
/// let array = trysquare::construct::field::flats(2, &[3, 4, 2, 2, 2, 2], &flats)?;
/// assert_eq!(array.runs(), 48);
/// # Ok::<(), trysquare::construct::ConstructError>(())
/// ```
#[must_use]
pub fn find(wanted: &Wanted) -> Option<Vec<Flat>> {
    let digits = wanted.levels.iter().map(|&s| match prime_power(u32::from(s)) {
        Some((p, e)) if p == u32::from(wanted.p) => Some(e as usize),
        _ => None,
    });
    let digits: Vec<usize> = digits.collect::<Option<_>>()?;
    let search = Search { wanted, candidates: candidates(wanted)? };
    let mut random = Random::new(wanted.seed);
    (0..wanted.tries)
        .find_map(|_| search.one(&digits, &mut random))
        .map(|found| search.flats(&digits, &found))
}

/// All columns that are balanced in each slice.
fn candidates(wanted: &Wanted) -> Option<Vec<Column>> {
    let p = usize::from(wanted.p);
    let functionals = p.checked_pow(wanted.directions.checked_mul(u32::try_from(wanted.slices).ok()?)?)?;
    let flats = wanted.slices.checked_mul(wanted.flats).filter(|&b| b > 0)?;
    let constants = p.checked_pow(u32::try_from(flats - 1).ok()?)?;
    functionals.checked_mul(constants).filter(|&c| c <= MAX_CANDIDATES && prime_power(p as u32).is_some())?;
    let values = p.pow(wanted.directions);
    let search = Search { wanted, candidates: Vec::new() };
    let mut out = Vec::new();
    for x in 0..functionals {
        for c in 0..constants {
            let (mut x, mut c) = (x, c * p);
            let slice: Vec<u32> = (0..wanted.slices)
                .map(|_| {
                    let f = x % values;
                    x /= values;
                    f as u32
                })
                .collect();
            let constant = (0..flats)
                .map(|_| {
                    let d = c % p;
                    c /= p;
                    d as u16
                })
                .collect();
            let functional = (0..flats).map(|b| slice[b / wanted.flats]).collect();
            let column = Column { functional, constant };
            if search.balanced_in_slices(&column) {
                out.push(column);
            }
        }
    }
    Some(out)
}

struct Search<'a> {
    wanted: &'a Wanted,
    candidates: Vec<Column>,
}

impl Search<'_> {
    /// One attempt.
    fn one(&self, digits: &[usize], random: &mut Random) -> Option<Vec<Factor>> {
        let mut alive: Vec<&Column> = self.candidates.iter().collect();
        let mut found: Vec<Factor> = Vec::new();
        for &e in digits {
            let factor = self.factor(e, &alive, &found, random)?;
            alive.retain(|c| {
                let multiples = self.combinations(&[(*c).clone()]);
                self.fits(&multiples, &factor, &found)
            });
            found.push(factor);
        }
        Some(found)
    }

    /// A factor of p^e levels out of columns that fit one by one.
    fn factor(&self, e: usize, alive: &[&Column], found: &[Factor], random: &mut Random) -> Option<Factor> {
        let mut columns: Vec<Column> = Vec::new();
        for _ in 0..100 * e {
            if alive.is_empty() || columns.len() == e {
                break;
            }
            columns.push(alive[random.modulo(alive.len())].clone());
            let all = self.combinations(&columns);
            let right = all.iter().all(|c| self.balanced_in_slices(c))
                && (0..found.len()).all(|i| self.fits(&all, &found[i], &found[..i]));
            if !right {
                columns.pop();
            }
        }
        (columns.len() == e && e > 0).then(|| self.combinations(&columns))
    }

    /// All nonzero combinations, the columns themselves first.
    fn combinations(&self, columns: &[Column]) -> Factor {
        let mut all = columns.to_vec();
        let mut sums: Vec<(Column, usize)> = vec![];
        for column in columns {
            let known = sums.clone();
            for c in 1..self.wanted.p {
                let zero = Column {
                    functional: vec![0; column.functional.len()],
                    constant: vec![0; column.constant.len()],
                };
                sums.push((self.sum(&zero, column, c), if c == 1 { 1 } else { 2 }));
                sums.extend(known.iter().map(|(k, _)| (self.sum(k, column, c), 2)));
            }
        }
        all.extend(sums.into_iter().filter(|s| s.1 > 1).map(|s| s.0));
        all
    }

    /// a + c·b.
    fn sum(&self, a: &Column, b: &Column, c: u16) -> Column {
        let p = u32::from(self.wanted.p);
        let add = |&a: &u32, &b: &u32| {
            let (mut a, mut b, mut weight, mut sum) = (a, b, 1, 0);
            for _ in 0..self.wanted.directions {
                sum += weight * ((a % p + u32::from(c) * (b % p)) % p);
                (a, b, weight) = (a / p, b / p, weight * p);
            }
            sum
        };
        Column {
            functional: a.functional.iter().zip(&b.functional).map(|(a, b)| add(a, b)).collect(),
            constant: a
                .constant
                .iter()
                .zip(&b.constant)
                .map(|(&a, &b)| (a + c * b) % self.wanted.p)
                .collect(),
        }
    }

    /// Whether the factor `a` fits `b` and any pair of `b` and a third one.
    fn fits(&self, a: &Factor, b: &Factor, others: &[Factor]) -> bool {
        a.iter().all(|x| {
            b.iter().all(|y| {
                let xy = self.sum(x, y, 1);
                self.balanced_in_slices(&xy)
                    && others.iter().flatten().all(|z| {
                        let xyz = self.sum(&xy, z, 1);
                        self.balanced(&xyz, 0..xyz.constant.len())
                    })
            })
        })
    }

    fn balanced_in_slices(&self, column: &Column) -> bool {
        let f = self.wanted.flats;
        (0..self.wanted.slices).all(|i| self.balanced(column, i * f..(i + 1) * f))
    }

    /// Whether the column takes all levels equally often on these flats.
    fn balanced(&self, column: &Column, flats: std::ops::Range<usize>) -> bool {
        let mut counts = vec![0; usize::from(self.wanted.p)];
        flats
            .filter(|&b| column.functional[b] == 0)
            .for_each(|b| counts[usize::from(column.constant[b])] += 1);
        counts.iter().all(|&n| n == counts[0])
    }

    fn flats(&self, digits: &[usize], found: &[Factor]) -> Vec<Flat> {
        let p = self.wanted.p;
        let level =
            |e: usize, digit: &dyn Fn(usize) -> u16| (0..e).rev().fold(0, |sum, i| sum * p + digit(i));
        (0..self.wanted.slices * self.wanted.flats)
            .map(|b| {
                let beside = |digit: &dyn Fn(&Column) -> u16| -> Vec<u16> {
                    digits.iter().zip(found).map(|(&e, f)| level(e, &|i| digit(&f[i]))).collect()
                };
                let mut base = vec![(b / self.wanted.flats) as u16];
                base.extend(beside(&|c| c.constant[b]));
                let directions = (0..self.wanted.directions)
                    .map(|i| {
                        let mut direction = vec![0];
                        let power = u32::from(p).pow(i);
                        direction.extend(beside(&|c| (c.functional[b] / power % u32::from(p)) as u16));
                        direction
                    })
                    .collect();
                Flat { base, directions }
            })
            .collect()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::construct::field::flats;
    use crate::verify::{Demand, Verdict, certify};

    #[test]
    fn what_is_found_has_strength_three() {
        let cases: [(u16, u32, usize, usize, &[u16]); 4] = [
            (2, 4, 3, 1, &[4, 2, 2, 2, 2]),
            (2, 3, 2, 1, &[2, 2, 2]),
            (3, 2, 2, 3, &[3; 5]),
            (3, 2, 3, 1, &[3, 3, 3]),
        ];
        for (p, directions, slices, per_slice, levels) in cases {
            let wanted = Wanted {
                p,
                directions,
                slices,
                flats: per_slice,
                levels: levels.to_vec(),
                tries: 999,
                seed: 1,
            };
            let found = find(&wanted).unwrap_or_else(|| panic!("{levels:?}"));
            assert_eq!(Some(&found), find(&wanted).as_ref());
            let all: Vec<u16> = std::iter::once(slices as u16).chain(levels.iter().copied()).collect();
            let array = flats(u32::from(p), &all, &found).unwrap();
            assert_eq!(array.runs(), slices * per_slice * usize::from(p).pow(directions));
            assert_eq!(certify(&array, &Demand::strength(3)).unwrap().verdict, Verdict::Orthogonal);
        }
    }

    #[test]
    fn what_cannot_be_is_not_found() {
        let wanted = |p, levels| Wanted { p, directions: 2, slices: 2, flats: 1, levels, tries: 20, seed: 1 };
        assert_eq!(find(&wanted(2, vec![2; 4])), None, "more than Rao's bound admits");
        assert_eq!(find(&wanted(2, vec![3])), None);
        assert_eq!(find(&wanted(4, vec![4])), None);
        assert_eq!(find(&Wanted { directions: 99, ..wanted(2, vec![2]) }), None);
        assert_eq!(find(&Wanted { flats: 0, ..wanted(2, vec![2]) }), None);
    }
}
