//! Arrays of strength t − 1 whose union has strength t, and one more factor.

use crate::array::Array;
use crate::construct::ConstructError;
use crate::construct::compose::{as_levels, times};

const NAME: &str = "slices";

/// The runs of all parts one after the other, with a first factor that tells the parts apart.
///
/// # Parameters
/// `parts`: s arrays. All of these must hold:
/// * 2 ≤ s ≤ 65,535;
/// * all parts have the same number N of runs and the same levels X in the same order;
/// * every part has strength t − 1 and the union of all parts has strength t (not checked: judge
///   the result).
///
/// # Result
/// OA(sN, s·X, t). The first column is the number of the part, the others are those of the parts;
/// runs in the order of the parts. Typical parts: the cosets of a linear array of strength 2 whose
/// union is the whole space (or each coset equally often), arrays and their complements.
///
/// # Errors
/// [`ConstructError::Condition`] when a checked condition fails.
///
/// # Cost
/// O(cells of the result).
///
/// # Reference
/// The converse of taking [`derived`](super::derived) arrays; immediate from the definition.
///
/// ```
/// use trysquare::array::Array;
/// use trysquare::construct::strength3::slices;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let even = Array::new(4, vec![2; 3], vec![0, 0, 1, 1, 0, 1, 0, 1, 0, 1, 1, 0])?;
/// let odd = Array::new(4, vec![2; 3], vec![0, 0, 1, 1, 0, 1, 0, 1, 1, 0, 0, 1])?;
/// let array = slices(&[&even, &odd])?;
/// assert_eq!((array.runs(), array.levels()), (8, &[2, 2, 2, 2][..]));
/// let judged = certify(&array, &Demand::strength(3))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn slices(parts: &[&Array]) -> Result<Array, ConstructError> {
    let Some(&first) = parts.first() else {
        return Err(ConstructError::condition(NAME, "at least two parts, not 0"));
    };
    let same = |a: &Array| a.runs() == first.runs() && a.levels() == first.levels();
    if let Some(odd) = parts.iter().position(|a| !same(a)) {
        let needs = format!("the same runs and levels in all parts, but part {odd} differs from part 0");
        return Err(ConstructError::condition(NAME, needs));
    }
    let levels = slices_levels(parts.len(), first.levels())?;
    let runs = times(NAME, parts.len(), first.runs())?;
    Ok(Array::from_fn(runs, levels, |run, j| {
        let (x, i) = (run / first.runs(), run % first.runs());
        // Below s, which is a number of levels.
        if j == 0 { x as u16 } else { parts[x].get(i, j - 1) }
    })?)
}

/// The levels of [`slices`], from the number s of parts and the levels of one.
///
/// # Errors
/// [`ConstructError::Condition`] when s is no number of levels.
pub fn slices_levels(s: usize, part: &[u16]) -> Result<Vec<u16>, ConstructError> {
    let mut levels = vec![as_levels(NAME, Some(s))?];
    levels.extend_from_slice(part);
    Ok(levels)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::construct::compose::testing::*;

    /// The coset of an array over Z_3 by a vector.
    fn shifted(a: &Array, by: &[u16]) -> Array {
        Array::from_fn(a.runs(), a.levels().to_vec(), |i, j| (a.get(i, j) + by[j]) % 3).unwrap()
    }

    #[test]
    fn six_and_three_three_level_factors_in_fifty_four_runs() {
        // x + y + z = c, c = 0, 1, 2, each coset twice.
        let zero = Array::from_fn(9, vec![3; 3], |i, j| ([i / 3, i % 3, 6 - i / 3 - i % 3][j] % 3) as u16);
        let cosets: Vec<Array> = (0..3).map(|c| shifted(zero.as_ref().unwrap(), &[0, 0, c])).collect();
        let parts: Vec<&Array> = cosets.iter().chain(&cosets).collect();
        let array = slices(&parts).unwrap();
        assert_eq!((array.runs(), array.levels()), (54, &[6, 3, 3, 3][..]));
        assert_eq!(array.levels(), slices_levels(6, &[3; 3]).unwrap());
        assert!(has_strength(&array, 3));
        assert!(!has_strength(&slices(&parts[1..]).unwrap(), 3));
    }

    #[test]
    fn nine_cosets_of_the_tetracode() {
        let code = plane(3);
        let cosets: Vec<Array> = (0..9).map(|c| shifted(&code, &[0, 0, c / 3, c % 3])).collect();
        let parts: Vec<&Array> = cosets.iter().collect();
        let array = slices(&parts).unwrap();
        assert_eq!((array.runs(), array.levels()), (81, &[9, 3, 3, 3, 3][..]));
        assert!(has_strength(&array, 3));
    }

    #[test]
    fn refuses_what_does_not_fit() {
        let (a, b) = (full(&[2, 2]), sylvester(2).select(&[0, 1, 2]).unwrap());
        refused(slices(&[]), "at least two parts, not 0");
        refused(slices(&[&a]), "2 to 65535 levels, not 1");
        refused(slices(&[&a, &a, &b]), "part 2 differs from part 0");
        refused(slices(&[&full(&[2, 2, 2]), &b]), "part 1 differs from part 0");
        let one = Array::new(1, vec![2], vec![0]).unwrap();
        refused(slices(&vec![&one; 65_536]), "not 65536");
    }
}
