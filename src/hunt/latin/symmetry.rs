//! Symmetries of quasi-difference matrices.

use crate::algebra::AbelianGroup;

/// The largest group of symmetries that is listed.
const MAX_ORDER: usize = 4096;

/// A map of columns c ↦ c′ with c′\[rows\[r\]\] = multiplier(c\[r\]) + shift\[rows\[r\]\]; empty places
/// stay empty.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Symmetry {
    /// Where each row goes.
    pub rows: Vec<usize>,
    /// The image of every group element under an automorphism of the group.
    pub multiplier: Vec<u16>,
    /// What is added in each row.
    pub shift: Vec<u16>,
}

impl Symmetry {
    /// The symmetry with the automorphism that maps the generator of each cyclic factor to the
    /// given element; `None` when the shapes are wrong, `rows` is no permutation or the map no
    /// automorphism.
    #[must_use]
    pub fn new(group: &AbelianGroup, rows: &[usize], images: &[u16], shift: &[u16]) -> Option<Self> {
        let k = rows.len();
        let mut sorted = rows.to_vec();
        sorted.sort_unstable();
        if !sorted.into_iter().eq(0..k) || shift.len() != k || images.len() != group.factors().len() {
            return None;
        }
        let n = u16::try_from(group.order()).ok()?;
        if images.iter().chain(shift).any(|&e| e >= n) {
            return None;
        }
        let image = |a: u16| {
            let mut rest = a;
            group.factors().iter().zip(images).fold(0, |sum, (&order, &by)| {
                let digit = rest % order;
                rest /= order;
                (0..digit).fold(sum, |sum, _| group.add(sum, by))
            })
        };
        let multiplier: Vec<u16> = (0..n).map(image).collect();
        let mut seen = vec![false; usize::from(n)];
        let one_to_one = multiplier.iter().all(|&e| !std::mem::replace(&mut seen[usize::from(e)], true));
        let additive = (0..n).all(|a| {
            let mut weight = 1;
            group.factors().iter().zip(images).all(|(&order, &by)| {
                let sum = group.add(a, weight);
                weight = weight.saturating_mul(order);
                multiplier[usize::from(sum)] == group.add(multiplier[usize::from(a)], by)
            })
        });
        (one_to_one && additive).then(|| Self { rows: rows.to_vec(), multiplier, shift: shift.to_vec() })
    }

    /// The image of a column.
    #[must_use]
    pub(super) fn apply(&self, group: &AbelianGroup, column: &[Option<u16>]) -> Vec<Option<u16>> {
        let mut image = vec![None; column.len()];
        for (&to, entry) in self.rows.iter().zip(column) {
            image[to] = entry.map(|e| group.add(self.multiplier[usize::from(e)], self.shift[to]));
        }
        image
    }

    /// First `self`, then `next`, the shift of row 0 made zero: a constant added to a column
    /// changes none of its differences.
    fn then(&self, group: &AbelianGroup, next: &Self) -> Self {
        let rows: Vec<usize> = self.rows.iter().map(|&r| next.rows[r]).collect();
        let multiplier = self.multiplier.iter().map(|&e| next.multiplier[usize::from(e)]).collect();
        let mut shift = vec![0; rows.len()];
        for (r, &s) in self.shift.iter().enumerate() {
            shift[next.rows[r]] = group.add(next.multiplier[usize::from(s)], next.shift[next.rows[r]]);
        }
        Self { rows, multiplier, shift }.reduced(group)
    }

    fn reduced(mut self, group: &AbelianGroup) -> Self {
        let first = self.shift[0];
        self.shift.iter_mut().for_each(|s| *s = group.sub(*s, first));
        self
    }

    /// All products of the generators, the identity first; `None` when there are too many.
    pub(super) fn closure(group: &AbelianGroup, k: usize, generators: &[Self]) -> Option<Vec<Self>> {
        let n = u16::try_from(group.order()).ok()?;
        let identity = Self { rows: (0..k).collect(), multiplier: (0..n).collect(), shift: vec![0; k] };
        let mut all = vec![identity];
        let mut at = 0;
        while at < all.len() {
            for g in generators {
                let product = all[at].then(group, g);
                if !all.contains(&product) {
                    all.push(product);
                }
            }
            at += 1;
            if all.len() > MAX_ORDER {
                return None;
            }
        }
        Some(all)
    }
}
