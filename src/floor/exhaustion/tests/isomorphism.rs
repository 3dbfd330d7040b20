//! Canonical forms against all permutations.

use std::collections::{BTreeMap, BTreeSet};

use super::super::canonical::canonical;
use super::super::columns::{Columns, columns};
use super::super::sketch::Sketch;
use super::super::{Census, Progress};
use crate::floor::Effort;

type Rows = Vec<Vec<u8>>;

/// All permutations of `0..n`.
fn permutations(n: usize) -> Vec<Vec<u8>> {
    if n == 0 {
        return vec![Vec::new()];
    }
    let shorter = permutations(n - 1);
    let longer = |p: &Vec<u8>, at: usize| {
        let mut p = p.clone();
        p.insert(at, n as u8 - 1);
        p
    };
    shorter.iter().flat_map(|p| (0..n).map(move |at| longer(p, at))).collect()
}

/// Every permutation of equal columns and of the levels within columns: for every new column where
/// it comes from, and what becomes of its levels.
fn all_moves(levels: &[u16]) -> Vec<Vec<(usize, Vec<u8>)>> {
    let orders =
        permutations(levels.len()).into_iter().map(|p| p.into_iter().map(usize::from).collect::<Vec<_>>());
    let kept = orders.filter(|p| p.iter().zip(levels).all(|(&from, &s)| levels[from] == s));
    let mut moves = Vec::new();
    for order in kept {
        let mut partial: Vec<Vec<(usize, Vec<u8>)>> = vec![Vec::new()];
        for (&from, &s) in order.iter().zip(levels) {
            let names = permutations(usize::from(s));
            partial = partial
                .into_iter()
                .flat_map(|m| {
                    let names = names.clone();
                    names.into_iter().map(move |n| m.iter().cloned().chain([(from, n)]).collect())
                })
                .collect();
        }
        moves.extend(partial);
    }
    moves
}

/// The rows after a move, sorted.
fn moved(rows: &[Vec<u8>], how: &[(usize, Vec<u8>)]) -> Rows {
    let row = |row: &Vec<u8>| how.iter().map(|(from, names)| names[usize::from(row[*from])]).collect();
    let mut rows: Rows = rows.iter().map(row).collect();
    rows.sort_unstable();
    rows
}

fn form(levels: &[u16], rows: &[Vec<u8>]) -> Vec<u8> {
    let sketch = Sketch::from_rows(levels.to_vec(), rows.iter().map(|row| (row.clone(), 1)));
    canonical(&sketch, &mut |_| true).unwrap().form
}

/// All arrays of a shape, orthogonal or not: forms are equal exactly when arrays are isomorphic.
#[test]
fn forms_of_all_small_arrays_agree_with_brute_force() {
    for (runs, levels) in [
        (4, vec![2, 2, 2]),
        (3, vec![3, 3]),
        (4, vec![3, 2]),
        (3, vec![3, 2, 2]),
        (6, vec![2, 2]),
        (3, vec![2; 4]),
    ] {
        let moves = all_moves(&levels);
        let size: usize = levels.iter().map(|&s| usize::from(s)).product();
        let row = |mut code: usize| {
            levels
                .iter()
                .map(|&s| {
                    let x = code % usize::from(s);
                    code /= usize::from(s);
                    x as u8
                })
                .collect::<Vec<u8>>()
        };
        let (mut by_least, mut by_form) = (BTreeMap::new(), BTreeMap::new());
        for code in 0..size.pow(runs) {
            let mut rows: Rows = (0..runs).map(|r| row(code / size.pow(r) % size)).collect();
            let form = form(&levels, &rows);
            rows.sort_unstable();
            let least = moves.iter().map(|how| moved(&rows, how)).min().unwrap();
            assert_eq!(by_least.entry(least.clone()).or_insert(form.clone()), &form, "{rows:?}");
            assert_eq!(by_form.entry(form).or_insert(least.clone()), &least, "{rows:?}");
        }
        assert!(by_least.len() > 3);
    }
}

/// A census of `columns` columns.
fn census(order: &[u16], runs: u32, strength: u32) -> Census {
    let mut census = Census::new(order, runs, strength).unwrap();
    while census.advance(&mut Effort::unlimited()) == Progress::Advanced {}
    census
}

