//! Rows of the literature that must come out at exactly their number of runs.

use trysquare::catalog::Shelf;
use trysquare::seek::{Outcome, Request, seek_on};

const STRENGTH_TWO: &[(u64, &[&str])] = &[
    (4, &["2^3"]),
    (8, &["2^4 4"]),
    (9, &["3^4"]),
    (12, &["2^11", "2^2 6"]),
    (16, &["2^8 8", "4^5"]),
    (18, &["3^6 6", "2 3^7"]),
    (20, &["2^19", "2^2 10"]),
    (24, &["2^20 4", "2^12 12"]),
    (25, &["5^6"]),
    (27, &["3^9 9"]),
    (28, &["2^27"]),
    (32, &["2^16 16", "4^8 8"]),
    (36, &["2^35", "3^12 12", "3^13 4", "2^11 3^12", "2^2 3^12 6"]),
    (40, &["2^36 4", "2^20 20"]),
    (45, &["3^9 15"]),
    (48, &["2^40 8", "4^12 12", "2^24 24"]),
    (49, &["7^8"]),
    (50, &["5^10 10", "2 5^11"]),
    (54, &["3^18 18", "3^24 6", "3^20 6 9"]),
    (64, &["8^9", "4^16 16", "2^32 32", "4^7 8^6", "4^14 8^3", "2^5 4^10 8^4", "2^5 4^17 8"]),
    (72, &["6^6 12"]),
    (81, &["9^10"]),
    (98, &["7^14 14"]),
    (100, &["2^99"]),
];

const STRENGTH_THREE: &[(u64, &[&str])] = &[
    (8, &["2^4"]),
    (16, &["2^8", "4 2^3"]),
    (24, &["2^12", "3 2^4", "6 2^3"]),
    (27, &["3^4"]),
    (32, &["4 2^7", "4^2 2^4", "8 2^3"]),
    (48, &["4 2^11", "6 2^7", "4 6 2^2"]),
    (54, &["6 3^3"]),
    (64, &["4^6", "4^2 2^12"]),
    (81, &["3^10", "9 3^4"]),
    (125, &["5^6"]),
    (256, &["4^17"]),
];

fn check(table: &[(u64, &[&str])], strength: u32) {
    let shelf = Shelf::new();
    let mut wrong = Vec::new();
    for &(runs, mixes) in table {
        for mix in mixes {
            let request = Request::new(mix.parse().unwrap()).strength(strength);
            match seek_on(&shelf, &request).unwrap() {
                Outcome::Found(answer) if answer.array.runs() as u64 == runs => {
                    assert_eq!(answer.array.levels(), request.mix.levels());
                    assert!(answer.certificate.strength >= strength as usize);
                }
                Outcome::Found(answer) => wrong.push(format!("{mix}: {} not {runs}", answer.array.runs())),
                _ => wrong.push(format!("{mix}: nothing")),
            }
        }
    }
    assert!(wrong.is_empty(), "{wrong:#?}");
}

#[test]
fn rows_of_strength_two() {
    check(STRENGTH_TWO, 2);
}

#[test]
fn rows_of_strength_three() {
    check(STRENGTH_THREE, 3);
}

#[test]
fn large_requests() {
    let shelf = Shelf::new();
    for mix in ["2^1000", "3^300", "10^11", "7^40 2^1", "12^5"] {
        let start = std::time::Instant::now();
        let Outcome::Found(answer) = seek_on(&shelf, &Request::new(mix.parse().unwrap())).unwrap() else {
            panic!("{mix}");
        };
        eprintln!(
            "{mix}: {} runs, floor {}, {:?}; {}",
            answer.array.runs(),
            answer.floor.runs,
            start.elapsed(),
            answer.recipe
        );
        assert!(answer.array.runs() as u64 >= answer.floor.runs);
    }
}
