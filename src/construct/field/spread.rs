//! Partitions of GF(q)^n into subspaces.

use super::super::ConstructError;
use super::{Room, Subspace, require};
use crate::algebra::{Field, prime_power, unit};
use crate::array::Array;

const NAME: &str = "spread";

/// The array of a partition of GF(q)^n into e-dimensional subspaces and, when e does not divide n,
/// one larger subspace.
///
/// # Parameters
/// With r = n mod e; all of these must hold:
/// * `q` is a prime power;
/// * 1 ≤ `e` and 2e ≤ `n`;
/// * q^(e+r) ≤ 65,535, the levels of the largest factor.
///
/// # Guarantee
/// Strength 2 in q^n runs, saturated (the degrees of freedom Σ(s_i − 1) are N − 1):
/// * e divides n: mix (q^e)^((q^n − 1)/(q^e − 1)), a spread;
/// * otherwise: first one q^(e+r)-level factor, then (q^n − q^(e+r))/(q^e − 1) factors of q^e levels.
///
/// Runs are numbered by the digits to the base p, the prime below q.
///
/// # Errors
/// [`ConstructError::Algebra`] when there is no such field, [`ConstructError::Condition`] when e or
/// n is out of range, [`ConstructError::Array`] when memory does not suffice.
///
/// # Cost
/// O(N · k) for k factors.
///
/// # Reference
/// André 1954 (spreads); Beutelspacher 1975 (partial spreads of this size); Wu, Zhang & Wang 1992
/// (as arrays).
///
/// ```
/// use trysquare::construct::field::spread;
/// use trysquare::verify::{Demand, Verdict, certify};
/// assert_eq!(spread(2, 4, 2)?.mix().to_string(), "4^5");
/// assert_eq!(spread(2, 5, 2)?.mix().to_string(), "4^8 8^1");
/// let judged = certify(&spread(2, 5, 2)?, &Demand::strength(2))?;
/// assert_eq!(judged.verdict, Verdict::Orthogonal);
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn spread(q: u32, n: u32, e: u32) -> Result<Array, ConstructError> {
    require(NAME, e >= 1 && n / 2 >= e, || format!("1 ≤ e and 2e ≤ n, not e = {e}, n = {n}"))?;
    partition(NAME, q, n / e - 1, e, e + n % e)
}

/// The array of the partition of GF(q^e)^h ⊕ GF(q^f), f ≥ e ≥ 1, h ≥ 1, into the last summand and
/// the subspaces `{(0, …, 0, y, c_1 y, …, c_j y, a ι(y)) : y ∈ GF(q^e)}`, where c_i runs through
/// GF(q^e), a through GF(q^f), and ι embeds GF(q^e) linearly.
///
/// Two such subspaces meet in 0: with the same first non-zero place, `c y = c' y` or
/// `a ι(y) = a' ι(y)` forces y = 0.
pub(super) fn partition(
    construction: &'static str,
    q: u32,
    h: u32,
    e: u32,
    f: u32,
) -> Result<Array, ConstructError> {
    // Everything happens over the prime field: the same subspaces, seen as larger ones.
    let (p, m) = prime_power(q).ok_or(crate::algebra::AlgebraError::NotAPrimePower { q })?;
    let too_many =
        || ConstructError::condition(construction, format!("{q}^{f} levels: a factor has 2 to 65535 levels"));
    let (e, f) = (e.checked_mul(m).ok_or_else(too_many)?, f.checked_mul(m).ok_or_else(too_many)?);
    let large = p.checked_pow(f).filter(|&s| s <= u32::from(u16::MAX)).ok_or_else(too_many)?;
    let small = p.pow(e);
    let n = h.checked_mul(e).and_then(|n| n.checked_add(f));
    let factors = count(small as usize, large as usize, h);
    let room = Room::reserve(construction, p, n.unwrap_or(u32::MAX), factors)?;
    let (small, large) = (Field::new(small)?, Field::new(large)?);
    let mut all = vec![(0..f as usize).map(|i| unit((h * e + f) as usize, (h * e) as usize + i)).collect()];
    for lead in 0..h {
        push_subspaces(&small, &large, h as usize, lead as usize, &mut all);
    }
    room.fill(&Field::new(p)?, &all)
}

/// `1 + large · (small^h − 1)/(small − 1)`, the number of subspaces of the partition.
fn count(small: usize, large: usize, h: u32) -> Option<usize> {
    let mut sum = 0usize;
    for _ in 0..h {
        sum = sum.checked_mul(small)?.checked_add(1)?;
    }
    sum.checked_mul(large)?.checked_add(1)
}

/// The subspaces whose first non-zero place among the h small summands is `lead`.
fn push_subspaces(small: &Field, large: &Field, h: usize, lead: usize, all: &mut Vec<Subspace>) {
    let (e, p) = (small.degree(), small.characteristic());
    let free = h - lead - 1;
    let mut constants = vec![0u16; free];
    loop {
        for a in large.elements() {
            let basis = (0..e).map(|i| {
                // The element x^i of both fields: the digit 1 at place i.
                let y = p.pow(i) as u16;
                let mut v = vec![0u16; lead * e as usize];
                v.extend(small.digits(y));
                v.extend(constants.iter().flat_map(|&c| small.digits(small.mul(c, y))));
                v.extend(large.digits(large.mul(a, y)));
                v
            });
            all.push(basis.collect());
        }
        let Some(i) = constants.iter().position(|&c| u32::from(c) + 1 < small.order()) else { return };
        constants[..i].fill(0);
        constants[i] += 1;
    }
}
