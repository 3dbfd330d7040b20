//! Four circulants for the array of Goethals and Seidel.

use std::collections::HashSet;

use num_integer::Integer;

use super::Random;
use crate::construct::ConstructError;

const NAME: &str = "hunt for four circulants";
/// Lanes of the products; the vectors of autocorrelations are padded to a multiple.
const LANES: usize = 8;
const WORDS: usize = 4;

/// A hunt for four rows a, b, c, d over ±1 of length m, constant on the orbits of a group H of
/// units modulo m, whose periodic autocorrelations sum to zero at every shift; then
/// [`goethals_seidel`](crate::construct::hadamard::goethals_seidel) makes the Hadamard matrix of
/// order 4m of them.
///
/// The autocorrelations of such a row are constant on the orbits of ±H, so a handful of numbers
/// decides. The hunt
///
/// 1. draws rows (all of them when there are few) and keeps the flattest: those whose power
///    spectrum is nearest to constant, by Parseval those whose autocorrelations have the smallest
///    sum of squares; every unit modulo m turns a row into one as flat,
/// 2. keeps the flattest pairs of them in a table, as many as fit,
/// 3. runs through all pairs that are as flat and looks up the opposite autocorrelations.
///
/// A finite sample: nothing found proves nothing.
#[derive(Clone, Debug)]
pub struct FourCirculants {
    /// m, the length of the rows, from 3 to 255.
    pub length: u16,
    /// Units modulo m that generate H.
    pub generators: Vec<u16>,
    /// The seed of the random numbers.
    pub seed: u64,
    /// How many rows are drawn.
    pub samples: u64,
    /// How many rows are kept.
    pub pool: usize,
    /// About how many pairs are kept in the table, 24 bytes each.
    pub pairs: usize,
}

type Bits = [u64; WORDS];

/// A row kept: its bits (1 for −1) and what is needed of its autocorrelations.
#[derive(Clone, Debug)]
struct Row {
    bits: Bits,
    /// A linear function of the autocorrelations modulo 2^64.
    hash: u64,
    flatness: i64,
    sum_squared: i64,
}

struct Frame {
    length: usize,
    orbits: Vec<Bits>,
    units: Vec<usize>,
    /// Per orbit of ±H on the shifts: representative, size, random odd number.
    shifts: Vec<(usize, i64, u64)>,
}

/// The pool with the autocorrelations of its rows, twice: plain and weighted by orbit sizes.
struct Pool {
    rows: Vec<Row>,
    /// The first `base` rows stand for the orbits of the units.
    base: usize,
    width: usize,
    plain: Vec<i16>,
    weighted: Vec<i16>,
}

impl FourCirculants {
    /// H, ascending.
    ///
    /// # Errors
    /// [`ConstructError::Condition`] when m is not from 3 to 255 or a generator is no unit.
    pub fn multipliers(&self) -> Result<Vec<u16>, ConstructError> {
        if !(3..=255).contains(&self.length) {
            return Err(ConstructError::condition(NAME, format!("m is from 3 to 255, not {}", self.length)));
        }
        let m = self.length;
        if let Some(g) = self.generators.iter().find(|g| g.gcd(&m) != 1) {
            return Err(ConstructError::condition(
                NAME,
                format!("multipliers are units modulo {m}, not {g}"),
            ));
        }
        let mut group = vec![1u16];
        let mut at = 0;
        while at < group.len() {
            for g in &self.generators {
                let product = (u32::from(group[at]) * u32::from(*g) % u32::from(m)) as u16;
                if !group.contains(&product) {
                    group.push(product);
                }
            }
            at += 1;
        }
        group.sort_unstable();
        Ok(group)
    }

    /// Runs the hunt; `None` when the sample holds no such rows.
    ///
    /// Cost: samples · m/2 word operations, then pool²/2 products of vectors with an entry per
    /// orbit of ±H.
    ///
    /// # Errors
    /// As [`FourCirculants::multipliers`].
    ///
    /// ```
    /// use trysquare::construct::hadamard::goethals_seidel;
    /// use trysquare::hunt::FourCirculants;
    /// let hunt = FourCirculants {
    ///     length: 13, generators: vec![3], seed: 1, samples: 1000, pool: 100, pairs: 5000,
    /// };
    /// let rows = hunt.run()?.expect("there are some");
    /// let h = goethals_seidel(rows.each_ref().map(Vec::as_slice))?;
    /// assert!(h.order() == 52 && h.is_hadamard());
    /// # Ok::<(), trysquare::construct::ConstructError>(())
    /// ```
    pub fn run(&self) -> Result<Option<[Vec<i8>; 4]>, ConstructError> {
        let mut random = Random::new(self.seed);
        let frame = Frame::new(usize::from(self.length), &self.multipliers()?, &mut random);
        let rows = frame.flattest(self.samples, self.pool, &mut random);
        let pool = frame.pool(rows);
        let limit = pool.limit(self.pairs, &mut random);
        let found = pool.meet(limit, 4 * i64::from(self.length));
        Ok(found.map(|four| four.map(|i| frame.signs(&pool.rows[i].bits))))
    }
}

