//! Arrays from `seek`: every changed cell is refused, every renaming and reordering accepted.

use super::engines::{permuted, refused};
use super::samples::with_cell;
use trysquare::array::Array;
use trysquare::catalog::Shelf;
use trysquare::seek::{Outcome, Request, seek_on};
use trysquare::verify::distance::dual_distribution;
use trysquare::verify::{Demand, Verdict, certify};

/// Mixes, strength and the number of runs at which they are had.
const SOUGHT: [(&str, u32, usize); 14] = [
    ("2^4 4", 2, 8),
    ("2^11", 2, 12),
    ("3^7 2", 2, 18),
    ("3^6 6", 2, 18),
    ("2^20 4", 2, 24),
    ("5^6", 2, 25),
    ("3^9 9", 2, 27),
    ("4^8 8", 2, 32),
    ("2^11 3^12", 2, 36),
    ("3^12 12", 2, 36),
    ("2^10 5^5", 2, 100),
    ("8^9", 2, 64),
    ("4^6", 3, 64),
    ("6 2^7", 3, 48),
];

fn sought() -> Vec<(&'static str, Array, usize)> {
    let shelf = Shelf::new();
    SOUGHT
        .into_iter()
        .map(|(mix, strength, runs)| {
            let request = Request::new(mix.parse().unwrap()).strength(strength);
            let Outcome::Found(answer) = seek_on(&shelf, &request).unwrap() else { panic!("{mix}") };
            assert!(answer.array.runs() <= runs, "{mix}: {} runs", answer.array.runs());
            (mix, answer.array, strength as usize)
        })
        .collect()
}

/// A changed cell takes one run from a level of its column and gives it to another, so the witness
/// is that column, and a level that is one off.
#[test]
fn every_single_changed_cell_is_refused_with_its_column() {
    for (mix, array, strength) in sought() {
        let quick = Demand::strength(strength);
        for j in 0..array.factors() {
            let each = array.runs() as u64 / u64::from(array.levels()[j]);
            for i in 0..array.runs() {
                let was = array.get(i, j);
                for symbol in (0..array.levels()[j]).filter(|&s| s != was) {
                    let changed = with_cell(&array, i, j, symbol);
                    let witness = refused(&changed, strength);
                    assert_eq!(witness.columns, [j], "{mix}");
                    let level = witness.combination[0];
                    assert!(
                        level == was && witness.count == each - 1
                            || level == symbol && witness.count == each + 1
                    );
                    if i % 7 == 0 {
                        let judged = certify(&changed, &quick).unwrap();
                        assert_eq!((judged.verdict, judged.witness), (Verdict::NotOrthogonal, Some(witness)));
                    }
                }
            }
        }
    }
}

#[test]
fn permutations_of_runs_columns_and_level_names_change_nothing() {
    for (mix, array, strength) in sought() {
        let demand = Demand::strength(strength).thorough();
        let before = certify(&array, &demand).unwrap();
        let pattern = dual_distribution(&array, strength + 2).word_length_pattern();
        for keys in [&[1u64, 5, 2][..], &[u64::MAX, 3, 77, 1 << 40], &[9]] {
            let other = permuted(&array, keys);
            let after = certify(&other, &demand).unwrap();
            assert_eq!(after.verdict, Verdict::Orthogonal, "{mix}");
            assert_eq!(after.certificate.strength, before.certificate.strength, "{mix}");
            assert_eq!(after.certificate.index, before.certificate.index, "{mix}");
            assert_eq!(dual_distribution(&other, strength + 2).word_length_pattern(), pattern, "{mix}");
        }
    }
}
