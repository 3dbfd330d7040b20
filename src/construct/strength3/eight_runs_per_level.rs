//! One factor with an odd number of levels beside two-level factors, in 8 runs per level.

use crate::array::Array;
use crate::construct::ConstructError;
use crate::construct::compose::times;

const NAME: &str = "eight runs per level";

/// A slice: for each two-level factor a nonzero functional on F_2^3, as a mask of coordinates, and
/// a bit to add.
type Slice = [(u16, u16); 6];

/// Five slices whose union has strength 3. Two slices of a factor triple cancel when the three
/// functionals sum to zero in both and the added bits have different parity. Found by listing the
/// 240 different vectors of such contributions to the 20 triples, functionals and then bits in
/// ascending order, and taking the first five (indices not descending, beginning with the first)
/// that sum to zero; a test repeats that search.
const BASE: [Slice; 5] = [
    [(1, 0), (2, 0), (3, 0), (4, 0), (5, 0), (6, 0)],
    [(1, 1), (2, 0), (3, 0), (4, 0), (6, 0), (7, 0)],
    [(1, 0), (2, 1), (4, 0), (5, 0), (6, 0), (7, 0)],
    [(1, 0), (2, 1), (4, 1), (5, 0), (7, 0), (3, 0)],
    [(1, 1), (2, 1), (4, 1), (7, 0), (6, 0), (3, 0)],
];

/// The four functionals of the only slice that is needed for three levels: no three sum to zero.
const CAP: [u16; 4] = [1, 2, 4, 7];

/// One factor with an odd number s of levels beside two-level factors, in 8s runs.
///
/// # Parameters
/// `s`: odd and at least 3. For even s take [`even_level`](super::even_level), which has one
/// two-level factor more.
///
/// # Result
/// OA(8s, s·2^6, 3) for s ≥ 5 and OA(24, 3·2^4, 3). Run (x, y) has the number `8x + y`; the first
/// column is x, the others are functions of y in F_2^3, six of the seven nonzero functionals in an
/// order and with complements that depend on x, so each level of the first factor sees an
/// OA(8, 2^6, 2). Five levels take slices whose triple products cancel; every further two levels
/// take a slice and its complement. For s = 3 all slices are one OA(8, 2^4, 3).
///
/// # Errors
/// [`ConstructError::Condition`] when s is even or below 3.
///
/// # Cost
/// O(s).
///
/// # Reference
/// Proved above. One two-level factor more is impossible, because an OA(8, 2^k, 2) with k ≥ 5 is k
/// columns of the Hadamard matrix of order 8 \[from memory\]. With k = 7 every slice has seven
/// dependent triples; 7s is odd, but triples cancel in pairs. With s = 3 and k = 5 every slice has
/// two, {a,b,c} and {a,d,e}, so any two slices share one triple and each of three triples meets
/// each other in one factor, the two covering all five: no three triples do that.
///
/// ```
/// use trysquare::construct::strength3::eight_runs_per_level;
/// use trysquare::verify::{Demand, Verdict, certify};
/// let array = eight_runs_per_level(5)?;
/// assert_eq!((array.runs(), array.levels()), (40, &[5, 2, 2, 2, 2, 2, 2][..]));
/// let judged = certify(&array, &Demand::strength(3))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn eight_runs_per_level(s: u16) -> Result<Array, ConstructError> {
    let levels = eight_runs_per_level_levels(s)?;
    let runs = times(NAME, usize::from(s), 8)?;
    Ok(Array::from_fn(runs, levels, |run, j| {
        // Below s and below 8.
        let (x, y) = ((run / 8) as u16, (run % 8) as u16);
        match (j, s) {
            (0, _) => x,
            (_, 3) => parity(CAP[j - 1] & y),
            _ => {
                // Slices 5, 6, 7, 8, … are the first one, its complement, the first one, …
                let (slice, complement) = if x < 5 { (usize::from(x), 0) } else { (0, (x + 1) % 2) };
                let (mask, bit) = BASE[slice][j - 1];
                parity(mask & y) ^ bit ^ complement
            }
        }
    })?)
}

