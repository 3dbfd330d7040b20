//! Miyamoto's construction.

use super::{Hadamard, MAX_ORDER, squares};
use crate::algebra::Field;
use crate::construct::ConstructError;

/// The Hadamard matrix of order 4q from one of order q − 1, q ≡ 1 (mod 4) a prime power.
///
/// With m = (q − 1)/2 there are m × m matrices U_ij, V_ij, i and j from 1 to 4, over 0 and ±1, each
/// zero exactly where its partner is not:
///
/// * \[U_ij\] is two copies, on the diagonal, of the table χ(x − y) over the non-zero squares
///   followed by the non-squares of GF(q). So Σ_j U_ij·U_kjᵀ is qI − 2J for i = k and 0 otherwise,
///   and the rows of U_ij sum to ∓1 for i = j and to 0 otherwise.
/// * \[V_ij\] = [[I, K], [−Kᵀ, I]] with K the given matrix, so V·Vᵀ = qI.
///
/// The blocks [[U + V, U − V], [U − V, U + V]] make a core of order 8m, bordered by four rows and
/// columns that are constant on its four blocks and complete it.
///
/// All of these must hold:
/// * q is a prime power, q ≡ 1 (mod 4),
/// * `inner` has order q − 1,
/// * 4q is at most [`MAX_ORDER`].
///
/// Guarantee: order 4q.
///
/// # Errors
/// [`ConstructError::Algebra`] when q is no prime power, [`ConstructError::Condition`] when another
/// condition fails.
///
/// Cost: 16q² entries. Reference: Miyamoto 1991, Journal of Combinatorial Theory A 57, 86–108 (U, V
/// and K as there; the border is ours).
///
/// ```
/// use trysquare::construct::hadamard::{miyamoto, sylvester};
/// use trysquare::verify::{Demand, Verdict, certify};
/// let h = miyamoto(5, &sylvester(2)?)?;
/// assert!(h.order() == 20 && h.is_hadamard());
/// let judged = certify(&h.to_array()?, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn miyamoto(q: u32, inner: &Hadamard) -> Result<Hadamard, ConstructError> {
    const NAME: &str = "Miyamoto";
    let field = Field::new(q)?;
    let size = q as usize;
    if q % 4 != 1 || inner.order() != size - 1 || size > MAX_ORDER / 4 {
        let needs = format!(
            "q is 1 modulo 4, at most {}, and the given matrix has order q - 1, not q = {q} and order {}",
            MAX_ORDER / 4,
            inner.order()
        );
        return Err(ConstructError::condition(NAME, needs));
    }
    let square = squares(&field);
    let (mut points, others): (Vec<u16>, Vec<u16>) =
        field.elements().skip(1).partition(|&x| square[x as usize]);
    points.extend(others);
    let m = (size - 1) / 2;
    let core = |row: usize, column: usize| -> bool {
        let (i, e, a) = (row / (2 * m), row / m % 2, row % m);
        let (j, f, b) = (column / (2 * m), column / m % 2, column % m);
        let (x, y) = (i % 2 * m + a, j % 2 * m + b);
        match (i / 2, j / 2) {
            (u, v) if u == v && x != y => !square[field.sub(points[x], points[y]) as usize],
            (0, 1) => inner.negative(x, y) ^ (e != f),
            (1, 0) => !inner.negative(y, x) ^ (e != f),
            _ => e != f,
        }
    };
    Hadamard::from_fn(NAME, 4 * size, |row, column| match (row < 4, column < 4) {
        (true, true) => corner(row, column),
        (true, false) => top(row, (column - 4) / (2 * m)),
        (false, true) => side((row - 4) / (2 * m), column),
        (false, false) => core(row - 4, column - 4),
    })
}

/// K = J − 2I.
fn corner(l: usize, column: usize) -> bool {
    l == column
}

/// B, Sylvester's matrix of order 4: row i stands left of block i of the core.
fn side(i: usize, column: usize) -> bool {
    (i & column).count_ones() % 2 == 1
}

/// C = −K·Bᵀ·diag(u)/2, u_i = ∓1 the row sum of U_ii: row l stands above the core. K·Bᵀ has entries
/// ±2 and C·Cᵀ = 4I, so these rows are orthogonal to each other and to the rows of the core.
fn top(l: usize, i: usize) -> bool {
    let sign = |negative: bool| if negative { -1 } else { 1 };
    let product: i32 = (0..4).map(|c| sign(corner(l, c)) * sign(side(i, c))).sum();
    let row_sum = if i.is_multiple_of(2) { -1 } else { 1 };
    -product * row_sum < 0
}
