//! One factor with an even number of levels beside two-level factors.

use super::all_two;
use crate::array::Array;
use crate::construct::ConstructError;
use crate::construct::compose::{Levels, times};

const NAME: &str = "one even-level factor";

/// s/2 copies of a two-level array and s/2 copies of its complement, told apart by one s-level
/// factor.
///
/// # Parameters
/// `s`: levels. `h`: M runs, 2^k (saturated, k = M − 1, is best). All of these must hold:
/// * s is even and at least 2;
/// * all levels of `h` are 2;
/// * `h` has strength 2 (not checked).
///
/// # Result
/// OA(sM, s·2^k, 3). Run (x, i) has the number `x·M + i`; the first column is x, the others are
/// run i of `h` for even x and its complement for odd x. Each level of the first factor sees an
/// array of strength 2; products of three others cancel between copies and complements. With
/// k = M − 1 no larger k exists: fixing one level of the first factor leaves OA(M, 2^k, 2).
///
/// # Errors
/// [`ConstructError::Condition`] when a checked condition fails, [`ConstructError::Array`] when
/// the result does not fit into memory.
///
/// # Cost
/// O(cells of the result).
///
/// # Reference
/// Proved above; s = 2 is the foldover of E. Seiden & R. Zemach, Annals of Mathematical Statistics
/// 37 (1966) 1355–1370.
///
/// ```
/// use trysquare::array::Array;
/// use trysquare::construct::strength3::even_level;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let h = Array::new(4, vec![2; 3], vec![0, 0, 1, 1, 0, 1, 0, 1, 0, 1, 1, 0])?;
/// let array = even_level(6, &h)?;
/// assert_eq!((array.runs(), array.levels()), (24, &[6, 2, 2, 2][..]));
/// let judged = certify(&array, &Demand::strength(3))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn even_level(s: u16, h: &Array) -> Result<Array, ConstructError> {
    all_two(NAME, "H", h.levels())?;
    let levels = even_level_levels(s, h.factors())?;
    let runs = times(NAME, usize::from(s), h.runs())?;
    Ok(Array::from_fn(runs, levels, |run, j| {
        // Below s.
        let x = (run / h.runs()) as u16;
        if j == 0 { x } else { h.get(run % h.runs(), j - 1) ^ (x % 2) }
    })?)
}

/// The levels of [`even_level`], from s and the number k of factors of H.
///
/// # Errors
/// [`ConstructError::Condition`] when s is odd or zero, or the factors are too many.
pub fn even_level_levels(s: u16, k: usize) -> Result<Vec<u16>, ConstructError> {
    if s < 2 || !s.is_multiple_of(2) {
        return Err(ConstructError::condition(NAME, format!("s is even and at least 2, not {s}")));
    }
    Ok(Levels::new(NAME).all([s])?.repeat(2, Some(k))?.done())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::construct::compose::testing::*;

    #[test]
    fn every_small_even_number_of_levels() {
        for s in (2..=14u16).step_by(2) {
            for h in [sylvester(1), sylvester(2), sylvester(3), twelve()] {
                let array = even_level(s, &h).unwrap();
                assert_eq!(array.runs(), usize::from(s) * h.runs());
                assert_eq!(array.levels()[0], s);
                assert_eq!(array.levels(), even_level_levels(s, h.factors()).unwrap());
                assert!(has_strength_up_to(&array, 3));
            }
        }
    }

    #[test]
    fn refuses_what_does_not_fit() {
        for s in [0, 1, 3, 65_535] {
            refused(even_level(s, &twelve()), &format!("s is even and at least 2, not {s}"));
        }
        refused(even_level(2, &plane(3)), "all levels of H are 2, not 3");
        assert!(even_level_levels(2, 1 << 24).unwrap_err().to_string().contains("at most 16777216 factors"));
    }
}
