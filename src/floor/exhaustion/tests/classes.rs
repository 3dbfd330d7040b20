//! Numbers of classes against published ones.

use crate::floor::Effort;
use crate::floor::exhaustion::{Census, Progress, classes};
use crate::verify::{Demand, Verdict, certify};

/// The numbers from the third column on.
fn numbers(order: &[u16], runs: u32, strength: u32) -> Vec<u64> {
    let census = classes(order, runs, strength, &mut Effort::unlimited()).unwrap();
    for array in census.arrays() {
        let demand = Demand::strength(strength as usize);
        assert_eq!(certify(&array, &demand).unwrap().verdict, Verdict::Orthogonal);
    }
    census.numbers()[2..].to_vec()
}

/// Schoen, Eendebak & Nguyen 2010, tables of pure-level arrays of strength 2 \[memory\].
#[test]
fn strength_two_has_the_published_numbers() {
    assert_eq!(numbers(&[2; 11], 12, 2), [2, 1, 2, 2, 1, 1, 1, 1, 1]);
    assert_eq!(numbers(&[2; 15], 16, 2), [3, 5, 11, 27, 55, 80, 87, 78, 58, 36, 18, 10, 5]);
    assert_eq!(numbers(&[3; 7], 18, 2), [4, 12, 10, 8, 3]);
    assert_eq!(numbers(&[2; 6], 20, 2), [3, 3, 11, 75]);
    assert_eq!(numbers(&[3; 3], 27, 2), [9]);
}

/// OA(54, 3^5, 3): 4, Schoen, Eendebak & Nguyen 2010 \[memory\]. The other numbers are not
/// remembered from there; that 24 runs hold one class of 2^12 is the uniqueness of the Hadamard
/// matrix of order 12 (Hall 1961) through foldover.
#[test]
fn strength_three_has_the_published_numbers() {
    assert_eq!(numbers(&[3; 5], 54, 3), [1, 7, 4]);
    assert_eq!(numbers(&[2; 12], 24, 3), [1, 2, 1, 2, 1, 1, 1, 1, 1, 1]);
    assert_eq!(numbers(&[3; 5], 27, 3), [1, 1, 0]);
}

/// Schoen, Eendebak & Nguyen 2010 \[memory\]; the last number is that of the Hadamard matrices of
/// order 20 (Hall 1965).
#[test]
#[ignore = "some seconds in release"]
fn twenty_runs_have_the_published_numbers_up_to_nineteen_columns() {
    let published = [3, 3, 11, 75, 474, 1603, 2477, 2389, 1914, 1300, 730, 328, 124, 40, 11, 6, 3];
    assert_eq!(numbers(&[2; 19], 20, 2), published);
}

#[test]
fn the_order_of_the_columns_does_not_matter_in_the_end() {
    for (orders, runs, strength) in [
        ([[2, 3, 2, 3, 3], [3, 3, 3, 2, 2], [3, 2, 3, 2, 3]], 36, 1),
        ([[3, 2, 2, 2, 2], [2, 2, 3, 2, 2], [2, 2, 2, 2, 3]], 12, 2),
        ([[4, 2, 2, 2, 2], [2, 2, 4, 2, 2], [2, 2, 2, 2, 4]], 16, 2),
    ] {
        let runs = if strength == 1 { 6 } else { runs };
        let ends = orders.map(|order| {
            let census = classes(&order, runs, strength, &mut Effort::unlimited()).unwrap();
            census.stages().last().unwrap().clone()
        });
        assert!(ends[0].classes > 0 && ends[0] == ends[1] && ends[1] == ends[2], "{orders:?}");
    }
}

#[test]
fn a_budget_stops_between_stages_and_the_rest_is_done_later() {
    let whole = classes(&[2; 9], 16, 2, &mut Effort::unlimited()).unwrap();
    let mut seen = std::collections::BTreeSet::new();
    let mut budget = 1000;
    let mut census = classes(&[2; 9], 16, 2, &mut Effort::new(budget, &|| false)).unwrap();
    while !census.is_complete() {
        seen.insert(census.numbers().len());
        let text = serde_json::to_string(&census).unwrap();
        census = serde_json::from_str(&text).unwrap();
        budget *= 4;
        let mut effort = Effort::new(budget, &|| false);
        while census.advance(&mut effort) == Progress::Advanced {}
    }
    assert!(seen.len() > 2, "stopped after {seen:?} stages");
    assert_eq!(census, whole);
    assert_eq!(census.advance(&mut Effort::unlimited()), Progress::Complete);
}

#[test]
fn the_number_of_threads_changes_nothing() {
    for budget in [u64::MAX, 300_000, 30_000] {
        let run = |threads| {
            let pool = rayon::ThreadPoolBuilder::new().num_threads(threads).build().unwrap();
            pool.install(|| classes(&[2; 10], 16, 2, &mut Effort::new(budget, &|| false)).unwrap())
        };
        let one = run(1);
        assert!(one == run(2) && one == run(5), "budget {budget}");
        assert_eq!(one.is_complete(), budget == u64::MAX);
    }
}

#[test]
fn a_request_to_stop_stops() {
    let mut census = Census::new(&[2; 9], 20, 2).unwrap();
    let mut effort = Effort::new(u64::MAX, &|| true);
    while census.advance(&mut effort) == Progress::Advanced {}
    assert!(!census.is_complete() && effort.halted());
}
