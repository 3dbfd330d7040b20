//! What `hunt` finds from nothing, and how fast. The mixes are those of the literature, from memory
//! (36: 2^8·6^3 and others: Zhang, Lu & Pang 1999; 24, 28, 44: DeCock & Stufken 2000).

use std::time::{Duration, Instant};

use trysquare::hunt::campaign::{HuntRequest, Observer, Outcome, State, run};
use trysquare::verify::{Demand, Verdict, certify};

/// Wants the end after some time.
struct Until(Instant);

impl Observer for Until {
    fn time_is_over(&self) -> bool {
        Instant::now() >= self.0
    }
}

const LIMIT: Duration = Duration::from_secs(60);

/// The seconds until the array is found; the limit when it is not.
fn seconds(mix: &str, runs: u32, strength: u32, seed: u64) -> f64 {
    let request = HuntRequest { strength, seed, ..HuntRequest::new(mix.parse().unwrap(), runs) };
    let begin = Instant::now();
    let outcome = run(State::new(request).unwrap(), &Until(begin + LIMIT)).unwrap();
    let Outcome::Found(find) = outcome else { return LIMIT.as_secs_f64() };
    let judgement = certify(&find.array, &Demand::strength(strength as usize)).unwrap();
    assert_eq!(judgement.verdict, Verdict::Orthogonal, "{mix}");
    assert_eq!(find.array.runs(), runs as usize);
    begin.elapsed().as_secs_f64()
}

fn median(mix: &str, runs: u32, strength: u32) -> f64 {
    let mut all: Vec<f64> = (1..=3).map(|seed| seconds(mix, runs, strength, seed)).collect();
    all.sort_by(f64::total_cmp);
    println!("{runs}: {mix} at strength {strength}: {:.2} s of {all:.2?}", all[1]);
    all[1]
}

#[test]
fn the_small_ones_in_no_time() {
    for (runs, mix) in [(12, "2^4 3"), (18, "2 3^7"), (20, "2^8 5"), (24, "2^14 6")] {
        assert!(seconds(mix, runs, 2, 1) < 20.0, "{mix}");
    }
    assert!(seconds("3 2^9", 48, 3, 1) < 20.0);
}

#[test]
#[ignore = "a minute"]
fn found_from_nothing() {
    let wanted = [
        (12, "2^4 3"),
        (20, "2^8 5"),
        (24, "2^11 4 6"),
        (24, "2^14 6"),
        (28, "2^12 7"),
        (36, "2 3^8 6^2"),
        (36, "2^8 6^3"),
        (36, "2^2 3^5 6^2"),
        (36, "2^3 3^9 6"),
        (44, "2^16 11"),
        (54, "3^20 6 9"),
        (54, "2 3^25"),
    ];
    let slow: Vec<_> = wanted.iter().filter(|(runs, mix)| median(mix, *runs, 2) >= 60.0).collect();
    assert!(slow.is_empty(), "{slow:?}");
    for (runs, mix) in [(48, "3 2^9"), (48, "3 4 2^4"), (54, "3^5 2")] {
        assert!(median(mix, runs, 3) < 60.0, "{mix}");
    }
}
