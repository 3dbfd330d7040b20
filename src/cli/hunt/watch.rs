//! The sign of life of a hunt and the file of its state.

use std::sync::{Arc, Mutex, PoisonError};
use std::time::{Duration, Instant};

use sha2::{Digest, Sha256};

use crate::cli::Failure;
use crate::cli::output::{self, Output};
use crate::hunt::campaign::{Observer, Placed, State};

/// Keeps a state in a new file.
pub(super) fn keep(state: &State) -> Result<String, Failure> {
    let text = state.to_json();
    let request = serde_json::to_string(&state.request).unwrap_or_default();
    let digest: String = Sha256::digest(request).iter().take(4).map(|b| format!("{b:02x}")).collect();
    let name = format!("trysquare-hunt-{digest}.json");
    write_state(&name, &text)?;
    Ok(name)
}

fn write_state(name: &str, text: &str) -> Result<(), Failure> {
    let mut out = Output::open(Some(name))?;
    out.write(|out| out.write_all(text.as_bytes()))?;
    out.finish()
}

/// `10 of 11 columns, 23 degrees of freedom`.
pub(super) fn best(state: &State, factors: usize) -> String {
    let met = |p: &Placed| {
        format!(
            "best {} of {factors} columns ({} degrees of freedom)",
            p.columns.len(),
            p.degrees_of_freedom()
        )
    };
    state.best.as_ref().map_or_else(|| "nothing met yet".to_owned(), met)
}

/// What stands beside the spinner.
#[derive(Default)]
pub(super) struct Line {
    pub(super) task: String,
    pub(super) best: String,
    pub(super) done: u64,
}

impl Line {
    pub(super) fn text(&self, begin: Instant, end: Option<Instant>) -> String {
        let seconds = begin.elapsed().as_secs_f64().max(0.001);
        let left = end.map_or_else(String::new, |end| {
            format!("; {} s left", end.saturating_duration_since(Instant::now()).as_secs())
        });
        format!("{}; {}; {:.1} tasks/s{left}", self.task, self.best, self.done as f64 / seconds)
    }
}

/// Keeps the state in a file and the line beside the spinner true.
pub(super) struct Watcher<'a> {
    pub(super) file: Option<&'a str>,
    pub(super) end: Option<Instant>,
    pub(super) factors: usize,
    pub(super) first: u64,
    /// When the state was written last, and the state if it is newer.
    pub(super) saved: Mutex<Option<(Instant, Option<State>)>>,
    pub(super) line: Arc<Mutex<Line>>,
}

/// The least time between two writings of the state.
const PAUSE: Duration = Duration::from_millis(500);

impl Watcher<'_> {
    pub(super) fn show(&self, change: impl FnOnce(&mut Line)) {
        change(&mut self.line.lock().unwrap_or_else(PoisonError::into_inner));
    }

    fn saved(&self) -> std::sync::MutexGuard<'_, Option<(Instant, Option<State>)>> {
        self.saved.lock().unwrap_or_else(PoisonError::into_inner)
    }

    /// The state that is not written down yet.
    pub(super) fn last(&self) -> Option<State> {
        self.saved().take().and_then(|(_, state)| state)
    }

    pub(super) fn save(&self, state: &State) {
        let Some(name) = self.file else { return };
        if let Err(failure) = write_state(name, &state.to_json()) {
            output::remark(&format!("note: the state is not kept: {}", failure.message));
        }
        *self.saved() = Some((Instant::now(), None));
    }
}

impl Observer for Watcher<'_> {
    fn interrupt(&self) -> bool {
        output::interrupted()
    }

    fn time_is_over(&self) -> bool {
        self.end.is_some_and(|end| Instant::now() >= end)
    }

    fn begins(&self, task: u64, method: &'static str, symmetry: &str) {
        self.show(|line| line.task = format!("task {task}: {method}, symmetry {symmetry}"));
    }

    fn changed(&self, state: &State) {
        self.show(|line| {
            line.best = best(state, self.factors);
            line.done = state.tasks_done() - self.first;
        });
        if self.file.is_none() {
            return;
        }
        let due = self.saved().as_ref().is_none_or(|(at, _)| at.elapsed() >= PAUSE);
        if due || state.found.is_some() {
            self.save(state);
        } else if let Some((_, newer)) = self.saved().as_mut() {
            *newer = Some(state.clone());
        }
    }
}
