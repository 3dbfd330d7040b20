//! The two judges against each other, against the definition and against published facts.

use super::samples::*;
use proptest::prelude::*;
use trysquare::array::Array;
use trysquare::verify::counting::{by_definition, find_violation};
use trysquare::verify::distance::dual_distribution;
use trysquare::verify::{Demand, JudgeError, Verdict, Witness, certify};

/// Both engines and the oracle on one array at every strength up to `top`; the largest strength.
fn strength_by_all(array: &Array, top: usize) -> usize {
    let dual = dual_distribution(array, top);
    for t in 1..=top.min(array.factors()) {
        let counted = find_violation(array, t).unwrap();
        assert_eq!(counted, by_definition(array, t).unwrap());
        assert_eq!(counted.is_some(), dual.strength() < t);
        if let Some(witness) = counted {
            assert_eq!(witness.columns.len(), dual.strength() + 1);
            assert!(witness.holds_for(array));
        }
    }
    dual.strength()
}

/// The witness on which both engines agree when they refuse.
pub(crate) fn refused(array: &Array, strength: usize) -> Witness {
    let counted = find_violation(array, strength).unwrap().expect("counting refuses");
    assert_eq!(Some(&counted), by_definition(array, strength).unwrap().as_ref());
    assert!(counted.holds_for(array));
    assert_eq!(dual_distribution(array, strength).strength() + 1, counted.columns.len());
    counted
}

#[test]
fn the_sample_has_the_strength_it_was_made_with() {
    for (name, array, strength) in sample() {
        assert_eq!(strength_by_all(&array, strength + 1), strength, "{name}");
    }
}

#[test]
fn every_single_changed_cell_is_refused() {
    for (_, array, strength) in sample() {
        for j in 0..array.factors() {
            for i in 0..array.runs() {
                for symbol in (0..array.levels()[j]).filter(|&s| s != array.get(i, j)) {
                    let witness = refused(&with_cell(&array, i, j, symbol), strength);
                    assert_eq!(witness.columns, [j]);
                }
            }
        }
    }
}

/// Two cells of one column exchanged: every column stays balanced, so the witness needs more
/// columns. Nothing is broken exactly when the two runs agree everywhere else.
#[test]
fn every_exchange_of_two_cells_in_a_column_is_refused() {
    for (name, array, strength) in sample().into_iter().filter(|(_, a, _)| a.runs() <= 18) {
        for j in 0..array.factors() {
            for i in 0..array.runs() {
                for other in (0..i).filter(|&o| array.get(o, j) != array.get(i, j)) {
                    let changed = with_cell(&array, i, j, array.get(other, j));
                    let changed = with_cell(&changed, other, j, array.get(i, j));
                    let agree =
                        (0..array.factors()).all(|c| c == j || array.get(i, c) == array.get(other, c));
                    if agree {
                        assert_eq!(strength_by_all(&changed, strength), strength, "{name}");
                    } else {
                        let witness = refused(&changed, strength);
                        assert!(witness.columns.len() > 1 && witness.columns.contains(&j), "{name}");
                    }
                }
            }
        }
    }
}

#[test]
fn strength_outside_the_factors_is_an_error() {
    let array = rao_hamming(3, 2);
    for asked in [0, 5, usize::MAX] {
        let error = JudgeError::Strength { asked, factors: 4 };
        assert_eq!(find_violation(&array, asked), Err(error.clone()));
        assert_eq!(by_definition(&array, asked), Err(error.clone()));
        assert_eq!(certify(&array, &Demand::strength(asked)), Err(error));
    }
    assert_eq!(
        JudgeError::Strength { asked: 5, factors: 4 }.to_string(),
        "strength 5 cannot be judged on 4 factors; ask for a strength from 1 to 4"
    );
}

#[test]
fn huge_products_of_levels_take_no_memory() {
    let column: Vec<u16> = (0..65535).collect();
    let array = Array::from_columns(vec![(65535, column); 12]).unwrap();
    let witness = find_violation(&array, 12).unwrap().unwrap();
    assert_eq!((witness.columns.as_slice(), witness.count), ([0, 1].as_slice(), 1));
    assert_eq!(witness.expected.to_string(), "1/65535");
    assert!(witness.holds_for(&array));
    let judgement = certify(&array, &Demand::strength(3)).unwrap();
    assert_eq!(judgement.certificate.strength, 1);
    assert_eq!(judgement.witness, Some(witness));
}

