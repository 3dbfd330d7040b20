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
/// is common knowledge [memory; the tests list all of them].
#[must_use]
pub fn eight_runs_allow(levels: u16, factors: u64) -> bool {
    levels.is_multiple_of(2) || factors < if levels == 3 { 5 } else { 7 }
}
