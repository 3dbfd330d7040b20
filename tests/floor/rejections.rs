//! One rejection for every rule about exclusions and certificates; the other rules are tested
//! beside the checker.

use trysquare::floor::proof::{
    Bound, Exclusion, ExclusionError, Proof, ProofError, Reason, Step, Subject, Term, Weights,
};
use trysquare::floor::{Effort, divisibility, exclude, floor, linear_program, raise};
use trysquare::mix::Mix;

fn mix(text: &str) -> Mix {
    text.parse().unwrap()
}

fn subject(runs: u64, strength: u32, text: &str) -> Subject {
    Subject { runs, strength, mix: mix(text) }
}

/// The reason alone, about a request.
fn judged(request: &Subject, reason: Reason) -> Result<(), ExclusionError> {
    Exclusion { runs: request.runs, steps: Vec::new(), about: request.clone(), reason }.check(request)
}

fn program(text: &str, strength: u32) -> Proof {
    let mix = mix(text);
    let divisor = divisibility(&mix, strength).unwrap();
    let bound = linear_program(&mix, strength, divisor.divisor, &mut Effort::unlimited()).unwrap();
    Proof::new(mix, strength, divisor, bound).unwrap()
}

#[test]
fn exclusions_of_a_proof() {
    let good = raise(floor(&mix("3 2^5"), 2).unwrap(), 24, &mut Effort::unlimited()).unwrap();
    good.check().unwrap();
    assert_eq!(good.exclusions.len(), 1);
    let broken = |change: &dyn Fn(&mut Proof)| {
        let mut p = good.clone();
        change(&mut p);
        p.check().unwrap_err()
    };
    let because = |runs, why| ProofError::Exclusion { runs, why };
    assert_eq!(broken(&|p| p.version = 1), ProofError::Version(1));
    assert_eq!(broken(&|p| p.runs = 36), ProofError::Runs { claimed: 36, given: 24 });
    assert_eq!(broken(&|p| p.exclusions.clear()), ProofError::Runs { claimed: 24, given: 12 });
    assert_eq!(broken(&|p| p.exclusions[0].runs = 24), because(24, ExclusionError::Order { expected: 12 }));
    let twice = |p: &mut Proof| p.exclusions.push(p.exclusions[0].clone());
    assert_eq!(broken(&twice), because(12, ExclusionError::Order { expected: 24 }));
    assert_eq!(
        broken(&|p| p.exclusions[0].steps = vec![Step::Strength { to: 2 }]),
        because(12, ExclusionError::Step(1))
    );
    assert!(matches!(
        broken(&|p| p.exclusions[0].about.runs = 24),
        ProofError::Exclusion { runs: 12, why: ExclusionError::About(_) }
    ));
    assert!(matches!(
        broken(&|p| p.exclusions[0].steps = vec![Step::Drop { levels: 2, factors: 1 }]),
        ProofError::Exclusion { runs: 12, why: ExclusionError::About(_) }
    ));
}

#[test]
fn steps() {
    let follows = |from: &Subject, step: Step, to: Option<Subject>| {
        let after = from.after(&step);
        let same = match (&after, &to) {
            (Some(a), Some(b)) => a.same(b),
            (None, None) => true,
            _ => false,
        };
        assert!(same, "{from}, {step:?}: {after:?}");
    };
    let from = subject(48, 3, "2^3 4 6");
    follows(&from, Step::Strength { to: 2 }, Some(subject(48, 2, "2^3 4 6")));
    follows(&from, Step::Strength { to: 3 }, None);
    follows(&from, Step::Strength { to: 0 }, None);
    follows(&from, Step::Drop { levels: 2, factors: 2 }, Some(subject(48, 3, "2 4 6")));
    follows(&from, Step::Drop { levels: 2, factors: 0 }, None);
    follows(&from, Step::Drop { levels: 2, factors: 4 }, None);
    follows(&from, Step::Drop { levels: 3, factors: 1 }, None);
    follows(&from, Step::Drop { levels: 2, factors: 3 }, None);
    follows(&from, Step::Merge { levels: 6, into: 3, factors: 1 }, Some(subject(48, 3, "2^3 4 3")));
    follows(&from, Step::Merge { levels: 6, into: 4, factors: 1 }, None);
    follows(&from, Step::Merge { levels: 6, into: 6, factors: 1 }, None);
    follows(&from, Step::Merge { levels: 6, into: 1, factors: 1 }, None);
    follows(&from, Step::Merge { levels: 6, into: 3, factors: 2 }, None);
    follows(&from, Step::Part { levels: 6, into: 3 }, Some(subject(48, 3, "2^4 4 3")));
    follows(&from, Step::Part { levels: 6, into: 5 }, None);
    follows(&from, Step::Part { levels: 8, into: 2 }, None);
    follows(&from, Step::Derive { levels: 4 }, Some(subject(12, 2, "2^3 6")));
    follows(&from, Step::Derive { levels: 3 }, None);
    follows(&subject(50, 3, "2^3 4 6"), Step::Derive { levels: 4 }, None);
    follows(&subject(4, 1, "2^3"), Step::Derive { levels: 2 }, None);
    follows(&subject(12, 2, "2^11"), Step::FoldOver, Some(subject(24, 3, "2^12")));
    follows(&subject(24, 3, "2^12"), Step::FoldOver, None);
    follows(&subject(12, 2, "2^4 3"), Step::FoldOver, None);
}

