//! Recorded searches as reasons, and proofs that rest on them.

use std::sync::OnceLock;

use serde_json::Value;

use super::Effort;
use super::exhaustion::{Claim, Record, stored};
use super::proof::{Proof, ProofError, Reason, Step, Subject};
use crate::mix::Mix;

impl Proof {
    /// As [`Proof::check`], and recorded searches are made again.
    ///
    /// Cost: of the searches; `effort` limits each step of them together.
    ///
    /// # Errors
    /// The first rule that is broken; a search that the effort does not suffice for is not
    /// confirmed.
    pub fn check_deep(&self, effort: &mut Effort<'_>) -> Result<(), ProofError> {
        let effort = std::cell::RefCell::new(effort);
        self.check_with(&|record, about| {
            let record = claiming(record, about)?;
            record.replay(&mut effort.borrow_mut()).map_err(|e| e.to_string())
        })
    }

    /// As [`Proof::check`], and of recorded searches everything that can be checked without making
    /// them again. Such a proof is not confirmed by this.
    ///
    /// # Errors
    /// The first rule that is broken.
    pub fn check_light(&self) -> Result<(), ProofError> {
        self.check_with(&light)
    }

    /// Whether the proof rests on a recorded search.
    #[must_use]
    pub fn is_recorded(&self) -> bool {
        self.exclusions.iter().any(|e| matches!(e.reason, Reason::Exhaustion { .. }))
    }
}

/// The record in a reason, if it claims what it is the reason for.
fn claiming(record: &Value, about: &Subject) -> Result<Record, String> {
    let record: Record = serde_json::from_value(record.clone()).map_err(|e| e.to_string())?;
    let claim = record.claim().map_err(|e| e.to_string())?;
    let same = u64::from(claim.runs) == about.runs
        && claim.strength == about.strength
        && claim.mix.counts() == about.mix.counts();
    if same { Ok(record) } else { Err(format!("it is about {} in {} runs", claim.mix, claim.runs)) }
}

pub(super) fn light(record: &Value, about: &Subject) -> Result<(), String> {
    claiming(record, about)?.check_light().map_err(|e| e.to_string())
}

/// The first stored record that some steps lead to, with the steps.
pub(super) fn recorded(about: &Subject) -> Option<(Vec<Step>, Reason)> {
    static STORED: OnceLock<Vec<(Claim, Record)>> = OnceLock::new();
    let known = STORED.get_or_init(|| {
        let records = stored().iter().filter_map(|(_, text)| Record::from_json(text).ok());
        records.filter_map(|record| Some((record.claim().ok()?, record))).collect()
    });
    known.iter().find_map(|(claim, record)| {
        let near = u64::from(claim.runs) == about.runs && claim.strength <= about.strength;
        let mut steps = steps_to(&about.mix, &claim.mix).filter(|_| near)?;
        if claim.strength < about.strength {
            steps.push(Step::Strength { to: claim.strength });
        }
        // The classes met on the way are for readers; making the search again does not need them.
        let mut record = record.clone();
        if let Record::Columns(by) = &mut record {
            by.stages.iter_mut().for_each(|stage| stage.representatives.clear());
        }
        Some((steps, Reason::Exhaustion { record: serde_json::to_value(record).ok()? }))
    })
}

/// Merging and dropping that turn the factors of one mix into those of another: most levels
/// first, each wanted factor from the one with fewest levels that can give it.
fn steps_to(from: &Mix, to: &Mix) -> Option<Vec<Step>> {
    let mut left = from.counts();
    let mut steps = Vec::new();
    for (into, wanted) in to.counts().into_iter().rev() {
        let mut wanted = wanted;
        for (&levels, there) in left.iter_mut().filter(|(s, _)| s.is_multiple_of(into)) {
            let used = wanted.min(*there);
            *there -= used;
            wanted -= used;
            if levels != into && used > 0 {
                steps.push(Step::Merge { levels, into, factors: u32::try_from(used).ok()? });
            }
        }
        if wanted > 0 {
            return None;
        }
    }
    for (levels, k) in left.into_iter().filter(|&(_, k)| k > 0) {
        steps.insert(0, Step::Drop { levels, factors: u32::try_from(k).ok()? });
    }
    Some(steps)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::floor::{Bound, exclude, floor, raise};

    #[test]
    fn a_recorded_reason_needs_the_search() {
        // Tarry 1900: no two orthogonal Latin squares of order 6.
        let mix: Mix = "6^4 2".parse().unwrap();
        let exclusion = exclude(&mix, 2, 36, &mut Effort::unlimited()).unwrap();
        assert_eq!(exclusion.reason.name(), "exhaustion");
        let proof = raise(floor(&mix, 2).unwrap(), 37, &mut Effort::unlimited()).unwrap();
        assert_eq!((proof.runs, proof.is_recorded()), (72, true));
        assert!(proof.check().is_err());
        proof.check_light().unwrap();
        proof.check_deep(&mut Effort::unlimited()).unwrap();
        assert!(proof.check_deep(&mut Effort::new(10, &|| false)).is_err());
        let mut other = proof.clone();
        let Reason::Exhaustion { record } = &mut other.exclusions[0].reason else { panic!() };
        *record = serde_json::json!({"by": "columns"});
        assert!(other.check_light().is_err() && other.check_deep(&mut Effort::unlimited()).is_err());
        let Bound::Rao { .. } = proof.bound else { panic!() };
    }

    #[test]
    fn steps_lead_to_the_mix() {
        let steps = |from: &str, to: &str| steps_to(&from.parse().unwrap(), &to.parse().unwrap());
        assert_eq!(steps("6^4", "6^4"), Some(vec![]));
        assert_eq!(
            steps("12 6^3 5", "6^4"),
            Some(vec![Step::Drop { levels: 5, factors: 1 }, Step::Merge { levels: 12, into: 6, factors: 1 }])
        );
        assert_eq!(steps("6^3", "6^4"), None);
        assert_eq!(steps("4 6", "2 6"), Some(vec![Step::Merge { levels: 4, into: 2, factors: 1 }]));
    }
}
