//! Two-level factors beside one p-level factor in 4p runs, by block types.

use super::ConstructError;
use crate::array::Array;

const NAME: &str = "block types";

/// The array OA(4p, 2^a · p, 2) of a mutually orthogonal vectors of block types.
///
/// A two-level column beside a p-level factor in 4p runs splits each of the p blocks of 4 runs
/// evenly, in one of three ways up to complement; so it is a vector over ±1, ±2, ±3, the number
/// naming the way and the sign the complement. Two columns are orthogonal exactly when their
/// vectors are, the product of two entries being the product of their signs if they name the same
/// way and 0 otherwise.
///
/// # Parameters
/// `vectors`: a vectors of length p. All of these must hold:
/// * p is at least 2, a at least 1, and all vectors have the same length;
/// * every entry is ±1, ±2 or ±3;
/// * the vectors are mutually orthogonal.
///
/// # Result
/// OA(4p, 2^a · p, 2): the two-level columns in order, then the block number. Run (j, x) of block
/// j and place x has the number 4j + x.
///
/// # Errors
/// [`ConstructError::Condition`] when a condition fails, naming the first pair of vectors that are
/// not orthogonal.
///
/// # Cost
/// O(a²p).
///
/// # Reference
/// The reduction to ways of splitting blocks is used by D. DeCock & J. Stufken, *On finding mixed
/// orthogonal arrays of strength 2 with many 2-level factors*, Statistics & Probability Letters 50
/// (2000); the vectors over ±e1, ±e2, ±e3 are our form of it.
///
/// ```
/// use trysquare::construct::block_types;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let array = block_types(&[vec![1, 1], vec![1, -1], vec![2, 2], vec![2, -2], vec![3, 3], vec![3, -3]])?;
/// assert_eq!((array.runs(), array.factors()), (8, 7));
/// assert_eq!(certify(&array, &Demand::strength(2))?.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn block_types<V: AsRef<[i8]> + Sync>(vectors: &[V]) -> Result<Array, ConstructError> {
    let fail = |needs: String| Err(ConstructError::condition(NAME, needs));
    let p = vectors.first().map_or(0, |v| v.as_ref().len());
    let Ok(blocks) = u16::try_from(p) else { return fail(format!("at most 65535 blocks, not {p}")) };
    if p < 2 || vectors.iter().any(|v| v.as_ref().len() != p) {
        return fail("at least one vector, all of one length of at least 2".to_owned());
    }
    if let Some(odd) = vectors.iter().flat_map(AsRef::as_ref).find(|x| !(1..=3).contains(&x.unsigned_abs())) {
        return fail(format!("entries ±1, ±2 or ±3, not {odd}"));
    }
    for (i, v) in vectors.iter().enumerate() {
        if let Some(j) = vectors[..i].iter().position(|w| block_product(v.as_ref(), w.as_ref()) != 0) {
            return fail(format!("vectors {j} and {i} orthogonal"));
        }
    }
    let mut levels = vec![2; vectors.len()];
    levels.push(blocks);
    Ok(Array::from_fn(4 * p, levels, |run, column| {
        let (j, x) = (run / 4, run % 4);
        let Some(v) = vectors.get(column) else { return j as u16 };
        let entry = v.as_ref()[j];
        let side = match entry.unsigned_abs() {
            1 => x >> 1,
            2 => x & 1,
            _ => (x >> 1) ^ (x & 1),
        };
        side as u16 ^ u16::from(entry < 0)
    })?)
}

/// The product of two vectors of block types: the sum over the places at which they name the same
/// way of the products of their signs.
#[must_use]
pub fn block_product(v: &[i8], w: &[i8]) -> i32 {
    v.iter()
        .zip(w)
        .map(|(&a, &b)| {
            if a == b {
                1
            } else if i16::from(a) == -i16::from(b) {
                -1
            } else {
                0
            }
        })
        .sum()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::verify::{Demand, Verdict, certify};

    #[test]
    fn orthogonal_vectors_are_orthogonal_columns() {
        // All pairs of vectors of length 3: the judge and the product agree.
        let all: Vec<Vec<i8>> = (0..216usize)
            .map(|n| [n % 6, n / 6 % 6, n / 36].iter().map(|&d| [1, -1, 2, -2, 3, -3][d]).collect())
            .collect();
        for v in all.iter().step_by(7) {
            for w in &all {
                let built = block_types(&[v, w]);
                if block_product(v, w) == 0 {
                    let judgement = certify(&built.unwrap(), &Demand::strength(2)).unwrap();
                    assert_eq!(judgement.verdict, Verdict::Orthogonal);
                } else {
                    assert!(built.is_err());
                }
            }
        }
    }

    #[test]
    fn every_condition_is_checked() {
        for bad in [vec![], vec![vec![1]], vec![vec![1, 1], vec![1]], vec![vec![0, 1]], vec![vec![1, 4]]] {
            assert!(block_types(&bad).is_err(), "{bad:?}");
        }
        let e = block_types(&[vec![1, 1, 1], vec![2, 1, 2]]).unwrap_err();
        assert_eq!(e.to_string(), "block types: vectors 0 and 1 orthogonal");
    }
}