#[test]
fn reasons() {
    use ExclusionError::{Subject as Elsewhere, Weak};
    let set = |levels: &[u16]| Reason::Indivisible { set: levels.to_vec() };
    let request = subject(12, 2, "2^3 6");
    assert_eq!(judged(&subject(20, 2, "2^3 6"), set(&[2, 6])), Ok(()));
    assert_eq!(judged(&request, set(&[2, 6])), Err(Elsewhere), "12 is a multiple");
    assert_eq!(judged(&request, set(&[6, 6])), Err(Elsewhere), "there is one factor of 6 levels");
    assert_eq!(judged(&request, set(&[2, 2, 6])), Err(Elsewhere), "two factors, not three");
    assert_eq!(judged(&subject(0, 2, "2^3 6"), set(&[2, 6])), Err(Elsewhere));

    let rao = |least| Reason::Bound { bound: Bound::Rao { strength: 2, aside: None, least } };
    assert_eq!(judged(&subject(8, 2, "2^8"), rao(9)), Ok(()));
    assert_eq!(judged(&subject(8, 2, "2^8"), rao(10)), Err(Elsewhere), "more than the theorem gives");
    assert_eq!(judged(&subject(12, 2, "2^8"), rao(9)), Err(Weak));
    let other = Reason::Bound { bound: Bound::Bush { levels: 3, factors: 4, least: 18 } };
    assert_eq!(judged(&subject(8, 2, "2^8"), other), Err(Elsewhere));

    let four = |levels| Reason::FourRunsPerLevel { levels };
    assert_eq!(judged(&subject(20, 2, "5 2^9"), four(5)), Ok(()));
    assert_eq!(judged(&subject(20, 2, "5 2^8"), four(5)), Err(Weak));
    assert_eq!(judged(&subject(24, 2, "5 2^9"), four(5)), Err(Elsewhere), "other runs");
    assert_eq!(judged(&subject(20, 1, "5 2^9"), four(5)), Err(Elsewhere), "other strength");
    assert_eq!(judged(&subject(20, 2, "2^9"), four(5)), Err(Elsewhere), "no such factor");
    assert_eq!(judged(&subject(28, 2, "7 2^20"), four(7)), Err(Elsewhere), "not decided");

    let eight = |levels| Reason::EightRunsPerLevel { levels };
    assert_eq!(judged(&subject(40, 3, "5 2^7"), eight(5)), Ok(()));
    assert_eq!(judged(&subject(40, 3, "5 2^6"), eight(5)), Err(Weak));
    assert_eq!(judged(&subject(24, 3, "3 2^4"), eight(3)), Err(Weak));
    assert_eq!(judged(&subject(32, 3, "4 2^7"), eight(4)), Err(Weak));
    assert_eq!(judged(&subject(40, 2, "5 2^7"), eight(5)), Err(Elsewhere));
    assert_eq!(judged(&subject(48, 3, "5 2^7"), eight(5)), Err(Elsewhere));
    assert_eq!(judged(&subject(40, 3, "2^7"), eight(5)), Err(Elsewhere));

    let record = Reason::Exhaustion { record: serde_json::json!({}) };
    let exclusion = Exclusion { runs: 12, steps: Vec::new(), about: request.clone(), reason: record };
    assert!(matches!(exclusion.check(&request), Err(ExclusionError::Replay(_))));
    exclusion.check_with(&request, &|_, _| Ok(())).unwrap();
}

#[test]
fn parity() {
    let request = subject(12, 2, "2^3 6");
    let good = exclude(&request.mix, 2, 12, &mut Effort::unlimited()).unwrap();
    let Reason::Parity { weights } = good.reason else { panic!() };
    assert_eq!(judged(&request, Reason::Parity { weights: weights.clone() }), Ok(()));
    let elsewhere = subject(24, 2, "2^3 6");
    assert_eq!(judged(&elsewhere, Reason::Parity { weights: weights.clone() }), Err(ExclusionError::Subject));
    let mut weak = weights.clone();
    weak.constant += 1000;
    assert_eq!(judged(&request, Reason::Parity { weights: weak }), Err(ExclusionError::Weak));
    let mut wrong = weights;
    wrong.constant = 1;
    assert!(matches!(judged(&request, Reason::Parity { weights: wrong }), Err(ExclusionError::Negative(_))));
}