impl Frame {
    fn new(length: usize, group: &[u16], random: &mut Random) -> Self {
        let orbit = |of: usize, signs: &[usize]| -> Vec<usize> {
            let images = group.iter().flat_map(|&h| {
                signs.iter().map(move |&sign| {
                    let image = of * usize::from(h) % length;
                    if sign == 0 { image } else { (length - image) % length }
                })
            });
            let mut out: Vec<usize> = images.collect();
            out.sort_unstable();
            out.dedup();
            out
        };
        let partition = |from: usize, signs: &[usize]| -> Vec<Vec<usize>> {
            (from..length).map(|i| (i, orbit(i, signs))).filter(|(i, o)| o[0] == *i).map(|(_, o)| o).collect()
        };
        let orbits = partition(0, &[0])
            .iter()
            .map(|o| {
                let mut bits = [0; WORDS];
                for &i in o {
                    bits[i / 64] |= 1 << (i % 64);
                }
                bits
            })
            .collect();
        let shifts =
            partition(1, &[0, 1]).iter().map(|o| (o[0], o.len() as i64, random.bits() | 1)).collect();
        let units: Vec<usize> = (1..length).filter(|u| u.gcd(&length) == 1).collect();
        // One unit per coset of ±H: the others give the same autocorrelations.
        let units = units.iter().copied().filter(|&u| orbit(u, &[0, 1])[0] == u).collect();
        Self { length, orbits, units, shifts }
    }

    fn row(&self, bits: Bits) -> Row {
        let (mut hash, mut flatness) = (0u64, 0);
        for &(shift, size, factor) in &self.shifts {
            let p = self.autocorrelation(&bits, shift);
            hash = hash.wrapping_add((p as u64).wrapping_mul(factor));
            flatness += size * p * p;
        }
        let minus: u32 = bits.iter().map(|w| w.count_ones()).sum();
        let sum = self.length as i64 - 2 * i64::from(minus);
        Row { bits, hash, flatness, sum_squared: sum * sum }
    }

    fn autocorrelation(&self, bits: &Bits, shift: usize) -> i64 {
        let (down, up) = (shift_down(bits, shift), shift_up(bits, self.length - shift));
        let mut differ = 0;
        for w in 0..WORDS {
            let valid = match (self.length - (64 * w).min(self.length)).min(64) {
                64 => u64::MAX,
                n => (1 << n) - 1,
            };
            differ += i64::from(((down[w] | up[w]) & valid ^ bits[w]).count_ones());
        }
        self.length as i64 - 2 * differ
    }

    /// The flattest rows of the sample, one per orbit of the units, no two with the same
    /// autocorrelations.
    fn flattest(&self, samples: u64, pool: usize, random: &mut Random) -> Vec<Row> {
        // The orbit of 0 comes first and stays +: −a has the autocorrelations of a.
        let free = self.orbits.len() - 1;
        let keep = pool.div_ceil(self.units.len()).max(1);
        let all = free < 63 && 1 << free <= samples;
        let mut kept: Vec<Row> = Vec::new();
        let mut worst = i64::MAX;
        for k in 0..if all { 1 << free } else { samples } {
            let (mut choice, mut left) = (k, 64);
            if !all {
                choice = random.bits();
            }
            let mut bits = [0; WORDS];
            for orbit in &self.orbits[1..] {
                if left == 0 {
                    (choice, left) = (random.bits(), 64);
                }
                if choice & 1 == 1 {
                    (0..WORDS).for_each(|w| bits[w] |= orbit[w]);
                }
                choice >>= 1;
                left -= 1;
            }
            let row = self.row(bits);
            if row.flatness < worst {
                kept.push(row);
            }
            if kept.len() >= 4 * keep {
                cull(&mut kept, keep);
                worst = kept.last().map_or(i64::MAX, |r| r.flatness);
            }
        }
        cull(&mut kept, keep);
        kept
    }

