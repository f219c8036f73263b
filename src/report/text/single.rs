//! One output in full.

use super::figures::{current, room, target, total_beside};
use super::page::{INDENT, Page, plain, tied};
use super::{budget, design, infeasible, limits};
use crate::answers::{OutputAnswer, Verdict};
use crate::report::Ink;

pub(super) fn write(page: &mut Page, output: &OutputAnswer) {
    page.gap();
    match &output.verdict {
        Verdict::Chosen(chosen, evaluation) => {
            asked(page, output);
            design::write(page, chosen);
            page.gap();
            let total = total_beside(evaluation.total, output.target);
            let verdict = format!(
                "{} ({}), {} to spare",
                tied(&format!("{total} of {}", target(output.target))),
                output.method,
                tied(&room(evaluation.total, output.target)),
            );
            page.led(INDENT, "passes: ", INDENT * 2, Some(Ink::Good), &verdict);
            budget::write(page, output, evaluation);
            limits::write(page, evaluation);
        }
        Verdict::NoCommonSet => asked(page, output),
        Verdict::Infeasible(reasons) => infeasible::write(page, output, reasons),
    }
}

/// What was asked for.
fn asked(page: &mut Page, output: &OutputAnswer) {
    let text = format!(
        "{} within {}, {}",
        tied(&current(output.current)),
        tied(&target(output.target)),
        tied(&format!("{} built", output.quantity)),
    );
    page.led(0, &format!("{}: ", plain(&output.name)), INDENT, Some(Ink::Bold), &text);
}
