//! The definition of a difference scheme, counted word for word.

use super::Scheme;

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
