use super::*;
use crate::construct::orbit_array;
use crate::mix::Mix;
use crate::verify::{Demand, Verdict, certify};

fn hunt(runs: u32, mix: &str, group: &[u16], strength: u32) -> ExactHunt {
    let levels = mix.parse::<Mix>().unwrap().levels().to_vec();
    ExactHunt { runs, levels, strength, group: group.to_vec(), most_candidates: 1 << 20 }
}

/// Whether the array exists; what is found is judged.
fn exists(runs: u32, mix: &str, group: &[u16], strength: u32) -> bool {
    let request = hunt(runs, mix, group, strength);
    match decide(&request, &mut Effort::unlimited()).unwrap() {
        Outcome::Found(columns) => {
            let array = orbit_array(group, &columns).unwrap();
            assert_eq!(array.runs(), runs as usize);
            assert_eq!(array.mix().counts(), mix.parse::<Mix>().unwrap().counts());
            let judgement = certify(&array, &Demand::strength(strength as usize)).unwrap();
            assert_eq!(judgement.verdict, Verdict::Orthogonal, "{runs}: {mix}");
            true
        }
        Outcome::Impossible => false,
        Outcome::GaveUp => panic!("{runs}: {mix} has an answer"),
    }
}

/// What the literature says of 12, 18, 20 and 24 runs: OA(12, 3·2^4), OA(12, 6·2^2),
/// OA(20, 5·2^8) are maximal (methods 3.4, 3.5, after DeCock & Stufken 2000 and Wang & Wu 1991);
/// OA(18, 2·3^7) and OA(18, 6·3^6) are (Bose & Bush 1952, degrees of freedom); at strength 3 and
/// 24 runs 3·2^4 is.
#[test]
fn what_is_known_of_small_arrays() {
    for (runs, yes, no, strength) in [
        (12, "3 2^4", "3 2^5", 2),
        (12, "6 2^2", "6 2^3", 2),
        (12, "2^11", "2^12", 2),
        (18, "3^7", "3^8", 2),
        (18, "2 3^7", "2^2 3", 2),
        (18, "6 3^6", "6 3^7", 2),
        (20, "5 2^8", "5 2^9", 2),
        (20, "10 2^2", "10 2^3", 2),
        (24, "3 2^4", "3 2^5", 3),
        (16, "2^8", "2^9", 3),
    ] {
        assert!(exists(runs, yes, &[], strength), "{runs}: {yes}");
        assert!(!exists(runs, no, &[], strength), "{runs}: {no}");
    }
}

/// The symmetries that the shelf's arrays have (methods 4.2); an array with a symmetry is also
/// one without, so what the trivial group excludes every group does.
#[test]
fn groups() {
    for (runs, mix, group) in [
        (18, "3^7 2", &[3][..]),
        (24, "6 4 2^11", &[2]),
        (24, "6 2^14", &[2]),
        (36, "6^3 2^8", &[3]),
        (36, "3^12", &[3]),
        (16, "4^5", &[2]),
    ] {
        assert!(exists(runs, mix, group, 2), "{runs}: {mix}");
    }
    for group in [&[2][..], &[3], &[4], &[2, 2], &[6]] {
        assert!(!exists(12, "6 2^3", group, 2) && !exists(12, "3 2^5", group, 2));
    }
    // With any group less is possible than the literature has (24 runs: 6·4·2^11, 6·2^14).
    assert!(!exists(24, "6 4 2^12", &[2], 2) && !exists(24, "6 2^15", &[2], 2));
}

/// Beside what the literature is remembered to hold in 24 runs, 2^11·4·6 and 2^14·6: nothing more
/// exists with these factors, under any symmetry or none.
#[test]
#[ignore = "half a minute"]
fn no_more_columns_in_24_runs() {
    assert!(!exists(24, "6 4 2^12", &[], 2));
    assert!(!exists(24, "6 2^15", &[], 2));
}

#[test]
fn no_answer_where_the_limits_are_narrow() {
    let few = ExactHunt { most_candidates: 10, ..hunt(18, "3^7", &[], 2) };
    assert_eq!(decide(&few, &mut Effort::unlimited()), Some(Outcome::GaveUp));
    let request = hunt(20, "5 2^9", &[], 2);
    assert_eq!(decide(&request, &mut Effort::new(1000, &|| false)), Some(Outcome::GaveUp));
    let twice: Vec<_> =
        (0..2).map(|_| decide(&hunt(20, "5 2^8", &[], 2), &mut Effort::unlimited())).collect();
    assert_eq!(twice[0], twice[1]);
}

#[test]
fn requests_that_make_no_sense() {
    for bad in [
        ExactHunt { levels: vec![], ..hunt(8, "2", &[], 2) },
        ExactHunt { levels: vec![1], ..hunt(8, "2", &[], 2) },
        hunt(8, "2", &[3], 2),
        hunt(8, "2", &[1], 2),
        hunt(8, "2", &[], 4),
        hunt(0, "2", &[], 2),
        hunt(129, "2", &[], 2),
    ] {
        assert_eq!(decide(&bad, &mut Effort::unlimited()), None);
    }
    assert!(!exists(9, "2", &[], 2) && !exists(8, "2^2 4 8", &[], 2) && !exists(8, "16", &[], 2));
}

