//! Where does the time go, and what is being done right now? Stages of the work are named where they
//! begin and end; `--timings` tells the milliseconds of each, and on a terminal the stage at work is
//! shown when a second has gone by.
//!
//! Stages may run beside one another and within one another, so their times need not add up.

use std::io::{IsTerminal, Write};
use std::sync::{Arc, Condvar, Mutex, MutexGuard, PoisonError};
use std::thread::JoinHandle;
use std::time::{Duration, Instant};

use indicatif::{ProgressBar, ProgressStyle};

use crate::compare::Watch;

/// Work that is over before this is not shown: it would only flicker.
const SHOWN_AFTER: Duration = Duration::from_secs(1);

/// How often the line is drawn again.
const REDRAWN: Duration = Duration::from_millis(200);

/// One stage.
#[derive(Debug)]
struct Stage {
    name: &'static str,
    began: Instant,
    /// `None` while it is at work.
    taken: Option<Duration>,
}

#[derive(Debug, Default)]
struct State {
    stages: Vec<Stage>,
    /// Nothing is to be shown any more.
    over: bool,
}

#[derive(Debug, Default)]
struct Shared {
    state: Mutex<State>,
    changed: Condvar,
}

impl Shared {
    fn lock(&self) -> MutexGuard<'_, State> {
        // Nothing is left half done under this lock, so a poisoned one is as good.
        self.state.lock().unwrap_or_else(PoisonError::into_inner)
    }
}

/// The stages of one piece of work.
#[derive(Debug)]
pub struct Stages {
    shared: Arc<Shared>,
    began: Instant,
    shown_by: Mutex<Option<JoinHandle<()>>>,
}

impl Stages {
    /// No stage yet. Shows them from now on when standard error is a terminal.
    pub fn new() -> Self {
        let shared = Arc::new(Shared::default());
        let shown_by = std::io::stderr().is_terminal().then(|| {
            let shared = Arc::clone(&shared);
            std::thread::spawn(move || show(&shared))
        });
        Self { shared, began: Instant::now(), shown_by: Mutex::new(shown_by) }
    }

    /// Does `work` as the stage `name`.
    pub fn run<T>(&self, name: &'static str, work: impl FnOnce() -> T) -> T {
        self.begins(name);
        let done = work();
        self.ends(name);
        done
    }

    /// Shows nothing more, and clears what is shown: something else is about to be printed.
    pub fn stop_showing(&self) {
        self.shared.lock().over = true;
        self.shared.changed.notify_all();
        let shown_by = self.shown_by.lock().unwrap_or_else(PoisonError::into_inner).take();
        if let Some(thread) = shown_by {
            // It can only have come to its end.
            let _ = thread.join();
        }
    }

    /// Tells the milliseconds of every stage on standard error, in the order in which they began.
    pub fn tell(&self) {
        let mut out = std::io::stderr().lock();
        let mut line = |name: &str, taken: Duration| {
            // What cannot be said there cannot be said at all.
            let _ = writeln!(out, "{:>10.1} ms  {name}", 1e3 * taken.as_secs_f64());
        };
        for stage in &self.shared.lock().stages {
            line(stage.name, stage.taken.unwrap_or_else(|| stage.began.elapsed()));
        }
        line("in all", self.began.elapsed());
    }
}

impl Watch for Stages {
    fn begins(&self, name: &'static str) {
        self.shared.lock().stages.push(Stage { name, began: Instant::now(), taken: None });
    }

    fn ends(&self, name: &'static str) {
        let mut state = self.shared.lock();
        let open = state.stages.iter_mut().rev().find(|s| s.name == name && s.taken.is_none());
        if let Some(stage) = open {
            stage.taken = Some(stage.began.elapsed());
        }
    }
}

impl Drop for Stages {
    fn drop(&mut self) {
        self.stop_showing();
    }
}

/// Shows the stages at work until all is over.
fn show(shared: &Shared) {
    let begun = shared.changed.wait_timeout_while(shared.lock(), SHOWN_AFTER, |s| !s.over);
    if begun.is_ok_and(|(state, _)| state.over) {
        return;
    }
    let bar = ProgressBar::new_spinner();
    // The template is a constant that is known to be well formed; the built-in one would do as well.
    if let Ok(style) = ProgressStyle::with_template("{spinner} {elapsed} {msg}") {
        bar.set_style(style);
    }
    loop {
        let over = {
            let state = shared.lock();
            let at_work: Vec<&str> =
                state.stages.iter().filter(|s| s.taken.is_none()).map(|s| s.name).collect();
            bar.set_message(at_work.join(", "));
            state.over
        };
        if over {
            break;
        }
        bar.tick();
        let waited = shared.changed.wait_timeout_while(shared.lock(), REDRAWN, |s| !s.over);
        drop(waited);
    }
    bar.finish_and_clear();
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn stages_are_kept_in_the_order_in_which_they_begin_and_may_lie_in_one_another() {
        let stages = Stages::new();
        let answer = stages.run("outer", || stages.run("inner", || 7));
        assert_eq!(answer, 7);
        stages.stop_showing();
        let state = stages.shared.lock();
        let names: Vec<&str> = state.stages.iter().map(|s| s.name).collect();
        assert_eq!(names, ["outer", "inner"]);
        assert!(state.stages.iter().all(|s| s.taken.is_some()));
        assert!(state.stages[0].taken >= state.stages[1].taken);
    }
}
