//! The arrays of Addelman and Kempthorne.

use super::super::ConstructError;
use super::{power, require};
use crate::algebra::{Field, projective_point_count};
use crate::array::{Array, ArrayError};
use crate::mix::MAX_FACTORS;

const NAME: &str = "Addelman-Kempthorne";

/// OA(2q^n, 2(q^n − 1)/(q − 1) − 1, q, 2), for odd and for even q.
///
/// Built by recursion on n. Let D be the difference scheme D(2q, 2q, q) and M the scheme
/// D(q^(n−2), q^(n−2), q) of inner products `<u, w>` of vectors over GF(q). The Kronecker sum D ⊕ M
/// is a D(2q^(n−1), 2q^(n−1), q); developing it (adding each g of GF(q) to every row) gives
/// 2q^(n−1) factors in 2q^n runs, and beside them stands the array for n − 1 with every run
/// repeated q times. The case n = 1 is one balanced factor in 2q runs.
///
/// D for odd q, rows (h, x), columns (g, y), h and g from {0, 1}, ν a non-square:
///
/// | | g = 0 | g = 1 |
/// | --- | --- | --- |
/// | h = 0 | `xy` | `xy + x²` |
/// | h = 1 | `xy + y²(1 − 1/ν)/4` | `ν(xy + x²) + y²(ν − 1)/4` |
///
/// Columns with the same g differ by a linear function for each h. For different g the difference
/// is `(x + …)² + const` for h = 0 and `ν (x + …)² + const` with the *same* constant for h = 1, so
/// together they take every value twice. D for even q is the multiplication table of GF(2q) with
/// the highest bit dropped, an additive map onto GF(q).
///
/// # Parameters
/// All of these must hold:
/// * `q` is a prime power, at most 65,521, and 2q ≤ 65,535 when q is even;
/// * `n` ≥ 2.
///
/// # Guarantee
/// Strength 2, index 2q^(n−2), mix q^(2(q^n − 1)/(q − 1) − 1). The factor of the case n = 1 comes
/// first, then the 2q, 2q², …, 2q^(n−1) factors of the steps. Examples: 3^7 in 18 runs, 5^11 in 50,
/// 3^25 in 54, 7^15 in 98, 4^9 in 32.
///
/// # Errors
/// [`ConstructError::Algebra`] when there is no such field, [`ConstructError::Condition`] when n is
/// below 2 or the size does not fit, [`ConstructError::Array`] when memory does not suffice.
///
/// # Cost
/// O(n) field operations per cell.
///
/// # Reference
/// Addelman & Kempthorne 1961, *Some main-effect plans and orthogonal arrays of strength two*, for
/// the parameters (Hedayat, Sloane & Stufken 1999, section 3.3); the schemes are those of Masuyama 1957 (odd q) and Bose & Bush 1952 (even q), the
/// sum of schemes that of Shrikhande 1964.
///
/// ```
/// use trysquare::verify::{Demand, Verdict, certify};
/// let a = trysquare::construct::field::addelman_kempthorne(3, 2)?;
/// assert_eq!((a.runs(), a.mix().to_string()), (18, "3^7".to_owned()));
/// let judged = certify(&a, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn addelman_kempthorne(q: u32, n: u32) -> Result<Array, ConstructError> {
    let scheme = Scheme::new(q)?;
    require(NAME, n >= 2, || format!("n of at least 2, not {n}"))?;
    let runs = power(NAME, q, n)?.checked_mul(2);
    let runs = runs.ok_or_else(|| {
        ConstructError::condition(NAME, format!("2·{q}^{n} runs are more than memory can hold"))
    })?;
    let factors = projective_point_count(q, n)
        .and_then(|k| k.checked_mul(2))
        .map(|k| k - 1)
        .filter(|&k| k <= MAX_FACTORS)
        .ok_or_else(|| {
            ConstructError::condition(NAME, format!("there are more than {MAX_FACTORS} factors"))
        })?;
    if runs.checked_mul(factors).is_none() {
        return Err(ArrayError::TooLarge { runs, factors }.into());
    }
    let q = q as usize;
    Ok(Array::from_fn(runs, vec![q as u16; factors], |run, factor| {
        if factor == 0 {
            return (run / 2 % q) as u16;
        }
        // Factors 1.. come in steps of 2q, 2q², …: `rows` is the size of the step's scheme.
        let (mut column, mut rows) = (factor - 1, 2 * q);
        while column >= rows {
            column -= rows;
            rows *= q;
        }
        let developed = (run / rows % q) as u16;
        scheme.field.add(developed, scheme.kronecker_sum(run % rows, column))
    })?)
}

/// The scheme D(2q, 2q, q) and its Kronecker sums with inner products.
struct Scheme {
    field: Field,
    parts: Parts,
}

enum Parts {
    /// ν, (1 − 1/ν)/4 and (ν − 1)/4.
    Odd { nu: u16, first: u16, second: u16 },
    /// GF(2q).
    Even(Field),
}

impl Scheme {
    fn new(q: u32) -> Result<Self, ConstructError> {
        let field = Field::new(q)?;
        if q.is_multiple_of(2) {
            return Ok(Self { field, parts: Parts::Even(Field::new(2 * q)?) });
        }
        // The generator of a field of odd order is never a square.
        let nu = field.generator();
        let quarter = field.inv(field.add(field.add(1, 1), field.add(1, 1))).unwrap_or(0);
        let first = field.mul(quarter, field.sub(1, field.inv(nu).unwrap_or(0)));
        let second = field.mul(quarter, field.sub(nu, 1));
        Ok(Self { field, parts: Parts::Odd { nu, first, second } })
    }

    /// The entry of D(2q, 2q, q); rows and columns are numbered `x + q·h` and `y + q·g`.
    fn entry(&self, row: usize, column: usize) -> u16 {
        let f = &self.field;
        let q = f.order() as usize;
        let (nu, first, second) = match &self.parts {
            Parts::Even(double) => return double.mul(row as u16, column as u16) & (q - 1) as u16,
            &Parts::Odd { nu, first, second } => (nu, first, second),
        };
        let (x, y) = ((row % q) as u16, (column % q) as u16);
        let product = f.mul(x, y);
        let with_square = f.add(product, f.mul(x, x));
        match (row >= q, column >= q) {
            (false, false) => product,
            (false, true) => with_square,
            (true, false) => f.add(product, f.mul(first, f.mul(y, y))),
            (true, true) => f.add(f.mul(nu, with_square), f.mul(second, f.mul(y, y))),
        }
    }

    /// The entry of D ⊕ M, M the scheme of inner products of the digits beyond the first 2q.
    fn kronecker_sum(&self, row: usize, column: usize) -> u16 {
        let q = self.field.order() as usize;
        let mut sum = self.entry(row % (2 * q), column % (2 * q));
        let (mut u, mut w) = (row / (2 * q), column / (2 * q));
        while u > 0 && w > 0 {
            sum = self.field.add(sum, self.field.mul((u % q) as u16, (w % q) as u16));
            (u, w) = (u / q, w / q);
        }
        sum
    }
}
