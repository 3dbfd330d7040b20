use super::*;
use crate::algebra::AbelianGroup;
use crate::construct::field::bush;
use crate::construct::latin::{QuasiDifference, quasi_difference, v_vector};
use crate::verify::{Demand, Verdict, certify};

fn search(
    group: &[u16],
    rows: usize,
    empty: usize,
    symmetries: &[(&[usize], &[u16])],
) -> QuasiDifferenceSearch {
    let group = AbelianGroup::new(group).unwrap();
    let symmetry =
        |&(to, images): &(&[usize], &[u16])| Symmetry::new(&group, to, images, &vec![0; rows]).unwrap();
    let symmetries = symmetries.iter().map(symmetry).collect();
    QuasiDifferenceSearch { group, rows, empty, symmetries, seed: 1, nodes: 100_000, attempts: 20 }
}

/// What is found is a quasi-difference matrix, the same every time, and keeps its symmetries.
#[test]
fn finds_what_it_says() {
    let cases = [
        search(&[5], 5, 0, &[]),
        search(&[2, 2], 4, 0, &[(&[1, 2, 0, 3], &[2, 3])]),
        search(&[7], 4, 3, &[(&[1, 2, 3, 0], &[1])]),
        search(&[13], 5, 1, &[(&[1, 2, 0, 3, 4], &[3])]),
        search(&[14], 5, 4, &[(&[1, 2, 0, 3, 4], &[9])]),
        search(&[21], 5, 1, &[(&[0, 1, 2, 3, 4], &[4])]),
    ];
    for case in &cases {
        let columns = quasi_difference_matrix(case).unwrap_or_else(|| panic!("{case:?}"));
        assert_eq!(quasi_difference_matrix(case).as_ref(), Some(&columns));
        let matrix = QuasiDifference::new(case.group.clone(), columns.clone()).unwrap();
        assert_eq!((matrix.rows(), matrix.empty()), (case.rows, case.empty));
        for s in &case.symmetries {
            let reduced = |c: &[Option<u16>]| -> Vec<Option<u16>> {
                let first = c.iter().flatten().next().copied().unwrap();
                c.iter().map(|e| e.map(|e| case.group.sub(e, first))).collect()
            };
            let mut there: Vec<_> = columns.iter().map(|c| reduced(c)).collect();
            let mut moved: Vec<_> = columns.iter().map(|c| reduced(&s.apply(&case.group, c))).collect();
            there.sort();
            moved.sort();
            assert_eq!(there, moved);
        }
        let fill = (case.empty > 1).then(|| bush(case.empty as u32, 2).unwrap());
        let array = quasi_difference(&matrix, fill.as_ref()).unwrap();
        assert_eq!(certify(&array, &Demand::strength(2)).unwrap().verdict, Verdict::Orthogonal);
    }
}

/// No two squares of order 6 (Tarry 1900): no (5, 4; 1, 1; 1) quasi-difference matrix, and no
/// difference matrix of three rows over a group of order 2 mod 4 (Drake 1979).
#[test]
fn does_not_find_what_there_is_not() {
    assert_eq!(quasi_difference_matrix(&search(&[5], 4, 1, &[])), None);
    assert_eq!(quasi_difference_matrix(&search(&[6], 3, 0, &[])), None);
    assert_eq!(quasi_difference_matrix(&search(&[2], 33, 0, &[])), None);
    assert!(quasi_difference_matrix(&search(&[5], 3, 1, &[])).is_some());
}

/// The least vectors equal those of the Handbook of Combinatorial Designs, second edition 2007,
/// section III.3.6, as `catalog/` has them.
#[test]
fn the_least_v_vectors_are_those_of_the_handbook() {
    let handbook: [(u16, u16, &[u16]); 3] =
        [(2, 3, &[0, 1, 4]), (4, 9, &[0, 1, 3, 2, 8]), (6, 7, &[0, 1, 3, 16, 35, 26, 36])];
    for (m, t, vector) in handbook {
        assert_eq!(least_v_vector(m, t, u64::MAX).unwrap().as_deref(), Some(vector));
    }
    for (m, t) in (1..=5).flat_map(|m| (1..=9).map(move |t| (m, t))) {
        if let Ok(Some(vector)) = least_v_vector(m, t, 100_000) {
            assert!(v_vector(m, t, &vector).is_ok(), "V({m},{t}) {vector:?}");
        }
    }
    assert_eq!(least_v_vector(8, 9, 100), Ok(None), "the limit counts");
    assert!(least_v_vector(5, 1, 100).is_err());
}

#[test]
#[ignore = "several seconds"]
fn the_least_vector_with_eight_squares() {
    let vector = least_v_vector(8, 9, u64::MAX).unwrap();
    assert_eq!(vector.as_deref(), Some(&[0, 1, 20, 70, 23, 59, 3, 8, 19][..]));
}

#[test]
fn what_is_no_symmetry() {
    let group = AbelianGroup::new(&[4, 3]).unwrap();
    let new = |rows: &[usize], images: &[u16], shift: &[u16]| Symmetry::new(&group, rows, images, shift);
    assert!(new(&[1, 0], &[3, 8], &[0, 11]).is_some());
    assert!(new(&[1, 1], &[3, 8], &[0, 0]).is_none());
    assert!(new(&[1, 0], &[2, 8], &[0, 0]).is_none());
    assert!(new(&[1, 0], &[4, 8], &[0, 0]).is_none());
    assert!(new(&[1, 0], &[3], &[0, 0]).is_none());
    assert!(new(&[1, 0], &[3, 8], &[0]).is_none());
    assert!(new(&[1, 0], &[3, 12], &[0, 0]).is_none());
}
