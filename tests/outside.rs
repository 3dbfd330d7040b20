//! The main job against facts from outside the project, each with its source.

use trysquare::array::Array;
use trysquare::catalog::Shelf;
use trysquare::exchange::Symbols;
use trysquare::floor::floor;
use trysquare::seek::{Answer, Outcome, Request, Verdict, seek, seek_on};
use trysquare::verify::distance::dual_distribution;
use trysquare::verify::{self, Demand, certify};

fn answer(shelf: &Shelf, mix: &str, strength: u32) -> Answer {
    match seek_on(shelf, &Request::new(mix.parse().unwrap()).strength(strength)).unwrap() {
        Outcome::Found(answer) => *answer,
        other => panic!("{mix}: {other:?}"),
    }
}

/// R. L. Plackett & J. P. Burman, "The design of optimum multifactorial experiments", Biometrika 33
/// (1946) 305–325: the generating rows for 12, 20 and 24 runs, shifted cyclically and closed by a
/// run of minus signs. The rows are also in handbooks of experimental design; written down from
/// memory.
const PLACKETT_BURMAN: [&str; 3] = ["++-+++---+-", "++--++++-+-+----++-", "+++++-+-++--++--+-+----"];

#[test]
fn plackett_burman_designs_are_as_ours() {
    let shelf = Shelf::new();
    for row in PLACKETT_BURMAN {
        let signs: Vec<u16> = row.chars().map(|c| u16::from(c == '+')).collect();
        let k = signs.len();
        let symbol = |i: usize, j: usize| if i == k { 0 } else { signs[(j + k - i) % k] };
        let theirs = Array::from_fn(k + 1, vec![2; k], symbol).unwrap();
        assert_eq!(certify(&theirs, &Demand::strength(2)).unwrap().verdict, verify::Verdict::Orthogonal);

        let ours = answer(&shelf, &format!("2^{k}"), 2);
        assert_eq!((ours.array.runs(), ours.verdict), (k + 1, Verdict::ProvedSmallest));
        let pattern = |a: &Array| dual_distribution(a, k).word_length_pattern();
        assert_eq!(pattern(&theirs), pattern(&ours.array), "{} runs", k + 1);
    }
}

/// NIST/SEMATECH e-Handbook of Statistical Methods, section 5.3.3.10: the L18, 2 × 3^7 in 18 runs.
/// Written down from memory, digit by digit as the rows stand there, levels from 1.
const L18: [&str; 18] = [
    "11111111", "11222222", "11333333", "12112233", "12223311", "12331122", "13121323", "13232131",
    "13313212", "21133221", "21211332", "21322113", "22123132", "22231213", "22312321", "23132312",
    "23213123", "23321231",
];

#[test]
fn the_l18_of_the_handbook_is_accepted_and_as_small_as_ours() {
    let digit = |row: &str, j: usize| u16::from(row.as_bytes()[j] - b'1');
    let levels = vec![2, 3, 3, 3, 3, 3, 3, 3];
    let theirs = Array::from_fn(18, levels, |i, j| digit(L18[i], j)).unwrap();
    let judged = certify(&theirs, &Demand::strength(2).thorough()).unwrap();
    assert_eq!((judged.verdict, judged.certificate.strength), (verify::Verdict::Orthogonal, 2));
    assert_eq!(judged.certificate.repeated_runs, 0);
    // Common practice, no source: the interaction of the first two factors can be estimated too, for
    // their six combinations are one six-level factor orthogonal to the others.
    let joint = |i: usize| theirs.get(i, 0) * 3 + theirs.get(i, 1);
    let six =
        Array::from_fn(
            18,
            vec![6, 3, 3, 3, 3, 3, 3],
            |i, j| {
                if j == 0 { joint(i) } else { theirs.get(i, j + 1) }
            },
        );
    assert_eq!(certify(&six.unwrap(), &Demand::strength(2)).unwrap().verdict, verify::Verdict::Orthogonal);

    let ours = answer(&Shelf::new(), "2^1 3^7", 2);
    assert_eq!((ours.array.runs(), ours.verdict), (18, Verdict::ProvedSmallest));
    let index = |a: &Array| certify(a, &Demand::strength(2)).unwrap().certificate.index;
    assert_eq!(index(&theirs), index(&ours.array));
}

/// The largest number of factors of s levels at strength t in N runs: (s, t, N, factors).
///
/// A. S. Hedayat, N. J. A. Sloane & J. Stufken, "Orthogonal Arrays: Theory and Applications"
/// (1999), the tables of chapter 12 for 2, 3, 4 and 5 levels; only entries where the largest number
/// is known exactly. From memory.
const LARGEST: &[(u16, u32, usize, usize)] = &[
    (2, 2, 4, 3),
    (2, 2, 8, 7),
    (2, 2, 12, 11),
    (2, 2, 16, 15),
    (2, 2, 20, 19),
    (2, 2, 24, 23),
    (3, 2, 9, 4),
    (3, 2, 18, 7),
    (3, 2, 27, 13),
    (3, 2, 54, 25),
    (3, 2, 81, 40),
    (4, 2, 16, 5),
    (4, 2, 64, 21),
    (5, 2, 25, 6),
    (5, 2, 50, 11),
    (2, 3, 8, 4),
    (2, 3, 16, 8),
    (2, 3, 24, 12),
    (3, 3, 27, 4),
    (3, 3, 81, 10),
    (4, 3, 64, 6),
    (5, 3, 125, 6),
];

