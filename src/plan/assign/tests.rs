use super::*;
use crate::plan::effects::{Scale, contrasts};
use nalgebra::DMatrix;

fn two_levels(bits: usize) -> Array {
    let factors = (1 << bits) - 1;
    Array::from_fn(1 << bits, vec![2; factors], |run, j| ((run & (j + 1)).count_ones() % 2) as u16).unwrap()
}

/// All points of the geometry over three elements.
fn three_levels(places: u32) -> Array {
    let digit = |n: usize, at: u32| n / 3usize.pow(at) % 3;
    let points: Vec<usize> = (1..3usize.pow(places))
        .filter(|&p| (0..places).rev().map(|a| digit(p, a)).find(|&d| d != 0) == Some(1))
        .collect();
    let symbol = |run, j: usize| (0..places).map(|a| digit(run, a) * digit(points[j], a)).sum::<usize>() % 3;
    Array::from_fn(3usize.pow(places), vec![3; points.len()], |run, j| symbol(run, j) as u16).unwrap()
}

fn eighteen() -> Array {
    let crate::seek::Outcome::Found(found) =
        crate::seek::seek(&crate::seek::Request::new("2^1 3^7".parse().unwrap())).unwrap()
    else {
        panic!()
    };
    found.array
}

fn run(parent: &Array, levels: &[u16], wanted: &[[usize; 2]]) -> Outcome {
    assign(parent, levels, wanted, 1 << 24, &|| false).unwrap()
}

/// Every injective map of factors to columns, its model by the definition: the best as (orthogonal,
/// determinant of X'X/N).
fn brute(parent: &Array, levels: &[u16], wanted: &[[usize; 2]]) -> Option<(bool, f64)> {
    fn place(columns: &mut Vec<usize>, parent: &Array, levels: &[u16], visit: &mut dyn FnMut(&[usize])) {
        if columns.len() == levels.len() {
            return visit(columns);
        }
        for c in 0..parent.factors() {
            if parent.levels()[c] == levels[columns.len()] && !columns.contains(&c) {
                columns.push(c);
                place(columns, parent, levels, visit);
                columns.pop();
            }
        }
    }
    let tables: Vec<Vec<Vec<f64>>> =
        parent.levels().iter().map(|&s| contrasts(s, &Scale::even(s)).scaled).collect();
    let n = parent.runs();
    let values = |c: usize| -> Vec<Vec<f64>> {
        tables[c].iter().map(|t| parent.column(c).iter().map(|&x| t[usize::from(x)]).collect()).collect()
    };
    let all: Vec<Vec<Vec<f64>>> = (0..parent.factors()).map(values).collect();
    let mut best: Option<(bool, f64)> = None;
    place(&mut Vec::new(), parent, levels, &mut |columns| {
        let mut x = vec![vec![1.0; n]];
        columns.iter().for_each(|&c| x.extend(all[c].iter().cloned()));
        let main = x.len();
        let mut starts = vec![main];
        for w in wanted {
            for a in &all[columns[w[0]]] {
                for b in &all[columns[w[1]]] {
                    x.push(a.iter().zip(b).map(|(p, q)| p * q).collect());
                }
            }
            starts.push(x.len());
        }
        let m = DMatrix::from_vec(n, x.len(), x.concat());
        let gram = m.tr_mul(&m) / n as f64;
        let determinant = gram.clone().determinant();
        if determinant < 1e-9 {
            return;
        }
        let block = |i: usize| starts.iter().take_while(|&&s| s <= i).count();
        let apart = |i: usize, j: usize| block(i) == block(j) || gram[(i, j)].abs() < 1e-9;
        let orthogonal = (main..x.len()).all(|i| (0..x.len()).all(|j| apart(i, j)));
        if best.is_none_or(|(o, d)| (orthogonal, determinant) > (o, d)) {
            best = Some((orthogonal, determinant));
        }
    });
    best
}

fn agrees(parent: &Array, levels: &[u16], wanted: &[[usize; 2]]) -> bool {
    let expected = if check(parent, levels, wanted).unwrap() > parent.runs() {
        None
    } else {
        brute(parent, levels, wanted)
    };
    match (run(parent, levels, wanted), expected) {
        (Outcome::Best(ours), Some((orthogonal, determinant))) => {
            let value = determinant.powf(1.0 / ours.parameters as f64);
            assert!((ours.d_efficiency - value).abs() < 1e-8, "{levels:?} {wanted:?}: {ours:?}, {value}");
            assert_eq!(ours.orthogonal, orthogonal, "{levels:?} {wanted:?}");
            true
        }
        (Outcome::NotPossible, None) => false,
        (ours, theirs) => panic!("{levels:?} {wanted:?}: {ours:?}, by trying all {theirs:?}"),
    }
}

const WISHES: [&[[usize; 2]]; 9] = [
    &[],
    &[[0, 1]],
    &[[0, 1], [0, 2]],
    &[[0, 1], [2, 3]],
    &[[0, 1], [0, 2], [0, 3]],
    &[[0, 1], [1, 2], [0, 2]],
    &[[0, 1], [1, 2], [2, 3]],
    &[[0, 1], [1, 2], [2, 3], [3, 0]],
    &[[3, 1], [3, 2], [3, 0], [1, 2]],
];