fn parity(x: u16) -> u16 {
    (x.count_ones() % 2) as u16
}

/// The levels of [`eight_runs_per_level`].
///
/// # Errors
/// [`ConstructError::Condition`] when s is even or below 3.
pub fn eight_runs_per_level_levels(s: u16) -> Result<Vec<u16>, ConstructError> {
    if s < 3 || s.is_multiple_of(2) {
        return Err(ConstructError::condition(NAME, format!("s is odd and at least 3, not {s}")));
    }
    let mut levels = vec![2; if s == 3 { 5 } else { 7 }];
    levels[0] = s;
    Ok(levels)
}

#[cfg(test)]
mod tests {
    use std::collections::HashMap;

    use super::*;
    use crate::construct::compose::testing::*;

    #[test]
    fn every_small_odd_number_of_levels() {
        for s in (3..=25u16).step_by(2) {
            let array = eight_runs_per_level(s).unwrap();
            assert_eq!(array.runs(), 8 * usize::from(s));
            assert_eq!(array.levels(), eight_runs_per_level_levels(s).unwrap());
            assert!(has_strength(&array, 3), "{s}");
        }
        assert_eq!(eight_runs_per_level(3).unwrap().mix().to_string(), "2^4 3^1");
        assert_eq!(eight_runs_per_level(7).unwrap().mix().to_string(), "2^6 7^1");
        assert_eq!(eight_runs_per_level(65_535).unwrap().runs(), 524_280);
    }

    #[test]
    fn refuses_even_and_small_numbers() {
        for s in [0, 1, 2, 4, 65_534] {
            refused(eight_runs_per_level(s), &format!("s is odd and at least 3, not {s}"));
        }
    }

    fn permutations(chosen: &mut Vec<u16>, out: &mut Vec<[u16; 6]>) {
        if let Ok(full) = <[u16; 6]>::try_from(chosen.as_slice()) {
            out.push(full);
            return;
        }
        for mask in 1..8 {
            if !chosen.contains(&mask) {
                chosen.push(mask);
                permutations(chosen, out);
                chosen.pop();
            }
        }
    }

    #[test]
    fn the_base_is_what_the_search_finds() {
        let triples: Vec<[usize; 3]> =
            (0..6).flat_map(|a| (a + 1..6).flat_map(move |b| (b + 1..6).map(move |c| [a, b, c]))).collect();
        let mut orders = Vec::new();
        permutations(&mut Vec::new(), &mut orders);
        let mut index: HashMap<Vec<i8>, usize> = HashMap::new();
        let mut found: Vec<(Vec<i8>, Slice)> = Vec::new();
        for masks in orders {
            for bits in 0..64u16 {
                let slice: Slice = std::array::from_fn(|j| (masks[j], bits >> j & 1));
                let contribution = |t: &[usize; 3]| {
                    let [a, b, c] = t.map(|j| slice[j]);
                    if a.0 ^ b.0 ^ c.0 != 0 { 0 } else { 1 - 2 * (a.1 ^ b.1 ^ c.1) as i8 }
                };
                let vector: Vec<i8> = triples.iter().map(contribution).collect();
                if !index.contains_key(&vector) {
                    index.insert(vector.clone(), found.len());
                    found.push((vector, slice));
                }
            }
        }
        assert_eq!(found.len(), 240);
        let sum = |x: &[i8], i: usize| -> Vec<i8> { x.iter().zip(&found[i].0).map(|(p, q)| p + q).collect() };
        let first = (0..240).find_map(|b| {
            let two = sum(&found[0].0, b);
            (b..240).find_map(|c| {
                let three = sum(&two, c);
                (c..240).find_map(|d| {
                    let wanted: Vec<i8> = sum(&three, d).iter().map(|x| -x).collect();
                    index.get(&wanted).filter(|&&e| e >= d).map(|&e| [0, b, c, d, e])
                })
            })
        });
        assert_eq!(first.unwrap().map(|i| found[i].1), BASE);
    }
}
