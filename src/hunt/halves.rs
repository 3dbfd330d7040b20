//! All balanced columns of two or three levels orthogonal to given columns: meet in the middle.

use super::random::Random;
use super::splits::Split;

/// The most entries of a half; a half that has more is sampled.
const MOST: usize = 1 << 20;
/// The most ways to split one block.
const WAYS: usize = 1 << 16;

/// One half of a column, on the blocks of one half of the first given column, with a linear hash
/// of its counts against all given columns.
#[derive(Clone, Copy)]
struct Half {
    key: u64,
    masks: [u128; 2],
}

/// The columns of one number of levels that are orthogonal to given columns, as two sorted lists
/// of halves whose hashes must be equal.
pub(super) struct Halves {
    levels: u8,
    left: Vec<Half>,
    right: Vec<Half>,
    /// Groups of equal keys: begin and end in both lists.
    groups: Vec<[u32; 4]>,
    /// How many pairs there are.
    pub(super) total: u64,
}

impl Halves {
    /// `given`: the symbols of each column, the first one with the smallest blocks. `None` when a
    /// block cannot be split evenly or in too many ways.
    pub(super) fn new(given: &[(u16, Vec<u8>)], levels: u8, random: &mut Random) -> Option<Self> {
        let (first, symbols) = given.first()?;
        let (runs, s) = (symbols.len(), usize::from(levels));
        if given.iter().any(|(t, _)| !runs.is_multiple_of(usize::from(*t) * s)) {
            return None;
        }
        let (weights, target) = weigh(given, s, random);
        let mut blocks: Vec<Vec<Half>> = Vec::new();
        for level in 0..*first {
            let block: Vec<usize> = (0..runs).filter(|&r| u16::from(symbols[r]) == level).collect();
            blocks.push(ways(&block, s, &weights)?);
        }
        // The levels can be renamed: run 0 has level 0.
        let home = blocks.iter().position(|b| b.iter().any(|h| h.masks[0] & 1 == 1))?;
        blocks[home].retain(|h| h.masks[0] & 1 == 1);
        let middle = blocks.len() / 2;
        let mut left = product(&blocks[..middle], random);
        let mut right = product(&blocks[middle..], random);
        left.iter_mut().for_each(|h| h.key = target.wrapping_sub(h.key));
        left.sort_unstable_by_key(|h| (h.key, h.masks));
        right.sort_unstable_by_key(|h| (h.key, h.masks));
        left.dedup_by_key(|h| h.masks);
        right.dedup_by_key(|h| h.masks);
        let mut halves = Self { levels, left, right, groups: Vec::new(), total: 0 };
        halves.group();
        Some(halves)
    }

    fn group(&mut self) {
        let (mut i, mut j) = (0, 0);
        while i < self.left.len() && j < self.right.len() {
            let (a, b) = (self.left[i].key, self.right[j].key);
            if a != b {
                if a < b {
                    i += 1;
                } else {
                    j += 1;
                }
                continue;
            }
            let end = |list: &[Half], from: usize| {
                list[from..].iter().position(|h| h.key != a).map_or(list.len(), |n| from + n)
            };
            let (x, y) = (end(&self.left, i), end(&self.right, j));
            self.total += (x - i) as u64 * (y - j) as u64;
            self.groups.push([i as u32, x as u32, j as u32, y as u32]);
            (i, j) = (x, y);
        }
    }

    /// How many halves there are.
    pub(super) fn size(&self) -> u64 {
        (self.left.len() + self.right.len()) as u64
    }

    fn join(&self, i: usize, j: usize) -> Split {
        let (a, b) = (&self.left[i].masks, &self.right[j].masks);
        Split { masks: [a[0] | b[0], a[1] | b[1]], levels: self.levels }
    }

    /// Shows all columns, or when there are more than `looks` that many, drawn at random, until
    /// the caller has enough.
    pub(super) fn visit(&self, looks: u64, random: &mut Random, mut enough: impl FnMut(Split) -> bool) {
        if self.total <= looks {
            for &[i, x, j, y] in &self.groups {
                for a in i..x {
                    for b in j..y {
                        if enough(self.join(a as usize, b as usize)) {
                            return;
                        }
                    }
                }
            }
            return;
        }
        for _ in 0..looks {
            let a = random.below(self.left.len());
            let known = self.groups.binary_search_by(|g| {
                if g[1] as usize <= a {
                    std::cmp::Ordering::Less
                } else if g[0] as usize > a {
                    std::cmp::Ordering::Greater
                } else {
                    std::cmp::Ordering::Equal
                }
            });
            let Ok(at) = known else { continue };
            let [_, _, j, y] = self.groups[at];
            if enough(self.join(a, j as usize + random.below((y - j) as usize))) {
                return;
            }
        }
    }
}

