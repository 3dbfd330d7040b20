//! Enumerations over GF(q): vectors, spans, the points of a projective space, in stated orders.

use super::Field;

/// The vector number `index` of GF(q)^n: the base-`q` digits of `index`, *first coordinate least
/// significant*. This is the order of the runs of every linear array; digits beyond `n` are cut.
#[must_use]
pub fn vector(field: &Field, n: usize, mut index: usize) -> Vec<u16> {
    let q = field.order() as usize;
    (0..n)
        .map(|_| {
            let digit = index % q;
            index /= q;
            digit as u16
        })
        .collect()
}

/// All vectors of the span of `basis`, `q^e` of them for e basis vectors: combination number i has
/// the base-q digits of i as coefficients, first basis vector least significant.
///
/// # Panics
/// When the vectors differ in length or an entry is not an element of `field`. The span must fit
/// into memory.
#[must_use]
pub fn span(field: &Field, basis: &[Vec<u16>]) -> Vec<Vec<u16>> {
    let Some(first) = basis.first() else { return Vec::new() };
    let mut out = vec![vec![0; first.len()]];
    for b in basis {
        assert_eq!(b.len(), first.len(), "vectors of unequal length");
        let known = out.clone();
        for c in field.elements().skip(1) {
            out.extend(known.iter().map(|v| {
                v.iter().zip(b).map(|(&x, &y)| field.add(x, field.mul(c, y))).collect::<Vec<u16>>()
            }));
        }
    }
    out
}

/// The number of points of PG(n−1, q), `(q^n − 1)/(q − 1) = 1 + q + … + q^(n−1)`; `None` when it
/// does not fit, or when `q` is below 2.
#[must_use]
pub fn projective_point_count(q: u32, n: u32) -> Option<usize> {
    let q = usize::try_from(q).ok().filter(|&q| q > 1)?;
    // Horner's rule; it overflows after at most 64 steps.
    (0..n).try_fold(0usize, |sum, _| sum.checked_mul(q)?.checked_add(1))
}

/// The points of PG(n−1, q), each as its vector whose first non-zero coordinate is 1.
///
/// Order: by the place of that 1, first coordinate first; then by the coordinates after it read as
/// a number in base q, the coordinate next to the 1 least significant.
///
/// ```
/// use trysquare::algebra::{Field, projective_points};
/// let field = Field::new(3)?;
/// let points: Vec<_> = projective_points(&field, 2).collect();
/// assert_eq!(points, [vec![1, 0], vec![1, 1], vec![1, 2], vec![0, 1]]);
/// # Ok::<(), trysquare::algebra::AlgebraError>(())
/// ```
pub fn projective_points(field: &Field, n: usize) -> impl Iterator<Item = Vec<u16>> + '_ {
    let q = field.order() as u16;
    let mut next = (n > 0).then(|| unit(n, 0));
    std::iter::from_fn(move || {
        let point = next.take()?;
        let lead = point.iter().position(|&x| x != 0)?;
        let mut after = point.clone();
        next = match (lead + 1..n).find(|&i| after[i] + 1 < q) {
            Some(i) => {
                after[lead + 1..i].fill(0);
                after[i] += 1;
                Some(after)
            }
            None => (lead + 1 < n).then(|| unit(n, lead + 1)),
        };
        Some(point)
    })
}

/// The vector of length `n` with a 1 in coordinate `place` and 0 elsewhere.
///
/// # Panics
/// When `place` is not below `n`.
#[must_use]
pub fn unit(n: usize, place: usize) -> Vec<u16> {
    let mut v = vec![0; n];
    v[place] = 1;
    v
}

#[cfg(test)]
mod tests {
    use std::collections::HashSet;

    use super::*;

    fn field(q: u32) -> Field {
        Field::new(q).unwrap()
    }

    #[test]
    fn points_are_one_per_line_through_the_origin() {
        for (q, n) in [(2, 1), (2, 5), (3, 4), (4, 3), (5, 3), (7, 2), (8, 3), (9, 3)] {
            let f = field(q);
            let points: Vec<_> = projective_points(&f, n).collect();
            assert_eq!(Some(points.len()), projective_point_count(q, n as u32));
            let multiples: HashSet<Vec<u16>> = points
                .iter()
                .flat_map(|p| f.elements().skip(1).map(|c| p.iter().map(|&x| f.mul(c, x)).collect()))
                .collect();
            assert_eq!(multiples.len(), (q as usize).pow(n as u32) - 1, "q={q} n={n}");
            let key = |p: &Vec<u16>| {
                let lead = p.iter().position(|&x| x != 0).unwrap();
                (lead, p[lead + 1..].iter().rev().copied().collect::<Vec<_>>())
            };
            assert!(points.is_sorted_by_key(key), "the stated order, q={q} n={n}");
        }
        assert_eq!(projective_points(&field(2), 0).count(), 0);
    }

    #[test]
    fn counts_of_points_never_overflow_silently() {
        assert_eq!(projective_point_count(2, 64), Some(usize::MAX));
        assert_eq!(projective_point_count(2, 65), None);
        assert_eq!(projective_point_count(65521, u32::MAX), None);
        assert_eq!(projective_point_count(0, u32::MAX), None);
        assert_eq!(projective_point_count(1, 7), None);
        assert_eq!(projective_point_count(7, 0), Some(0));
    }

    #[test]
    fn vectors_are_numbered_first_coordinate_fastest() {
        let f = field(3);
        assert_eq!(vector(&f, 3, 5), [2, 1, 0]);
        assert_eq!(span(&f, &[unit(2, 0), unit(2, 1)]), (0..9).map(|i| vector(&f, 2, i)).collect::<Vec<_>>());
        assert!(span(&f, &[]).is_empty());
    }
}
