//! How many answers are proved smallest.

use std::collections::BTreeMap;

use trysquare::catalog::{Bag, Shelf};
use trysquare::floor::{Effort, QUICK, floor, strengthen};
use trysquare::mix::Mix;

/// Every mix of at least two factors that the shelf answers with at most `top` runs at strength 2,
/// and with how many: all that splitting, merging and dropping make of the parents.
fn answers(shelf: &Shelf, top: u64) -> BTreeMap<Bag, u64> {
    let mut seen = BTreeMap::new();
    for runs in 4..=top {
        let mut stack: Vec<Bag> = shelf.parents(runs, 2).iter().map(|p| p.bag.clone()).collect();
        while let Some(bag) = stack.pop() {
            if bag.factors() < 2 || seen.contains_key(&bag) {
                continue;
            }
            seen.insert(bag.clone(), runs);
            for &(s, _) in bag.entries() {
                let mut less = bag.clone();
                less.take(s, 1);
                for r in (2..s).filter(|&r| s.is_multiple_of(r)) {
                    stack.push(less.union(&Bag::from_pairs([(r, 1)])));
                }
                stack.extend(shelf.variants(u64::from(s), 2).iter().map(|v| less.union(&v.bag)));
                stack.push(less);
            }
        }
    }
    seen
}

#[test]
fn answers_that_are_proved_smallest() {
    let shelf = Shelf::new();
    let mut shares: BTreeMap<u64, (usize, usize)> = BTreeMap::new();
    let mut open = Vec::new();
    for (bag, runs) in answers(&shelf, 36) {
        let mix = Mix::from_counts(bag.entries().iter().map(|&(s, k)| (s, k as usize))).unwrap();
        let start = floor(&mix, 2).unwrap();
        let raised = strengthen(start, runs, &mut Effort::new(QUICK, &|| false)).unwrap();
        raised.proof.check_light().unwrap();
        assert!(raised.proof.runs <= runs, "{mix}: {} above {runs}", raised.proof.runs);
        let (all, proved) = shares.entry(runs).or_default();
        *all += 1;
        if raised.proof.runs == runs {
            *proved += 1;
        } else {
            assert!(raised.below.iter().any(|b| b.excluded.is_none()), "{mix}");
            open.push(format!("{mix}: {} to {runs}", raised.proof.runs));
        }
    }
    let sum = |top: u64| {
        shares.range(..=top).fold((0, 0), |(all, proved), (_, share)| (all + share.0, proved + share.1))
    };
    for (runs, (all, proved)) in &shares {
        println!("{runs} runs: {proved} of {all} answers are proved smallest");
    }
    println!("not proved: {}", open.join("; "));
    let ((all_20, proved_20), (all_36, proved_36)) = (sum(20), sum(36));
    println!("up to 20 runs {proved_20} of {all_20}, up to 36 runs {proved_36} of {all_36}");
    assert!(all_20 > 90 && proved_20 == all_20);
    assert!(all_36 > 800 && proved_36 * 100 >= all_36 * 98);
}
