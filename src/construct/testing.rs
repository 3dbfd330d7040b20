//! The definition of strength, counted plainly, for the tests of constructions.

use crate::array::Array;

/// Whether in every `t` factors every combination of levels occurs equally often.
///
/// Strength `t` asks for at least `t` factors, so that a claim about more factors than there are
/// is never true by emptiness.
pub(crate) fn has_strength(array: &Array, t: usize) -> bool {
    let k = array.factors();
    if t > k {
        return false;
    }
    let mut chosen: Vec<usize> = (0..t).collect();
    loop {
        if !balanced(array, &chosen) {
            return false;
        }
        let Some(i) = (0..t).rev().find(|&i| chosen[i] < k - t + i) else { return true };
        chosen[i] += 1;
        for j in i + 1..t {
            chosen[j] = chosen[j - 1] + 1;
        }
    }
}

/// Strength `t`, or, with fewer factors, every combination of all of them equally often.
pub(crate) fn has_strength_up_to(array: &Array, t: usize) -> bool {
    has_strength(array, array.factors().min(t))
}

/// Strength 2; a single factor has every level equally often.
pub(crate) fn has_strength_two(array: &Array) -> bool {
    has_strength_up_to(array, 2)
}

fn balanced(array: &Array, chosen: &[usize]) -> bool {
    let cells: usize = chosen.iter().map(|&j| usize::from(array.levels()[j])).product();
    if !array.runs().is_multiple_of(cells) {
        return false;
    }
    let mut counts = vec![0usize; cells];
    for i in 0..array.runs() {
        let place = chosen
            .iter()
            .fold(0, |place, &j| place * usize::from(array.levels()[j]) + usize::from(array.column(j)[i]));
        counts[place] += 1;
    }
    counts.iter().all(|&c| c == array.runs() / cells)
}

#[test]
fn the_definition_is_met_and_missed() {
    let a = Array::from_rows(vec![2, 2, 2], &[[0, 0, 0], [0, 1, 1], [1, 0, 1], [1, 1, 0]]).unwrap();
    assert!(has_strength(&a, 1) && has_strength(&a, 2) && !has_strength(&a, 3) && !has_strength(&a, 4));
    let b = Array::from_rows(vec![2, 2, 2], &[[0, 0, 0], [0, 1, 1], [1, 0, 1], [1, 1, 1]]).unwrap();
    assert!(!has_strength(&b, 1) && !has_strength(&b, 2));
    let last_pair = Array::from_rows(vec![2, 2, 2], &[[0, 0, 0], [0, 1, 1], [1, 0, 0], [1, 1, 1]]).unwrap();
    assert!(has_strength(&last_pair, 1) && !has_strength(&last_pair, 2));
}
