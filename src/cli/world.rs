//! Where a run writes, and what can be shown there. Handed in, so that a run can be tested.

use std::io::{self, IsTerminal, Write};
use std::sync::atomic::AtomicBool;

use super::exit::Failure;
use crate::report::{Screen, Terminal};

/// The surroundings of a run.
pub struct World<'a> {
    /// For results.
    pub out: &'a mut dyn Write,
    /// For everything else.
    pub err: &'a mut dyn Write,
    /// How results are laid out.
    pub out_screen: Screen,
    /// How messages are laid out.
    pub err_screen: Screen,
    /// Whether a line of progress may be shown on standard error.
    pub progress: bool,
    /// Set from outside to stop a search early, with the best set so far as its answer.
    pub stop: Option<&'a AtomicBool>,
}

impl World<'_> {
    /// Writes a result.
    pub(super) fn result(&mut self, text: &str) -> Result<(), Failure> {
        let written = self.out.write_all(text.as_bytes()).and_then(|()| self.out.flush());
        written.map_err(Failure::Write)
    }

    /// Writes a message. There is nobody left to tell when that fails.
    pub(super) fn message(&mut self, text: &str) {
        let _ = self.err.write_all(text.as_bytes()).and_then(|()| self.err.flush());
    }
}

/// How results and messages of this process are laid out.
#[must_use]
pub fn screens() -> (Screen, Screen) {
    let variable = |name: &str| std::env::var_os(name).filter(|value| !value.is_empty());
    let facts = Terminal {
        is_terminal: false,
        columns: None,
        columns_variable: variable("COLUMNS").and_then(|text| text.to_str()?.parse().ok()),
        no_color: variable("NO_COLOR").is_some(),
        is_dumb: variable("TERM").is_some_and(|term| term == "dumb"),
    };
    let columns = |size: Option<(terminal_size::Width, terminal_size::Height)>| {
        size.map(|(terminal_size::Width(columns), _)| usize::from(columns))
    };
    let out = Terminal {
        is_terminal: io::stdout().is_terminal(),
        columns: columns(terminal_size::terminal_size_of(io::stdout())),
        ..facts
    };
    let err = Terminal {
        is_terminal: io::stderr().is_terminal(),
        columns: columns(terminal_size::terminal_size_of(io::stderr())),
        ..facts
    };
    (Screen::of(out), Screen::of_messages(err))
}
