//! Foldover.

use super::all_two;
use crate::array::Array;
use crate::construct::ConstructError;
use crate::construct::compose::{Levels, times};

const NAME: &str = "foldover";

/// A two-level array followed by its complement, with one more factor that tells them apart.
///
/// # Parameters
/// `a`: N runs, 2^k. Both must hold:
/// * all levels are 2;
/// * `a` has *even* strength t = 2u (not checked).
///
/// # Result
/// OA(2N, 2^{k+1}, 2u + 1). The first N runs are those of `a` with symbol 0 in the new, last
/// column; the others are their complements, with symbol 1. Products of an odd number of factors
/// cancel between the halves; products of an even number, at most 2u of the old ones, vanish in
/// each.
///
/// # Errors
/// [`ConstructError::Condition`] when a checked condition fails, [`ConstructError::Array`] when
/// the result does not fit into memory.
///
/// # Cost
/// O(cells of the result).
///
/// # Reference
/// E. Seiden & R. Zemach, *On orthogonal arrays*, Annals of Mathematical Statistics 37 (1966)
/// 1355–1370: OA(N, 2^k, 2u) exists if and only if OA(2N, 2^{k+1}, 2u + 1) does. For the way back
/// see [`derived`](super::derived).
///
/// ```
/// use trysquare::array::Array;
/// use trysquare::construct::strength3::foldover;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = Array::new(4, vec![2; 3], vec![0, 0, 1, 1, 0, 1, 0, 1, 0, 1, 1, 0])?;
/// let array = foldover(&a)?;
/// assert_eq!((array.runs(), array.levels()), (8, &[2, 2, 2, 2][..]));
/// let judged = certify(&array, &Demand::strength(3))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn foldover(a: &Array) -> Result<Array, ConstructError> {
    all_two(NAME, "A", a.levels())?;
    let runs = times(NAME, a.runs(), 2)?;
    Ok(Array::from_fn(runs, foldover_levels(a.factors())?, |run, j| {
        let half = u16::from(run >= a.runs());
        if j == a.factors() { half } else { a.get(run % a.runs(), j) ^ half }
    })?)
}

/// The levels of [`foldover`], from the number k of factors of A.
///
/// # Errors
/// [`ConstructError::Condition`] when the factors are too many.
pub fn foldover_levels(k: usize) -> Result<Vec<u16>, ConstructError> {
    Ok(Levels::new(NAME).repeat(2, k.checked_add(1))?.done())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::construct::compose::testing::*;
    use crate::construct::strength3::derived;

    #[test]
    fn doubles_every_starting_array_and_back() {
        for a in [sylvester(1), sylvester(2), sylvester(3), sylvester(4), twelve()] {
            let array = foldover(&a).unwrap();
            assert_eq!((array.runs(), array.factors()), (2 * a.runs(), a.factors() + 1));
            assert_eq!(array.levels(), foldover_levels(a.factors()).unwrap());
            assert!(has_strength_up_to(&array, 3));
            assert_eq!(derived(&array, a.factors(), 0).unwrap(), a);
        }
        assert!(!has_strength(&foldover(&twelve()).unwrap(), 4));
    }

    #[test]
    fn four_becomes_five() {
        // OA(16, 2^5, 4): the fifth factor is the sum of the others.
        let a = full(&[2; 4]);
        let sum = |i: usize| a.row(i).iter().sum::<u16>() % 2;
        let a = Array::from_fn(16, vec![2; 5], |i, j| if j < 4 { a.get(i, j) } else { sum(i) }).unwrap();
        assert!(has_strength(&a, 4) && !has_strength(&a, 5));
        let array = foldover(&a).unwrap();
        assert_eq!((array.runs(), array.factors()), (32, 6));
        assert!(has_strength(&array, 5));
    }

    #[test]
    fn refuses_other_levels() {
        refused(foldover(&full(&[2, 3])), "all levels of A are 2, not 3");
        for k in [usize::MAX, 1 << 24] {
            assert!(foldover_levels(k).unwrap_err().to_string().contains("at most 16777216 factors"));
        }
    }
}
