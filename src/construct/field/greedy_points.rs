//! Points any t independent, the first that fit.

use super::super::ConstructError;
use super::{power, require};
use crate::algebra::{Field, vector};

const NAME: &str = "greedy points";

/// Points of PG(n−1, q), any `t` of them independent, each the first that fits: lexicographic codes.
///
/// Vectors are met in the order of their numbers (base q, first coordinate least significant); one
/// is taken unless it is a combination of at most t − 1 taken before. The dual of the code of the
/// [`points`](super::points()) is the lexicographic code of distance t + 1.
///
/// # Parameters
/// All of these must hold:
/// * `q` is a prime power, at most 65,521; `n` ≥ 1 and q^n fits into memory;
/// * 2 ≤ `t` ≤ 255.
///
/// # Guarantee
/// Any t points are independent; at least n points, the unit vectors among them.
///
/// # Errors
/// [`ConstructError::Algebra`] when there is no such field, [`ConstructError::Condition`] when n or
/// t is out of range.
///
/// # Cost
/// O(k · q^(n+1) · n) for k points.
///
/// # Reference
/// Levenstein 1960; Conway & Sloane 1986, *Lexicographic codes*.
///
/// ```
/// let points = trysquare::construct::field::greedy_points(2, 7, 4)?;
/// assert_eq!(points.len(), 11, "2^11 at strength 4 in 128 runs");
/// # Ok::<(), trysquare::construct::ConstructError>(())
/// ```
pub fn greedy_points(q: u32, n: u32, t: u32) -> Result<Vec<Vec<u16>>, ConstructError> {
    let field = Field::new(q)?;
    let size = power(NAME, q, n)?;
    require(NAME, n >= 1 && (2..=255).contains(&t) && size <= 1 << 24, || {
        format!("n ≥ 1, q^n ≤ 2^24 and 2 ≤ t ≤ 255, not n = {n}, t = {t}")
    })?;
    let n = n as usize;
    // The least number of taken points of which a vector is a combination, t when more are needed.
    let far = t as u8;
    let mut least = vec![far; size];
    least[0] = 0;
    let mut taken = Vec::new();
    for v in 1..size {
        if least[v] < far {
            continue;
        }
        let point = vector(&field, n, v);
        let shifts: Vec<Vec<usize>> =
            field.elements().skip(1).map(|c| digit_sums(&field, &point, c)).collect();
        let before = least.clone();
        for (w, &l) in before.iter().enumerate().filter(|(_, l)| **l + 1 < far) {
            for shift in &shifts {
                let sum = sum(q as usize, shift, w);
                least[sum] = least[sum].min(l + 1);
            }
        }
        taken.push(point);
    }
    Ok(taken)
}

/// For each coordinate i and digit d, `q^i` times (d + c·point_i), at place i·q + d.
fn digit_sums(field: &Field, point: &[u16], c: u16) -> Vec<usize> {
    let q = field.order() as usize;
    let mut out = Vec::with_capacity(point.len() * q);
    let mut weight = 1;
    for &x in point {
        let moved = field.mul(c, x);
        out.extend(field.elements().map(|d| weight * usize::from(field.add(d, moved))));
        weight *= q;
    }
    out
}

fn sum(q: usize, shift: &[usize], mut w: usize) -> usize {
    shift.chunks_exact(q).fold(0, |sum, digits| {
        let d = w % q;
        w /= q;
        sum + digits[d]
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::construct::field::points_strength;

    #[test]
    fn independent_and_not_to_be_extended() {
        for (q, n, t) in [(2, 4, 3), (2, 6, 4), (2, 7, 5), (3, 3, 2), (3, 4, 3), (4, 3, 3), (5, 3, 4)] {
            let points = greedy_points(q, n, t).unwrap();
            let field = Field::new(q).unwrap();
            let enough = t.min(points.len() as u32);
            assert!(points_strength(q, &points, enough).unwrap(), "{q} {n} {t}");
            for v in 1..(q as usize).pow(n) {
                let mut more = points.clone();
                more.push(vector(&field, n as usize, v));
                let most = t.min(more.len() as u32);
                assert!(!points_strength(q, &more, most).unwrap(), "{q} {n} {t}: {v}");
            }
        }
    }

    #[test]
    fn lengths_of_lexicographic_codes() {
        // Two-level: all points for t = 2, the affine points for t = 3.
        for n in 2..=8 {
            assert_eq!(greedy_points(2, n, 2).unwrap().len(), (1 << n) - 1);
            assert_eq!(greedy_points(2, n, 3).unwrap().len(), 1 << (n - 1));
        }
        // The binary Golay code of distance 8 is lexicographic (Conway & Sloane 1986).
        assert!(greedy_points(2, 12, 7).unwrap().len() >= 24);
        assert!(greedy_points(2, 3, 1).is_err() && greedy_points(6, 3, 2).is_err());
    }
}
