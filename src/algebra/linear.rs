//! Vectors, matrices and subspaces over GF(q).
//!
//! A vector is a slice of field elements, a matrix a slice of rows of equal length, a subspace a
//! basis of it. Functions panic, as [`Field`] does, when an entry is not an element of the field,
//! and when vectors that belong together differ in length.

use super::Field;

/// The inner product `Σ a_i b_i`.
///
/// # Panics
/// When the lengths differ or an entry is not an element of `field`.
#[must_use]
pub fn dot(field: &Field, a: &[u16], b: &[u16]) -> u16 {
    assert_eq!(a.len(), b.len(), "vectors of unequal length");
    a.iter().zip(b).fold(0, |sum, (&x, &y)| field.add(sum, field.mul(x, y)))
}

/// A growing family of vectors in echelon form: tells of each new vector whether it is independent
/// of those before.
///
/// Cost of an insertion: O(rank · n) field operations.
#[derive(Clone, Debug)]
pub struct Echelon<'f> {
    field: &'f Field,
    rows: Vec<(usize, Vec<u16>)>,
}

impl<'f> Echelon<'f> {
    /// The empty family.
    #[must_use]
    pub fn new(field: &'f Field) -> Self {
        Self { field, rows: Vec::new() }
    }

    /// The dimension of the span.
    #[must_use]
    pub fn rank(&self) -> usize {
        self.rows.len()
    }

    /// `vector` minus a combination of the family, zero exactly when it lies in the span.
    ///
    /// # Panics
    /// When the length differs from that of the vectors before, or an entry is not an element.
    #[must_use]
    pub fn reduce(&self, vector: &[u16]) -> Vec<u16> {
        let mut v = vector.to_vec();
        for (pivot, row) in &self.rows {
            assert_eq!(v.len(), row.len(), "vectors of unequal length");
            let factor = v[*pivot];
            subtract(self.field, &mut v, factor, row);
        }
        v
    }

    /// Adds a vector; returns whether the rank grew.
    ///
    /// # Panics
    /// As [`Echelon::reduce`].
    pub fn insert(&mut self, vector: &[u16]) -> bool {
        let mut v = self.reduce(vector);
        let Some(pivot) = v.iter().position(|&x| x != 0) else { return false };
        normalise(self.field, &mut v, pivot);
        self.rows.push((pivot, v));
        true
    }

    /// Forgets the vectors that raised the rank above `rank`.
    pub fn truncate(&mut self, rank: usize) {
        self.rows.truncate(rank);
    }
}

/// `v -= factor · row`.
fn subtract(field: &Field, v: &mut [u16], factor: u16, row: &[u16]) {
    if factor != 0 {
        for (x, &y) in v.iter_mut().zip(row) {
            *x = field.sub(*x, field.mul(factor, y));
        }
    }
}

/// Divides `v` by its non-zero entry at `pivot`.
fn normalise(field: &Field, v: &mut [u16], pivot: usize) {
    if let Some(inverse) = field.inv(v[pivot]) {
        for x in v {
            *x = field.mul(*x, inverse);
        }
    }
}

/// The rank of a matrix.
///
/// # Panics
/// When rows differ in length or an entry is not an element of `field`.
#[must_use]
pub fn rank(field: &Field, rows: &[Vec<u16>]) -> usize {
    let mut echelon = Echelon::new(field);
    for row in rows {
        echelon.insert(row);
    }
    echelon.rank()
}

/// The reduced row echelon form without its zero rows: the one basis of the row space that is the
/// same for every generating set of it.
///
/// # Panics
/// As [`rank`].
#[must_use]
pub fn row_echelon(field: &Field, rows: &[Vec<u16>]) -> Vec<Vec<u16>> {
    let mut echelon = Echelon::new(field);
    for row in rows {
        echelon.insert(row);
    }
    let mut basis = echelon.rows;
    basis.sort_unstable_by_key(|(pivot, _)| *pivot);
    for i in (0..basis.len()).rev() {
        let (pivot, row) = basis[i].clone();
        for (_, above) in &mut basis[..i] {
            let factor = above[pivot];
            subtract(field, above, factor, &row);
        }
    }
    basis.into_iter().map(|(_, row)| row).collect()
}

/// A basis of the vectors `x` of length `n` with `<row, x> = 0` for every row.
///
/// There is one basis vector per column without a pivot, ascending, with a 1 in that column.
///
/// # Panics
/// As [`rank`]; also when a row does not have length `n`.
#[must_use]
pub fn null_space(field: &Field, rows: &[Vec<u16>], n: usize) -> Vec<Vec<u16>> {
    assert!(rows.iter().all(|r| r.len() == n), "rows of a length other than {n}");
    let basis = row_echelon(field, rows);
    let pivots: Vec<usize> = basis.iter().filter_map(|r| r.iter().position(|&x| x != 0)).collect();
    (0..n)
        .filter(|column| !pivots.contains(column))
        .map(|column| {
            let mut x = vec![0; n];
            x[column] = 1;
            for (&pivot, row) in pivots.iter().zip(&basis) {
                x[pivot] = field.neg(row[column]);
            }
            x
        })
        .collect()
}

