//! The definitions of strength 2 and of a difference scheme, counted word for word.

use std::collections::HashMap;

use super::Scheme;
use crate::array::Array;

/// Whether in every two columns every combination of levels occurs equally often (one column:
/// every level).
pub(crate) fn has_strength_two(array: &Array) -> bool {
    let uniform = |keys: Vec<(u16, u16)>, combinations: usize| {
        let mut count: HashMap<(u16, u16), usize> = HashMap::new();
        for key in keys {
            *count.entry(key).or_default() += 1;
        }
        count.len() == combinations && count.values().all(|&n| n * combinations == array.runs())
    };
    let levels = |j: usize| usize::from(array.levels()[j]);
    if array.factors() == 1 {
        return uniform(array.column(0).iter().map(|&a| (a, 0)).collect(), levels(0));
    }
    (0..array.factors()).all(|j| {
        (0..j).all(|k| {
            let keys = array.column(j).iter().copied().zip(array.column(k).iter().copied());
            uniform(keys.collect(), levels(j) * levels(k))
        })
    })
}

/// Whether for every two columns and every group element the number of rows with that difference
/// is r/s.
pub(crate) fn is_scheme(d: &Scheme) -> bool {
    (0..d.columns()).all(|j| {
        (0..j).all(|k| {
            (0..d.order()).all(|value| {
                let hits =
                    (0..d.rows()).filter(|&i| d.group().add(value, d.entry(i, k)) == d.entry(i, j)).count();
                hits * usize::from(d.order()) == d.rows()
            })
        })
    })
}