/// A weight for each run and level, so that the sum over the runs of a column tells its counts, and
/// the sum that a column orthogonal to all has.
fn weigh(given: &[(u16, Vec<u8>)], s: usize, random: &mut Random) -> (Vec<[u64; 2]>, u64) {
    let runs = given[0].1.len();
    let mut weights = vec![[0u64; 2]; runs];
    let mut target = 0u64;
    for (levels, symbols) in given {
        let even = (runs / (usize::from(*levels) * s)) as u64;
        // The count of one level follows from the others'.
        let random: Vec<[u64; 2]> = (0..*levels).map(|_| [random.bits(), random.bits()]).collect();
        for pair in &random {
            for r in &pair[..s - 1] {
                target = target.wrapping_add(even.wrapping_mul(*r));
            }
        }
        for (weight, &x) in weights.iter_mut().zip(symbols) {
            for k in 0..s - 1 {
                weight[k] = weight[k].wrapping_add(random[usize::from(x)][k]);
            }
        }
    }
    (weights, target)
}

/// All ways to split a block evenly.
fn ways(block: &[usize], s: usize, weights: &[[u64; 2]]) -> Option<Vec<Half>> {
    if !block.len().is_multiple_of(s) {
        return None;
    }
    let each = block.len() / s;
    let mut all = vec![(Half { key: 0, masks: [0; 2] }, [0usize; 3])];
    for &run in block {
        let mut next = Vec::new();
        for (half, counts) in all {
            for level in 0..s {
                if counts[level] == each {
                    continue;
                }
                let (mut half, mut counts) = (half, counts);
                counts[level] += 1;
                if level < s - 1 {
                    half.masks[level] |= 1 << run;
                    half.key = half.key.wrapping_add(weights[run][level]);
                }
                next.push((half, counts));
            }
        }
        if next.len() > 4 * WAYS {
            return None;
        }
        all = next;
    }
    Some(all.into_iter().map(|(half, _)| half).collect())
}

fn product(blocks: &[Vec<Half>], random: &mut Random) -> Vec<Half> {
    let join = |a: &Half, b: &Half| Half {
        key: a.key.wrapping_add(b.key),
        masks: [a.masks[0] | b.masks[0], a.masks[1] | b.masks[1]],
    };
    let none = Half { key: 0, masks: [0; 2] };
    let size = blocks.iter().try_fold(1usize, |n, b| n.checked_mul(b.len()).filter(|&n| n <= MOST));
    if size.is_none() {
        return (0..MOST)
            .map(|_| blocks.iter().fold(none, |h, b| join(&h, &b[random.below(b.len())])))
            .collect();
    }
    blocks.iter().fold(vec![none], |all, block| {
        all.iter().flat_map(|a| block.iter().map(move |b| join(a, b))).collect()
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn all(given: &[(u16, Vec<u8>)], levels: u8, looks: u64) -> Vec<Split> {
        let mut random = Random::new(1);
        let halves = Halves::new(given, levels, &mut random).unwrap();
        let mut found = Vec::new();
        halves.visit(looks, &mut random, |s| {
            found.push(s);
            false
        });
        found
    }

    /// The squares of order 6 of zeros and ones with all sums 3: 297,200 (OEIS A058527 \[memory\]),
    /// half of them up to complement.
    #[test]
    fn squares_with_even_sums_are_counted() {
        let grid = |s: u8| {
            let by = |f: fn(u8, u8) -> u8| (0..s * s).map(|r| f(r, s)).collect();
            [(u16::from(s), by(|r, s| r / s)), (u16::from(s), by(|r, s| r % s))]
        };
        assert_eq!(all(&grid(6), 2, u64::MAX).len(), 148_600);
        assert_eq!(all(&grid(4), 2, u64::MAX).len(), 45);
        // Latin squares of order 3, the first cell fixed.
        assert_eq!(all(&grid(3), 3, u64::MAX).len(), 4);
        let some = all(&grid(6), 2, 1000);
        assert!(some.len() <= 1000 && some.len() > 500);
    }

    #[test]
    fn what_cannot_be_even_is_refused() {
        let given = [(3, vec![0, 0, 1, 1, 2, 2])];
        assert!(Halves::new(&given, 3, &mut Random::new(1)).is_none());
        assert!(Halves::new(&[], 2, &mut Random::new(1)).is_none());
    }
}
