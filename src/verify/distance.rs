//! The second judge: the dual distribution, from the distances between runs.
//!
//! An array has strength t if and only if B_1 = … = B_t = 0 (Delsarte, "An algebraic approach to
//! the association schemes of coding theory", 1973; for mixed levels Sloane & Stufken, "A linear
//! programming bound for orthogonal arrays with mixed levels", 1996). It shares no step with
//! [`counting`](super::counting), and its cost does not grow with t.

use std::collections::{BTreeSet, HashMap};
use std::ops::{AddAssign, Mul, Neg};

use num_bigint::BigInt;
use rayon::prelude::*;

use super::evidence::ratio_text;
use crate::array::Array;
use crate::mix::counts_of;

/// The beginning B_0, B_1, …, B_J of the dual distribution of an array, exactly.
///
/// B_j sums over all factor sets of size j; by groups of factors with equal levels it is the sum
/// of the B_i, |i| = j, of Sloane & Stufken, and since each of those is at least 0 nothing is lost.
/// B_1, B_2, … is also the generalised word-length pattern of Xu & Wu, "Generalized minimum
/// aberration for asymmetrical fractional factorial designs", 2001.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct DualDistribution {
    runs: usize,
    factors: usize,
    numerators: Vec<BigInt>,
}

impl DualDistribution {
    /// The numerators of B_0, …, B_J over N²; the first is N² itself.
    #[must_use]
    pub fn numerators(&self) -> &[BigInt] {
        &self.numerators
    }

    /// The largest t ≤ J with B_1 = … = B_t = 0.
    #[must_use]
    pub fn strength(&self) -> usize {
        self.numerators.iter().skip(1).take_while(|b| **b == BigInt::ZERO).count()
    }

    /// Whether [`DualDistribution::strength`] is the largest strength the array has, rather than
    /// as far as was computed.
    #[must_use]
    pub fn strength_is_exact(&self) -> bool {
        self.strength() + 1 < self.numerators.len() || self.numerators.len() == self.factors + 1
    }

    /// B_1, …, B_J as texts in lowest terms: `"0"`, `"35"`, `"55/3"`.
    #[must_use]
    pub fn word_length_pattern(&self) -> Vec<String> {
        let square = BigInt::from(self.runs) * BigInt::from(self.runs);
        self.numerators.iter().skip(1).map(|b| ratio_text(b, &square)).collect()
    }
}

/// The dual distribution of `array` up to B_J, J the smaller of `up_to` and the number of factors.
///
/// With x the numbers of differing factors of two runs, one per group of factors with equal
/// levels, summed over all ordered pairs of runs (a run with itself included):
/// Σ B_j z^j = (1/N²) Σ ∏_g (1 + (s_g − 1)z)^(k_g − x_g) (1 − z)^(x_g).
///
/// Cost: N²/2 · k/64 · ⌈log2 s⌉ word operations, and one product of polynomials of degree J per
/// distinct x. Computed in 128-bit integers where these provably suffice, otherwise in big ones.
///
/// ```
/// use trysquare::{array::Array, verify::distance};
/// let array = Array::from_rows(vec![2, 2, 2], &[[0, 0, 0], [0, 1, 1], [1, 0, 1], [1, 1, 0]])?;
/// let dual = distance::dual_distribution(&array, 3);
/// assert_eq!(dual.strength(), 2);
/// assert_eq!(dual.word_length_pattern(), ["0", "0", "1"]);
/// # Ok::<(), trysquare::array::ArrayError>(())
/// ```
#[must_use]
pub fn dual_distribution(array: &Array, up_to: usize) -> DualDistribution {
    let degree = up_to.min(array.factors());
    let packed = Packed::new(array);
    let tally = packed.tally();
    let numerators = if fits_i128(&packed.groups, array.runs(), degree) {
        let sums: Vec<i128> = sum_polynomials(&packed.groups, &tally, degree);
        sums.into_iter().map(BigInt::from).collect()
    } else {
        sum_polynomials(&packed.groups, &tally, degree)
    };
    DualDistribution { runs: array.runs(), factors: array.factors(), numerators }
}

