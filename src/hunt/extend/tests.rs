use super::*;
use crate::mix::Mix;

fn request(array: Array, strength: u32, wanted: &[(u16, Option<usize>)]) -> Extension {
    let wanted = wanted.iter().map(|&(levels, most)| Wanted { levels, most }).collect();
    Extension { array, strength, wanted, most_candidates: 1 << 18 }
}

fn run(array: &Array, strength: u32, wanted: &[(u16, Option<usize>)]) -> Extended {
    let extended = extend(&request(array.clone(), strength, wanted), &mut Effort::unlimited()).unwrap();
    if let Extended::Found { array: longer, added, .. } = &extended {
        assert_eq!(&longer.levels()[..array.factors()], array.levels());
        assert_eq!(longer.levels()[array.factors()..], added[..]);
        let kept: Vec<usize> = (0..array.factors()).collect();
        assert_eq!(&longer.select(&kept).unwrap(), array);
        assert_eq!(crate::verify::counting::by_definition(longer, strength as usize).unwrap(), None);
    }
    extended
}

/// How many columns of `levels` levels are added, and what is proved about them.
fn most(array: &Array, strength: u32, levels: u16) -> (usize, Option<Standing>) {
    match run(array, strength, &[(levels, None)]) {
        Extended::Found { added, standing, .. } => (added.len(), Some(standing)),
        Extended::NoneExists => (0, None),
        Extended::GaveUp => panic!("an answer was expected"),
    }
}

fn square(n: u16, table: impl Fn(u16, u16) -> u16 + Sync) -> Array {
    Array::from_fn(usize::from(n * n), vec![n; 3], |run, j| {
        let (r, c) = (run as u16 / n, run as u16 % n);
        [r, c, table(r, c)][j]
    })
    .unwrap()
}

fn sought(runs: usize, mix: &str, strength: u32) -> Array {
    let request = crate::seek::Request::new(mix.parse::<Mix>().unwrap()).strength(strength);
    let crate::seek::Outcome::Found(answer) = crate::seek::seek(&request).unwrap() else { panic!("{mix}") };
    assert_eq!(answer.array.runs(), runs);
    answer.array
}

/// 18 and 16 runs: the floors leave no room (17 degrees of freedom; Rao at strength 3).
#[test]
fn saturated_arrays_have_no_room() {
    for s in [2, 3, 6, 9] {
        assert_eq!(most(&sought(18, "3^7 2", 2), 2, s).0, 0);
    }
    assert_eq!(most(&sought(16, "2^8", 3), 3, 2), (0, None));
}

/// Euler 1782: a cyclic square of even order has no transversal, hence no orthogonal mate; of
/// prime order it has all p − 2 further mates.
#[test]
fn mates_of_cyclic_squares() {
    for n in [4, 6] {
        assert_eq!(most(&square(n, |r, c| (r + c) % n), 2, n), (0, None), "order {n}");
    }
    for n in [5, 7] {
        let mates = most(&square(n, |r, c| (r + c) % n), 2, n);
        assert_eq!(mates, (usize::from(n) - 2, Some(Standing::Maximum)), "order {n}");
    }
    assert_eq!(most(&square(4, |r, c| r ^ c), 2, 4), (2, Some(Standing::Maximum)));
}

/// OA(12, 3·2^4) is maximal (methods 3.5), and so is OA(24, 3·2^4) of strength 3 (methods 1.6).
#[test]
fn maximal_arrays() {
    assert_eq!(most(&sought(12, "3 2^4", 2), 2, 2), (0, None));
    assert_eq!(most(&sought(24, "3 2^4", 3), 3, 2), (0, None));
    assert_eq!(most(&sought(20, "5 2^8", 2), 2, 2), (0, None));
}

#[test]
fn further_columns_at_strength_three() {
    let full = |k: usize| Array::from_fn(1 << k, vec![2; k], |run, j| (run >> j & 1) as u16).unwrap();
    // The affine space: 2^(k−1) factors.
    assert_eq!(most(&full(4), 3, 2), (4, Some(Standing::Maximum)));
    assert_eq!(most(&full(3), 3, 2), (1, Some(Standing::Maximum)));
}

#[test]
#[ignore = "explore"]
fn explore() {
    let full = Array::from_fn(16, vec![2; 2], |run, j| (run >> j & 1) as u16).unwrap();
    let mut random = crate::hunt::Random::new(5);
    let mut counts = std::collections::BTreeMap::new();
    for _ in 0..200 {
        let mut array = full.clone();
        let start = std::time::Instant::now();
        while array.factors() < 5 {
            let mut column: Vec<u16> = (0..16).map(|r| r % 2).collect();
            for i in (1..16).rev() {
                column.swap(i, random.below(i + 1));
            }
            let mut columns: Vec<(u16, Vec<u16>)> =
                array.columns().map(|c| (2, c.to_vec())).collect();
            columns.push((2, column));
            let next = Array::from_columns(columns).unwrap();
            if crate::verify::counting::find_violation(&next, 2).unwrap().is_none() {
                array = next;
            }
        }
        let start2 = std::time::Instant::now();
        let m = most(&array, 2, 2);
        if !counts.contains_key(&m.0) {
            println!("{m:?} {:?} {:?}: {:?}", start2 - start, start2.elapsed(), array.columns().collect::<Vec<_>>());
        }
        *counts.entry(m.0).or_insert(0) += 1;
    }
    println!("{counts:?}");
}
