//! The shelf and its recipes: everything on it is what it claims, whoever asks and however.

use std::sync::Arc;

use proptest::prelude::*;
use rayon::prelude::*;
use trysquare::catalog::{Bag, Packer, Parent, Shelf, arrange};
use trysquare::mix::Mix;
use trysquare::recipe::Recipe;
use trysquare::seek::{Outcome, Request, seek_on};
use trysquare::verify::{Demand, Verdict, certify};

/// What is wrong with a parent: its recipe, what the recipe claims, or the array.
fn fault(parent: &Parent, runs: u64, strength: u32) -> Option<String> {
    let recipe = &parent.recipe;
    let fault = |what: String| Some(format!("{runs} runs, strength {strength}, {}: {what}", parent.bag));
    let array = match recipe.build() {
        Ok(array) => array,
        Err(e) => return fault(format!("cannot be built: {e}")),
    };
    let claimed = (recipe.levels(), recipe.runs());
    if claimed != (Ok(array.levels().to_vec()), Ok(array.runs())) {
        return fault(format!("built {} runs of {}, claimed {claimed:?}", array.runs(), array.mix()));
    }
    if array.runs() as u64 != runs || Bag::of_levels(array.levels()) != parent.bag {
        return fault(format!("built {} runs of {}", array.runs(), array.mix()));
    }
    let demanded = recipe.strength().min(array.factors() as u32);
    if recipe.strength() < strength.min(array.factors() as u32) {
        return fault(format!("the recipe claims strength {} only", recipe.strength()));
    }
    match certify(&array, &Demand::strength(demanded as usize)) {
        Ok(judged) if judged.verdict == Verdict::Orthogonal => {}
        Ok(judged) => return fault(format!("claims strength {demanded}; {:?}", judged.witness)),
        Err(e) => return fault(e.to_string()),
    }
    let json = serde_json::to_string(recipe).unwrap();
    match serde_json::from_str::<Recipe>(&json) {
        Ok(read) if read == **recipe && read.build().as_ref() == Ok(&array) => None,
        other => fault(format!("its JSON is read as {other:?}")),
    }
}

/// Builds and judges every parent; returns how many there are.
fn check_parents(runs: std::ops::RangeInclusive<u64>, strength: u32) -> usize {
    let shelf = Shelf::new();
    let all: Vec<(u64, Arc<Parent>)> =
        runs.flat_map(|n| shelf.parents(n, strength).to_vec().into_iter().map(move |p| (n, p))).collect();
    let faults: Vec<String> = all.par_iter().filter_map(|(n, p)| fault(p, *n, strength)).collect();
    assert!(faults.is_empty(), "{} of {}:\n{}", faults.len(), all.len(), faults.join("\n"));
    all.len()
}

#[test]
fn parents_up_to_100_runs_are_what_they_claim() {
    for strength in [2, 3] {
        assert!(check_parents(2..=100, strength) > 100);
    }
}

#[test]
fn parents_of_higher_strength_are_what_they_claim() {
    for strength in [4, 5] {
        assert!(check_parents(2..=128, strength) > 10);
    }
}

#[test]
#[ignore = "half a minute: every parent from 101 to 144 runs"]
fn parents_up_to_144_runs_are_what_they_claim() {
    for strength in [2, 3] {
        assert!(check_parents(101..=144, strength) > 100);
    }
}

/// No parent is in another one of the same number of runs.
#[test]
fn parents_are_maximal() {
    let shelf = Shelf::new();
    for strength in [2, 3] {
        let packer = Packer::new(&shelf, strength);
        for runs in 2..=64 {
            let parents = shelf.parents(runs, strength);
            for (i, a) in parents.iter().enumerate() {
                for (j, b) in parents.iter().enumerate() {
                    let fits = packer.fit(&a.bag, &b.bag).is_some();
                    assert_eq!(fits, i == j, "{runs} runs: {} in {}", a.bag, b.bag);
                }
            }
        }
    }
}

/// A parent by its number of runs, strength and place in the list.
fn some_parent(shelf: &Shelf, runs: u64, strength: u32, pick: prop::sample::Index) -> Option<Arc<Parent>> {
    let parents = shelf.parents(runs, strength);
    (!parents.is_empty()).then(|| Arc::clone(&parents[pick.index(parents.len())]))
}

