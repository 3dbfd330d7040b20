//! Arrays of strength 2 developed from difference schemes.

use super::Scheme;
use crate::array::{Array, ArrayError};
use crate::construct::ConstructError;

/// The array A(s) ⊕ D of a D(r, c, s), A(s) the column of all group elements.
///
/// Run g·r + i holds g + D\[i\]\[j\] in factor j: the rows of D, shifted by the first group element
/// (zero), then by the next, and so on.
///
/// Guarantee: OA(rs, s^c, 2), index r/s (a single column: every level r times).
///
/// # Errors
/// [`ConstructError::Array`] when the result does not fit into memory.
///
/// Cost: r·s·c group additions. Reference: Bose & Bush 1952, Annals of Mathematical Statistics 23,
/// 508–524 (difference schemes).
///
/// ```
/// use trysquare::construct::scheme::{developed, masuyama};
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = developed(&masuyama(3)?)?;
/// assert_eq!((a.runs(), a.mix().to_string().as_str()), (18, "3^6"));
/// let judged = certify(&a, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn developed(scheme: &Scheme) -> Result<Array, ConstructError> {
    let (runs, levels) = shape(scheme)?;
    Ok(Array::from_fn(runs, levels, |run, j| cell(scheme, run, j))?)
}

/// The array of [`developed`] with one more factor: the row of D from which the run comes.
///
/// All of these must hold:
/// * r is from 2 to 65,535.
///
/// Guarantee: OA(rs, s^c · r, 2): with each s-level factor the r-level one, which stands last, meets
/// every combination once.
///
/// # Errors
/// [`ConstructError::Condition`] when r is out of range, [`ConstructError::Array`] when the result
/// does not fit into memory.
///
/// Cost: r·s·c group additions. Reference: Bose & Bush 1952, Annals of Mathematical Statistics 23,
/// 508–524 (difference schemes).
///
/// ```
/// use trysquare::construct::scheme::{developed_with_rows, masuyama};
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = developed_with_rows(&masuyama(3)?)?;
/// assert_eq!((a.runs(), a.mix().to_string().as_str()), (18, "3^6 6^1"));
/// let judged = certify(&a, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn developed_with_rows(scheme: &Scheme) -> Result<Array, ConstructError> {
    let Some(rows) = u16::try_from(scheme.rows()).ok().filter(|&r| r >= 2) else {
        let needs = format!("the number of rows is from 2 to 65535, not {}", scheme.rows());
        return Err(ConstructError::condition("Developed scheme with rows", needs));
    };
    let (runs, mut levels) = shape(scheme)?;
    levels.push(rows);
    Ok(Array::from_fn(runs, levels, |run, j| {
        if j < scheme.columns() { cell(scheme, run, j) } else { (run % scheme.rows()) as u16 }
    })?)
}

fn shape(scheme: &Scheme) -> Result<(usize, Vec<u16>), ArrayError> {
    let too_large = ArrayError::TooLarge { runs: scheme.rows(), factors: scheme.columns() };
    let runs = scheme.rows().checked_mul(usize::from(scheme.order())).ok_or(too_large)?;
    Ok((runs, vec![scheme.order(); scheme.columns()]))
}

fn cell(scheme: &Scheme, run: usize, j: usize) -> u16 {
    // Below s, which fits u16.
    let shift = (run / scheme.rows()) as u16;
    scheme.group().add(shift, scheme.entry(run % scheme.rows(), j))
}