/// An estimate of the word operations of [`dual_distribution`].
pub(super) fn cost(array: &Array, degree: usize) -> u128 {
    let groups = groups(array.levels());
    let n = array.runs() as u128;
    let words: u128 = words(&groups).iter().map(|w| u128::from(w.planes) + w.parts.len() as u128).sum();
    let distinct = distances(&groups);
    let pairs = n.saturating_mul(n) / 2;
    let degree = degree.min(array.factors()) as u128 + 1;
    let polynomial = (groups.len() as u128).saturating_mul(degree.saturating_mul(degree));
    let products = distinct.min(pairs).saturating_mul(polynomial);
    // A hash map in place of a table costs about 30 word operations per pair.
    let entry = if fits_table(distinct, array.runs()) { 2 } else { 30 };
    pairs.saturating_mul(words + entry).saturating_add(products)
}

/// The number of possible x.
fn distances(groups: &[Group]) -> u128 {
    groups.iter().fold(1, |product, g| product.saturating_mul(g.factors as u128 + 1))
}

/// Whether to count the x in a table: it must fit a cache, and clearing it must not cost more
/// than filling it.
fn fits_table(distances: u128, runs: usize) -> bool {
    let pairs = (runs as u128).saturating_mul(runs as u128) / 2;
    distances <= pairs.clamp(1 << 12, 1 << 18)
}

/// The factors with `levels` levels.
#[derive(Clone, Copy)]
struct Group {
    levels: u16,
    factors: usize,
}

fn groups(levels: &[u16]) -> Vec<Group> {
    counts_of(levels).into_iter().map(|(levels, factors)| Group { levels, factors }).collect()
}

/// 64 neighbouring factors of a run, sorted by levels, one word per bit of the symbols.
struct Word {
    offset: usize,
    planes: u32,
    /// The groups in it and the places of their factors.
    parts: Vec<(usize, u64)>,
}

fn words(groups: &[Group]) -> Vec<Word> {
    let mut words: Vec<Word> = Vec::new();
    let mut place = 0usize;
    for (g, group) in groups.iter().enumerate() {
        let mut left = group.factors;
        while left > 0 {
            let bit = place % 64;
            let take = left.min(64 - bit);
            if bit == 0 {
                let offset = words.last().map_or(0, |w| w.offset + w.planes as usize);
                words.push(Word { offset, planes: 0, parts: Vec::new() });
            }
            let word = words.last_mut().expect("pushed at bit 0");
            word.planes = u16::BITS - (group.levels - 1).leading_zeros();
            word.parts.push((g, (u64::MAX >> (64 - take)) << bit));
            place += take;
            left -= take;
        }
    }
    words
}

/// How many ordered pairs of runs have which x.
type Tally = Vec<(Vec<usize>, u64)>;

struct Packed {
    groups: Vec<Group>,
    words: Vec<Word>,
    /// Words per run.
    stride: usize,
    runs: usize,
    data: Vec<u64>,
}

impl Packed {
    fn new(array: &Array) -> Self {
        let groups = groups(array.levels());
        let words = words(&groups);
        let stride = words.last().map_or(0, |w| w.offset + w.planes as usize);
        let mut order: Vec<usize> = (0..array.factors()).collect();
        order.sort_by_key(|&j| array.levels()[j]);
        let mut data = vec![0u64; stride * array.runs()];
        for (place, &j) in order.iter().enumerate() {
            let word = &words[place / 64];
            for (run, &symbol) in array.column(j).iter().enumerate() {
                for plane in 0..word.planes as usize {
                    let bit = u64::from(symbol >> plane) & 1;
                    data[run * stride + word.offset + plane] |= bit << (place % 64);
                }
            }
        }
        Self { groups, words, stride, runs: array.runs(), data }
    }

    fn row(&self, run: usize) -> &[u64] {
        &self.data[run * self.stride..(run + 1) * self.stride]
    }

    fn tally(&self) -> Tally {
        let size = distances(&self.groups);
        let mut tally = if fits_table(size, self.runs) {
            self.tally_in_table(size as usize)
        } else {
            self.tally_in_map()
        };
        tally.iter_mut().for_each(|(_, n)| *n *= 2);
        tally.push((vec![0; self.groups.len()], self.runs as u64));
        tally
    }

