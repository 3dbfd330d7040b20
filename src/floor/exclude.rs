//! Finds reasons why no array has exactly so many runs.

use super::linear_program::{distances, parity};
use super::proof::{Bound, Exclusion, Reason, Step, Subject, block_limit, eight_runs_allow};
use super::recorded::recorded;
use super::{Effort, bose_bush, bush, confirmed, divisibility, rao};
use crate::mix::Mix;

/// A reason why no array for `mix` at `strength` has exactly `runs` runs, the cheapest kind first;
/// `None` when none is found within the effort.
///
/// ```
/// use trysquare::floor::{Effort, Subject, exclude};
/// let mix: trysquare::mix::Mix = "6^1 2^3".parse()?;
/// let exclusion = exclude(&mix, 2, 12, &mut Effort::unlimited()).unwrap();
/// assert_eq!(exclusion.reason.name(), "parity");
/// exclusion.check(&Subject { runs: 12, strength: 2, mix })?;
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
#[must_use]
pub fn exclude(mix: &Mix, strength: u32, runs: u64, effort: &mut Effort<'_>) -> Option<Exclusion> {
    let mut path = Path { steps: Vec::new(), at: Subject { runs, strength, mix: mix.clone() } };
    // What needs no search to be checked is preferred.
    let reason = path.search(&mut |path| path.argument(effort)).or_else(|| path.search(&mut Path::record))?;
    Some(Exclusion { runs, steps: path.steps, about: path.at, reason })
}

/// Steps from a request, and where they have led.
struct Path {
    steps: Vec<Step>,
    at: Subject,
}

impl Path {
    /// Takes a step; false, without having moved, when it does not follow.
    fn step(&mut self, step: Step) -> bool {
        let Some(at) = self.at.after(&step) else { return false };
        self.steps.push(step);
        self.at = at;
        true
    }

    /// A reason that `find` gives here or after taking derived arrays; on success `self` is the path
    /// to it.
    fn search(&mut self, find: &mut dyn FnMut(&mut Self) -> Option<Reason>) -> Option<Reason> {
        if let Some(reason) = find(self) {
            return Some(reason);
        }
        if self.at.strength < 3 {
            return None;
        }
        for (levels, _) in self.at.counts() {
            let (depth, before) = (self.steps.len(), self.at.clone());
            if self.step(Step::Derive { levels })
                && let Some(reason) = self.search(find)
            {
                return Some(reason);
            }
            self.steps.truncate(depth);
            self.at = before;
        }
        None
    }

    /// A reason that can be checked on the spot.
    fn argument(&mut self, effort: &mut Effort<'_>) -> Option<Reason> {
        if let Some(reason) = plain(&self.at) {
            return Some(reason);
        }
        for find in [four_runs, eight_runs] {
            if let Some((steps, reason)) = find(&self.at)
                && self.follow(&steps, &reason)
            {
                return Some(reason);
            }
        }
        parity(&self.at, effort).or_else(|| distances(&self.at, effort))
    }

    /// A stored record of a search.
    fn record(&mut self) -> Option<Reason> {
        let (steps, reason) = recorded(&self.at)?;
        self.follow(&steps, &reason).then_some(reason)
    }

    /// Takes all the steps if the reason holds at their end.
    fn follow(&mut self, steps: &[Step], reason: &Reason) -> bool {
        let (depth, before) = (self.steps.len(), self.at.clone());
        if steps.iter().all(|s| self.step(s.clone())) && confirmed(reason, &self.at) {
            return true;
        }
        self.steps.truncate(depth);
        self.at = before;
        false
    }
}

/// Divisibility and the bounds with closed formulas.
fn plain(about: &Subject) -> Option<Reason> {
    let divisor = divisibility(&about.mix, about.strength).ok()?;
    if let Some(set) = divisor.sets.into_iter().find(|set| {
        let product = set.iter().try_fold(1u64, |n, &s| n.checked_mul(u64::from(s)));
        product.is_none_or(|p| !about.runs.is_multiple_of(p))
    }) {
        return Some(Reason::Indivisible { set });
    }
    let mut bounds: Vec<Bound> = rao(&about.mix, about.strength).into_iter().collect();
    for (s, k) in about.counts() {
        bounds.extend(bose_bush(s, k, about.strength).ok().flatten());
        bounds.extend(bush(s, k, about.strength).ok().flatten());
    }
    let bound = bounds.into_iter().find(|b| b.least() > about.runs)?;
    Some(Reason::Bound { bound })
}

/// The steps to one factor of `odd` levels beside two-level factors, at most `most` of them; and
/// how many there are.
///
/// A factor whose levels `odd` divides gives that factor and, if what remains is even, a two-level
/// one; every other factor with an even number of levels gives a two-level one.
fn two_levels_beside(about: &Subject, odd: u16, most: u64) -> Option<(Vec<Step>, u64)> {
    let hosts = about.counts().into_iter().map(|c| c.0).filter(|s| s.is_multiple_of(odd));
    // The host that is worth least as a two-level factor.
    let host = hosts.min_by_key(|s| (u8::from(s.is_multiple_of(2)) ^ u8::from(*s == 2 * odd), *s))?;
    let mut steps = Vec::new();
    let mut twos = 0u64;
    let rest = host / odd;
    if rest > 1 {
        steps.push(Step::Part { levels: host, into: odd });
        if rest.is_multiple_of(2) {
            twos += 1;
            if rest > 2 {
                steps.push(Step::Merge { levels: rest, into: 2, factors: 1 });
            }
        } else {
            steps.push(Step::Drop { levels: rest, factors: 1 });
        }
    }
    for (s, k) in about.counts() {
        let k = k - u64::from(s == host);
        let used = if s % 2 == 0 { k.min(most.saturating_sub(twos)) } else { 0 };
        twos += used;
        if s > 2 && used > 0 {
            steps.push(Step::Merge { levels: s, into: 2, factors: u32::try_from(used).ok()? });
        }
        if k > used {
            steps.push(Step::Drop { levels: s, factors: u32::try_from(k - used).ok()? });
        }
    }
    Some((steps, twos))
}

fn four_runs(about: &Subject) -> Option<(Vec<Step>, Reason)> {
    let levels = u16::try_from(about.runs / 4).ok()?;
    let limit = block_limit(levels).filter(|_| about.strength == 2 && about.runs.is_multiple_of(4))?;
    let (steps, twos) = two_levels_beside(about, levels, limit + 1)?;
    (twos > limit).then_some((steps, Reason::FourRunsPerLevel { levels }))
}

fn eight_runs(about: &Subject) -> Option<(Vec<Step>, Reason)> {
    let levels = u16::try_from(about.runs / 8).ok()?;
    if about.strength != 3 || !about.runs.is_multiple_of(8) || levels < 3 {
        return None;
    }
    let (steps, twos) = two_levels_beside(about, levels, 7)?;
    (!eight_runs_allow(levels, twos)).then_some((steps, Reason::EightRunsPerLevel { levels }))
}