/// Whether the subspaces are independent: the rank of the stacked bases is the number of basis
/// vectors, so that the sum of the subspaces is direct (and every basis really is one).
///
/// # Panics
/// As [`rank`].
#[must_use]
pub fn independent(field: &Field, subspaces: &[Vec<Vec<u16>>]) -> bool {
    let mut echelon = Echelon::new(field);
    subspaces.iter().flatten().all(|v| echelon.insert(v))
}

/// The first set of at most `t` subspaces (by index, ascending) that are not independent, `None`
/// when any `t` of them are.
///
/// Sets are met in lexicographic order, each extended only while it is independent. Cost: at most
/// O(C(k, t) · e · n · t·e) field operations for k subspaces of dimension e.
///
/// # Panics
/// As [`rank`].
#[must_use]
pub fn first_dependent(field: &Field, subspaces: &[Vec<Vec<u16>>], t: usize) -> Option<Vec<usize>> {
    let mut chosen = Vec::new();
    extend_independent(subspaces, t, &mut Echelon::new(field), &mut chosen).then_some(chosen)
}

/// Depth-first step of [`first_dependent`]; leaves the dependent set in `chosen` on `true`.
fn extend_independent(
    subspaces: &[Vec<Vec<u16>>],
    t: usize,
    echelon: &mut Echelon<'_>,
    chosen: &mut Vec<usize>,
) -> bool {
    if chosen.len() == t {
        return false;
    }
    let (rank, from) = (echelon.rank(), chosen.last().map_or(0, |last| last + 1));
    for next in from..subspaces.len() {
        chosen.push(next);
        let direct = subspaces[next].iter().all(|v| echelon.insert(v));
        if !direct || extend_independent(subspaces, t, echelon, chosen) {
            return true;
        }
        echelon.truncate(rank);
        chosen.pop();
    }
    false
}

#[cfg(test)]
mod tests {
    use std::collections::HashSet;

    use super::super::span;
    use super::*;
    use proptest::prelude::*;

    fn field(q: u32) -> Field {
        Field::new(q).unwrap()
    }

    #[test]
    fn dependent_sets_are_named() {
        let f = field(2);
        let point = |v: &[u16]| vec![v.to_vec()];
        let fano = [point(&[1, 0, 0]), point(&[0, 1, 0]), point(&[0, 0, 1]), point(&[1, 1, 0])];
        assert_eq!(first_dependent(&f, &fano, 2), None);
        assert_eq!(first_dependent(&f, &fano, 3), Some(vec![0, 1, 3]));
        assert_eq!(first_dependent(&f, &fano[..3], 9), None);
        assert_eq!(first_dependent(&f, &fano, 0), None);
        let plane = vec![vec![1, 0, 0], vec![0, 1, 0]];
        assert!(!independent(&f, &[plane.clone(), point(&[1, 1, 0])]));
        assert!(independent(&f, &[plane, point(&[1, 1, 1])]));
        assert!(!independent(&f, &[vec![vec![1, 1, 0], vec![1, 1, 0]]]), "a basis that is none");
    }

    fn matrix() -> impl Strategy<Value = (u32, Vec<Vec<u16>>)> {
        (prop::sample::select(vec![2u32, 3, 4, 5, 8, 9]), 1usize..5, 1usize..5).prop_flat_map(|(q, r, n)| {
            (Just(q), prop::collection::vec(prop::collection::vec(0..q as u16, n), r))
        })
    }

    proptest! {
        #[test]
        fn rank_is_the_logarithm_of_the_number_of_combinations((q, rows) in matrix()) {
            let f = field(q);
            let all: HashSet<Vec<u16>> = span(&f, &rows).into_iter().collect();
            let rank = rank(&f, &rows);
            prop_assert_eq!(all.len(), (q as usize).pow(rank as u32));
            let reduced = row_echelon(&f, &rows);
            prop_assert_eq!(reduced.len(), rank);
            prop_assert_eq!(&row_echelon(&f, &reduced), &reduced);
            if rank > 0 {
                prop_assert_eq!(&span(&f, &reduced).into_iter().collect::<HashSet<_>>(), &all);
            }
            let mut shuffled = rows.clone();
            shuffled.reverse();
            prop_assert_eq!(row_echelon(&f, &shuffled), reduced);
        }

        #[test]
        fn null_space_is_all_that_is_orthogonal((q, rows) in matrix()) {
            let f = field(q);
            let n = rows[0].len();
            let kernel = null_space(&f, &rows, n);
            prop_assert_eq!(kernel.len() + rank(&f, &rows), n);
            prop_assert_eq!(rank(&f, &kernel), kernel.len());
            for (k, row) in kernel.iter().flat_map(|k| rows.iter().map(move |r| (k, r))) {
                prop_assert_eq!(dot(&f, k, row), 0);
            }
        }
    }
}
