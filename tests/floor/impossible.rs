//! What is proved impossible, and that nothing that exists is.

use trysquare::catalog::Shelf;
use trysquare::floor::{Effort, QUICK, Subject, exclude, floor, most, raise};
use trysquare::mix::Mix;
use trysquare::seek::{Outcome, Request, Verdict, seek_on};

fn mix(text: &str) -> Mix {
    text.parse().unwrap()
}

/// The runs, the strength and the mix; the reason.
const IMPOSSIBLE: [(u64, u32, &str, &str); 12] = [
    (12, 2, "3 2^5", "four-runs-per-level"),
    (12, 2, "6 2^3", "parity"),
    (18, 2, "3^8", "bose-bush"),
    (20, 2, "5 2^9", "four-runs-per-level"),
    (20, 2, "10 2^3", "parity"),
    (28, 2, "14 2^3", "parity"),
    (24, 3, "3 2^5", "eight-runs-per-level"),
    (40, 3, "5 2^7", "eight-runs-per-level"),
    (48, 3, "4 6 2^3", "parity"),
    (27, 3, "3^5", "bush"),
    (81, 3, "3^13", "distances"),
    (36, 2, "6^4", "exhaustion"),
];

#[test]
fn proved_impossible() {
    // Non-existence as in the tables of orthogonal arrays [memory]; the proofs are checked here.
    for (runs, strength, text, by) in IMPOSSIBLE {
        let mix = mix(text);
        let exclusion = exclude(&mix, strength, runs, &mut Effort::new(QUICK, &|| false)).unwrap();
        assert_eq!(exclusion.reason.name(), by, "{runs}: {text}");
        if by != "exhaustion" {
            exclusion.check(&Subject { runs, strength, mix: mix.clone() }).unwrap();
        }
        let proof =
            raise(floor(&mix, strength).unwrap(), runs + 1, &mut Effort::new(QUICK, &|| false)).unwrap();
        assert!(proof.runs > runs, "{runs}: {text}");
        proof.check_deep(&mut Effort::unlimited()).unwrap();
    }
}

#[test]
fn one_factor_less_exists() {
    let shelf = Shelf::new();
    let exist = [
        (12, 2, "3 2^4"),
        (12, 2, "6 2^2"),
        (18, 2, "3^7"),
        (20, 2, "5 2^8"),
        (20, 2, "10 2^2"),
        (28, 2, "14 2^2"),
        (24, 3, "3 2^4"),
        (40, 3, "5 2^6"),
        (48, 3, "4 6 2^2"),
        (27, 3, "3^4"),
    ];
    for (runs, strength, text) in exist {
        let request = Request::new(mix(text)).strength(strength);
        let Outcome::Found(answer) = seek_on(&shelf, &request).unwrap() else { panic!("{text}") };
        assert_eq!((answer.array.runs() as u64, answer.verdict), (runs, Verdict::ProvedSmallest), "{text}");
        answer.floor.check().unwrap();
    }
}

#[test]
fn no_parent_on_the_shelf_is_excluded() {
    let shelf = Shelf::new();
    let mut looked_at = 0;
    for strength in [2, 3] {
        for runs in 2..=100 {
            for parent in shelf.parents(runs, strength).iter() {
                let counts = parent.bag.entries().iter().map(|&(s, k)| (s, k as usize));
                let mix = Mix::from_counts(counts).unwrap();
                if mix.factors() < strength as usize {
                    continue;
                }
                let mut effort = Effort::new(QUICK, &|| false);
                assert_eq!(exclude(&mix, strength, runs, &mut effort), None, "{runs}: {mix} at {strength}");
                looked_at += 1;
            }
        }
    }
    assert!(looked_at > 300, "{looked_at}");
}

#[test]
fn upper_limits_on_factors() {
    let limit = |rest: &[u16], levels, runs, strength| {
        let mut effort = Effort::new(QUICK, &|| false);
        most(rest, levels, runs, strength, None, &mut effort).unwrap().factors
    };
    assert_eq!(limit(&[3], 2, 12, 2), Some(4));
    assert_eq!(limit(&[6], 2, 12, 2), Some(2));
    assert_eq!(limit(&[5], 2, 20, 2), Some(8));
    assert_eq!(limit(&[], 3, 18, 2), Some(7));
    assert_eq!(limit(&[3], 2, 24, 3), Some(4));
    assert_eq!(limit(&[], 2, 1000, 2), Some(999));
    assert_eq!(limit(&[3, 3], 2, 12, 2), None);
}

#[test]
fn the_request_is_proved_impossible_where_a_reason_says_so() {
    let request = Request::new(mix("6 2^3")).max_runs(12);
    let Outcome::ProvedImpossible { floor } = seek_on(&Shelf::new(), &request).unwrap() else { panic!() };
    assert_eq!((floor.runs, floor.name()), (24, "parity"));
    floor.check().unwrap();
}
