use std::sync::Arc;
use std::sync::atomic::{AtomicU64, Ordering};
use std::sync::mpsc::{RecvTimeoutError, Sender, channel};
use std::thread::JoinHandle;
use std::time::{Duration, Instant};

use indicatif::{ProgressBar, ProgressStyle};

/// A sign of life on stderr, from the second second on; nothing unless stderr is a terminal.
pub(super) struct Progress {
    done: Arc<AtomicU64>,
    painter: Option<(Sender<()>, JoinHandle<()>)>,
}

impl Progress {
    /// Starts the clock. `count` says what is counted, if anything.
    pub(super) fn start(what: &'static str, count: Option<&'static str>, quiet: bool) -> Self {
        let done = Arc::new(AtomicU64::new(0));
        let seen = Arc::clone(&done);
        let message = move || match count {
            Some(count) => format!("{what}: {} {count}", seen.load(Ordering::Relaxed)),
            None => what.to_owned(),
        };
        let mut progress = Self::telling(message, quiet);
        progress.done = done;
        progress
    }

    /// Starts the clock; `message` says what is going on.
    pub(super) fn telling(message: impl Fn() -> String + Send + 'static, quiet: bool) -> Self {
        use std::io::IsTerminal;
        let done = Arc::default();
        if quiet || !std::io::stderr().is_terminal() {
            return Self { done, painter: None };
        }
        let (stop, stopped) = channel();
        let painter = std::thread::spawn(move || {
            let start = Instant::now();
            if stopped.recv_timeout(Duration::from_secs(1)) != Err(RecvTimeoutError::Timeout) {
                return;
            }
            let bar = ProgressBar::new_spinner().with_elapsed(start.elapsed());
            if let Ok(style) = ProgressStyle::with_template("{spinner} {wide_msg} {elapsed}") {
                bar.set_style(style);
            }
            loop {
                bar.set_message(message());
                bar.tick();
                if stopped.recv_timeout(Duration::from_millis(100)) != Err(RecvTimeoutError::Timeout) {
                    bar.finish_and_clear();
                    return;
                }
            }
        });
        Self { done, painter: Some((stop, painter)) }
    }

    /// One more is done.
    pub(super) fn tick(&self) {
        self.done.fetch_add(1, Ordering::Relaxed);
    }
}

impl Drop for Progress {
    fn drop(&mut self) {
        if let Some((stop, painter)) = self.painter.take() {
            drop(stop);
            let _ = painter.join();
        }
    }
}
