//! Two-level factors beside one q-level factor in 4q runs, from two conference matrices.

use super::hadamard::{conference, has_conference};
use super::{ConstructError, block_types};
use crate::array::Array;

const NAME: &str = "blocks from conference matrices";

/// Whether [`conference_blocks`] builds an array for q levels.
#[must_use]
pub fn has_conference_blocks(q: u32) -> bool {
    q >= 3 && q % 2 == 1 && has_conference(q - 1) && q.checked_add(1).is_some_and(has_conference)
}

/// The array OA(4q, 2^{2(q−1)} · q, 2) from conference matrices of the orders q − 1 and q + 1.
///
/// # Parameters
/// `q`: all of these must hold:
/// * q is odd and at least 3;
/// * [`conference`] has matrices of the orders q − 1 and q + 1. For q up to 40 these are 3, 5, 7, 9,
///   11, 13, 15, 17, 19, 25, 27, 29, 31 and 39.
///
/// # Result
/// The two-level columns, then the q-level one; run 4j + x is place x of block j.
///
/// # Guarantee
/// Strength 2. Proof: scale the matrix of order q + 1 so that its first row is 0, 1, …, 1 and its
/// first column 0, 1, …, 1; without both it is Q with Q·Qᵀ = qI − J. Let c be the first column of Q
/// without its zero and K what remains of Q without its first row and column; then K·Kᵀ =
/// qI − J − c·cᵀ = qI − 2E, where E = (J + c·cᵀ)/2 has a 1 where c has equal signs. Let L be the
/// matrix of order q − 1, so L·Lᵀ = (q − 2)I. Both have their zeros on the diagonal, so A = (K + L)/2
/// and B = (K − L)/2 have entries 0 and ±1 of which exactly one is not 0 off the diagonal. The
/// vectors of block types are, for each row i, in blocks 1 … q − 1 the rows of (A, B, I) as the
/// coefficients of types 1, 2, 3 for the first vector and of (B, A, −I) for the second, and in block
/// 0 for both type 1 or 2 by the sign of c. The products of first (or of second) vectors are
/// A·Aᵀ + B·Bᵀ + I + E = (K·Kᵀ + L·Lᵀ)/2 + I + E = qI, those of a first and a second
/// A·Bᵀ + B·Aᵀ − I + E = (K·Kᵀ − L·Lᵀ)/2 − I + E = 0.
///
/// # Errors
/// [`ConstructError::Condition`] when q is no such number.
///
/// # Cost
/// 8q² entries.
///
/// # Reference
/// Found for this project: the searches of [`hunt::types`](crate::hunt::types) met it for q up to 11
/// under a cyclic group of order 2(q − 1), and the proof above followed. The form of the vectors is
/// that of [`block_types`].
///
/// ```
/// use trysquare::construct::conference_blocks;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let array = conference_blocks(9)?;
/// assert_eq!((array.runs(), array.factors()), (36, 17));
/// assert_eq!(certify(&array, &Demand::strength(2))?.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn conference_blocks(q: u32) -> Result<Array, ConstructError> {
    if !has_conference_blocks(q) {
        let needs = format!("q odd with conference matrices of the orders q − 1 and q + 1, not {q}");
        return Err(ConstructError::condition(NAME, needs));
    }
    let (large, l) = (conference(q + 1)?, conference(q - 1)?);
    // Rows and columns from 1 on, the first row and column scaled to ones.
    let core = |i: usize, j: usize| large[0][j] * large[i][0] * large[i][j];
    let n = q as usize - 1;
    let vector = |i: usize, second: bool| -> Vec<i8> {
        let first = if core(i + 2, 1) == 1 { 1 } else { 2 };
        let entry = |j: usize| {
            if i == j {
                return if second { -3 } else { 3 };
            }
            let (k, l) = (core(i + 2, j + 2), if second { -l[i][j] } else { l[i][j] });
            if k == l { k } else { 2 * k }
        };
        std::iter::once(first).chain((0..n).map(entry)).collect()
    };
    let vectors: Vec<Vec<i8>> = (0..n).flat_map(|i| [vector(i, false), vector(i, true)]).collect();
    block_types(&vectors)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::verify::{Demand, Verdict, certify};

    #[test]
    fn every_q_up_to_forty() {
        let known: Vec<u32> = (0..=40).filter(|&q| has_conference_blocks(q)).collect();
        assert_eq!(known, [3, 5, 7, 9, 11, 13, 15, 17, 19, 25, 27, 29, 31, 39]);
        for q in known {
            let array = conference_blocks(q).unwrap();
            assert_eq!((array.runs(), array.factors()), (4 * q as usize, 2 * q as usize - 1));
            assert!(array.levels().iter().filter(|&&s| s == 2).count() == 2 * (q as usize - 1));
            assert_eq!(certify(&array, &Demand::strength(2)).unwrap().verdict, Verdict::Orthogonal, "{q}");
        }
    }

    /// The most two-level columns beside three and five levels are 4 and 8: DeCock & Stufken 2000
    /// \[memory\]; here the same number comes out.
    #[test]
    fn small_cases_reach_the_maxima() {
        assert_eq!(conference_blocks(3).unwrap().factors(), 5);
        assert_eq!(conference_blocks(5).unwrap().factors(), 9);
    }

    #[test]
    fn other_numbers_are_refused() {
        for q in [0, 1, 2, 4, 21, 23, 33, u32::MAX] {
            assert!(conference_blocks(q).is_err(), "{q}");
        }
    }
}
