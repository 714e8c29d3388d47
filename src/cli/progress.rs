//! How far a long command has come, on standard error.

use indicatif::{ProgressBar, ProgressDrawTarget, ProgressStyle};
use std::io::IsTerminal;
use std::sync::atomic::{AtomicBool, Ordering};
use std::time::{Duration, Instant};

/// Commands shorter than this show nothing.
const PATIENCE: Duration = Duration::from_millis(500);

/// A bar with the time left: only on a terminal, and only after half a second.
pub struct Progress {
    bar: ProgressBar,
    began: Instant,
    waits: AtomicBool,
}

impl Progress {
    /// Of so many steps.
    pub fn new(steps: u64, what: &'static str) -> Progress {
        let bar = ProgressBar::with_draw_target(Some(steps), ProgressDrawTarget::hidden());
        let style = ProgressStyle::with_template("{msg} {bar:30} {pos} of {len}, {eta} left");
        if let Ok(style) = style {
            bar.set_style(style);
        }
        bar.set_message(what);
        Progress {
            bar,
            began: Instant::now(),
            waits: AtomicBool::new(std::io::stderr().is_terminal()),
        }
    }

    /// Some steps more; from any thread.
    pub fn step(&self, steps: u64) {
        self.bar.inc(steps);
        self.show();
    }

    /// So many steps of so many are done: for a search that learns on the way how many it takes.
    pub fn reached(&self, done: usize, steps: usize) {
        let count = |steps: usize| u64::try_from(steps).unwrap_or(u64::MAX);
        self.bar.set_length(count(steps));
        self.bar.set_position(count(done));
        self.show();
    }

    fn show(&self) {
        if self.waits.load(Ordering::Relaxed)
            && self.began.elapsed() > PATIENCE
            && self.waits.swap(false, Ordering::Relaxed)
        {
            self.bar.set_draw_target(ProgressDrawTarget::stderr());
        }
    }

    /// Takes the bar away while something else is written.
    pub fn aside<T>(&self, write: impl FnOnce() -> T) -> T {
        self.bar.suspend(write)
    }

    /// Takes the bar away.
    pub fn done(&self) {
        self.bar.finish_and_clear();
    }
}

impl Drop for Progress {
    fn drop(&mut self) {
        self.bar.finish_and_clear();
    }
}