/// MacWilliams & Sloane, "The Theory of Error-Correcting Codes" (1977), chapters 1, 2 and 20:
/// weights of the Hamming code of length 15 (A_3 = 35, A_4 = 105) and of the extended Golay codes
/// (A_8 = 759; A_6 = 264). By the MacWilliams identities they are the B_j of the arrays formed by
/// the dual codes, and the minimum distance is the strength plus 1. Figures from memory.
#[test]
fn duals_of_published_codes_have_their_weights() {
    let hamming = dual_distribution(&rao_hamming(2, 4), 4);
    assert_eq!(hamming.word_length_pattern(), ["0", "0", "35", "105"]);

    let golay = [1, 0, 1, 0, 1, 1, 1, 0, 0, 0, 1, 1];
    let row = |i: usize| (0..23).map(move |j| if j < i { 0 } else { *golay.get(j - i).unwrap_or(&0) });
    let functional = |j: usize| {
        let symbol = |i: usize| if j < 23 { row(i).nth(j).unwrap() } else { row(i).sum::<u16>() % 2 };
        (0..12).map(symbol).collect::<Vec<u16>>()
    };
    let binary = linear(2, 12, &(0..24).map(functional).collect::<Vec<_>>());
    let judgement = certify(&binary, &Demand::strength(7)).unwrap();
    assert_eq!((judgement.verdict, judgement.certificate.strength), (Verdict::Orthogonal, 7));
    assert_eq!(
        judgement.certificate.word_length_pattern.unwrap(),
        ["0", "0", "0", "0", "0", "0", "0", "759", "0"]
    );

    // Identity beside the bordered matrix of quadratic characters modulo 5.
    let character = [0u16, 1, 2, 2, 1];
    let right = |i: usize, j: usize| match (i, j) {
        (0, 0) => 0,
        (0, _) | (_, 0) => 1,
        (i, j) => character[(j + 5 - i) % 5],
    };
    let functional = |j: usize| {
        (0..6).map(|i| if j < 6 { u16::from(i == j) } else { right(i, j - 6) }).collect::<Vec<u16>>()
    };
    let ternary = linear(3, 6, &(0..12).map(functional).collect::<Vec<_>>());
    let dual = dual_distribution(&ternary, 7);
    assert_eq!(dual.word_length_pattern(), ["0", "0", "0", "0", "0", "264", "0"]);
    let thorough = certify(&ternary, &Demand::strength(5).thorough()).unwrap();
    assert_eq!((thorough.verdict, thorough.certificate.strength), (Verdict::Orthogonal, 5));
}

/// Plackett & Burman 1946. In the 12-run design every three factors have |J_3| = 4 (Lin & Draper,
/// "Projection properties of Plackett and Burman designs", 1992; from memory), so
/// B_3 = C(11,3) · (4/12)² = 55/3.
#[test]
fn plackett_burman_designs_have_strength_two() {
    for row in PLACKETT_BURMAN {
        assert_eq!(strength_by_all(&plackett_burman(row), 3), 2, "{row}");
    }
    let twelve = dual_distribution(&plackett_burman(PLACKETT_BURMAN[0]), 3);
    assert_eq!(twelve.word_length_pattern(), ["0", "0", "55/3"]);
}

/// Common practice, no source: in centred coding the columns of a three-level array are
/// orthogonal vectors, and three factors of 4 runs, four of 9 and six of 18 are carried.
#[test]
fn centred_columns_have_dot_product_zero() {
    for (array, k) in
        [(rao_hamming(2, 2), 3), (rao_hamming(3, 2), 4), (eighteen().select(&[0, 1, 2, 3, 4, 5]).unwrap(), 6)]
    {
        assert_eq!((array.factors(), strength_by_all(&array, 2)), (k, 2));
        let centre = |j: usize, x: u16| 2 * i64::from(x) - i64::from(array.levels()[j]) + 1;
        for a in 0..k {
            for b in 0..a {
                let columns = array.column(a).iter().zip(array.column(b));
                assert_eq!(columns.map(|(&x, &y)| centre(a, x) * centre(b, y)).sum::<i64>(), 0);
            }
        }
    }
}

