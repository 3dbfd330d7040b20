//! Kerdock codes.

use super::super::ConstructError;
use crate::algebra::Field;
use crate::array::Array;

const NAME: &str = "Kerdock code";

/// The words of the Kerdock code of length 2^m; for m = 4 the Nordstrom–Robinson code.
///
/// With F = GF(2^(m−1)) and u in F, the quadratic form
/// Q_u(x, ε) = Σ_{i=1}^{(m−2)/2} Tr((ux)^{2^i + 1}) + ε Tr(ux) on F × GF(2); the words are the values
/// of all Q_u plus an affine function. The difference of any two of the bilinear forms of the Q_u is
/// non-degenerate.
///
/// # Parameters
/// `m` is even, 4 ≤ m ≤ 14.
///
/// # Guarantee
/// OA(4^m, 2^(2^m), 5). Factor number x + 2^(m−1) ε; run number
/// ((u·2^(m−1) + a)·2 + b)·2 + c for the affine function Tr(ax) + bε + c.
///
/// # Errors
/// [`ConstructError::Condition`] when m is out of range, [`ConstructError::Array`] when memory does
/// not suffice.
///
/// # Cost
/// O(8^m).
///
/// # Reference
/// Kerdock 1972; the form in MacWilliams & Sloane 1977, chapter 15, § 5 (from memory); strength
/// from the dual distance 6, Delsarte 1973.
///
/// ```
/// let array = trysquare::construct::code::kerdock(4)?;
/// assert_eq!((array.runs(), array.factors()), (256, 16));
/// # Ok::<(), trysquare::construct::ConstructError>(())
/// ```
pub fn kerdock(m: u32) -> Result<Array, ConstructError> {
    if !m.is_multiple_of(2) || !(4..=14).contains(&m) {
        return Err(ConstructError::condition(NAME, format!("m even, 4 ≤ m ≤ 14, not m = {m}")));
    }
    let field = Field::new(1 << (m - 1))?;
    let size = 1usize << (m - 1);
    let trace: Vec<u16> =
        field.elements().map(|x| (0..m - 1).fold(0, |sum, i| field.add(sum, field.pow(x, 1 << i)))).collect();
    let quadratic: Vec<u16> = field
        .elements()
        .map(|y| (1..=(m - 2) / 2).fold(0, |sum, i| sum ^ trace[usize::from(field.pow(y, (1 << i) + 1))]))
        .collect();
    Ok(Array::from_fn(1 << (2 * m), vec![2; 2 * size], |run, j| {
        let (c, b, a, u) = (run & 1, run >> 1 & 1, (run >> 2) % size, (run >> 2) / size);
        let (x, e) = (j % size, j / size);
        let y = usize::from(field.mul(u as u16, x as u16));
        let linear = trace[usize::from(field.mul(a as u16, x as u16))];
        quadratic[y] ^ (e as u16 & trace[y]) ^ linear ^ ((b & e) as u16) ^ (c as u16)
    })?)
}
