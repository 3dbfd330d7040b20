//! What a hunt has done so far, as a value that can be written down and read again.

use std::collections::{BTreeMap, BTreeSet};

use serde::{Deserialize, Serialize};

use super::request::{HuntError, HuntRequest};
use super::work;
use crate::construct::OrbitColumn;

/// What the first key of a state says.
const FORMAT: &str = "trysquare hunt state";

/// Columns that go together, and how they were met.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct Placed {
    /// The number of the task that met them.
    pub task: u64,
    /// Its method.
    pub method: String,
    /// Its symmetry.
    pub symmetry: String,
    /// The cyclic factors of the group that acts freely on the runs; empty for none.
    pub group: Vec<u16>,
    /// The columns.
    pub columns: Vec<OrbitColumn>,
}

impl Placed {
    /// The degrees of freedom of the columns: the sum of levels − 1.
    #[must_use]
    pub fn degrees_of_freedom(&self) -> u64 {
        self.columns.iter().map(|c| u64::from(c.levels.saturating_sub(1))).sum()
    }

    /// More columns are better, then more degrees of freedom, then the earlier task.
    fn better_than(&self, other: &Self) -> bool {
        let key = |p: &Self| (p.columns.len(), p.degrees_of_freedom(), std::cmp::Reverse(p.task));
        key(self) > key(other)
    }
}

/// What a hunt has done so far.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct State {
    format: String,
    work_list: u32,
    /// What is looked for.
    pub request: HuntRequest,
    /// Of the tasks of the shard so many from the first on are done …
    done: u64,
    /// … and of the later ones those at these places.
    beyond: BTreeSet<u64>,
    /// The most that was met.
    pub best: Option<Placed>,
    /// All columns, from the earliest task known to find them.
    pub found: Option<Placed>,
    /// The symmetries under which no array exists, with the earliest task that went through all.
    pub exhausted: BTreeMap<String, u64>,
}

impl State {
    /// The state before the first task.
    ///
    /// # Errors
    /// Those of [`HuntRequest::check`].
    pub fn new(request: HuntRequest) -> Result<Self, HuntError> {
        request.check()?;
        Ok(Self {
            format: FORMAT.to_owned(),
            work_list: work::VERSION,
            request,
            done: 0,
            beyond: BTreeSet::new(),
            best: None,
            found: None,
            exhausted: BTreeMap::new(),
        })
    }

    /// Reads a state.
    ///
    /// # Errors
    /// [`HuntError::State`] when the text is no state, is damaged, or belongs to another work list.
    pub fn from_json(text: &str) -> Result<Self, HuntError> {
        let fail = |reason: String| HuntError::State { reason };
        let state: Self = serde_json::from_str(text).map_err(|e| fail(e.to_string()))?;
        if state.format != FORMAT {
            return Err(fail(format!("its format is {:?}, not {FORMAT:?}", state.format)));
        }
        if state.work_list != work::VERSION {
            return Err(fail(format!(
                "it belongs to work list {}, this program has {}; start anew",
                state.work_list,
                work::VERSION
            )));
        }
        state.request.check()?;
        Ok(state)
    }

    /// Writes it down.
    #[must_use]
    pub fn to_json(&self) -> String {
        // Nothing in it can fail to be written.
        serde_json::to_string(self).unwrap_or_default() + "\n"
    }

    /// How many tasks are done.
    #[must_use]
    pub fn tasks_done(&self) -> u64 {
        self.done + self.beyond.len() as u64
    }

    /// Whether the task at this place of the shard is done.
    pub(super) fn is_done(&self, place: u64) -> bool {
        place < self.done || self.beyond.contains(&place)
    }

    /// The first place that is not done.
    pub(super) fn first_open(&self) -> u64 {
        self.done
    }

    pub(super) fn finish(&mut self, place: u64) {
        self.beyond.insert(place);
        while self.beyond.remove(&self.done) {
            self.done += 1;
        }
    }

    /// Takes note of what a task met.
    pub(super) fn meet(&mut self, placed: Placed) {
        let complete = placed.columns.len() == self.request.mix.factors();
        if complete && self.found.as_ref().is_none_or(|f| placed.task < f.task) {
            self.found = Some(placed.clone());
        }
        if self.best.as_ref().is_none_or(|b| placed.better_than(b)) {
            self.best = Some(placed);
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn places_are_counted_and_states_read_back() {
        let mut state = State::new(HuntRequest::new("2^4 3".parse().unwrap(), 12)).unwrap();
        for place in [2, 0, 3] {
            state.finish(place);
        }
        assert_eq!((state.first_open(), state.tasks_done()), (1, 3));
        assert!(state.is_done(3) && !state.is_done(1));
        state.finish(1);
        assert_eq!((state.first_open(), state.tasks_done()), (4, 4));
        let text = state.to_json();
        assert_eq!(State::from_json(&text).unwrap(), state);
        // Cut anywhere it is no state; from another work list neither.
        for end in 0..text.len() - 1 {
            assert!(State::from_json(&text[..end]).is_err(), "{end}");
        }
        assert!(State::from_json(&text.replace("\"work_list\":1", "\"work_list\":0")).is_err());
        assert!(State::from_json(&text.replace("\"runs\":12", "\"runs\":0")).is_err());
    }
}
