use super::*;
use crate::construct::orbit_array;
use crate::verify::{Demand, Verdict, certify};

fn search(runs: u32, mix: &str, group: &[u16]) -> Found {
    let levels = mix.parse::<crate::mix::Mix>().unwrap().levels().to_vec();
    let request = SymmetricHunt {
        runs,
        levels,
        strength: 2,
        group: group.to_vec(),
        fixed: vec![],
        motion: Motion::Any,
        elementary: false,
        seed: 1,
        attempts: 400,
        pool: 200,
        steps: STEPS,
        exchanges: 0,
    };
    let found = hunt(&request, None).unwrap();
    assert_eq!(hunt(&request, None).unwrap(), found, "deterministic");
    found
}

#[test]
fn small_arrays_are_found_and_judged() {
    for (runs, mix, group) in [(12, "3 2^4", &[][..]), (18, "2 3^7", &[3]), (16, "4^5", &[2])] {
        let found = search(runs, mix, group);
        assert!(found.complete, "{mix}");
        let array = orbit_array(group, &found.columns).unwrap();
        assert_eq!(certify(&array, &Demand::strength(2)).unwrap().verdict, Verdict::Orthogonal, "{mix}");
    }
}

#[test]
fn requests_that_make_no_sense() {
    let request = |runs, levels: &[u16], group: &[u16]| SymmetricHunt {
        runs,
        levels: levels.to_vec(),
        strength: 2,
        group: group.to_vec(),
        fixed: vec![],
        motion: Motion::Any,
        elementary: false,
        seed: 1,
        attempts: 4,
        pool: 10,
        steps: STEPS,
        exchanges: 0,
    };
    assert!(hunt(&request(12, &[5], &[]), None).is_none());
    assert!(hunt(&request(12, &[2], &[5]), None).is_none());
    assert!(hunt(&request(0, &[2], &[]), None).is_none());
    assert!(hunt(&request(256, &[2], &[]), None).is_none());
    // 12 runs cannot hold two six-level columns.
    assert!(!hunt(&request(12, &[6, 6], &[]), None).unwrap().complete);
}
