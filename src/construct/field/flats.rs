//! Unions of flats.

use super::super::ConstructError;
use super::require;
use crate::algebra::{AbelianGroup, prime_power};
use crate::array::Array;

const NAME: &str = "union of flats";

/// A run and the directions in which a flat extends from it.
#[derive(Clone, Debug, PartialEq, Eq, Hash, serde::Serialize, serde::Deserialize)]
#[serde(deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Flat {
    /// A run.
    pub base: Vec<u16>,
    /// The directions g_1, …, g_k, each as long as a run.
    pub directions: Vec<Vec<u16>>,
}

/// The runs of several flats, one flat after the other: every run of a flat is its base plus a
/// combination of its directions with coefficients modulo p.
///
/// Levels are added in the elementary abelian group: digits in base p, first digit least
/// significant. A factor whose levels are not a power of p is constant on each flat; the number of
/// the slice in an array made of slices is one.
///
/// # Parameters
/// `p`; `levels`: the levels of the factors; `flats`. All of these must hold:
/// * `p` is a prime, and there is at least one flat;
/// * every base has an entry for each factor, below its levels, and so has every direction, with 0
///   where the levels are not a power of p;
/// * all flats have the same number of directions.
///
/// # Guarantee
/// p^k runs per flat of k directions; in flat b, run i is the base plus the combination whose
/// coefficients are the base-p digits of i, first direction least significant. No strength: it is
/// that of the choice of the flats. With the characters χ of the group of all level combinations
/// (p-power levels only), the strength is t exactly when for every χ of weight 1 to t the sum of
/// χ(base) over the flats on whose directions χ is trivial is 0.
///
/// # Errors
/// [`ConstructError::Condition`] when a condition fails, [`ConstructError::Array`] when memory does
/// not suffice.
///
/// # Cost
/// O(cells of the result · k).
///
/// # Reference
/// Delsarte 1973 for the criterion; a linear array is a single flat, a union of cosets several with
/// the same directions.
///
/// ```
/// use trysquare::construct::field::{Flat, flats};
/// let even = Flat { base: vec![0; 3], directions: vec![vec![1, 1, 0], vec![0, 1, 1]] };
/// let a = flats(2, &[2; 3], &[even])?;
/// assert_eq!((a.runs(), a.row(3)), (4, vec![1, 0, 1]));
/// # Ok::<(), trysquare::construct::ConstructError>(())
/// ```
pub fn flats(p: u32, levels: &[u16], flats: &[Flat]) -> Result<Array, ConstructError> {
    let (prime, width) = match (prime_power(p), flats.first()) {
        (Some((_, 1)), Some(first)) if u16::try_from(p).is_ok() => (p as u16, first.directions.len()),
        _ => {
            return Err(ConstructError::condition(NAME, format!("p a prime and at least one flat, p = {p}")));
        }
    };
    let mut groups = Vec::with_capacity(levels.len());
    for &s in levels {
        groups.push(match prime_power(u32::from(s)) {
            Some((base, e)) if base == p => Some(AbelianGroup::elementary(prime, e)?),
            _ => None,
        });
    }
    for (i, flat) in flats.iter().enumerate() {
        let fits = |row: &[u16]| row.len() == levels.len() && row.iter().zip(levels).all(|(&x, &s)| x < s);
        let still = |row: &[u16]| row.iter().zip(&groups).all(|(&x, g)| x == 0 || g.is_some());
        let right = flat.directions.len() == width
            && fits(&flat.base)
            && flat.directions.iter().all(|d| fits(d) && still(d));
        require(NAME, right, || {
            format!(
                "{width} directions in each flat, entries below the levels, 0 off the powers of {p}: flat {i}"
            )
        })?;
    }
    let size = u32::try_from(width).ok().and_then(|k| (p as usize).checked_pow(k));
    let runs = size.and_then(|n| n.checked_mul(flats.len()));
    let (Some(size), Some(runs)) = (size, runs) else {
        return Err(ConstructError::condition(
            NAME,
            format!("{p}^{width} runs are more than memory can hold"),
        ));
    };
    Ok(Array::from_fn(runs, levels.to_vec(), |run, j| {
        let (flat, mut i) = (&flats[run / size], run % size);
        let Some(group) = &groups[j] else { return flat.base[j] };
        flat.directions.iter().fold(flat.base[j], |mut sum, direction| {
            for _ in 0..i % p as usize {
                sum = group.add(sum, direction[j]);
            }
            i /= p as usize;
            sum
        })
    })?)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::construct::compose::testing::{has_strength, refused};

    #[test]
    fn one_flat_is_a_linear_array() {
        for (p, n) in [(2u16, 3usize), (3, 2), (5, 2)] {
            let points: Vec<Vec<u16>> = super::super::bush(u32::from(p), 2)
                .map(|a| (0..p as usize + 1).map(|j| vec![a.get(1, j), a.get(p as usize, j)]).collect())
                .unwrap();
            let k = points.len();
            let directions = (0..2).map(|d| points.iter().map(|x| x[d]).collect()).collect();
            let array = flats(u32::from(p), &vec![p; k], &[Flat { base: vec![0; k], directions }]).unwrap();
            assert_eq!(array, super::super::points(u32::from(p), &points).unwrap(), "{p} {n}");
        }
    }

    #[test]
    fn slices_of_cosets() {
        // x + y + z = c in slice c: 3^4 with strength 3 in 27 runs.
        let flat =
            |c: u16| Flat { base: vec![c, 0, 0, c], directions: vec![vec![0, 1, 0, 2], vec![0, 0, 1, 2]] };
        let array = flats(3, &[3; 4], &[0, 1, 2].map(flat)).unwrap();
        assert_eq!(array.runs(), 27);
        assert!(has_strength(&array, 3) && !has_strength(&array, 4));
    }

    #[test]
    fn refuses_what_does_not_fit() {
        let flat = |base: &[u16], direction: &[u16]| {
            vec![Flat { base: base.to_vec(), directions: vec![direction.to_vec()] }]
        };
        refused(flats(4, &[2], &flat(&[0], &[1])), "p a prime");
        refused(flats(2, &[2], &[]), "at least one flat");
        refused(flats(2, &[2, 3], &flat(&[0, 2], &[1, 1])), "flat 0");
        refused(flats(2, &[2, 3], &flat(&[2, 0], &[1, 0])), "flat 0");
        refused(flats(2, &[2, 3], &flat(&[0], &[1])), "flat 0");
        assert_eq!(flats(2, &[2, 3], &flat(&[0, 2], &[1, 0])).unwrap().row(1), vec![1, 2]);
    }
}
