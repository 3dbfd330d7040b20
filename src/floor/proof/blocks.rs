/// The largest number of vectors that [`blocks_allow`] finds for p = 3 and 5; `None` for other p.
///
/// What is stated here from a computation is computed again by the checker.
#[must_use]
pub fn block_limit(p: u16) -> Option<u64> {
    match p {
        3 => Some(4),
        5 => Some(8),
        _ => None,
    }
}

/// Whether k two-level factors can stand beside one p-level factor in 4p runs, p 3 or 5: decided
/// by exhaustion. `None` when p is another number or the search is longer than a fixed limit.
///
/// The four runs at a level of the p-level factor are a block. Strength 2 makes a two-level factor
/// split each block 2 + 2, in one of three ways with one of two signs: a vector in
/// {±e_1, ±e_2, ±e_3}^p. Two different ways are orthogonal within the block, so two factors are
/// orthogonal if and only if the blocks in which they agree are as many as those in which they are
/// opposite: OA(4p, p·2^k, 2) exists if and only if k such vectors are pairwise orthogonal.
///
/// The permutations of the four runs of a block act on the six signed ways transitively, and those
/// that fix e_1 act transitively on ±e_2, ±e_3. So the first vector may be (e_1, …, e_1), and the
/// second one with m agreements begins with m times e_1 and m times −e_1, the rest being e_2.
/// Vectors that differ in sign count once. What is left is a search for cliques.
///
/// Reference: the vectors as in DeCock & Stufken 2000 \[memory\].
#[must_use]
pub fn blocks_allow(p: u16, k: u64) -> Option<bool> {
    block_limit(p)?;
    if k <= 2 {
        return Some(true);
    }
    let p = usize::from(p);
    let first = vec![1i8; p];
    let mut steps = LIMIT;
    for m in 0..=p / 2 {
        let second: Vec<i8> = (0..p)
            .map(|i| {
                if i < m {
                    1
                } else if i < 2 * m {
                    -1
                } else {
                    2
                }
            })
            .collect();
        let others: Vec<Vec<i8>> =
            vectors(p).filter(|v| orthogonal(v, &first) && orthogonal(v, &second)).collect();
        let near: Vec<Vec<u64>> =
            others.iter().map(|v| bits(others.len(), |n| orthogonal(v, &others[n]))).collect();
        let all = bits(others.len(), |_| true);
        if clique(&near, &all, k - 2, &mut steps)? {
            return Some(true);
        }
    }
    Some(false)
}

/// Longer searches are not made.
const LIMIT: u64 = 20_000_000;

/// All vectors up to sign, an entry ±i for ±e_i: the first entry is positive.
fn vectors(p: usize) -> impl Iterator<Item = Vec<i8>> {
    const WAYS: [i8; 6] = [1, 2, 3, -1, -2, -3];
    (0..3 * 6usize.pow(p as u32 - 1)).map(move |n| {
        let mut rest = n;
        let mut v = vec![WAYS[rest % 3]];
        rest /= 3;
        for _ in 1..p {
            v.push(WAYS[rest % 6]);
            rest /= 6;
        }
        v
    })
}

fn orthogonal(a: &[i8], b: &[i8]) -> bool {
    a.iter().zip(b).map(|(&x, &y)| i32::from(x == y) - i32::from(x == -y)).sum::<i32>() == 0
}

fn bits(n: usize, is: impl Fn(usize) -> bool) -> Vec<u64> {
    let mut words = vec![0u64; n.div_ceil(64)];
    for i in (0..n).filter(|&i| is(i)) {
        words[i / 64] |= 1 << (i % 64);
    }
    words
}

/// Whether `wanted` of the candidates are pairwise near each other.
fn clique(near: &[Vec<u64>], candidates: &[u64], wanted: u64, steps: &mut u64) -> Option<bool> {
    if wanted == 0 {
        return Some(true);
    }
    *steps = steps.checked_sub(1)?;
    let mut left = candidates.to_vec();
    loop {
        let count: u64 = left.iter().map(|w| u64::from(w.count_ones())).sum();
        if count < wanted {
            return Some(false);
        }
        let word = left.iter().position(|&w| w != 0).unwrap_or(0);
        let bit = left[word].trailing_zeros() as usize;
        left[word] &= left[word] - 1;
        let next: Vec<u64> = left.iter().zip(&near[word * 64 + bit]).map(|(a, b)| a & b).collect();
        if clique(near, &next, wanted - 1, steps)? {
            return Some(true);
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_limits_are_what_the_search_finds() {
        for p in [3, 5] {
            let limit = block_limit(p).unwrap();
            assert_eq!(blocks_allow(p, limit), Some(true), "{p}");
            assert_eq!(blocks_allow(p, limit + 1), Some(false), "{p}");
        }
        assert_eq!(blocks_allow(7, 3), None);
    }
}