/// All columns a(o) + χ(g) that are even, by trying everything; the first symbol is 0.
fn all_columns(runs: usize, group: &[u16], s: u16) -> Vec<Vec<u16>> {
    let order: usize = group.iter().map(|&n| usize::from(n)).product();
    let tuples = |sizes: Vec<u16>| {
        sizes.into_iter().fold(vec![Vec::new()], |all: Vec<Vec<u16>>, n| {
            all.iter().flat_map(|t| (0..n).map(|x| [t.as_slice(), &[x]].concat())).collect()
        })
    };
    let mut columns = Vec::new();
    for shifts in tuples(vec![s; group.len()]) {
        if shifts.iter().zip(group).any(|(x, n)| x * n % s != 0) {
            continue;
        }
        for rest in tuples(vec![s; runs / order - 1]) {
            let base = [&[0], rest.as_slice()].concat();
            let column = OrbitColumn { levels: s, shifts: shifts.clone(), base };
            let column = orbit_array(group, &[column]).unwrap().column(0).to_vec();
            if (0..s).all(|x| column.iter().filter(|&&y| y == x).count() * usize::from(s) == runs) {
                columns.push(column);
            }
        }
    }
    columns
}

/// Whether every combination of levels of these columns occurs equally often.
fn even(columns: &[&(u16, Vec<u16>)]) -> bool {
    let cells: usize = columns.iter().map(|c| usize::from(c.0)).product();
    let mut counts = vec![0usize; cells];
    for run in 0..columns[0].1.len() {
        counts[columns.iter().fold(0, |n, c| n * usize::from(c.0) + usize::from(c.1[run]))] += 1;
    }
    counts.iter().all(|&n| n * cells == columns[0].1.len())
}

/// Plain backtracking over the columns: nothing is left out but the order of equal factors.
fn brute(
    lists: &[(u16, Vec<Vec<u16>>)],
    levels: &[u16],
    strength: usize,
    chosen: &mut Vec<(u16, Vec<u16>)>,
    steps: &mut usize,
) -> Option<bool> {
    let Some(&s) = levels.get(chosen.len()) else { return Some(true) };
    for column in &lists.iter().find(|l| l.0 == s).unwrap().1 {
        *steps = steps.checked_sub(1)?;
        let new = (s, column.clone());
        let follows = chosen.last().is_none_or(|last| last.0 != s || last.1 < new.1);
        let fits = (0..chosen.len()).all(|i| {
            even(&[&chosen[i], &new])
                && (strength == 2 || (0..i).all(|j| even(&[&chosen[j], &chosen[i], &new])))
        });
        if follows && fits {
            chosen.push(new);
            if brute(lists, levels, strength, chosen, steps)? {
                return Some(true);
            }
            chosen.pop();
        }
    }
    Some(false)
}

/// All mixes of the divisors of the runs with at most one degree of freedom too many.
fn mixes(runs: u16) -> Vec<Vec<u16>> {
    fn add(runs: u16, most: u16, left: u16, levels: &mut Vec<u16>, all: &mut Vec<Vec<u16>>) {
        for s in (2..=most).filter(|&s| runs.is_multiple_of(s) && s - 1 <= left) {
            levels.push(s);
            all.push(levels.clone());
            add(runs, s, left - (s - 1), levels, all);
            levels.pop();
        }
    }
    let mut all = Vec::new();
    add(runs, runs, runs, &mut Vec::new(), &mut all);
    all
}

fn compare(runs: u16, groups: &[&[u16]], steps: usize) -> [usize; 2] {
    let mut compared = [0; 2];
    for &group in groups {
        let divisors = (2..=runs).filter(|&s| runs.is_multiple_of(s));
        let lists: Vec<_> = divisors.map(|s| (s, all_columns(usize::from(runs), group, s))).collect();
        for levels in mixes(runs) {
            for strength in [2, 3] {
                let hunt = ExactHunt {
                    runs: u32::from(runs),
                    levels: levels.clone(),
                    strength,
                    group: group.to_vec(),
                    most_candidates: 1 << 20,
                };
                let mut steps = steps;
                let plain = brute(&lists, &levels, strength as usize, &mut Vec::new(), &mut steps);
                let Some(plain) = plain else { continue };
                let fast = decide(&hunt, &mut Effort::unlimited()).unwrap();
                assert_eq!(matches!(fast, Outcome::Found(_)), plain, "{hunt:?}");
                assert_eq!(fast == Outcome::Impossible, !plain, "{hunt:?}");
                compared[usize::from(plain)] += 1;
            }
        }
    }
    compared
}

#[test]
fn plain_backtracking_agrees() {
    let mut compared = [0; 2];
    for (runs, groups) in [
        (4, &[&[][..], &[2], &[4], &[2, 2]][..]),
        (6, &[&[], &[2], &[3], &[6]]),
        (8, &[&[2], &[4], &[2, 2], &[8], &[2, 4], &[2, 2, 2]]),
        (9, &[&[3], &[9], &[3, 3]]),
        (12, &[&[3], &[4], &[2, 2], &[6], &[2, 6]]),
        (16, &[&[4], &[2, 2], &[8], &[2, 4]]),
        (18, &[&[3, 3], &[6], &[9]]),
    ] {
        for (all, some) in compared.iter_mut().zip(compare(runs, groups, 8_000)) {
            *all += some;
        }
    }
    assert!(compared.iter().all(|&n| n > 100), "{compared:?}");
}