/// What remains of a bag when its columns are, one by one, kept, dropped, merged to a divisor of
/// their levels or split by a parent with as many runs, the pieces treated likewise.
fn cut(shelf: &Shelf, bag: &Bag, strength: u32, choices: &mut impl Iterator<Item = u32>) -> Bag {
    let mut out = Bag::default();
    for &(s, count) in bag.entries() {
        for _ in 0..count {
            let choice = choices.next().unwrap_or(0);
            let detail = choices.next().unwrap_or(0) as usize;
            let by = shelf.parents(u64::from(s), strength);
            let divisors: Vec<u16> = (2..=s).filter(|r| s.is_multiple_of(*r)).collect();
            match choice % 4 {
                0 => {}
                1 => out.add(divisors[detail % divisors.len()], 1),
                2 if !by.is_empty() => {
                    out = out.union(&cut(shelf, &by[detail % by.len()].bag, strength, choices));
                }
                _ => out.add(s, 1),
            }
        }
    }
    out
}

thread_local! {
    static SHELF: Shelf = Shelf::new();
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(300))]

    #[test]
    fn what_is_cut_from_a_parent_fits_into_it(
        half in 2u64..=48, strength in 2u32..=3, pick in any::<prop::sample::Index>(),
        choices in prop::collection::vec(any::<u32>(), 0..120),
    ) {
        SHELF.with(|shelf| {
            let Some(parent) = some_parent(shelf, 2 * half, strength, pick) else { return Ok(()) };
            let request = cut(shelf, &parent.bag, strength, &mut choices.into_iter());
            let placement = Packer::new(shelf, strength).fit(&request, &parent.bag);
            prop_assert!(placement.is_some(), "{request} not in {}", parent.bag);
            let (placement, wanted) = (placement.unwrap(), request);
            if wanted.factors() >= u64::from(strength) {
                let array = arrange(&parent.recipe, &placement, None).build().unwrap();
                prop_assert_eq!(Bag::of_levels(array.levels()), wanted);
                let judged = certify(&array, &Demand::strength(strength as usize)).unwrap();
                prop_assert_eq!(judged.verdict, Verdict::Orthogonal);
            }
            Ok(())
        })?;
    }

    #[test]
    fn no_text_of_a_mix_panics(text in mix_text(), strength in 0u32..6, most in 0u64..130) {
        if let Ok(mix) = text.parse::<Mix>() {
            let request = Request::new(mix).strength(strength).max_runs(most);
            SHELF.with(|shelf| match seek_on(shelf, &request) {
                Ok(Outcome::Found(answer)) => {
                    prop_assert!(answer.array.runs() as u64 <= most);
                    prop_assert_eq!(answer.array.levels(), request.mix.levels());
                    prop_assert!(answer.certificate.strength >= strength as usize);
                    Ok(())
                }
                Ok(Outcome::ProvedImpossible { floor }) => {
                    prop_assert!(floor.runs > most);
                    Ok(())
                }
                Ok(Outcome::LimitReached { floor, .. }) => {
                    prop_assert!(floor.runs <= most);
                    Ok(())
                }
                Ok(other) => Err(TestCaseError::fail(format!("{other:?}"))),
                Err(trysquare::seek::SeekError::Floor(_)) => {
                    prop_assert!(strength == 0 || strength as usize > request.mix.factors());
                    Ok(())
                }
                Err(e) => Err(TestCaseError::fail(e.to_string())),
            })?;
        }
    }

    #[test]
    fn damaged_recipes_are_errors(
        half in 2u64..=36, strength in 2u32..=3, pick in any::<prop::sample::Index>(),
        at in any::<prop::sample::Index>(), value in prop_oneof![0u64..70, Just(65_535), Just(u64::from(u32::MAX))],
    ) {
        let parent = SHELF.with(|shelf| some_parent(shelf, 2 * half, strength, pick));
        if let Some(parent) = parent {
            let mut json = serde_json::to_value(&*parent.recipe).unwrap();
            let mut numbers = Vec::new();
            number_paths(&json, &mut Vec::new(), &mut numbers);
            if !numbers.is_empty() {
                *json.pointer_mut(&numbers[at.index(numbers.len())]).unwrap() = value.into();
                judge_damaged(&json)?;
            }
        }
    }
}