/// Random arrays, parts of orthogonal ones, and those with a changed cell or repeated runs.
fn arrays() -> impl Strategy<Value = Array> {
    let level = prop_oneof![4 => 2u16..5, 1 => 5u16..13];
    let random = (1usize..30, prop::collection::vec(level, 1..6)).prop_flat_map(|(runs, levels)| {
        let cells = levels.iter().map(|&s| prop::collection::vec(0..s, runs)).collect::<Vec<_>>();
        cells.prop_map(move |cells| Array::from_columns(levels.iter().copied().zip(cells).collect()).unwrap())
    });
    let part = (0..sample().len(), prop::collection::vec(any::<prop::sample::Index>(), 1..6)).prop_map(
        |(n, picks)| {
            let (_, array, _) = sample().swap_remove(n);
            let columns: Vec<usize> = picks.iter().map(|p| p.index(array.factors())).collect();
            array.select(&columns).unwrap()
        },
    );
    let changed = (part.clone(), any::<(prop::sample::Index, prop::sample::Index, u16)>()).prop_map(
        |(array, (i, j, s))| {
            let j = j.index(array.factors());
            with_cell(&array, i.index(array.runs()), j, s % array.levels()[j])
        },
    );
    let repeated = (part.clone(), 1usize..4, 0usize..3).prop_map(|(array, times, extra)| {
        let runs = array.runs() * times + extra;
        Array::from_fn(runs, array.levels().to_vec(), |i, j| array.get(i % array.runs(), j)).unwrap()
    });
    prop_oneof![random, part, changed, repeated]
}

/// The array with runs, columns and level names permuted by the given keys.
pub(crate) fn permuted(array: &Array, keys: &[u64]) -> Array {
    let key = |i: usize, salt: u64| {
        (keys[i % keys.len()] ^ (i as u64).wrapping_mul(0x9E37_79B9_7F4A_7C15)).wrapping_mul(2 * salt + 3)
    };
    let order = |n: usize, salt: u64| {
        let mut order: Vec<usize> = (0..n).collect();
        order.sort_by_key(|&i| key(i, salt));
        order
    };
    let (runs, columns) = (order(array.runs(), 1), order(array.factors(), 2));
    let names: Vec<Vec<usize>> =
        columns.iter().map(|&j| order(usize::from(array.levels()[j]), 3 + j as u64)).collect();
    let levels = columns.iter().map(|&j| array.levels()[j]).collect();
    let symbol = |i: usize, j: usize| names[j][usize::from(array.get(runs[i], columns[j]))] as u16;
    Array::from_fn(array.runs(), levels, symbol).unwrap()
}

proptest! {
    #[test]
    fn the_engines_agree_with_the_definition(array in arrays()) {
        strength_by_all(&array, 4);
        let thorough = certify(&array, &Demand::strength(1).thorough()).unwrap();
        let quick = certify(&array, &Demand::strength(1)).unwrap();
        prop_assert_eq!(thorough.certificate.strength, quick.certificate.strength);
        prop_assert_eq!(thorough.witness, quick.witness);
    }

    #[test]
    fn permutations_keep_strength_and_pattern(array in arrays(), keys in prop::collection::vec(any::<u64>(), 1..9)) {
        let demand = Demand::strength(array.factors().min(2));
        let before = certify(&array, &demand).unwrap();
        let after = certify(&permuted(&array, &keys), &demand).unwrap();
        prop_assert_eq!(before.verdict, after.verdict);
        prop_assert_eq!(before.certificate.strength, after.certificate.strength);
        prop_assert_eq!(before.certificate.word_length_pattern, after.certificate.word_length_pattern);
        prop_assert_eq!(before.certificate.index, after.certificate.index);
        prop_assert_eq!(before.certificate.repeated_runs, after.certificate.repeated_runs);
    }

    #[test]
    fn the_sample_stays_orthogonal_under_permutations(n in 0..16usize, keys in prop::collection::vec(any::<u64>(), 1..9)) {
        let (_, array, strength) = sample().swap_remove(n);
        let judgement = certify(&permuted(&array, &keys), &Demand::strength(strength).thorough()).unwrap();
        prop_assert_eq!(judgement.verdict, Verdict::Orthogonal);
        prop_assert_eq!(judgement.certificate.strength, strength);
    }
}