#[test]
fn trying_all_assignments_finds_no_better_in_8_and_12_and_16_runs() {
    let (mut possible, mut not) = (0, 0);
    let paley = {
        let squares = [0, 1, 3, 4, 5, 9];
        let bit = |run: usize, j: usize| run == 11 || squares[1..].contains(&((run + 11 - j) % 11));
        Array::from_fn(12, vec![2; 6], |run, j| u16::from(bit(run, j))).unwrap()
    };
    let sixteen = two_levels(4).select(&[0, 1, 2, 3, 4, 7, 9, 14]).unwrap();
    for (parent, sizes) in [(two_levels(3), 4..=5), (paley, 4..=5), (sixteen, 4..=5)] {
        for k in sizes {
            for wanted in WISHES {
                let found = agrees(&parent, &vec![2; k], wanted);
                possible += usize::from(found);
                not += usize::from(!found);
            }
        }
    }
    assert!(possible >= 30 && not >= 5, "{possible} {not}");
}

#[test]
fn trying_all_assignments_finds_no_better_in_18_runs() {
    let parent = eighteen();
    let (mut possible, mut not) = (0, 0);
    for levels in [vec![2, 3, 3], vec![3; 3], vec![3, 3, 2, 3], vec![3; 4]] {
        let fitting = WISHES.iter().filter(|w| w.iter().flatten().all(|&f| f < levels.len()));
        for wanted in fitting {
            let found = agrees(&parent, &levels, wanted);
            possible += usize::from(found);
            not += usize::from(!found);
        }
    }
    assert!(possible >= 8 && not >= 4, "{possible} {not}");
}

/// In 8 runs three interactions that share a factor of four are clear of all main effects and of each
/// other: Taguchi's linear graphs; Wu & Hamada, *Experiments*, chapter 5 \[memory\]. Two interactions
/// without a common factor are one and the same in every choice of four columns of resolution IV.
#[test]
fn eight_runs() {
    let Outcome::Best(found) = run(&two_levels(3), &[2; 4], &[[0, 1], [0, 2], [0, 3]]) else { panic!() };
    assert!(found.orthogonal && found.d_efficiency == 1.0 && found.left == 0);
    assert_eq!(run(&two_levels(3), &[2; 4], &[[0, 1], [2, 3]]), Outcome::NotPossible);
}

/// In 27 runs four three-level factors and one wanted interaction fit, with 14 degrees of freedom left:
/// handbooks place the interaction on two columns \[memory\].
#[test]
fn twenty_seven_runs() {
    let Outcome::Best(found) = run(&three_levels(3), &[3; 4], &[[0, 1]]) else { panic!() };
    assert!(found.orthogonal && found.d_efficiency == 1.0);
    assert_eq!((found.parameters, found.left), (13, 14));
}

/// Eleven factors and three interactions in 16 runs: orthogonal needs all fifteen columns but one.
#[test]
fn eleven_factors() {
    let parent = two_levels(4);
    for wanted in [[[0, 1], [2, 3], [4, 5]], [[0, 1], [0, 2], [0, 3]], [[0, 1], [1, 2], [2, 3]]] {
        let Outcome::Best(found) = run(&parent, &[2; 11], &wanted) else { panic!("{wanted:?}") };
        assert!(found.orthogonal && found.d_efficiency == 1.0 && found.left == 1, "{found:?}");
    }
}

#[test]
fn any_number_of_threads_finds_the_same() {
    let parent = eighteen();
    let ask = || assign(&parent, &[3; 4], &[[0, 1]], 1 << 20, &|| false);
    let with =
        |threads| rayon::ThreadPoolBuilder::new().num_threads(threads).build().unwrap().install(ask).unwrap();
    assert_eq!(with(1), with(3));
}

#[test]
fn limits_and_senseless_requests() {
    let parent = two_levels(4);
    let ask = |levels: &[u16], wanted: &[[usize; 2]]| assign(&parent, levels, wanted, 1, &|| false);
    assert_eq!(ask(&[2; 4], &[[0, 1]]), Ok(Outcome::LimitReached));
    assert_eq!(ask(&[2; 15], &[[0, 1]]), Ok(Outcome::NotPossible), "17 parameters");
    assert_eq!(ask(&[], &[]), Err(AssignError::NoFactors));
    assert_eq!(ask(&[2, 3], &[]), Err(AssignError::Columns { levels: 3, wanted: 1, there: 0 }));
    assert_eq!(ask(&[2; 3], &[[0, 1], [1, 0]]), Err(AssignError::Interaction(1)));
    assert_eq!(ask(&[2; 3], &[[0, 3]]), Err(AssignError::Interaction(0)));
    assert_eq!(ask(&[2; 3], &[[1, 1]]), Err(AssignError::Interaction(0)));
}