    /// All unordered pairs of different runs, x read as a number in mixed radix.
    fn tally_in_table(&self, size: usize) -> Tally {
        let mut weights = vec![1usize; self.groups.len()];
        for g in 1..weights.len() {
            weights[g] = weights[g - 1] * (self.groups[g - 1].factors + 1);
        }
        let two_levels_only = self.groups.len() == 1 && self.groups[0].levels == 2;
        let block = |mut counts: Vec<u64>, first: usize| {
            let a = self.row(first);
            for b in self.data[(first + 1) * self.stride..].chunks_exact(self.stride) {
                let x = if two_levels_only {
                    a.iter().zip(b).map(|(a, b)| (a ^ b).count_ones() as usize).sum()
                } else {
                    let mut x = 0;
                    self.differences(a, b, |g, n| x += weights[g] * n);
                    x
                };
                counts[x] += 1;
            }
            counts
        };
        let counts =
            (0..self.runs).into_par_iter().fold(|| vec![0u64; size], block).reduce_with(|mut a, b| {
                a.iter_mut().zip(b).for_each(|(a, b)| *a += b);
                a
            });
        let digits = |x: usize| {
            weights.iter().zip(&self.groups).map(|(w, g)| x / w % (g.factors + 1)).collect::<Vec<_>>()
        };
        let counted = counts.unwrap_or_default().into_iter().enumerate().filter(|&(_, n)| n > 0);
        counted.map(|(x, n)| (digits(x), n)).collect()
    }

    fn tally_in_map(&self) -> Tally {
        let block = |mut counts: HashMap<Vec<usize>, u64>, first: usize| {
            let a = self.row(first);
            let mut x = vec![0usize; self.groups.len()];
            for b in self.data[(first + 1) * self.stride..].chunks_exact(self.stride) {
                x.fill(0);
                self.differences(a, b, |g, n| x[g] += n);
                match counts.get_mut(&x) {
                    Some(n) => *n += 1,
                    None => {
                        counts.insert(x.clone(), 1);
                    }
                }
            }
            counts
        };
        let counts = (0..self.runs).into_par_iter().fold(HashMap::new, block).reduce(HashMap::new, |a, b| {
            let (mut large, small) = if a.len() < b.len() { (b, a) } else { (a, b) };
            small.into_iter().for_each(|(x, n)| *large.entry(x).or_insert(0) += n);
            large
        });
        counts.into_iter().collect()
    }

    /// Reports for each word and group how many of its factors differ.
    #[inline]
    fn differences(&self, a: &[u64], b: &[u64], mut report: impl FnMut(usize, usize)) {
        for word in &self.words {
            let planes = word.offset..word.offset + word.planes as usize;
            let differ = a[planes.clone()].iter().zip(&b[planes]).fold(0, |d, (a, b)| d | (a ^ b));
            for &(g, mask) in &word.parts {
                report(g, (differ & mask).count_ones() as usize);
            }
        }
    }
}

/// Whether every number that occurs in [`sum_polynomials`] is below 2^127.
///
/// With M_j the coefficients of ∏ (1 + (s_g − 1)z)^(k_g): every coefficient of every (partial)
/// product is at most M_j in absolute value because s_g − 1 ≥ 1, a step of the recurrence adds two
/// numbers of at most (s_g − 1)·2·M_j, and the weights of the pairs add up to N².
fn fits_i128(groups: &[Group], runs: usize, degree: usize) -> bool {
    let mut bound = vec![0u128; degree + 1];
    bound[0] = 1;
    for group in groups {
        let a = u128::from(group.levels - 1);
        for _ in 0..group.factors {
            for j in (1..=degree).rev() {
                let Some(b) = bound[j - 1].checked_mul(a).and_then(|m| m.checked_add(bound[j])) else {
                    return false;
                };
                bound[j] = b;
            }
        }
    }
    let steepest = groups.iter().map(|g| u128::from(g.levels)).max().unwrap_or(1);
    let square = (runs as u128).checked_mul(runs as u128);
    bound.iter().all(|&m| {
        square
            .and_then(|n| n.checked_mul(m))
            .and_then(|n| n.checked_mul(4 * steepest))
            .is_some_and(|n| n < 1 << 127)
    })
}

/// Σ over the pairs of runs of ∏_g (1 + (s_g − 1)z)^(k_g − x_g) (1 − z)^(x_g), up to z^degree.
fn sum_polynomials<T>(groups: &[Group], tally: &Tally, degree: usize) -> Vec<T>
where
    T: Clone + From<u64> + Neg<Output = T> + for<'a> AddAssign<&'a T> + for<'a> Mul<&'a T, Output = T>,
{
    let met = |g: usize| tally.iter().map(|(x, _)| x[g]).collect::<BTreeSet<usize>>();
    let tables: Vec<HashMap<usize, Vec<T>>> =
        groups.iter().enumerate().map(|(g, group)| krawtchouk(*group, degree, &met(g))).collect();
    let zero = || vec![T::from(0); degree + 1];
    let mut sum = zero();
    for (x, pairs) in tally {
        let mut product = tables[0][&x[0]].clone();
        for (table, &x) in tables.iter().zip(x).skip(1) {
            let mut next = zero();
            for (i, p) in product.iter().enumerate() {
                for (j, q) in table[&x][..=degree - i].iter().enumerate() {
                    next[i + j] += &(p.clone() * q);
                }
            }
            product = next;
        }
        let pairs = T::from(*pairs);
        for (s, p) in sum.iter_mut().zip(product) {
            *s += &(p * &pairs);
        }
    }
    sum
}