    /// The rows and their images under the units.
    fn pool(&self, base: Vec<Row>) -> Pool {
        let mut seen: HashSet<u64> = HashSet::new();
        let mut rows: Vec<Row> = base.into_iter().filter(|r| seen.insert(r.hash)).collect();
        let count = rows.len();
        for &u in &self.units[1..] {
            for i in 0..count {
                let row = self.row(self.moved(&rows[i].bits, u));
                if seen.insert(row.hash) {
                    rows.push(row);
                }
            }
        }
        let width = self.shifts.len().div_ceil(LANES) * LANES;
        let (mut plain, mut weighted) = (vec![0i16; width * rows.len()], vec![0i16; width * rows.len()]);
        // Sizes are divided by their greatest common divisor, so that the products fit.
        let unit = self.shifts.iter().fold(0, |g, s| g.gcd(&s.1));
        for (i, row) in rows.iter_mut().enumerate() {
            row.flatness /= unit;
            for (c, &(shift, size, _)) in self.shifts.iter().enumerate() {
                let p = self.autocorrelation(&row.bits, shift);
                plain[i * width + c] = p as i16;
                weighted[i * width + c] = (p * (size / unit)) as i16;
            }
        }
        Pool { rows, base: count, width, plain, weighted }
    }

    /// The row b with b\[u·i\] = a\[i\].
    fn moved(&self, bits: &Bits, u: usize) -> Bits {
        let mut out = [0; WORDS];
        for i in (0..self.length).filter(|i| bits[i / 64] >> (i % 64) & 1 == 1) {
            let to = i * u % self.length;
            out[to / 64] |= 1 << (to % 64);
        }
        out
    }

    fn signs(&self, bits: &Bits) -> Vec<i8> {
        (0..self.length).map(|i| if bits[i / 64] >> (i % 64) & 1 == 1 { -1 } else { 1 }).collect()
    }
}

fn cull(rows: &mut Vec<Row>, keep: usize) {
    rows.sort_unstable_by_key(|r| (r.flatness, r.hash, r.bits));
    rows.dedup_by_key(|r| r.hash);
    rows.truncate(keep);
}

fn shift_down(bits: &Bits, by: usize) -> Bits {
    let (words, rest) = (by / 64, by % 64);
    std::array::from_fn(|w| {
        let low = bits.get(w + words).map_or(0, |x| x >> rest);
        let high = bits.get(w + words + 1).map_or(0, |x| if rest == 0 { 0 } else { x << (64 - rest) });
        low | high
    })
}

fn shift_up(bits: &Bits, by: usize) -> Bits {
    let (words, rest) = (by / 64, by % 64);
    std::array::from_fn(|w| {
        let high = w.checked_sub(words).map_or(0, |k| bits[k] << rest);
        let low = w.checked_sub(words + 1).map_or(0, |k| if rest == 0 { 0 } else { bits[k] >> (64 - rest) });
        low | high
    })
}

impl Pool {
    fn flatness(&self, i: usize, j: usize) -> i64 {
        let (a, b) = (&self.plain[i * self.width..], &self.weighted[j * self.width..]);
        // |p| ≤ 255 and at most 128 shifts in all: the sum stays below 2^23. Plain wrapping
        // operations, because checked ones are not turned into vector instructions.
        let dot = a[..self.width]
            .iter()
            .zip(&b[..self.width])
            .fold(0i32, |sum, (&x, &y)| sum.wrapping_add(i32::from(x).wrapping_mul(i32::from(y))));
        self.rows[i].flatness + self.rows[j].flatness + 2 * i64::from(dot)
    }

    /// The flatness that about `pairs` of the pairs (base row, any row) do not exceed.
    fn limit(&self, pairs: usize, random: &mut Random) -> i64 {
        let all = self.base * self.rows.len();
        if all <= pairs {
            return i64::MAX;
        }
        let mut drawn: Vec<i64> = (0..1 << 20)
            .map(|_| self.flatness(random.below(self.base), random.below(self.rows.len())))
            .collect();
        drawn.sort_unstable();
        drawn[(drawn.len() as u128 * pairs as u128 / all as u128) as usize]
    }

    /// The first four rows whose autocorrelations sum to zero, two of them from each side.
    fn meet(&self, limit: i64, total: i64) -> Option<[usize; 4]> {
        let sums: HashSet<i64> = {
            let one: HashSet<i64> = self.rows.iter().map(|r| r.sum_squared).collect();
            one.iter().flat_map(|a| one.iter().map(move |b| a + b)).collect()
        };
        let fits = |i: usize, j: usize| {
            sums.contains(&(total - self.rows[i].sum_squared - self.rows[j].sum_squared))
        };
        let mut table: Vec<(u64, u32, u32)> = Vec::new();
        for i in 0..self.base {
            for j in 0..self.rows.len() {
                if (j >= self.base || j >= i) && self.flatness(i, j) <= limit && fits(i, j) {
                    let hash = self.rows[i].hash.wrapping_add(self.rows[j].hash);
                    table.push((hash, i as u32, j as u32));
                }
            }
        }
        table.sort_unstable();
        let index = Index::new(&table);
        for i in 0..self.rows.len() {
            for j in 0..=i {
                if self.flatness(i, j) > limit {
                    continue;
                }
                let wanted = 0u64.wrapping_sub(self.rows[i].hash.wrapping_add(self.rows[j].hash));
                for &(_, k, l) in index.find(&table, wanted) {
                    let four = [i, j, k as usize, l as usize];
                    if self.cancel(four) {
                        return Some(four);
                    }
                }
            }
        }
        None
    }

