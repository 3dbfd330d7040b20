//! Duals of cyclic codes.

use super::super::ConstructError;
use super::LinearCode;
use crate::algebra::Field;

const NAME: &str = "dual of a cyclic code";

/// The dual of the cyclic code with the given zeros, or of that code with a parity check added.
///
/// With β an element of order n in GF(q^m), m the order of q modulo n, the cyclic code C consists of
/// the polynomials over GF(q) modulo x^n − 1 that vanish at β^z for each given z. Its dual has the
/// words (Σ_z Tr(a_z β^{zj}))_j, the sum over one z of each cyclotomic coset.
///
/// # Parameters
/// All of these must hold:
/// * `q` is a prime power, and q^m at most 65,521;
/// * `n` is at least 2 and prime to q;
/// * there is at least one zero, and all are below n.
///
/// `extended`: C is replaced by C with one more letter that makes the sum of the letters 0.
///
/// # Guarantee
/// An array of the minimum distance of C (of the extended code) minus 1; n (n + 1) q-level factors;
/// q^k runs, k the number of elements in the cosets of the zeros (one more when extended). β is the
/// power (q^m − 1)/n of the generator of [`Field`].
///
/// # Errors
/// [`ConstructError::Algebra`] when there is no such field, [`ConstructError::Condition`] when a
/// condition fails.
///
/// # Cost
/// O(n · k · m).
///
/// # Reference
/// MacWilliams & Sloane 1977, chapter 7; Delsarte 1975 for the trace description (from memory).
///
/// ```
/// use trysquare::construct::code::dual_of_cyclic;
/// let code = dual_of_cyclic(2, 17, &[1], false)?;
/// assert_eq!((code.length(), code.dimension(), code.dual_distance()?), (17, 8, 5));
/// # Ok::<(), trysquare::construct::ConstructError>(())
/// ```
pub fn dual_of_cyclic(q: u32, n: u32, zeros: &[u32], extended: bool) -> Result<LinearCode, ConstructError> {
    let base = Field::new(q)?;
    let fail = |needs: String| Err(ConstructError::condition(NAME, needs));
    if n < 2 || num_integer::gcd(n, q) != 1 {
        return fail(format!("a length of at least 2 prime to q, not n = {n}, q = {q}"));
    }
    if zeros.is_empty() || zeros.iter().any(|&z| z >= n) {
        return fail(format!("zeros from 0 to {}, not {zeros:?}", n - 1));
    }
    let mut power = 1u32;
    let order = loop {
        match power.checked_mul(q).filter(|&o| o <= u32::from(u16::MAX)) {
            Some(o) if o % n == 1 => break o,
            Some(o) => power = o,
            None => return fail(format!("n = {n} divides q^m − 1 for a q^m of at most 65521, q = {q}")),
        }
    };
    let field = Field::new(order)?;
    let into = subfield(&field, &base);
    let beta = field.pow(field.generator(), (order - 1) / n);
    let mut rows = Vec::new();
    let mut seen = vec![false; n as usize];
    for &z in zeros {
        let mut coset = Vec::new();
        let mut at = z;
        while !seen[at as usize] {
            seen[at as usize] = true;
            coset.push(at);
            // n and q are below 65,536.
            at = (u64::from(at) * u64::from(q) % u64::from(n)) as u32;
        }
        let traces: Vec<u16> = (0..n)
            .map(|j| {
                let term = |&c: &u32| field.pow(beta, (u64::from(c) * u64::from(j) % u64::from(n)) as u32);
                into[usize::from(coset.iter().map(term).fold(0, |s, x| field.add(s, x)))]
            })
            .collect();
        rows.extend((0..coset.len()).map(|i| {
            let mut row = traces.clone();
            row.rotate_left(i);
            row
        }));
    }
    if extended {
        rows.iter_mut().for_each(|row| row.push(0));
        rows.push(vec![1; n as usize + 1]);
    }
    LinearCode::new(base, rows)
}

/// For each element of `field` that lies in the subfield of the order of `base` the element of
/// `base` it is (for others, of no meaning).
fn subfield(field: &Field, base: &Field) -> Vec<u16> {
    let value = |coefficients: &[u16], at: u16| {
        coefficients.iter().rev().fold(0, |sum, &c| field.add(field.mul(sum, at), c))
    };
    let mut into = vec![0; field.order() as usize];
    // The numbers below the characteristic are the prime field in both encodings.
    let modulus: Vec<u16> = base.modulus().iter().map(|&c| c as u16).collect();
    let root = field.elements().find(|&x| value(&modulus, x) == 0).unwrap_or(0);
    for e in base.elements() {
        into[usize::from(value(&base.digits(e), root))] = e;
    }
    into
}
