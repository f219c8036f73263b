//! A line on standard error while the search takes long.

use std::sync::mpsc::{Receiver, RecvTimeoutError, Sender, channel};
use std::thread::{self, JoinHandle};
use std::time::Duration;

use indicatif::{ProgressBar, ProgressDrawTarget, ProgressStyle};

use crate::answers::Progress;

/// Whoever gets an answer this fast needs no line.
const PATIENCE: Duration = Duration::from_millis(250);
/// How often the line moves.
const TICK: Duration = Duration::from_millis(120);

/// The line; it vanishes when this is dropped.
pub(super) struct Waiting {
    bar: ProgressBar,
    currency: String,
    /// Dropped to end the waiting.
    end: Option<Sender<()>>,
    starter: Option<JoinHandle<()>>,
}

impl Waiting {
    /// Shows the line after a while.
    pub(super) fn start(currency: String) -> Self {
        let bar = ProgressBar::with_draw_target(None, ProgressDrawTarget::hidden());
        let style = ProgressStyle::with_template("{spinner} {elapsed} {wide_msg}");
        bar.set_style(style.unwrap_or_else(|_| ProgressStyle::default_spinner()));
        let (end, ended) = channel();
        let shown = bar.clone();
        let starter = thread::spawn(move || show_later(&shown, &ended));
        Self { bar, currency, end: Some(end), starter: Some(starter) }
    }

    /// Says where the search stands.
    pub(super) fn tell(&self, step: &Progress) {
        let amount = |name: &str, money: Option<crate::quantity::Money>| {
            money.map_or(String::new(), |money| format!(", {name} {} {money}", self.currency))
        };
        let (best, bound) = (amount("best", step.best), amount("not below", step.bound));
        self.bar.set_message(format!("{}{best}{bound}", step.phase));
    }
}

fn show_later(bar: &ProgressBar, ended: &Receiver<()>) {
    if ended.recv_timeout(PATIENCE) == Err(RecvTimeoutError::Timeout) {
        bar.set_draw_target(ProgressDrawTarget::stderr());
        bar.enable_steady_tick(TICK);
    }
}

impl Drop for Waiting {
    fn drop(&mut self) {
        self.end = None;
        if let Some(starter) = self.starter.take() {
            // A starter that failed has shown nothing that would have to be cleared.
            let _ = starter.join();
        }
        self.bar.finish_and_clear();
    }
}