#[test]
fn the_largest_numbers_of_factors_are_reached_and_never_passed() {
    let shelf = Shelf::new();
    for &(s, t, runs, most) in LARGEST {
        let ours = answer(&shelf, &format!("{s}^{most}"), t);
        assert_eq!(ours.array.runs(), runs, "{s}^{most}, strength {t}");
        let more = answer(&shelf, &format!("{s}^{}", most + 1), t);
        assert!(more.array.runs() > runs, "{s}^{}, strength {t}", most + 1);
    }
}

/// R. C. Bose & K. A. Bush, "Orthogonal arrays of strength two and three", Ann. Math. Statist. 23
/// (1952): in 18 runs there are at most seven three-level factors; with eight Rao's bound alone
/// still allows 18. From memory.
#[test]
fn eight_three_level_factors_need_more_than_18_runs() {
    assert_eq!(floor(&"3^7".parse().unwrap(), 2).unwrap().runs, 18);
    assert!(floor(&"3^8".parse().unwrap(), 2).unwrap().runs > 18);
}

/// Common practice, no source: 4 runs carry three two-level factors, 9 runs four three-level ones,
/// 18 runs six where the full factorial needs 729; in centred coding the columns of each are
/// orthogonal vectors of sum zero.
#[test]
fn centred_columns_are_orthogonal_vectors() {
    for (mix, runs, full) in [("2^3", 4, 8), ("3^4", 9, 81), ("3^6", 18, 729)] {
        let Outcome::Found(found) = seek(&Request::new(mix.parse().unwrap())).unwrap() else {
            panic!("{mix}");
        };
        let array = &found.array;
        assert_eq!((array.runs(), array.mix().full_factorial()), (runs, Some(full)));
        let vector = |j: usize| -> Vec<i32> {
            array.column(j).iter().map(|&x| Symbols::Coded.value(x, array.levels()[j])).collect()
        };
        for a in 0..array.factors() {
            let u = vector(a);
            assert!(u.iter().all(|x| (-1..=1).contains(x)));
            assert_eq!(u.iter().sum::<i32>(), 0);
            for b in 0..a {
                assert_eq!(u.iter().zip(vector(b)).map(|(x, y)| x * y).sum::<i32>(), 0, "{mix}: {a}, {b}");
            }
        }
    }
}

/// The number of sets of four rows whose entries multiply to the same sign in every column.
fn closed_quadruples(rows: &[Vec<i8>]) -> usize {
    let closed = |q: [usize; 4]| {
        let product = |j: usize| q.iter().map(|&i| rows[i][j]).product::<i8>();
        (1..rows.len()).all(|j| product(j) == product(0))
    };
    let n = rows.len();
    let mut count = 0;
    for a in 0..n {
        for b in a + 1..n {
            for c in b + 1..n {
                count += (c + 1..n).filter(|&d| closed([a, b, c, d])).count();
            }
        }
    }
    count
}

/// Hadamard matrices of order 16 fall into five classes (M. Hall 1961). Their saturated arrays have
/// *one* word-length pattern: any two runs of OA(N, 2^(N−1)) differ in N/2 places, and the pattern
/// is a function of the distances alone. What tells classes apart is the number of closed
/// quadruples of rows: 140, 76, 44, 28 and 28 (from memory; the last two classes are transposes of
/// one another, so four values are all that can be seen).
#[test]
fn classes_of_hadamard_matrices_of_order_16() {
    let sylvester = trysquare::construct::hadamard::sylvester(4).unwrap();
    let first: Vec<Vec<i8>> = (0..16).map(|i| (0..16).map(|j| sylvester.entry(i, j)).collect()).collect();
    let mut random = trysquare::hunt::Random::new(16);
    let (mut counts, mut patterns) = (std::collections::BTreeSet::new(), std::collections::BTreeSet::new());
    for _ in 0..40 {
        let mut rows = first.clone();
        for _ in 0..random.below(6) {
            switch(&mut rows, &mut random);
        }
        counts.insert(closed_quadruples(&rows));
        let matrix = trysquare::construct::hadamard::Hadamard::from_rows(&rows).unwrap();
        let array = matrix.to_array().unwrap();
        let judged = certify(&array, &Demand::strength(2).thorough()).unwrap();
        patterns.insert(judged.certificate.word_length_pattern.unwrap());
    }
    assert_eq!(counts.into_iter().collect::<Vec<_>>(), [28, 44, 76, 140]);
    assert_eq!(patterns.len(), 1);
}

/// Takes four rows that form a closed quadruple and changes their signs in the four columns of one
/// kind, which keeps a Hadamard matrix one.
fn switch(rows: &mut [Vec<i8>], random: &mut trysquare::hunt::Random) {
    for _ in 0..10_000 {
        let mut four = [0; 4].map(|_: usize| random.below(16));
        four.sort_unstable();
        let kind = |rows: &[Vec<i8>], j: usize| four.map(|i| rows[i][j] * rows[four[0]][j]);
        let like = random.below(16);
        let columns: Vec<usize> = (0..16).filter(|&j| kind(rows, j) == kind(rows, like)).collect();
        let product = |j: usize| four.iter().map(|&i| rows[i][j]).product::<i8>();
        if four.windows(2).all(|w| w[0] < w[1])
            && columns.len() == 4
            && (1..16).all(|j| product(j) == product(0))
        {
            for i in four {
                for &j in &columns {
                    rows[i][j] = -rows[i][j];
                }
            }
            return;
        }
    }
}
