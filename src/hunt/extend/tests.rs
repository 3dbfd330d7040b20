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

fn from_text(columns: &[&str]) -> Array {
    let symbols = |c: &&str| (2, c.bytes().map(|b| u16::from(b - b'0')).collect());
    Array::from_columns(columns.iter().map(symbols).collect()).unwrap()
}

/// Four columns of 16 runs that lie in a saturated array; six of 20 runs that take five more and
/// not thirteen; three of 20 runs that take none. Not every OA(20, 2^6) lies in a Hadamard matrix
/// of order 20 (Sun, Li & Ye 2002 \[memory\]); the numbers five and none are ours.
#[test]
fn some_two_level_arrays_can_be_saturated_and_others_not() {
    let sixteen =
        from_text(&["0101010101010101", "0011001100110011", "1011000111011000", "1101100100101001"]);
    assert_eq!(most(&sixteen, 2, 2), (11, Some(Standing::Maximum)));
    let columns = [
        "00011100001111010110",
        "00111011100100000111",
        "10101111001011000001",
        "01110001010011010011",
        "01001010010111001101",
        "00001011100011111010",
    ];
    assert_eq!(most(&from_text(&columns), 2, 2), (5, Some(Standing::Maximum)));
    // Each of the four runs of a half of 2^3 five times.
    let copies = from_text(&["00110011001100110011", "01010101010101010101", "01100110011001100110"]);
    assert_eq!(most(&copies, 2, 2), (0, None));
}

#[test]
fn wanted_mixes() {
    let half = |n| Array::from_fn(n, vec![3], |run, _| (run % 3) as u16).unwrap();
    let Extended::Found { added, standing, .. } = run(&half(12), 2, &[(2, Some(3))]) else { panic!() };
    assert_eq!((added, standing), (vec![2; 3], Standing::Complete));
    let Extended::Found { added, standing, .. } = run(&half(12), 2, &[(2, Some(5))]) else { panic!() };
    assert_eq!((added, standing), (vec![2; 4], Standing::Maximum));
    let wanted = [(3, Some(1)), (2, Some(2)), (5, None)];
    let Extended::Found { added, standing, .. } = run(&half(36), 2, &wanted) else { panic!() };
    assert_eq!((added, standing), (vec![3, 2, 2], Standing::Maximum));
    // First the factor of four levels, beside which there is none of two.
    let Extended::Found { added, .. } = run(&half(12), 2, &[(4, None), (2, None)]) else { panic!() };
    assert_eq!(added, [4]);
    assert_eq!(run(&half(12), 2, &[(3, None), (5, None)]), Extended::NoneExists);
    let little = extend(&request(half(36), 2, &[(2, None)]), &mut Effort::new(5, &|| false)).unwrap();
    assert_eq!(little, Extended::GaveUp);
}

/// Columns that are too many to be listed are added one by one.
#[test]
fn short_lists() {
    let pair = Array::from_fn(16, vec![2, 2], |run, j| (run >> j & 1) as u16).unwrap();
    let short = Extension { most_candidates: 20, ..request(pair, 2, &[(4, None), (2, None)]) };
    let Extended::Found { array, standing, .. } = extend(&short, &mut Effort::unlimited()).unwrap() else {
        panic!("there is room")
    };
    assert_eq!(standing, Standing::Maximal);
    assert!(array.factors() > 4);
    for levels in [2, 4] {
        assert_eq!(most(&array, 2, levels), (0, None), "maximal means that nothing fits");
    }
}

/// By trying every column: whether one fits.
fn by_trying(array: &Array, s: u16, strength: usize) -> bool {
    let runs = array.runs();
    (0..usize::from(s).pow(runs as u32 - 1)).any(|mut code| {
        let mut column = vec![0; runs];
        for symbol in &mut column[1..] {
            *symbol = (code % usize::from(s)) as u16;
            code /= usize::from(s);
        }
        let columns = array.levels().iter().copied().zip(array.columns().map(<[u16]>::to_vec));
        let longer = Array::from_columns(columns.chain([(s, column)]).collect()).unwrap();
        let strength = strength.min(longer.factors());
        crate::verify::counting::find_violation(&longer, strength).unwrap().is_none()
    })
}

#[test]
fn trying_every_column_agrees() {
    let mut answers = [0; 2];
    for (runs, mix, strength) in [
        (4, "2^2", 2),
        (8, "2^3", 3),
        (8, "4 2^3", 2),
        (8, "2^6", 2),
        (9, "3^3", 2),
        (8, "2^4", 3),
        (8, "2^2 4", 2),
    ] {
        let array = sought(runs, mix, strength);
        for s in [2, 3, 4] {
            if s == 4 && runs > 8 {
                continue;
            }
            let exists = by_trying(&array, s, strength as usize);
            assert_eq!(most(&array, strength, s).0 > 0, exists, "{runs}: {mix}, {s} levels");
            answers[usize::from(exists)] += 1;
        }
    }
    assert!(answers.iter().all(|&n| n > 3), "{answers:?}");
}

#[test]
fn requests_that_make_no_sense() {
    let array = || square(3, |r, c| (r + c) % 3);
    let fails = |request: Extension| extend(&request, &mut Effort::unlimited()).unwrap_err();
    assert_eq!(fails(request(array(), 4, &[(3, None)])), ExtendError::Request);
    assert_eq!(fails(request(array(), 2, &[])), ExtendError::Request);
    assert_eq!(fails(request(array(), 2, &[(1, None)])), ExtendError::Request);
    assert_eq!(fails(request(array(), 2, &[(3, Some(0))])), ExtendError::Request);
    assert_eq!(fails(request(array(), 2, &[(3, None), (3, Some(1))])), ExtendError::Request);
    assert_eq!(fails(request(array(), 3, &[(3, None)])), ExtendError::Strength { strength: 3 });
    let long = Array::from_fn(129, vec![3], |run, _| (run % 3) as u16).unwrap();
    assert_eq!(fails(request(long, 2, &[(3, None)])), ExtendError::Runs { runs: 129 });
}
