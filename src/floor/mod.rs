//! Lower bounds on the number of runs, each with a proof that integers alone can check.
//!
//! | bound | says | best for |
//! | --- | --- | --- |
//! | [`divisibility`] | the product of every t factors' levels divides N | small mixes with coprime levels |
//! | [`rao`] | N − 1 leaves room for all degrees of freedom | everything else |
//! | [`bose_bush`] | sharper than Rao for factors of one number of levels, s − 1 ∤ λ − 1 | 3^8, 4^10, … |
//! | [`bush`] | index 1 allows few factors | s^k just above s + t − 1 |
//! | [`linear_program`] | the distances between runs and their transform are not negative | many kinds of factors, strength 3 and up |
//! | [`exclude`] | no array has exactly N runs | N = 2^t·odd, few runs per level, derived arrays |
//!
//! [`bounds`] and [`floor`](floor()) are the closed formulas and take no time; [`strengthen`] goes on from
//! there where an answer stands above the floor.

pub mod exhaustion;
pub mod proof;

mod divisibility;
mod effort;
mod exclude;
mod linear_program;
mod most;
mod pure;
mod rao;
mod recorded;
mod strengthen;

use thiserror::Error;

use crate::mix::Mix;
pub use divisibility::divisibility;
pub use effort::Effort;
pub use exclude::exclude;
pub use linear_program::{distances, linear_program, parity};
pub use most::{Most, most};
pub use proof::{Bound, Distances, Exclusion, Proof, ProofError, Reason, Step, Subject};
pub use pure::{bose_bush, bush};
pub use rao::rao;
pub use strengthen::{Below, QUICK, Strengthened, raise, strengthen};

/// Why no floor can be stated.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Error)]
#[non_exhaustive]
pub enum FloorError {
    /// The strength is 0 or above the number of factors.
    #[error("strength {strength} makes no sense for {factors} factors: write a strength from 1 to {factors}")]
    Strength {
        /// The strength asked for.
        strength: u32,
        /// The number of factors.
        factors: usize,
    },
    /// The bound does not fit 64 bits.
    #[error("the floor is above 2^64 runs")]
    TooLarge,
}

/// The bounds with closed formulas for a mix, each rounded up to what divisibility allows, the best one first; of equal
/// ones Rao's first, then the ones for pure levels, then divisibility alone.
///
/// # Errors
/// A [`FloorError`] when the strength is 0 or above the number of factors, or a bound does not fit
/// 64 bits.
pub fn bounds(mix: &Mix, strength: u32) -> Result<Vec<Proof>, FloorError> {
    let factors = mix.factors();
    if strength == 0 || strength as usize > factors {
        return Err(FloorError::Strength { strength, factors });
    }
    let divisor = divisibility(mix, strength)?;
    let mut least = vec![rao(mix, strength)?];
    for (s, k) in mix.counts() {
        let k = k as u64;
        least.extend(bose_bush(s, k, strength)?);
        least.extend(bush(s, k, strength)?);
    }
    least.push(Bound::Divisibility);
    let mut proofs = least
        .into_iter()
        .map(|bound| Proof::new(mix.clone(), strength, divisor.clone(), bound))
        .collect::<Result<Vec<_>, _>>()?;
    proofs.sort_by_key(|p| std::cmp::Reverse(p.runs));
    Ok(proofs)
}

/// Whether a reason holds; recorded searches are not made again.
fn confirmed(reason: &Reason, about: &Subject) -> bool {
    reason.check(about, &recorded::light).is_ok()
}

/// The best bound of [`bounds`].
///
/// ```
/// let mix = "3^8".parse()?;
/// let floor = trysquare::floor::floor(&mix, 2)?;
/// assert_eq!((floor.runs, floor.bound.name()), (27, "bose-bush"));
/// floor.check()?;
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
///
/// # Errors
/// As [`bounds`].
pub fn floor(mix: &Mix, strength: u32) -> Result<Proof, FloorError> {
    bounds(mix, strength).map(|mut all| all.swap_remove(0))
}
