/// Whether the argument leaves room for an array of strength 3 in 8s runs with one factor of s
/// levels, s odd, beside k two-level factors; it leaves none for k ≥ 7, nor for s = 3, k ≥ 5.
///
/// Proof. The runs at one level of the s-level factor are an OA(8, 2^k, 2): distinct nonzero
/// points of F_2^3 up to order and complements, as every two-level column in such an array is
/// affine. The product of three columns is constant on the eight runs (their *triple* is a line)
/// when the points sum to zero, and sums to zero over the runs otherwise. Strength 3 makes the sum
/// over all s levels zero for each three columns, so each triple is a line at an even number of
/// levels. With k = 7 all points are there and each level has 7 lines: 7s is odd for odd s, a
/// contradiction; more factors contain seven.
///
/// With k = 5 and s = 3 each level has two lines (five points are the plane without the other
/// two; 7 − 3 − 3 + 1), which meet in one point and cover all five. Each triple is a line at zero
/// or two of the three levels, so there are three triples, each two of them together at one level:
/// they meet pairwise in one point, and the first two cover everything. If the third contains the
/// common point of the first two it meets them nowhere else, if not it meets each of them once:
/// in both cases it has at most two points, a contradiction.
///
/// Reference: proved here; that OA(8, 2^k, 2) is unique up to the choice of points for k = 5, 6, 7
/// is common knowledge \[memory\]; what is used of it is checked on all of them in the tests.
#[must_use]
pub fn eight_runs_allow(levels: u16, factors: u64) -> bool {
    levels.is_multiple_of(2) || factors < if levels == 3 { 5 } else { 7 }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Calls `with` for every set of `wanted` more columns that are orthogonal to each other and to
    /// the chosen ones, a column being the runs at level 1, run 0 at level 0.
    fn arrays(from: u16, wanted: usize, chosen: &mut Vec<u16>, with: &mut impl FnMut(&[u16])) {
        if wanted == 0 {
            return with(chosen);
        }
        for column in (from..256).step_by(2).filter(|c| c.count_ones() == 4) {
            if chosen.iter().all(|other| (other ^ column).count_ones() == 4) {
                chosen.push(column);
                arrays(column + 2, wanted - 1, chosen, with);
                chosen.pop();
            }
        }
    }

    /// The triples of columns whose product is constant.
    fn lines(columns: &[u16]) -> Vec<[usize; 3]> {
        let k = columns.len();
        let triples = (0..k).flat_map(|a| (a + 1..k).flat_map(move |b| (b + 1..k).map(move |c| [a, b, c])));
        triples.filter(|t| matches!(t.iter().fold(0, |x, &i| x ^ columns[i]), 0 | 255)).collect()
    }

    #[test]
    fn what_the_proof_says_of_eight_runs() {
        let mut seen = 0;
        arrays(2, 7, &mut Vec::new(), &mut |columns| {
            assert_eq!(lines(columns).len(), 7);
            seen += 1;
        });
        assert_eq!(seen, 30, "the ways to see eight points as an affine space");
        let mut seen = 0;
        arrays(2, 5, &mut Vec::new(), &mut |columns| {
            let lines = lines(columns);
            assert_eq!(lines.len(), 2);
            let all: std::collections::BTreeSet<usize> = lines.into_iter().flatten().collect();
            assert_eq!(all.len(), 5, "one common point");
            seen += 1;
        });
        assert_eq!(seen, 30 * 21);
        let mut other = 0;
        arrays(2, 3, &mut Vec::new(), &mut |columns| {
            let sum: i32 = (0..8)
                .map(|run| if (columns.iter().fold(0, |x, c| x ^ c) >> run) & 1 == 0 { 1 } else { -1 })
                .sum();
            other += i32::from(![0, 8, -8].contains(&sum));
        });
        assert_eq!(other, 0, "a triple that is no line sums to zero");
    }

    #[test]
    fn limits() {
        assert!(eight_runs_allow(3, 4) && !eight_runs_allow(3, 5));
        assert!(eight_runs_allow(5, 6) && !eight_runs_allow(5, 7) && eight_runs_allow(4, 9));
    }
}
