//! V(m, t) vectors.

use super::QuasiDifference;
use crate::algebra::{AbelianGroup, AlgebraError, Field};
use crate::construct::ConstructError;

const NAME: &str = "V(m,t) vector";

/// The (q, m + 2; 1, 1; t) quasi-difference matrix of a V(m, t) vector, q = mt + 1.
///
/// # Parameters
/// `vector`: a_1 … a_{m+1}, elements of GF(q). All of these must hold:
/// * q is a prime power below 65,536, m and t are at least 1, the vector has m + 1 entries below q;
/// * for k = 1 … m the differences a_{i+k} − a_i (indices modulo m + 2, those with the place m + 2
///   left out) lie in all m cyclotomic classes of order m (checked, by its consequence).
///
/// # Result
/// For j = 0 … t − 1 and i = 0 … m + 1 the column whose row r is w^{mj} · a_{((r + i) mod (m + 2)) + 1},
/// empty for a_{m+2}, w the generator of the field; then the zero column. Filled by an
/// OA(t², t^{m+2}, 2), or for t = 1 by nothing, it gives m squares of order (m + 1)t + 1.
///
/// # Errors
/// [`ConstructError::Condition`] when a condition fails, [`ConstructError::Algebra`] when q is no
/// prime power.
///
/// # Cost
/// O(q m²).
///
/// # Reference
/// *Handbook of Combinatorial Designs*, second edition 2007, section III.3.6.
///
/// ```
/// use trysquare::construct::latin::v_vector;
/// let matrix = v_vector(2, 3, &[0, 1, 4])?;
/// assert_eq!((matrix.group().order(), matrix.rows(), matrix.empty()), (7, 4, 3));
/// # Ok::<(), trysquare::construct::ConstructError>(())
/// ```
pub fn v_vector(m: u16, t: u16, vector: &[u16]) -> Result<QuasiDifference, ConstructError> {
    let q = u32::from(m) * u32::from(t) + 1;
    let field = Field::new(q)?;
    let rows = usize::from(m) + 2;
    if m == 0 || t == 0 || vector.len() + 1 != rows || vector.iter().any(|&a| u32::from(a) >= q) {
        let needs = format!("m, t ≥ 1 and m + 1 entries below {q}, not m = {m}, t = {t}, {vector:?}");
        return Err(ConstructError::condition(NAME, needs));
    }
    let mut columns = Vec::with_capacity(usize::from(t) * rows + 1);
    for j in 0..u32::from(t) {
        let factor = field.pow(field.generator(), u32::from(m) * j);
        for i in 0..rows {
            let entry = |r: usize| vector.get((r + i) % rows).map(|&a| field.mul(factor, a));
            columns.push((0..rows).map(entry).collect());
        }
    }
    columns.push(vec![Some(0); rows]);
    let characteristic =
        u16::try_from(field.characteristic()).map_err(|_| AlgebraError::NotAPrimePower { q })?;
    QuasiDifference::new(AbelianGroup::elementary(characteristic, field.degree())?, columns)
}
