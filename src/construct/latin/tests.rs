use super::*;
use crate::algebra::{AbelianGroup, Field, prime_power, prime_powers};
use crate::construct::field::{bush, full_factorial};
use crate::construct::testing::has_strength;
use crate::verify::{Demand, Verdict, certify};

fn judged(array: &Array) -> bool {
    let demand = Demand::strength(2).thorough();
    certify(array, &demand).unwrap().verdict == Verdict::Orthogonal && has_strength(array, 2)
}

fn refused<T>(result: Result<T, ConstructError>, reason: &str) {
    let error = result.err().expect("refused").to_string();
    assert!(error.contains(reason), "{error:?} does not say {reason:?}");
}

/// An OA(s², s^k, 2) with the most factors for a prime power, two factors otherwise.
fn plane(s: usize) -> Option<Array> {
    match s {
        0 | 1 => None,
        _ if prime_power(s as u32).is_some() => Some(bush(s as u32, 2).unwrap()),
        _ => Some(full_factorial(&[s as u16; 2]).unwrap()),
    }
}

fn factors(s: usize) -> usize {
    plane(s).map_or(usize::MAX, |a| a.factors())
}

/// Difference matrices of index 1 are the quasi-difference matrices without an empty place.
#[test]
fn fields_without_a_hole() {
    for q in prime_powers(2, 32) {
        let f = Field::new(q).unwrap();
        let group = AbelianGroup::elementary(f.characteristic() as u16, f.degree()).unwrap();
        let columns = f.elements().map(|x| f.elements().map(|y| Some(f.mul(x, y))).collect()).collect();
        let matrix = QuasiDifference::new(group, columns).unwrap();
        let array = quasi_difference(&matrix, None).unwrap();
        assert_eq!(array.levels(), quasi_difference_levels(q as usize, 0, q as usize).unwrap());
        assert!(judged(&array), "{q}");
    }
}

/// All vectors (0, 1, …) over the smallest fields: exactly those that meet the definition of V(m, t)
/// are taken, and each gives m squares of order (m + 1)t + 1.
#[test]
fn every_short_v_vector() {
    let mut taken = std::collections::BTreeMap::new();
    for (m, t) in (1..=4u16).flat_map(|m| (1..=7u16).map(move |t| (m, t))) {
        let q = m * t + 1;
        let Ok(f) = Field::new(u32::from(q)) else { continue };
        for index in 0..usize::from(q).pow(u32::from(m) - 1) {
            let mut rest = index;
            let mut vector = vec![0, 1];
            for _ in 1..m {
                vector.push((rest % usize::from(q)) as u16);
                rest /= usize::from(q);
            }
            let places = usize::from(m) + 2;
            let class = |k: usize| {
                let mut classes: Vec<u32> = (0..places)
                    .filter_map(|i| Some(f.sub(*vector.get((i + k) % places)?, *vector.get(i)?)))
                    .filter_map(|d| Some(f.log(d)? % u32::from(m)))
                    .collect();
                classes.sort_unstable();
                classes.into_iter().eq(0..u32::from(m))
            };
            let is_one = (1..=usize::from(m)).all(class);
            let matrix = v_vector(m, t, &vector);
            assert_eq!(matrix.is_ok(), is_one, "V({m},{t}) {vector:?}");
            let Ok(matrix) = matrix else { continue };
            *taken.entry((m, t)).or_insert(0) += 1;
            let fill = plane(usize::from(t));
            if taken[&(m, t)] == 1 && factors(usize::from(t)) >= places {
                let array = quasi_difference(&matrix, fill.as_ref()).unwrap();
                assert_eq!(array.levels(), vec![(m + 1) * t + 1; places]);
                assert!(judged(&array), "V({m},{t})");
            }
        }
    }
    assert!(taken.contains_key(&(2, 3)) && taken.contains_key(&(4, 7)), "{taken:?}");
}

