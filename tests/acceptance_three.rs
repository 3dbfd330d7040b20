//! Rows of strength 3 that must come out at exactly their number of runs, judged.

use trysquare::catalog::Shelf;
use trysquare::seek::{Outcome, Request, seek_on};

const ROWS: &[(u64, &[&str])] = &[
    (40, &["5 2^6", "10 2^3"]),
    (48, &["12 2^3", "3 2^9", "3 4 2^4"]),
    (54, &["3^5 2"]),
    (56, &["7 2^6"]),
    (64, &["4 8 2^4", "8 2^7", "4^5 2^2", "4^3 2^7"]),
    (72, &["6 2^11", "9 2^6", "6^2 2^2"]),
    (80, &["4 2^19", "10 2^7"]),
    (88, &["11 2^6"]),
    (96, &["6 2^15", "8 2^11", "4 12 2^4"]),
    (128, &["4^6 2^16", "8 4^4 2^3", "8 4^2 2^9", "4^7 2^7"]),
    (243, &["3^20", "9 3^13", "9^2 3^9"]),
    (729, &["3^56"]),
    (1024, &["4^41"]),
];

/// (strength, runs, mixes).
const HIGHER: &[(u32, u64, &[&str])] = &[
    (4, 16, &["2^5"]),
    (4, 64, &["2^8"]),
    (4, 128, &["2^11"]),
    (4, 256, &["2^17"]),
    (4, 243, &["3^11"]),
    (5, 32, &["2^6"]),
    (5, 256, &["2^16"]),
    (5, 729, &["3^12"]),
    (6, 2048, &["2^23"]),
    (7, 2048, &["2^16"]),
    (7, 4096, &["2^24"]),
];

fn check(strength: u32, table: &[(u64, &[&str])]) {
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
    assert!(wrong.is_empty(), "strength {strength}: {wrong:#?}");
}

#[test]
fn rows_of_strength_three() {
    check(3, ROWS);
}

#[test]
fn rows_of_higher_strength() {
    for &(strength, runs, mixes) in HIGHER {
        check(strength, &[(runs, mixes)]);
    }
}
