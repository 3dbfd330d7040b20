use std::sync::Mutex;

use crate::floor::Effort;

/// How many steps a worker makes between two payments.
const PAYMENT: u64 = 1 << 14;

/// A budget that workers share. They pay in portions and the rest at the end, so whether the sum
/// of all their steps was affordable does not depend on the order in which they pay.
pub(super) struct Purse<'a, 'b> {
    effort: Mutex<&'a mut Effort<'b>>,
}

impl<'a, 'b> Purse<'a, 'b> {
    pub(super) fn new(effort: &'a mut Effort<'b>) -> Self {
        Self { effort: Mutex::new(effort) }
    }

    /// Runs `work` with a function that spends steps; `None` when `work` gives none or its steps
    /// were not affordable.
    pub(super) fn pay<T>(&self, work: impl FnOnce(&mut dyn FnMut(u64) -> bool) -> Option<T>) -> Option<T> {
        let mut owed = 0u64;
        let result = work(&mut |steps| {
            owed = owed.saturating_add(steps);
            owed < PAYMENT || self.settle(std::mem::take(&mut owed))
        });
        let affordable = self.settle(owed);
        result.filter(|_| affordable)
    }

    fn settle(&self, steps: u64) -> bool {
        // A worker that panicked has changed nothing but the number of steps left.
        self.effort.lock().unwrap_or_else(std::sync::PoisonError::into_inner).spend(steps)
    }
}
