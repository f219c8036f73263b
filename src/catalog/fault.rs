//! Everything that can be wrong or doubtful in a user's file, as one kind of message.

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
