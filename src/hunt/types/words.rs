//! Vectors of block types orthogonal to given ones: meet in the middle.

use crate::hunt::random::Random;

/// An entry: twice the type (from 0), plus one when negative.
pub(super) type Word = [u8; 32];

/// The most entries of a sorted half.
const MOST: u64 = 1 << 21;
/// The most entries of the other half that are looked up.
const DRAWN: u64 = 1 << 24;
/// Shows words of length p, their first entry positive, that are orthogonal to the given ones: all of
/// them or `looks` many, until the caller has enough. Meets in the middle, by a hash of the products.
pub(super) fn visit(
    p: usize,
    given: &[Word],
    looks: u64,
    random: &mut Random,
    mut enough: impl FnMut(&Word) -> bool,
) {
    let keys: Vec<[u64; 6]> = keys(p, given, random);
    let middle = p / 2;
    let left = Half::new(&keys[..middle], true, random);
    let right = Half::new(&keys[middle..], false, random);
    if given.is_empty() {
        let all = left.size.saturating_mul(right.size);
        for n in 0..all.min(looks) {
            let (a, b) = if all <= looks {
                (n / right.size, n % right.size)
            } else {
                (random.bits() % left.size, random.bits() % right.size)
            };
            let mut word = [0; 32];
            left.write(a, &mut word[..middle]);
            right.write(b, &mut word[middle..p]);
            if enough(&word) {
                return;
            }
        }
        return;
    }
    let mut sorted: Vec<(u64, u64)> = (0..left.size.min(MOST))
        .map(|i| left.scrambled(i))
        .map(|i| (left.key(i).wrapping_neg(), i))
        .collect();
    sorted.sort_unstable();
    let index = Index::new(&sorted);
    let mut looked = 0;
    for i in 0..right.size.min(DRAWN) {
        let b = right.scrambled(i);
        for &(_, a) in index.find(&sorted, right.key(b)) {
            let mut word = [0; 32];
            left.write(a, &mut word[..middle]);
            right.write(b, &mut word[middle..p]);
            looked += 1;
            if enough(&word) || looked >= looks {
                return;
            }
        }
    }
}

/// A weight for each position and entry, so that the sum over a word is zero when it is
/// orthogonal to all given words, and otherwise hardly ever.
fn keys(p: usize, given: &[Word], random: &mut Random) -> Vec<[u64; 6]> {
    let mut keys = vec![[0u64; 6]; p];
    for word in given {
        let weight = random.bits();
        for (key, &c) in keys.iter_mut().zip(&word[..p]) {
            key[usize::from(c)] = key[usize::from(c)].wrapping_add(weight);
            key[usize::from(c ^ 1)] = key[usize::from(c ^ 1)].wrapping_sub(weight);
        }
    }
    keys
}

/// The words on some positions, by number.
struct Half<'a> {
    keys: &'a [[u64; 6]],
    /// Whether the first entry is positive.
    positive: bool,
    size: u64,
    step: u64,
    from: u64,
}

impl<'a> Half<'a> {
    fn new(keys: &'a [[u64; 6]], positive: bool, random: &mut Random) -> Self {
        let size = 6u64.pow(keys.len() as u32) / if positive { 2 } else { 1 };
        // Prime to 6.
        let step = (random.bits() % size / 6) * 6 + 1;
        Self { keys, positive, size, step, from: random.bits() % size }
    }

    /// Each number once, in an order that depends on the seed.
    fn scrambled(&self, i: u64) -> u64 {
        let product = u128::from(i) * u128::from(self.step) + u128::from(self.from);
        (product % u128::from(self.size)) as u64
    }

    fn entries(&self, number: u64) -> impl Iterator<Item = u8> {
        let mut rest = number;
        let positive = self.positive;
        (0..self.keys.len()).map(move |j| {
            let base = if positive && j == 0 { 3 } else { 6 };
            let digit = (rest % base) as u8;
            rest /= base;
            if base == 3 { 2 * digit } else { digit }
        })
    }

    fn key(&self, number: u64) -> u64 {
        self.entries(number)
            .zip(self.keys)
            .fold(0, |sum, (code, key)| sum.wrapping_add(key[usize::from(code)]))
    }

    fn write(&self, number: u64, word: &mut [u8]) {
        for (code, place) in self.entries(number).zip(word) {
            *place = code;
        }
    }
}

/// Where the keys that begin with given bits start in a sorted list.
struct Index {
    starts: Vec<u32>,
}

impl Index {
    const BITS: u32 = 20;

    fn new(sorted: &[(u64, u64)]) -> Self {
        let mut starts = vec![0u32; (1 << Self::BITS) + 1];
        for (key, _) in sorted {
            starts[(key >> (64 - Self::BITS)) as usize + 1] += 1;
        }
        for i in 1..starts.len() {
            starts[i] += starts[i - 1];
        }
        Self { starts }
    }

    fn find<'a>(&self, sorted: &'a [(u64, u64)], key: u64) -> &'a [(u64, u64)] {
        let bucket = (key >> (64 - Self::BITS)) as usize;
        let among = &sorted[self.starts[bucket] as usize..self.starts[bucket + 1] as usize];
        let begin = among.partition_point(|x| x.0 < key);
        let end = among[begin..].partition_point(|x| x.0 == key);
        &among[begin..begin + end]
    }
}

#[cfg(test)]
mod tests {
    use std::collections::HashSet;

    use super::*;

    fn product(a: &Word, b: &Word) -> i32 {
        let one = |(x, y): (&u8, &u8)| match x ^ y {
            0 => 1,
            1 => -1,
            _ => 0,
        };
        a[..5].iter().zip(&b[..5]).map(one).sum()
    }

    /// The words orthogonal to two given ones, by trying all.
    #[test]
    fn all_words_orthogonal_to_given_ones() {
        let mut random = Random::new(3);
        let mut all = HashSet::new();
        visit(5, &[], u64::MAX, &mut random, |w| !all.insert(*w));
        assert_eq!(all.len(), 3 * 6usize.pow(4));
        let mut a = [0; 32];
        a[..5].copy_from_slice(&[0, 2, 4, 1, 3]);
        let b = *all.iter().find(|w| product(w, &a) == 0).unwrap();
        let mut listed = HashSet::new();
        visit(5, &[a, b], u64::MAX, &mut random, |w| !listed.insert(*w));
        all.retain(|w| product(w, &a) == 0 && product(w, &b) == 0);
        assert!(all.len() > 50 && listed == all);
        let mut some = 0;
        visit(5, &[a, b], 10, &mut random, |_| {
            some += 1;
            false
        });
        assert_eq!(some, 10);
    }
}
