//! T-matrices.

use super::{FourCirculants, Random};
use crate::construct::ConstructError;

/// The first rows of four T-matrices of order t, constant on the orbits of the group H of units
/// that `generators` generate, found by drawing `tries` times; `None` when none was drawn.
///
/// Exactly one row is ±1 at each place, the others 0, and their periodic autocorrelations sum to
/// zero at every shift, as [`cooper_wallis`](crate::construct::hadamard::cooper_wallis) wants. Each
/// try assigns every orbit at random to a row and a sign. `seed` starts the random numbers.
///
/// Cost: tries · t for most of them, which fail at the first shift.
///
/// # Errors
/// [`ConstructError::Condition`] when t is not from 3 to 255 or a generator is no unit.
///
/// ```
/// let t = trysquare::hunt::t_matrices(13, &[3], 1, 100_000)?.expect("there are some");
/// assert!(t[0].len() == 13 && (0..13).all(|i| t.iter().filter(|r| r[i] != 0).count() == 1));
/// # Ok::<(), trysquare::construct::ConstructError>(())
/// ```
pub fn t_matrices(
    length: u16,
    generators: &[u16],
    seed: u64,
    tries: u64,
) -> Result<Option<[Vec<i8>; 4]>, ConstructError> {
    let request =
        FourCirculants { length, generators: generators.to_vec(), seed, samples: 0, pool: 0, pairs: 0 };
    let group = request.multipliers()?;
    let t = usize::from(length);
    // The orbit of each place, named by its smallest place.
    let orbit: Vec<usize> =
        (0..t).map(|i| group.iter().map(|&h| i * usize::from(h) % t).min().unwrap_or(i)).collect();
    let shifts: Vec<usize> = (1..t).filter(|&k| orbit[k] == k && orbit[t - k] >= k).collect();
    let mut random = Random::new(seed);
    // A symbol is 2·row, and 1 more for a minus.
    let mut symbol = vec![0u8; t];
    for _ in 0..tries {
        for i in 0..t {
            symbol[i] = if orbit[i] == i { (random.bits() >> 61) as u8 } else { symbol[orbit[i]] };
        }
        let product = |a: u8, b: u8| match a ^ b {
            0 => 1,
            1 => -1,
            _ => 0,
        };
        if shifts.iter().all(|&k| (0..t).map(|i| product(symbol[i], symbol[(i + k) % t])).sum::<i32>() == 0) {
            let row =
                |r: u8| symbol.iter().map(|&s| if s >> 1 == r { 1 - 2 * (s & 1) as i8 } else { 0 }).collect();
            return Ok(Some([0, 1, 2, 3].map(row)));
        }
    }
    Ok(None)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::construct::hadamard::{cooper_wallis, goethals_seidel};

    #[test]
    fn what_is_found_multiplies() {
        let one: [&[i8]; 4] = [&[1]; 4];
        for (length, generators) in [(3, &[1][..]), (5, &[1]), (7, &[1]), (13, &[3]), (19, &[7])] {
            let t =
                t_matrices(length, generators, 5, 1_000_000).unwrap().unwrap_or_else(|| panic!("{length}"));
            let rows = cooper_wallis(t.each_ref().map(Vec::as_slice), one).unwrap();
            let h = goethals_seidel(rows.each_ref().map(Vec::as_slice)).unwrap();
            assert!(h.is_hadamard() && h.order() == 4 * usize::from(length));
        }
        assert_eq!(t_matrices(47, &[2], 1, 1000).unwrap(), None);
        assert!(t_matrices(9, &[3], 1, 1).is_err());
    }
}