/// The forms of moved orthogonal arrays, which have many automorphisms.
#[test]
fn forms_of_orthogonal_arrays_do_not_change_under_moves() {
    for (order, runs, strength) in [
        (vec![2; 5], 16, 2),
        (vec![3; 4], 18, 2),
        (vec![4, 2, 2, 2], 16, 2),
        (vec![3; 4], 27, 3),
        (vec![6, 2, 2], 24, 2),
    ] {
        let moves = all_moves(&order);
        for sketch in census(&order, runs, strength).sketches() {
            let rows: Rows = sketch.array().rows().map(|r| r.iter().map(|&x| x as u8).collect()).collect();
            let own = form(&order, &rows);
            for how in moves.iter().step_by(moves.len().div_ceil(60)) {
                assert_eq!(form(&order, &moved(&rows, how)), own);
            }
        }
    }
}

/// Generators are automorphisms: they permute the distinct runs and keep the form.
#[test]
fn generators_are_automorphisms() {
    let mut seen = 0;
    for sketch in census(&[2; 6], 16, 2).sketches() {
        for generator in canonical(&sketch, &mut |_| true).unwrap().generators {
            seen += 1;
            assert_eq!(generator.iter().collect::<BTreeSet<_>>().len(), sketch.rows.len());
            // A column of the moved array, as a partition of the runs, is a column of the array.
            let column = |j: usize, by: &dyn Fn(usize) -> usize| -> Vec<u8> {
                let first = sketch.rows[by(0)][j];
                (0..sketch.rows.len()).map(|r| sketch.rows[by(r)][j] ^ first).collect()
            };
            let own: BTreeSet<Vec<u8>> = (0..6).map(|j| column(j, &|r| r)).collect();
            let its: BTreeSet<Vec<u8>> = (0..6).map(|j| column(j, &|r| usize::from(generator[r]))).collect();
            assert_eq!(own, its);
            assert!(
                (0..sketch.rows.len())
                    .all(|r| sketch.weights[r] == sketch.weights[usize::from(generator[r])])
            );
        }
    }
    assert!(seen > 50);
}

/// How many different namings of its levels a new column has.
fn namings(split: &[u8], s: usize) -> u64 {
    let mut vectors: BTreeMap<Vec<u8>, u64> = BTreeMap::new();
    for l in 0..s {
        *vectors.entry(split.iter().skip(l).step_by(s).copied().collect()).or_insert(0) += 1;
    }
    (1..=s as u64).product::<u64>() / vectors.values().map(|&n| (1..=n).product::<u64>()).product::<u64>()
}

/// Double counting (Kaski & Östergård 2006, 'Classification algorithms for codes and designs',
/// ch. 10): the arrays with one more column, counted as multisets of runs without regard to
/// isomorphism, are as many from the classes before as from the classes after. The automorphisms
/// are counted by brute force, so no class can be missing or counted twice unnoticed.
#[test]
fn classes_satisfy_the_double_count() {
    for (order, runs, strength) in [
        (vec![2; 5], 12, 2),
        (vec![2; 5], 16, 2),
        (vec![2; 5], 20, 2),
        (vec![3; 4], 18, 2),
        (vec![3; 4], 54, 3),
        (vec![4, 2, 2, 2, 2], 16, 2),
        (vec![5, 2, 2, 2], 20, 2),
        (vec![3, 2, 2, 2, 2], 24, 3),
    ] {
        for k in 1..order.len() {
            let total = |census: &Census, columns_of: &dyn Fn(&Sketch) -> u64| -> u64 {
                let levels = census.levels(census.order.len());
                let moves = all_moves(&levels);
                let orbit = |sketch: &Sketch| {
                    let rows: Rows =
                        sketch.array().rows().map(|r| r.iter().map(|&x| x as u8).collect()).collect();
                    let fixing = moves.iter().filter(|how| moved(&rows, how) == rows).count();
                    (moves.len() / fixing) as u64 * columns_of(sketch)
                };
                census.sketches().iter().map(orbit).sum()
            };
            let s = order[k];
            let t = strength.min(k as u32);
            let extensions = |sketch: &Sketch| match columns(sketch, strength, s, false, &mut |_| true) {
                Columns::All(all) => all.iter().map(|split| namings(split, usize::from(s))).sum(),
                Columns::Stopped => panic!("no limit was given"),
            };
            let before = total(&census(&order[..k], runs, t), &extensions);
            let after = total(&census(&order[..=k], runs, strength.min(k as u32 + 1)), &|_| 1);
            assert!(before > 0 && before == after, "{order:?} {runs}: {k} columns");
        }
    }
}