/// Mixes as people write them, with mistakes.
fn mix_text() -> impl Strategy<Value = String> {
    let level = prop_oneof![8 => 0u32..14, 1 => any::<u32>()];
    let count = prop_oneof![8 => 0u32..20, 1 => any::<u32>()];
    let piece = prop_oneof![
        6 => (level.clone(), count).prop_map(|(s, k)| format!("{s}^{k}")),
        3 => level.prop_map(|s| s.to_string()),
        1 => "[-^x×* ,.a²\u{0}]{1,3}".prop_map(String::from),
    ];
    (prop::collection::vec(piece, 0..6), prop_oneof![Just(" "), Just(", "), Just(" x "), Just("×")])
        .prop_map(|(pieces, between)| pieces.join(between))
}

/// JSON pointers to all numbers.
fn number_paths(json: &serde_json::Value, path: &mut Vec<String>, out: &mut Vec<String>) {
    use serde_json::Value;
    let children: Vec<(String, &Value)> = match json {
        Value::Number(_) => {
            out.push(path.iter().map(|p| format!("/{p}")).collect());
            return;
        }
        Value::Array(items) => items.iter().enumerate().map(|(i, v)| (i.to_string(), v)).collect(),
        Value::Object(map) => map.iter().map(|(k, v)| (k.clone(), v)).collect(),
        _ => return,
    };
    for (name, child) in children {
        path.push(name);
        number_paths(child, path, out);
        path.pop();
    }
}

/// A changed recipe is refused, or built as it says (a number may be changed to another good one).
/// Whether the array is orthogonal is for the judges, not for the recipe.
fn judge_damaged(json: &serde_json::Value) -> Result<(), TestCaseError> {
    let Ok(recipe) = serde_json::from_value::<Recipe>(json.clone()) else { return Ok(()) };
    let Ok(levels) = recipe.levels() else {
        prop_assert!(recipe.build().is_err(), "no levels, yet built: {json}");
        return Ok(());
    };
    let small = recipe.runs().is_ok_and(|n| n.saturating_mul(levels.len()) <= 1 << 20);
    if small && let Ok(array) = recipe.build() {
        prop_assert_eq!((Ok(array.runs()), array.levels()), (recipe.runs(), levels.as_slice()));
    }
    Ok(())
}

#[test]
fn recipes_that_are_cut_off_or_nested_too_deeply_are_errors() {
    let shelf = Shelf::new();
    let text = serde_json::to_string(&*shelf.parents(36, 2)[0].recipe).unwrap();
    for end in 0..text.len() {
        assert!(serde_json::from_str::<Recipe>(&text[..end]).is_err(), "{}", &text[..end]);
    }
    assert!(serde_json::from_str::<Recipe>(r#"{"make":"bush","q":3,"t":2,"more":1}"#).is_err());
    assert!(serde_json::from_str::<Recipe>(r#"{"make":"wish","q":3}"#).is_err());

    let nested = |depth: usize| {
        (0..depth).fold(Recipe::FullFactorial { levels: vec![2, 2] }, |of, _| Recipe::Arrange {
            of: Arc::new(of),
            split: vec![],
            take: None,
            merge: vec![],
        })
    };
    assert_eq!(nested(60).build().map(|a| a.runs()), Ok(4));
    let deep = nested(300);
    assert!(deep.build().is_err() && deep.levels().is_err() && deep.runs().is_err());
    let brackets = "{\"make\":\"arrange\",\"of\":".repeat(100_000);
    assert!(serde_json::from_str::<Recipe>(&brackets).is_err());
}

#[test]
fn answers_do_not_depend_on_the_number_of_threads() {
    let answers = |threads: usize| {
        let pool = rayon::ThreadPoolBuilder::new().num_threads(threads).build().unwrap();
        pool.install(|| {
            let shelf = Shelf::new();
            let requests =
                ["2^1 3^7", "2^60", "3^12 6 2^2", "4^5 2^9", "6^3", "5^4 10", "7^8", "2^3 3^4 4^2"];
            let two = requests.par_iter().map(|m| Request::new(m.parse().unwrap()));
            let three = requests.par_iter().map(|m| Request::new(m.parse().unwrap()).strength(3));
            two.chain(three).map(|r| seek_on(&shelf, &r).unwrap()).collect::<Vec<Outcome>>()
        })
    };
    let one = answers(1);
    assert_eq!(one, answers(2));
    assert_eq!(one, answers(7));
}
