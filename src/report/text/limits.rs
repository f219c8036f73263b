//! How close the limits of the operating window are.

use super::figures::worked;
use super::grid::{Grid, Side};
use super::page::{INDENT, Page, tied};
use super::words;
use crate::circuit::{Compliance, Evaluation, LimitLine};
use crate::report::Ink;

/// All limits, the closest first, and what load the design drives.
pub(super) fn write(page: &mut Page, evaluation: &Evaluation) {
    page.heading("How close the limits are", "closest first");
    let mut grid = Grid::new()
        .column("", Side::Left)
        .optional(1, "is", Side::Right)
        .optional(1, "", Side::Left)
        .optional(1, "limit", Side::Right)
        .column("to spare", Side::Right);
    for line in by_closeness(evaluation) {
        let unit = line.limit.def().unit;
        grid.row([
            words(line.limit.def().name),
            worked(line.value, unit),
            sign(line).to_owned(),
            worked(line.bound, unit),
            margin(line),
        ]);
        if line.margin < 0.0 {
            grid.ink_last(Ink::Bad);
        }
    }
    if !grid.is_empty() {
        grid.write(page, INDENT);
    }
    page.gap();
    page.led(INDENT, "load: ", INDENT * 2, None, &compliance(&evaluation.compliance));
}

/// Which way the inequality goes: the margin tells.
fn sign(line: &LimitLine) -> &'static str {
    let below = line.value <= line.bound;
    if below == (line.margin >= 0.0) { "≤" } else { "≥" }
}

/// How far on the passing side; a difference of temperatures is in kelvins.
pub(super) fn margin(line: &LimitLine) -> String {
    let unit = line.limit.def().unit;
    worked(line.margin, if unit == "degC" { "K" } else { unit })
}

/// The limits by how much of the larger side is left.
pub(super) fn by_closeness(evaluation: &Evaluation) -> Vec<&LimitLine> {
    let closeness = |line: &LimitLine| {
        let side = line.value.abs().max(line.bound.abs());
        if side > 0.0 { line.margin / side } else { 0.0 }
    };
    let mut lines: Vec<&LimitLine> = evaluation.limits.iter().collect();
    lines.sort_by(|a, b| closeness(a).total_cmp(&closeness(b)));
    lines
}

/// What load the design drives, as a sentence.
pub(super) fn compliance(compliance: &Compliance) -> String {
    let low = tied(&worked(compliance.load_min.value(), "V"));
    let high = tied(&worked(compliance.load_max.value(), "V"));
    let output = compliance.output.map_or_else(
        || "output resistance not known".to_owned(),
        |ohms| format!("output resistance {}", tied(&worked(ohms.value(), "Ω"))),
    );
    format!("every limit holds from {low} to {high}; {output}")
}