    fn cancel(&self, four: [usize; 4]) -> bool {
        (0..self.width)
            .all(|c| four.iter().map(|&i| i32::from(self.plain[i * self.width + c])).sum::<i32>() == 0)
    }
}

/// Where the hashes that begin with given bits stand in the sorted table.
struct Index {
    starts: Vec<u32>,
}

const INDEX_BITS: u32 = 22;

impl Index {
    fn new(table: &[(u64, u32, u32)]) -> Self {
        let mut starts = vec![0u32; (1 << INDEX_BITS) + 1];
        for (hash, _, _) in table {
            starts[(hash >> (64 - INDEX_BITS)) as usize + 1] += 1;
        }
        for b in 1..starts.len() {
            starts[b] += starts[b - 1];
        }
        Self { starts }
    }

    fn find<'a>(&self, table: &'a [(u64, u32, u32)], hash: u64) -> &'a [(u64, u32, u32)] {
        let bucket = (hash >> (64 - INDEX_BITS)) as usize;
        let part = &table[self.starts[bucket] as usize..self.starts[bucket + 1] as usize];
        let from = part.partition_point(|e| e.0 < hash);
        let to = part.partition_point(|e| e.0 <= hash);
        &part[from..to]
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::construct::hadamard::goethals_seidel;

    fn hunt(length: u16, generators: &[u16], samples: u64) -> FourCirculants {
        FourCirculants { length, generators: generators.to_vec(), seed: 3, samples, pool: 400, pairs: 20_000 }
    }

    #[test]
    fn finds_what_the_definition_accepts() {
        for (m, generators) in
            [(3, &[2][..]), (5, &[4]), (7, &[2]), (13, &[3]), (21, &[4]), (37, &[10]), (9, &[1])]
        {
            let request = hunt(m, generators, 5000);
            let rows = request.run().unwrap().unwrap_or_else(|| panic!("length {m}"));
            let h = goethals_seidel(rows.each_ref().map(Vec::as_slice)).unwrap();
            assert!(h.is_hadamard() && h.order() == 4 * usize::from(m));
            let group = request.multipliers().unwrap();
            for row in &rows {
                for (i, &h) in (0..row.len()).flat_map(|i| group.iter().map(move |h| (i, h))) {
                    assert_eq!(row[i * usize::from(h) % row.len()], row[i]);
                }
            }
            assert_eq!(request.run().unwrap(), Some(rows), "the same again");
        }
    }

    /// Rows of length 7 constant on 1 … 6 have sums ±5 and ±7, and 28 is no sum of four squares of
    /// these; for length 249 the sample is all there is.
    #[test]
    fn finds_nothing_where_there_is_nothing() {
        assert_eq!(hunt(7, &[3], 1000).run().unwrap(), None);
        assert_eq!(hunt(249, &[4], 1000).run().unwrap(), None);
    }

    #[test]
    fn refuses_what_is_no_request() {
        assert!(hunt(2, &[1], 1).run().is_err() && hunt(256, &[3], 1).run().is_err());
        assert!(hunt(9, &[3], 1).run().is_err() && hunt(9, &[0], 1).run().is_err());
        assert_eq!(hunt(9, &[4], 1).multipliers().unwrap(), [1, 4, 7]);
    }

    /// The autocorrelation by word operations against the sum of products, across word borders.
    #[test]
    fn autocorrelations_by_definition() {
        let mut random = Random::new(9);
        for m in [3usize, 63, 64, 65, 127, 128, 129, 191, 192, 255] {
            let frame = Frame::new(m, &[1], &mut random);
            let mut bits = [0; WORDS];
            (0..m).for_each(|i| bits[i / 64] |= (random.bits() & 1) << (i % 64));
            let signs = frame.signs(&bits);
            for k in 1..m {
                let plain: i64 = (0..m).map(|i| i64::from(signs[i]) * i64::from(signs[(i + k) % m])).sum();
                assert_eq!(frame.autocorrelation(&bits, k), plain, "{m} {k}");
            }
        }
    }
}
