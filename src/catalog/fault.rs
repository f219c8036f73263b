//! Everything that can be wrong or doubtful in a user's file, as one kind of message.

use std::fmt;

use super::model::Place;

/// Whether a fault stops the run.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Severity {
    /// The record or request cannot be used.
    Error,
    /// It can be used, but somebody should look.
    Doubt,
}

/// One fault: where, in which record and field, what was found, and what to write instead.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Fault {
    /// Where it stands.
    pub place: Place,
    /// Whether it stops the run.
    pub severity: Severity,
    /// The record's part (and grade), or `request`.
    pub record: Option<String>,
    /// Path of the field within the record, such as `grades[1].tempco`.
    pub field: Option<String>,
    /// What was found: a short fragment.
    pub message: String,
    /// What to write instead.
    pub hint: Option<String>,
}

impl Severity {
    /// The word in a message.
    #[must_use]
    pub const fn word(self) -> &'static str {
        match self {
            Self::Error => "error",
            Self::Doubt => "doubt",
        }
    }
}

impl fmt::Display for Fault {
    /// One line: `parts.yaml:3:9: error: KS-V25 grade A, grades[0].tempco: what was found; what
    /// to write instead`.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}: {}: ", self.place, self.severity.word())?;
        match (&self.record, &self.field) {
            (Some(record), Some(field)) => write!(f, "{record}, {field}: ")?,
            (Some(only), None) | (None, Some(only)) => write!(f, "{only}: ")?,
            (None, None) => {}
        }
        f.write_str(&self.message)?;
        match &self.hint {
            Some(hint) => write!(f, "; {hint}"),
            None => Ok(()),
        }
    }
}
