//! The best of several plans, by criteria in a stated order.

use std::cmp::Ordering;

use num_bigint::BigUint;

use crate::array::Array;
use crate::verify::{Nearness, nearness};

/// A plan and what the judge says of it.
#[derive(Clone)]
pub(super) struct Judged {
    pub(super) array: Array,
    pub(super) nearness: Nearness,
}

impl Judged {
    pub(super) fn new(array: Array) -> Self {
        let nearness = nearness(&array);
        Self { array, nearness }
    }
}

/// The best of `plans`, the first one of several, among those that are by no criterion worse than
/// `plain`; `plain` when there is none.
///
/// The order: the sum of squared deviations of the pair counts, the largest correlation, the
/// D-efficiency. (The level counts are as even as can be in all of them.) A criterion that was not
/// worked out decides nothing.
pub(super) fn best(plain: Judged, plans: Vec<Judged>) -> Judged {
    let mut best = plain.clone();
    for plan in plans {
        let worse = criteria(&plan.nearness, &plain.nearness).contains(&Ordering::Greater);
        let [first, second, third] = criteria(&plan.nearness, &best.nearness);
        if !worse && first.then(second).then(third) == Ordering::Less {
            best = plan;
        }
    }
    best
}

/// By each criterion in order: less is better.
fn criteria(a: &Nearness, b: &Nearness) -> [Ordering; 3] {
    let correlation = |n: &Nearness| {
        let squared = &n.by_pairs.as_ref()?.correlation.as_ref()?.squared;
        let (top, bottom) = squared.split_once('/').unwrap_or((squared, "1"));
        Some((top.parse::<BigUint>().ok()?, bottom.parse::<BigUint>().ok()?))
    };
    let determinant = |n: &Nearness| n.efficiency.as_ref()?.determinant.parse::<BigUint>().ok();
    [
        a.squares.cmp(&b.squares),
        match (correlation(a), correlation(b)) {
            (Some((p, q)), Some((r, s))) => (p * s).cmp(&(r * q)),
            _ => Ordering::Equal,
        },
        match (determinant(a), determinant(b)) {
            (Some(a), Some(b)) => b.cmp(&a),
            _ => Ordering::Equal,
        },
    ]
}

#[cfg(test)]
mod tests {
    use super::*;

    fn judged(rows: &[[u16; 3]]) -> Judged {
        Judged::new(Array::from_rows(vec![2; 3], rows).unwrap())
    }

    #[test]
    fn the_order_of_the_criteria() {
        let plain = judged(&[[0, 0, 0], [0, 0, 0], [1, 1, 1], [1, 1, 1]]);
        let orthogonal = judged(&[[0, 0, 0], [0, 1, 1], [1, 0, 1], [1, 1, 0]]);
        let between = judged(&[[0, 0, 0], [0, 0, 1], [1, 1, 0], [1, 1, 1]]);
        let found = best(plain.clone(), vec![between.clone(), orthogonal.clone()]);
        assert_eq!(found.array, orthogonal.array);
        assert_eq!(best(orthogonal.clone(), vec![plain.clone(), between.clone()]).array, orthogonal.array);
        assert_eq!(best(plain.clone(), vec![]).array, plain.array);
        assert_eq!(criteria(&orthogonal.nearness, &between.nearness), [Ordering::Less; 3]);
    }

    #[test]
    fn what_is_worse_than_the_plain_plan_by_one_criterion_is_not_taken() {
        let mut plain = judged(&[[0, 0, 0], [0, 1, 1], [1, 0, 1], [1, 1, 0]]);
        let mut other = plain.clone();
        plain.nearness.squares += 2;
        other.nearness.efficiency.as_mut().unwrap().determinant = "1".into();
        other.array = other.array.select(&[1, 0, 2]).unwrap();
        assert_eq!(best(plain.clone(), vec![other]).array, plain.array);
    }
}