/// For every x that is met, the Krawtchouk values K_0(x), …, K_degree(x) of a group: the
/// coefficients of (1 + (s − 1)z)^(k − x) (1 − z)^x.
fn krawtchouk<T>(group: Group, degree: usize, met: &BTreeSet<usize>) -> HashMap<usize, Vec<T>>
where
    T: Clone + From<u64> + Neg<Output = T> + for<'a> AddAssign<&'a T> + for<'a> Mul<&'a T, Output = T>,
{
    let a = T::from(u64::from(group.levels - 1));
    let minus_a = -a.clone();
    let mut row = vec![T::from(0); degree + 1];
    row[0] = T::from(1);
    for _ in 0..group.factors {
        for j in (1..=degree).rev() {
            let carried = row[j - 1].clone() * &a;
            row[j] += &carried;
        }
    }
    let mut table = HashMap::new();
    for x in 0..=met.last().copied().unwrap_or(0) {
        if x > 0 {
            // Times (1 − z), divided as a power series by 1 + (s − 1)z.
            let mut next = row.clone();
            for j in 1..=degree {
                next[j] += &-row[j - 1].clone();
                let carried = next[j - 1].clone() * &minus_a;
                next[j] += &carried;
            }
            row = next;
        }
        if met.contains(&x) {
            table.insert(x, row.clone());
        }
    }
    table
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Runs of a linear congruential generator: no structure wanted, only variety.
    fn scattered(runs: usize, levels: &[u16]) -> Array {
        let mut state = 1u64;
        let mut cells = Vec::new();
        for &s in levels {
            for _ in 0..runs {
                state = state.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
                cells.push(((state >> 33) % u64::from(s)) as u16);
            }
        }
        Array::new(runs, levels.to_vec(), cells).unwrap()
    }

    #[test]
    fn both_kinds_of_integers_give_the_same_sums() {
        for levels in [vec![2; 70], [vec![2; 5], vec![3; 66], vec![7; 3]].concat(), vec![65535, 2, 65535]] {
            let packed = Packed::new(&scattered(12, &levels));
            let tally = packed.tally();
            let degree = 8.min(levels.len());
            assert!(fits_i128(&packed.groups, 12, degree));
            let small: Vec<i128> = sum_polynomials(&packed.groups, &tally, degree);
            let large: Vec<BigInt> = sum_polynomials(&packed.groups, &tally, degree);
            assert_eq!(small.into_iter().map(BigInt::from).collect::<Vec<_>>(), large);
        }
    }

    /// At z = 1 only equal runs count: the B_j add up to ∏ s · (equal ordered pairs) / N².
    #[test]
    fn the_whole_distribution_adds_up() {
        for (runs, levels) in
            [(9, vec![2; 140]), (7, [vec![5; 70], vec![2; 3]].concat()), (30, vec![2, 3, 4])]
        {
            let array = scattered(runs, &levels);
            let rows: Vec<Vec<u16>> = array.rows().collect();
            let equal = rows.iter().flat_map(|a| rows.iter().filter(move |b| a == *b)).count();
            let dual = dual_distribution(&array, usize::MAX);
            let size: BigInt = levels.iter().map(|&s| BigInt::from(s)).product();
            assert_eq!(dual.numerators().iter().sum::<BigInt>(), size * BigInt::from(equal));
            assert!(dual.strength_is_exact());
            assert!(dual.numerators().iter().all(|b| *b >= BigInt::ZERO));
        }
        assert!(!fits_i128(&[Group { levels: 2, factors: 140 }], 9, 140));
    }

    #[test]
    fn table_and_map_count_the_same() {
        let levels: Vec<u16> = (2..11).chain(2..7).collect();
        let packed = Packed::new(&scattered(40, &levels));
        let size = packed.groups.iter().map(|g| g.factors + 1).product();
        let (mut table, mut map) = (packed.tally_in_table(size), packed.tally_in_map());
        table.sort();
        map.sort();
        assert_eq!(table, map);
    }
}
