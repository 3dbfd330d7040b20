//! A share of a budget.

use crate::hunt::Effort;

/// Steps of an effort, no more than a share of its own.
pub(in crate::hunt) struct Meter<'e, 'h> {
    effort: &'e mut Effort<'h>,
    left: u64,
}

impl<'e, 'h> Meter<'e, 'h> {
    pub(in crate::hunt) fn new(effort: &'e mut Effort<'h>, steps: u64) -> Self {
        Self { effort, left: steps }
    }

    /// A meter within this one, of no more steps than given.
    pub(in crate::hunt) fn part(&mut self, steps: u64) -> Meter<'_, 'h> {
        let left = steps.min(self.left);
        Meter { effort: &mut *self.effort, left }
    }

    /// Takes steps from both; false when one of them is used up.
    pub(in crate::hunt) fn spend(&mut self, steps: u64) -> bool {
        self.left = self.left.saturating_sub(steps);
        self.effort.spend(steps) && self.left > 0
    }

    /// Whether the share is used up.
    pub(in crate::hunt) fn used_up(&self) -> bool {
        self.left == 0
    }
}