#[test]
fn certificates_of_the_linear_program() {
    let good = program("3^5 2^2", 3);
    good.check().unwrap();
    let broken = |change: &dyn Fn(&mut Weights)| {
        let mut p = good.clone();
        let Bound::LinearProgram { weights, .. } = &mut p.bound else { panic!() };
        change(weights);
        p.check().unwrap_err()
    };
    let why = |e: ProofError| match e {
        ProofError::Program(why) => why,
        other => panic!("{other}"),
    };
    assert_eq!(why(broken(&|w| w.constant = 0)), ExclusionError::Constant);
    assert_eq!(why(broken(&|w| w.constant = -4)), ExclusionError::Constant);
    assert!(matches!(why(broken(&|w| w.terms[0].at.push(0))), ExclusionError::Weight(_)));
    assert!(matches!(why(broken(&|w| w.terms[0].at = vec![0, 0])), ExclusionError::Weight(_)));
    assert!(matches!(why(broken(&|w| w.terms[0].at = vec![3, 0])), ExclusionError::Weight(_)));
    assert!(matches!(why(broken(&|w| w.terms.swap(0, 1))), ExclusionError::Weight(_)));
    let twice = |w: &mut Weights| w.terms.insert(0, w.terms[0].clone());
    assert!(matches!(why(broken(&twice)), ExclusionError::Weight(_)));
    let sign = |w: &mut Weights| w.terms.push(Term { at: vec![2, 5], weight: -1 });
    assert!(matches!(why(broken(&sign)), ExclusionError::Weight(_)));
    assert!(matches!(why(broken(&|w| w.terms[0].weight -= 10_000)), ExclusionError::Negative(_)));
    let below_zero = |w: &mut Weights| w.terms[0].weight = i64::MAX;
    assert!(matches!(why(broken(&below_zero)), ExclusionError::Negative(_)));
    assert!(matches!(broken(&|w| w.constant *= 2), ProofError::Least { .. }));
    let mut large = good.clone();
    large.mix = mix("2^400");
    large.divisibility.divisor = 8;
    large.divisibility.sets = vec![vec![2, 2, 2]];
    assert_eq!(why(large.check().unwrap_err()), ExclusionError::TooLarge);
}

#[test]
fn distances_from_a_run() {
    use trysquare::floor::proof::Distances;
    let request = subject(81, 3, "3^13");
    let good = exclude(&request.mix, 3, 81, &mut Effort::unlimited()).unwrap();
    let Reason::Distances { cases } = good.reason else { panic!("{}", good.reason.name()) };
    let judge = |cases: &Distances| judged(&request, Reason::Distances { cases: cases.clone() });
    assert_eq!(judge(&cases), Ok(()));
    let Distances::Branch { at, most, low, high } = cases.clone() else { panic!("no branch") };
    let branch = |at: Vec<u32>, most, low: &Distances, high: &Distances| Distances::Branch {
        at,
        most,
        low: Box::new(low.clone()),
        high: Box::new(high.clone()),
    };
    assert!(judge(&low).is_err() && judge(&high).is_err(), "one case is not all of them");
    assert!(judge(&branch(at.clone(), most + 1, &low, &high)).is_err());
    assert_eq!(judge(&branch(vec![99], most, &low, &high)), Err(ExclusionError::Weight(vec![99])));
    assert_eq!(judge(&branch(at.clone(), u64::MAX, &low, &high)), Err(ExclusionError::Weight(at.clone())));
    let leaf = |constant, at: &[u32], weight| Distances::Leaf {
        weights: Weights { constant, terms: vec![Term { at: at.to_vec(), weight }] },
    };
    assert_eq!(judge(&leaf(1, &[1], 1)), Err(ExclusionError::Weak));
    assert_eq!(judge(&leaf(-1, &[1], 1)), Err(ExclusionError::Negative(vec![0])));
    assert_eq!(judge(&leaf(1, &[4], 1)), Err(ExclusionError::Weight(vec![4])), "above the strength");
    assert_eq!(judge(&deep_chain(&at, &low)), Err(ExclusionError::TooLarge));
}

/// More branches than are checked, in a chain.
fn deep_chain(at: &[u32], end: &trysquare::floor::proof::Distances) -> trysquare::floor::proof::Distances {
    use trysquare::floor::proof::Distances;
    (0..40).fold(end.clone(), |below, most| Distances::Branch {
        at: at.to_vec(),
        most,
        low: Box::new(end.clone()),
        high: Box::new(below),
    })
}
