//! The worked-out figures of one design: budget, limits, compliance. Owned, so that results
//! outlive the catalogue they came from.

use crate::quantity::{Ohms, Ppm, Volts};

use super::limits::LimitId;
use super::terms::TermId;

/// One line of the error budget.
#[derive(Clone, Debug, PartialEq)]
pub struct TermLine {
    /// Which term.
    pub term: TermId,
    /// Its size, in ppm of the output current.
    pub ppm: Ppm,
    /// A remark on how it was found.
    pub note: Option<String>,
}

/// One inequality of the operating window. `value` and `bound` are the left and right sides in
/// the unit of the limit's table entry; `margin` is positive when it passes with room.
#[derive(Clone, Debug, PartialEq)]
pub struct LimitLine {
    /// Which limit.
    pub limit: LimitId,
    /// Left side.
    pub value: f64,
    /// Right side.
    pub bound: f64,
    /// How far on the passing side.
    pub margin: f64,
}

/// A figure that a record lacks and the budget or window wanted.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct NotStated {
    /// The part.
    pub order_code: String,
    /// The field of its record.
    pub field: &'static str,
}

/// What load the design can drive.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Compliance {
    /// Lowest load voltage at which every limit holds.
    pub load_min: Volts,
    /// Highest load voltage at which every limit holds.
    pub load_max: Volts,
    /// Output resistance; `None` when nothing that lowers it is stated.
    pub output: Option<Ohms>,
}

/// The worked-out figures of one design.
#[derive(Clone, Debug, PartialEq)]
pub struct Evaluation {
    /// The total by the request's method.
    pub total: Ppm,
    /// All terms that apply, in the order of the term table.
    pub terms: Vec<TermLine>,
    /// Figures that were wanted and are not stated, sorted.
    pub not_stated: Vec<NotStated>,
    /// All limits that apply, in the order of the limit table.
    pub limits: Vec<LimitLine>,
    /// What load it can drive.
    pub compliance: Compliance,
    /// Whether every limit holds (with the tolerance of the contract).
    pub window_holds: bool,
    /// Whether the total meets the output's accuracy (with the tolerance of the contract).
    pub accuracy_holds: bool,
}
