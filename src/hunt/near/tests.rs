use super::*;

fn mix(text: &str) -> Mix {
    text.parse().unwrap()
}

fn plan(request: &NearRequest) -> NearPlan {
    match near(request).unwrap() {
        NearOutcome::Near(plan) => *plan,
        other => panic!("{other:?}"),
    }
}

#[test]
fn what_fits_the_budget_is_exact() {
    for (text, budget, runs) in [("2^1 3^7", 18, 18), ("2^1 3^7", 21, 18), ("5", 7, 5), ("2^3", 4, 4)] {
        let NearOutcome::Exact(answer) = near(&NearRequest::new(mix(text), budget)).unwrap() else {
            panic!()
        };
        assert_eq!(answer.array.runs(), runs);
    }
    let three = NearRequest::new(mix("2^4"), 8).strength(3);
    assert!(matches!(near(&three).unwrap(), NearOutcome::Exact(a) if a.certificate.strength == 3));
}

#[test]
fn the_same_for_any_number_of_threads() {
    let request = NearRequest::new(mix("2^3 3^4 5"), 17).seed(7).effort(1 << 22);
    let on = |threads: usize| {
        let pool = rayon::ThreadPoolBuilder::new().num_threads(threads).build().unwrap();
        pool.install(|| plan(&request))
    };
    assert_eq!(on(1), on(3));
}

#[test]
fn kept_runs_come_first() {
    let kept = Array::from_rows(vec![2, 2, 2, 3], &[[0, 0, 0, 2], [0, 1, 0, 2], [0, 1, 1, 2]]).unwrap();
    let request = NearRequest::new(mix("2^3 3"), 10).kept(kept.clone()).effort(1 << 20);
    let found = plan(&request);
    assert_eq!(found.array.rows().take(3).collect::<Vec<_>>(), kept.rows().collect::<Vec<_>>());
    assert_eq!(found.nearness.level_differences, [0, 0, 0, 1]);
    assert_eq!(found.next_exact.unwrap().runs, 12);
}

/// One kept run is part of an exact array of the right size, whatever its levels.
#[test]
fn a_plan_with_kept_runs_that_turns_out_orthogonal_is_certified() {
    let kept = Array::from_rows(vec![2, 3, 3, 3], &[[1, 2, 0, 1]]).unwrap();
    let request = NearRequest::new(mix("2 3^3"), 18).kept(kept.clone());
    let NearOutcome::Orthogonal(plan, certificate, floor, verdict) = near(&request).unwrap() else {
        panic!()
    };
    assert_eq!((certificate.strength, floor.runs, verdict), (2, 18, Verdict::ProvedSmallest));
    assert_eq!(plan.array.row(0), kept.row(0));
    let kept = Array::from_rows(vec![2, 3], &[[0, 0], [0, 0]]).unwrap();
    let request = NearRequest::new(mix("2 3"), 6).kept(kept).effort(1 << 16);
    assert!(matches!(near(&request).unwrap(), NearOutcome::Near(_)));
}

#[test]
fn fewer_runs_than_levels() {
    let found = plan(&NearRequest::new(mix("7 2^2"), 5).effort(1 << 16));
    assert_eq!(found.too_many_levels, [(0, 7)]);
    assert_eq!(found.nearness.level_differences, [1, 1, 1]);
    assert_eq!(found.nearness.efficiency.unwrap().value, 0.0);
    for runs in 1..4 {
        assert_eq!(plan(&NearRequest::new(mix("2^7 3"), runs).effort(1 << 16)).array.runs() as u64, runs);
    }
    assert_eq!(plan(&NearRequest::new(mix("5"), 3)).nearness.pairs, 0);
}

/// At strength 3 the plan is judged at pairs: 2^4 in 7 runs is 8 runs less one.
#[test]
fn strength_three_is_judged_at_pairs() {
    let found = plan(&NearRequest::new(mix("2^4"), 7).strength(3));
    assert_eq!(found.next_exact.unwrap().runs, 8);
    assert!(found.nearness.attains_the_bound());
    let pairs_even = plan(&NearRequest::new(mix("2^5"), 12).strength(3));
    assert_eq!(pairs_even.nearness.deviation, "0");
}

#[test]
fn large_requests_are_answered_within_their_effort() {
    let found = plan(&NearRequest::new(mix("2^400 3^100"), 300).effort(1 << 22));
    assert_eq!(found.nearness.largest_level_difference(), 0);
}

#[test]
fn requests_that_make_no_sense() {
    let error = |request: NearRequest| near(&request).unwrap_err().to_string();
    assert!(error(NearRequest::new(mix("2^3"), 0)).starts_with("a plan has at least one run"));
    let kept = Array::from_rows(vec![2, 2], &[[0, 0]; 3]).unwrap();
    assert!(error(NearRequest::new(mix("2^2"), 2).kept(kept.clone())).contains("a budget of 3 or more"));
    assert!(error(NearRequest::new(mix("2^3"), 3).kept(kept)).contains("have the levels 2^2"));
    assert!(error(NearRequest::new(mix("2^3"), 3).strength(4)).contains("strength 4"));
    let large = NearRequest::new(Mix::new(vec![60_000; 100]).unwrap(), 1_000_000);
    assert!(error(large).contains("too many for a near plan"));
}
