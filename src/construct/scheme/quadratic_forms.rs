//! Square difference schemes whose blocks are quadratic forms over a field.

use super::Scheme;
use crate::algebra::Field;
use crate::construct::ConstructError;

const NAME: &str = "Quadratic forms";

/// The difference scheme D(kq, kq, q) over GF(q), q odd, from k × k quadratic forms in two
/// variables.
///
/// `forms[u][v]` = \[α, γ, β\] stands for αx² + γxy + βy², elements as in [`Field`]; it fills the q × q
/// block of the rows (u, x) and the columns (v, y). The whole is normalised afterwards.
///
/// All of these must hold:
/// * q is an odd prime power,
/// * `forms` is square, k ≥ 1, its coefficients elements of GF(q), every γ other than 0,
/// * for any two v ≠ v′ every A_u = α_uv − α_uv′ is other than 0, and with the vertices
///   P_u(y, y′) = β_uv y² − β_uv′ y′² − (γ_uv y − γ_uv′ y′)²/(4A_u), compared coefficient by coefficient,
///   the A_u that share a vertex are half squares and half non-squares.
///
/// Why: within one v the difference of two columns is linear in x and not constant. Between v and
/// v′ it is A_u(x + …)² + P_u, which takes the value z 1 + χ((z − P_u)/A_u) times; summed over u the
/// characters cancel and k is left.
///
/// Guarantee: D(kq, kq, q), first row and first column zero.
///
/// # Errors
/// [`ConstructError::Algebra`] when there is no such field, [`ConstructError::Condition`] naming what
/// else does not hold.
///
/// Cost: k³ for the conditions, (kq)² entries. Reference: the form that Masuyama 1957 (k = 2) is a
/// case of; stated and proved here for any k.
///
/// ```
/// use trysquare::construct::scheme::quadratic_forms;
/// use trysquare::verify::{Demand, Verdict, certify};
/// // Two blocks over GF(3).
/// let d = quadratic_forms(3, &[[[1, 1, 2], [0, 1, 0]], [[2, 1, 0], [0, 2, 2]]])?;
/// assert_eq!((d.rows(), d.columns(), d.order()), (6, 6, 3));
/// assert!(d.is_difference_scheme());
/// let judged = certify(&trysquare::construct::scheme::developed(&d)?, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn quadratic_forms<R: AsRef<[[u16; 3]]> + Sync>(q: u32, forms: &[R]) -> Result<Scheme, ConstructError> {
    let field = Field::new(q)?;
    let fail = |needs: String| Err(ConstructError::condition(NAME, needs));
    if field.characteristic() == 2 {
        return fail(format!("q is odd, not {q}"));
    }
    let k = forms.len();
    if k == 0 || forms.iter().any(|row| row.as_ref().len() != k) {
        return fail("the forms make a square of at least one".to_owned());
    }
    for (u, row) in forms.iter().enumerate() {
        for (v, form) in row.as_ref().iter().enumerate() {
            if form[1] == 0 || form.iter().any(|&e| u32::from(e) >= q) {
                return fail(format!("form ({u}, {v}) has coefficients below {q}, the middle one not 0"));
            }
        }
    }
    for v in 0..k {
        for w in v + 1..k {
            let pairs = forms.iter().map(|row| (row.as_ref()[v], row.as_ref()[w]));
            if !cancel(&field, pairs) {
                return fail(format!("the vertices between block columns {v} and {w} cancel"));
            }
        }
    }
    let size = q as usize;
    let order = k.saturating_mul(size);
    // q fits u16, and so do x and y.
    let scheme = Scheme::from_fn(q as u16, order, order, |_, i, j| {
        let (x, y) = ((i % size) as u16, (j % size) as u16);
        let [alpha, gamma, beta] = forms[i / size].as_ref()[j / size];
        let linear = field.add(field.mul(alpha, x), field.mul(gamma, y));
        field.add(field.mul(linear, x), field.mul(beta, field.mul(y, y)))
    })?;
    Ok(scheme.normalised())
}

/// P_u as its coefficients of y², yy′, y′² and χ(A_u), `None` when A_u is 0; `s` and `t` are the forms
/// of v and v′ in block row u. Coefficients are compared only, so a common factor may be left out.
pub(super) fn vertex(field: &Field, s: [u16; 3], t: [u16; 3]) -> Option<([u16; 3], bool)> {
    let a = field.sub(s[0], t[0]);
    let two = field.add(1, 1);
    let quarter = field.inv(field.mul(field.mul(two, two), a))?;
    let square = |c: u16| field.mul(field.mul(c, c), quarter);
    let mixed = field.mul(field.mul(s[1], t[1]), quarter);
    let coefficients = [field.sub(s[2], square(s[1])), mixed, field.neg(field.add(t[2], square(t[1])))];
    Some((coefficients, field.is_nonzero_square(a)))
}

/// Whether the A_u that share a vertex are half squares and half non-squares, for the forms of two
/// block columns.
pub(super) fn cancel(field: &Field, pairs: impl Iterator<Item = ([u16; 3], [u16; 3])>) -> bool {
    let (mut squares, mut others) = (Vec::new(), Vec::new());
    for (s, t) in pairs {
        match vertex(field, s, t) {
            None => return false,
            Some((place, true)) => squares.push(place),
            Some((place, false)) => others.push(place),
        }
    }
    squares.sort_unstable();
    others.sort_unstable();
    squares == others
}
