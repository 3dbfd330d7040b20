//! The small arrays the tests of this room start from.

use super::DifferenceBlock;
use crate::algebra::{AbelianGroup, Field};
use crate::array::Array;
use crate::construct::ConstructError;
pub(crate) use crate::construct::testing::{has_strength, has_strength_up_to};

/// Demands that a construction was refused, for the given reason.
#[track_caller]
pub(crate) fn refused(result: Result<Array, ConstructError>, reason: &str) {
    let text = result.expect_err("must be refused").to_string();
    assert!(text.contains(reason), "{text:?} does not say {reason:?}");
}

/// The full factorial, first factor slowest.
pub(crate) fn full(levels: &[u16]) -> Array {
    let runs = levels.iter().map(|&s| usize::from(s)).product();
    let after = |j: usize| levels[j + 1..].iter().map(|&s| usize::from(s)).product::<usize>();
    Array::from_fn(runs, levels.to_vec(), |i, j| (i / after(j) % usize::from(levels[j])) as u16).unwrap()
}

/// OA(2^n, 2^{2^n − 1}, 2): all nonzero functionals on F_2^n.
pub(crate) fn sylvester(n: u32) -> Array {
    let order = 1usize << n;
    Array::from_fn(order, vec![2; order - 1], |i, j| ((i & (j + 1)).count_ones() % 2) as u16).unwrap()
}

/// `sylvester` with the constant column in front: a Hadamard matrix of order 2^n.
pub(crate) fn sylvester_signs(n: u32) -> Array {
    with_constant(&sylvester(n))
}

/// OA(12, 2^11, 2): R. L. Plackett & J. P. Burman, *The design of optimum multifactorial
/// experiments*, Biometrika 33 (1946), the cyclic row for N = 12.
pub(crate) fn twelve() -> Array {
    let row = [1u16, 1, 0, 1, 1, 1, 0, 0, 0, 1, 0];
    Array::from_fn(12, vec![2; 11], |i, j| if i == 11 { 0 } else { row[(j + 11 - i) % 11] }).unwrap()
}

/// `twelve` with the constant column in front.
pub(crate) fn twelve_signs() -> Array {
    with_constant(&twelve())
}

/// Two-level columns with the constant column in front.
pub(crate) fn with_constant(a: &Array) -> Array {
    Array::from_fn(a.runs(), vec![2; a.factors() + 1], |i, j| if j == 0 { 0 } else { a.get(i, j - 1) })
        .unwrap()
}

/// The Hadamard matrix H(2) ⊗ H, both as columns of 0/1.
pub(crate) fn doubled(h: &Array) -> Array {
    let (m, k) = (h.runs(), h.factors());
    Array::from_fn(2 * m, vec![2; 2 * k], |i, j| (h.get(i % m, j % k) + (i / m) as u16 * (j / k) as u16) % 2)
        .unwrap()
}

/// OA(q², q^{q+1}, 2) over GF(q): points of the projective line.
pub(crate) fn plane(q: u32) -> Array {
    let f = Field::new(q).unwrap();
    let n = q as usize;
    Array::from_fn(n * n, vec![q as u16; n + 1], |i, j| {
        let (x, y) = ((i / n) as u16, (i % n) as u16);
        if j == n { y } else { f.add(x, f.mul(j as u16, y)) }
    })
    .unwrap()
}

/// The columns of 0/1 as a block over the group of order 2.
pub(crate) fn block_of<'a>(z2: &'a AbelianGroup, signs: &Array) -> DifferenceBlock<'a> {
    let cells: Vec<u16> = signs.columns().flatten().copied().collect();
    DifferenceBlock::new(z2, signs.runs(), signs.factors(), cells.leak()).unwrap()
}

#[test]
fn the_starting_arrays_have_their_strength() {
    assert!(has_strength(&full(&[2, 3, 4]), 3));
    for n in 1..5 {
        assert!(has_strength_up_to(&sylvester(n), 2));
    }
    assert!(!has_strength(&sylvester(2), 3));
    assert!(has_strength(&twelve(), 2));
    assert!(!has_strength(&twelve(), 3));
    assert!(!has_strength(&twelve_signs(), 1));
    for q in [2, 3, 4, 5] {
        assert!(has_strength(&plane(q), 2));
    }
    let square = [0, 0, 1, 1, 0, 1, 0, 1];
    assert!(has_strength(&Array::new(4, vec![2, 2], square.to_vec()).unwrap(), 2));
    for at in 0..8 {
        let mut changed = square;
        changed[at] ^= 1;
        assert!(!has_strength(&Array::new(4, vec![2, 2], changed.to_vec()).unwrap(), 2));
    }
}