/// Every truncation of every small design, beside the number of squares Wilson 1974 promises.
#[test]
fn wilson_with_all_small_truncations() {
    let mut made = [0; 2];
    for t in 3..=9usize {
        for m in [2, 3, 4, 7, 8] {
            for (u, v) in (1..=t).flat_map(|u| (0..=u).map(move |v| (u, v))) {
                let sizes: Vec<u16> = [u as u16, v as u16].into_iter().filter(|&u| u > 0).collect();
                let r = sizes.len();
                let parts: Vec<Array> = (m..=m + r).map(|s| plane(s).unwrap()).collect();
                let k = (m..=m + r)
                    .chain([u, v])
                    .map(factors)
                    .min()
                    .unwrap()
                    .min(factors(t).saturating_sub(r))
                    .min(m + 2);
                if k < 2 || m * t > 30 {
                    continue;
                }
                let fills: Vec<Option<Array>> = sizes.iter().map(|&u| plane(usize::from(u))).collect();
                let parts: Vec<&Array> = parts.iter().collect();
                let fills: Vec<Option<&Array>> = fills.iter().map(Option::as_ref).collect();
                let array = wilson(k, &plane(t).unwrap(), &sizes, &parts, &fills).unwrap();
                let n = (m * t + u + v) as u16;
                assert_eq!(array.levels(), vec![n; k]);
                assert_eq!(array.levels(), wilson_levels(k, t, m, &sizes).unwrap());
                assert_eq!(array.runs(), usize::from(n).pow(2));
                assert!(judged(&array), "{m}·{t} + {u} + {v}");
                made[r - 1] += 1;
            }
        }
    }
    assert!(made[0] > 40 && made[1] > 40, "{made:?}");
}

#[test]
fn what_is_no_quasi_difference_matrix() {
    let group = || AbelianGroup::cyclic(3).unwrap();
    let full = |c: [u16; 3]| c.map(Some).to_vec();
    let good = vec![full([0, 0, 0]), full([0, 1, 2]), full([0, 2, 1])];
    assert!(QuasiDifference::new(group(), good.clone()).is_ok());
    refused(QuasiDifference::new(group(), Vec::new()), "columns of one length");
    refused(QuasiDifference::new(group(), vec![vec![Some(0)]; 3]), "columns of one length");
    let with = |at: usize, column: Vec<Option<u16>>| {
        let mut columns = good.clone();
        columns[at] = column;
        QuasiDifference::new(group(), columns)
    };
    refused(with(1, vec![Some(0), Some(1)]), "columns of one length");
    refused(with(1, full([0, 1, 3])), "below 3, not 3");
    refused(with(1, vec![Some(0), None, None]), "column 1 has more");
    refused(with(1, vec![Some(0), None, Some(2)]), "1 in row 1");
    refused(with(1, full([0, 1, 1])), "rows 0 and 2");
    refused(QuasiDifference::new(group(), good[..2].to_vec()), "n + 2u columns");
    refused(QuasiDifference::expanded(&[3], &[0, 1, 1], &good), "a permutation");
    refused(QuasiDifference::expanded(&[3], &[0, 1], &good), "a permutation");
    refused(QuasiDifference::expanded(&[1], &[0, 1, 2], &good), "cyclic");
    refused(QuasiDifference::expanded(&[3], &[1, 2, 0], &vec![full([0, 0, 0]); 9]), "at most 3n columns");
}

#[test]
fn what_does_not_fit_together() {
    let matrix = v_vector(2, 3, &[0, 1, 4]).unwrap();
    refused(quasi_difference(&matrix, None), "a fill for the hole of size 3");
    refused(quasi_difference(&matrix, plane(4).as_ref()), "s = 3");
    refused(quasi_difference_levels(65_535, 1, 3), "not 65536");
    refused(v_vector(2, 3, &[0, 1, 2]), "every element once");
    refused(v_vector(2, 3, &[0, 1]), "m + 1 entries");
    refused(v_vector(2, 3, &[0, 1, 7]), "m + 1 entries");
    refused(v_vector(0, 3, &[0]), "prime power");
    refused(v_vector(7, 2, &[0; 8]), "prime power");

    let [three, four, five] = [3, 4, 5].map(|s| plane(s).unwrap());
    assert!(wilson(3, &four, &[1], &[&three, &four], &[None]).is_ok());
    refused(wilson(1, &four, &[1], &[&three, &four], &[None]), "k and m at least 2");
    refused(wilson(3, &four, &[], &[&three], &[]), "one or two sizes");
    refused(wilson(3, &four, &[5], &[&three, &four], &[None]), "sizes from 1 to 4");
    refused(wilson(5, &four, &[1], &[&four, &five], &[None]), "the master has");
    refused(wilson(3, &four, &[1], &[&three, &three], &[None]), "a part has");
    refused(wilson(3, &four, &[1], &[&three], &[None]), "2 parts and 1 fills");
    refused(wilson(3, &four, &[3], &[&three, &four], &[None]), "a fill on 3 levels");
    refused(wilson(3, &four, &[3], &[&three, &four], &[Some(&four)]), "the fill has");
}
