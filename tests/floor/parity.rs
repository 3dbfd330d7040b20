//! The statement about N = 2^t·odd on arrays that exist, from pairs of runs.

use trysquare::catalog::Shelf;
use trysquare::floor::proof::{parity_applies, parity_bounds};

/// N² times the part of B of a set of factors: Σ over pairs of runs of Π (s [equal] − 1).
fn squares(rows: &[Vec<i64>], levels: &[i64], set: &[usize]) -> i64 {
    let mut sum = 0;
    for x in rows {
        for y in rows {
            sum += set.iter().map(|&c| if x[c] == y[c] { levels[c] - 1 } else { -1 }).product::<i64>();
        }
    }
    sum
}

fn subsets(of: &[usize], size: usize) -> Vec<Vec<usize>> {
    if size == 0 {
        return vec![Vec::new()];
    }
    (0..of.len())
        .flat_map(|n| {
            subsets(&of[n + 1..], size - 1).into_iter().map(move |mut rest| {
                rest.push(of[n]);
                rest
            })
        })
        .collect()
}

#[test]
fn holds_for_arrays_on_the_shelf() {
    let shelf = Shelf::new();
    let (mut sets, mut wide) = (0, 0);
    for (strength, runs) in [(2, 12), (2, 20), (2, 28), (2, 36), (2, 60), (3, 24), (3, 40)] {
        assert!(parity_applies(runs, strength));
        for parent in shelf.parents(runs, strength).iter() {
            let array = parent.recipe.build().unwrap();
            let levels: Vec<i64> = array.levels().iter().map(|&s| i64::from(s)).collect();
            let rows: Vec<Vec<i64>> =
                array.rows().map(|r| r.iter().map(|&x| i64::from(x)).collect()).collect();
            let mut even: Vec<usize> = (0..levels.len()).filter(|&c| levels[c] % 2 == 0).collect();
            // Factors of many levels first; enough of the others.
            even.sort_by_key(|&c| -levels[c]);
            even.truncate(7);
            for size in strength as usize + 1..=5 {
                let counts = [(2, 100)];
                if !parity_bounds(&[size as u32], &counts, strength) {
                    continue;
                }
                for set in subsets(&even, size) {
                    let least = set.iter().map(|&c| levels[c] - 1).product::<i64>() << (2 * strength);
                    assert!(squares(&rows, &levels, &set) >= least, "{runs} runs, {set:?} of {levels:?}");
                    sets += 1;
                    wide += usize::from(set.iter().any(|&c| levels[c] > 2));
                }
            }
        }
    }
    println!("{sets} sets of factors, {wide} with more than two levels");
    assert!(sets > 200 && wide > 20);
}
