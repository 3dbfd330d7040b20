//! How much work a search may do, counted in steps and not in seconds.

/// A budget of steps, and somebody who may ask for the end.
///
/// Steps make a search that gives up give up at the same place on every machine; the request to
/// stop is for time limits and interrupts, and what was stopped by it has no result.
pub struct Effort<'a> {
    left: u64,
    since: u64,
    halted: bool,
    halt: &'a (dyn Fn() -> bool + Sync),
}

/// How many steps are made between looks at the request to stop.
const LOOK: u64 = 1 << 14;

impl Effort<'static> {
    /// No limit, and nobody who stops it.
    #[must_use]
    pub fn unlimited() -> Self {
        Self::new(u64::MAX, &|| false)
    }
}

impl<'a> Effort<'a> {
    /// `steps` steps at the most; `halt` is asked now and then whether to stop at once.
    #[must_use]
    pub fn new(steps: u64, halt: &'a (dyn Fn() -> bool + Sync)) -> Self {
        Self { left: steps, since: 0, halted: false, halt }
    }

    /// Takes `steps` from the budget; false when it is used up or somebody wants the end.
    pub fn spend(&mut self, steps: u64) -> bool {
        self.since = self.since.saturating_add(steps);
        if self.since >= LOOK {
            self.since = 0;
            self.halted |= (self.halt)();
        }
        self.left = self.left.saturating_sub(steps);
        self.goes_on()
    }

    /// Whether there is budget left and nobody wants the end.
    #[must_use]
    pub fn goes_on(&self) -> bool {
        self.left > 0 && !self.halted
    }

    /// Whether somebody asked for the end: then what was being done has no result.
    #[must_use]
    pub fn halted(&self) -> bool {
        self.halted
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_budget_ends_and_so_does_a_request_to_stop() {
        let mut effort = Effort::new(10, &|| false);
        assert!(effort.spend(9) && effort.goes_on());
        assert!(!effort.spend(1) && !effort.halted());
        let mut effort = Effort::new(u64::MAX, &|| true);
        assert!(effort.spend(1), "asked only now and then");
        assert!(!effort.spend(LOOK) && effort.halted());
        assert!(Effort::unlimited().spend(u64::MAX - 1));
    }
}
