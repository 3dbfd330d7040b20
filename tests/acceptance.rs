//! What the tool must answer: rows of the literature, large requests, and every small request.

use rayon::prelude::*;
use trysquare::catalog::Shelf;
use trysquare::floor::Effort;
use trysquare::mix::Mix;
use trysquare::seek::{Answer, Outcome, Request, Verdict, seek_on};
use trysquare::verify::{Demand, certify};

const STRENGTH_TWO: &[(u64, &[&str])] = &[
    (4, &["2^3"]),
    (8, &["2^4 4"]),
    (9, &["3^4"]),
    (12, &["2^11", "2^2 6", "2^4 3"]),
    (16, &["2^8 8", "4^5"]),
    (18, &["3^6 6", "2 3^7"]),
    (20, &["2^19", "2^2 10", "2^8 5"]),
    (24, &["2^20 4", "2^12 12", "2^11 4 6", "2^13 3 4", "2^14 6"]),
    (25, &["5^6"]),
    (27, &["3^9 9"]),
    (28, &["2^27", "2^12 7"]),
    (32, &["2^16 16", "4^8 8"]),
    (36, &["2^35", "3^12 12", "3^13 4", "2^11 3^12", "2^2 3^12 6"]),
    (36, &["2 3^8 6^2", "2^8 6^3", "2^2 3^5 6^2", "2^3 3^9 6", "3^7 6^3", "2^10 3^8 6", "2^27 3"]),
    (36, &["2^9 3^4 6^2", "2^18 3 6", "2^20 3^2", "2^14 6^2", "2^10 3 6^2", "2^13 3^2 6", "2^4 3 6^3"]),
    (36, &["2^16 9", "2^3 3^2 6^3"]),
    (40, &["2^36 4", "2^20 20", "2^25 4 5", "2^19 4 10"]),
    (44, &["2^16 11"]),
    (45, &["3^9 15"]),
    (48, &["2^40 8", "4^12 12", "2^24 24", "2^31 6 8", "2^33 3 8"]),
    (49, &["7^8"]),
    (50, &["5^10 10", "2 5^11"]),
    (52, &["2^17 13"]),
    (54, &["3^18 18", "3^24 6", "3^20 6 9"]),
    (56, &["2^52 4", "2^28 28", "2^27 4 14"]),
    (63, &["3^21 21"]),
    (64, &["8^9", "4^16 16", "2^32 32", "4^7 8^6", "4^14 8^3", "2^5 4^10 8^4", "2^5 4^17 8"]),
    (72, &["6^6 12", "3^24 24"]),
    (81, &["9^10"]),
    (98, &["7^14 14"]),
    (100, &["2^99", "10^4"]),
    (144, &["12^7"]),
    (196, &["14^5"]),
    (400, &["20^6"]),
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

/// The number of runs reached for large requests; a larger one is a step back.
const LARGE: &[(&str, usize)] =
    &[("2^1000", 1008), ("3^300", 648), ("10^11", 600), ("7^40 2^1", 686), ("12^5", 144)];

/// The answer to a request, after everything that must hold of any answer was checked; why not
/// otherwise.
fn answer(shelf: &Shelf, mix: &Mix, strength: u32) -> Result<Answer, String> {
    let request = Request::new(mix.clone()).strength(strength);
    let found = match seek_on(shelf, &request) {
        Ok(Outcome::Found(answer)) => *answer,
        Ok(other) => return Err(format!("{mix}, strength {strength}: {other:?}")),
        Err(e) => return Err(format!("{mix}, strength {strength}: {e}")),
    };
    let runs = found.array.runs();
    let demand = |holds: bool, what: &str| {
        if holds { Ok(()) } else { Err(format!("{mix}, strength {strength}, {runs} runs: {what}")) }
    };
    demand(found.array.levels() == mix.levels(), "the columns are not in the asked order")?;
    let judged = certify(&found.array, &Demand::strength(strength as usize)).map_err(|e| e.to_string())?;
    demand(judged.witness.is_none() && judged.certificate.strength >= strength as usize, "refused")?;
    demand(judged.certificate.sha256 == found.certificate.sha256, "the certificate is of another array")?;
    demand(found.certificate.recipe.is_some(), "no recipe in the certificate")?;
    // Searches on record that the floor rests on are made again.
    demand(found.floor.check_deep(&mut Effort::unlimited()).is_ok(), "the proof of the floor does not hold")?;
    demand(runs as u64 >= found.floor.runs, "fewer runs than the floor")?;
    demand(mix.full_factorial().is_none_or(|full| runs as u128 <= full), "more than the full factorial")?;
    let smallest = found.verdict == Verdict::ProvedSmallest;
    demand(smallest == (runs as u64 == found.floor.runs), "a wrong verdict")?;
    Ok(found)
}

fn report(wrong: &[String]) {
    assert!(wrong.is_empty(), "{} wrong:\n{}", wrong.len(), wrong.join("\n"));
}

fn check(table: &[(u64, &[&str])], strength: u32) {
    let shelf = Shelf::new();
    let mut wrong = Vec::new();
    for (runs, mixes) in table {
        for mix in *mixes {
            match answer(&shelf, &mix.parse().unwrap(), strength) {
                Ok(found) if found.array.runs() as u64 == *runs => {}
                Ok(found) => wrong.push(format!("{mix}: {} runs, not {runs}", found.array.runs())),
                Err(why) => wrong.push(why),
            }
        }
    }
    report(&wrong);
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
    let mut wrong = Vec::new();
    for (mix, reached) in LARGE {
        match answer(&shelf, &mix.parse().unwrap(), 2) {
            Ok(found) if found.array.runs() <= *reached => {}
            Ok(found) => wrong.push(format!("{mix}: {} runs, once {reached}", found.array.runs())),
            Err(why) => wrong.push(why),
        }
    }
    report(&wrong);
}

/// Every mix of `least` to `most` factors of 2 to 6 levels with one or two different level counts.
fn small_mixes(least: usize, most: usize) -> Vec<Vec<u16>> {
    let mut all = Vec::new();
    for a in 2..=6 {
        for k in least..=most {
            all.push(vec![a; k]);
            for b in a + 1..=6 {
                all.extend((1..k).map(|i| [vec![a; i], vec![b; k - i]].concat()));
            }
        }
    }
    all
}

/// Some other order of the levels, the same for the same list.
fn shuffled(levels: &[u16]) -> Vec<u16> {
    let key = |i: usize| (i as u64 + 1).wrapping_mul(0x9E37_79B9_7F4A_7C15).rotate_left(levels.len() as u32);
    let mut order: Vec<usize> = (0..levels.len()).collect();
    order.sort_by_key(|&i| key(i));
    order.into_iter().map(|i| levels[i]).collect()
}

/// Every small mix as listed, reversed and shuffled: right answers, the same size in any order.
fn check_all(least: usize, most: usize, strength: u32) -> usize {
    let shelf = Shelf::new();
    let mixes = small_mixes(least, most);
    let wrong: Vec<String> = mixes
        .par_iter()
        .filter_map(|levels| {
            let reversed: Vec<u16> = levels.iter().rev().copied().collect();
            let sizes: Result<Vec<usize>, String> = [levels.clone(), reversed, shuffled(levels)]
                .into_iter()
                .map(|levels| Ok(answer(&shelf, &Mix::new(levels).unwrap(), strength)?.array.runs()))
                .collect();
            match sizes {
                Ok(n) if n.iter().all(|m| *m == n[0]) => None,
                Ok(n) => Some(format!("{levels:?}: the order changes the number of runs: {n:?}")),
                Err(why) => Some(why),
            }
        })
        .collect();
    report(&wrong);
    mixes.len()
}

#[test]
fn every_small_request_of_strength_two() {
    // 5 · 11 pure mixes and, for each of 10 pairs of levels, 1 + 2 + … + 11 mixed ones.
    assert_eq!(check_all(2, 12, 2), 5 * 11 + 10 * 66);
}

#[test]
fn every_small_request_of_strength_three() {
    assert_eq!(check_all(3, 5, 3), 5 * 3 + 10 * (2 + 3 + 4));
}

#[test]
#[ignore = "a minute: up to 8,000 runs and more, each judged twice in three orders"]
fn every_request_of_strength_three_up_to_eight_factors() {
    assert_eq!(check_all(3, 8, 3), 5 * 6 + 10 * (2 + 3 + 4 + 5 + 6 + 7));
}

#[test]
fn one_factor_needs_one_run_per_level() {
    let shelf = Shelf::new();
    for s in 2..=6 {
        let found = answer(&shelf, &Mix::new(vec![s]).unwrap(), 1).unwrap();
        assert_eq!((found.array.runs(), found.verdict), (usize::from(s), Verdict::ProvedSmallest));
    }
}
