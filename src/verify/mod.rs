//! The judges. They see an [`Array`] and nothing of how it was made.
//!
//! Two engines with nothing in common say which strength an array has: [`counting`] goes by the
//! definition and gives the witness when the answer is no, [`distance`] goes by the dual
//! distribution and gives the word-length pattern beside the strength. [`certify`] picks by cost,
//! or runs both; the [`Certificate`] it hands out can be checked again by [`recheck`], which
//! trusts nothing in it. [`nearness()`] says by stated criteria how far an array is from orthogonal.
//!
//! ```
//! use trysquare::{array::Array, verify::{Demand, Verdict, certify, recheck}};
//! let array = Array::from_rows(vec![2, 2, 2], &[[0, 0, 0], [0, 1, 1], [1, 0, 1], [1, 1, 0]])?;
//! let judgement = certify(&array, &Demand::strength(2))?;
//! assert_eq!(judgement.verdict, Verdict::Orthogonal);
//! assert!(recheck(&judgement.certificate, &array)?.holds());
//! assert!(certify(&array, &Demand::strength(3))?.witness.is_some());
//! # Ok::<(), Box<dyn std::error::Error>>(())
//! ```

use serde::{Deserialize, Serialize};
use thiserror::Error;

use crate::array::Array;

mod certificate;
mod choice;
pub mod counting;
pub mod digest;
pub mod distance;
mod evidence;
mod nearness;
mod recheck;

pub use certificate::{CERTIFICATE_VERSION, Certificate, CertificateError, StrengthClaim};
pub use choice::Engine;
pub use evidence::{Ratio, Witness};
pub use nearness::{
    ByPairs, Correlation, Efficiency, MOST_PARAMETERS, MOST_STEPS, Nearness, WorstPair, nearness,
};
pub use recheck::{Field, Mismatch, RecheckReport, recheck};

/// Why no verdict can be given.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[non_exhaustive]
pub enum JudgeError {
    /// A strength that no array with so many factors can be asked for.
    #[error("strength {asked} cannot be judged on {factors} factors; ask for a strength from 1 to {factors}")]
    Strength {
        /// The strength asked for.
        asked: usize,
        /// The number of factors.
        factors: usize,
    },
    /// The two engines contradict each other: a defect of this crate, never of the array.
    #[error(
        "the judges disagree (counting: strength {counting}, distance: strength {distance}); \
         this is a defect of the program, please report it with the array"
    )]
    Disagreement {
        /// The strength by counting.
        counting: usize,
        /// The strength by distances.
        distance: usize,
    },
}

impl JudgeError {
    fn check_strength(array: &Array, asked: usize) -> Result<(), Self> {
        let factors = array.factors();
        if (1..=factors).contains(&asked) { Ok(()) } else { Err(Self::Strength { asked, factors }) }
    }
}

/// What an array is judged against.
#[derive(Clone, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub struct Demand {
    /// The strength demanded, 1 to k.
    pub strength: usize,
    /// Whether both engines are to run, whatever they cost.
    pub thorough: bool,
}

impl Demand {
    /// Demands a strength, judged by the cheaper engine.
    #[must_use]
    pub fn strength(strength: usize) -> Self {
        Self { strength, thorough: false }
    }

    /// The same demand, judged by both engines.
    #[must_use]
    pub fn thorough(self) -> Self {
        Self { thorough: true, ..self }
    }
}

/// The answer to a [`Demand`].
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub enum Verdict {
    /// The array has the demanded strength.
    Orthogonal,
    /// It has not; a witness says why.
    NotOrthogonal,
}

/// A verdict with everything it rests on.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Judgement {
    /// The strength demanded.
    pub demanded: usize,
    /// Whether the array has it.
    pub verdict: Verdict,
    /// The first combination that occurs too often or too rarely, at the smallest strength that
    /// fails; there is one exactly when the verdict is [`Verdict::NotOrthogonal`].
    pub witness: Option<Witness>,
    /// All that was found out about the array.
    pub certificate: Certificate,
}

/// Judges `array` against `demand`.
///
/// The engine is chosen by estimated cost. Beyond the demanded strength, the largest strength and
/// the word-length pattern are found out as far as they are cheap; the certificate says how far.
/// The result does not depend on the number of threads.
///
/// Cost: that of the cheaper engine, see [`counting::find_violation`] and
/// [`distance::dual_distribution`]; when the answer is no, counting at the strength that
/// fails comes on top, to find the witness.
///
/// # Errors
/// [`JudgeError::Strength`] unless 1 ≤ demanded strength ≤ k; [`JudgeError::Disagreement`] when the
/// engines contradict each other.
pub fn certify(array: &Array, demand: &Demand) -> Result<Judgement, JudgeError> {
    JudgeError::check_strength(array, demand.strength)?;
    let findings = choice::investigate(array, demand.strength, demand.thorough)?;
    let mut engines = findings.engines.clone();
    let (verdict, witness) = if findings.strength >= demand.strength {
        (Verdict::Orthogonal, None)
    } else {
        let search = || {
            if !engines.contains(&Engine::Counting) {
                engines.insert(0, Engine::Counting);
            }
            choice::find_witness(array, findings.strength + 1)
        };
        let found = findings.witness.clone().or_else(search);
        let contradiction =
            JudgeError::Disagreement { counting: findings.strength + 1, distance: findings.strength };
        (Verdict::NotOrthogonal, Some(found.ok_or(contradiction)?))
    };
    let certificate = Certificate::from_findings(array, findings, engines);
    Ok(Judgement { demanded: demand.strength, verdict, witness, certificate })
}
