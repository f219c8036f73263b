//! Why an output, or the whole, has no answer.

use super::figures::{current, reaching, target, total_beside, trimmed};
use super::page::{INDENT, Page, counted, plain, tied};
use super::{design, words};
use crate::answers::{Cause, JointReason, OutputAnswer, Reasons, Relaxation, Removed};
use crate::catalog::Kind;
use crate::quantity::ppm_text;
use crate::report::Ink;

/// Width of the labels.
const LABEL: usize = 10;

/// What came closest, what fell out, and what would help.
pub(super) fn write(page: &mut Page, output: &OutputAnswer, reasons: &Reasons) {
    let lead = format!("{}: no design ", plain(&output.name));
    let asked =
        format!("for {} within {}", tied(&current(output.current)), tied(&target(output.target)),);
    page.led(0, &lead, INDENT, Some(Ink::Bad), &asked);
    match &reasons.best {
        Some((total, best)) => {
            let over = *total - output.target;
            let best_total = tied(&format!("{} ppm", total_beside(*total, output.target)));
            let text = if over.value() > 0.0 {
                // A near miss is shown as small as it is, not as nothing.
                let shown = total_beside(over, output.target);
                let nothing = shown.chars().all(|c| matches!(c, '0' | '.'));
                let over = if nothing { ppm_text(over.value()) } else { format!("{shown} ppm") };
                let over = tied(&over);
                format!("{best_total}, {over} too much, with {}", design::sentence(best))
            } else {
                format!("{best_total}, with {}", design::sentence(best))
            };
            page.field("best total", LABEL, &text);
        }
        None => page.field("best total", LABEL, "none: no combination fits the operating window"),
    }
    for (number, removed) in reasons.removed.iter().enumerate() {
        page.field(if number == 0 { "removed" } else { "" }, LABEL, &fallen(removed));
    }
    for (number, change) in reasons.relaxations.iter().enumerate() {
        let (label, or) = if number == 0 { ("would help", "") } else { ("", "or ") };
        page.field(label, LABEL, &format!("{or}{}", relaxed(change)));
    }
}

/// `3 references: reference headroom`.
fn fallen(removed: &Removed) -> String {
    let (one, many) = match removed.kind {
        Kind::Reference => ("reference", "references"),
        Kind::Amplifier => ("amplifier", "amplifiers"),
        Kind::Resistor => ("resistor", "resistors"),
        Kind::Lift => ("lift diode", "lift diodes"),
        Kind::Adjustment => ("adjustment", "adjustments"),
    };
    let cause = match removed.cause {
        Cause::Limit(limit) => format!("by the limit {}", tied(&words(limit.def().name))),
        Cause::Rule(rule) => format!("by the rule {rule}"),
    };
    format!("{} {cause}", tied(&counted(removed.offers, one, many)))
}

fn relaxed(change: &Relaxation) -> String {
    let unit = unit_of(&change.figure);
    let with_unit = |figure: String| tied(format!("{figure} {unit}").trim_end());
    format!(
        "{} {} instead of {}",
        plain(&change.figure),
        with_unit(reaching(change.from, change.to)),
        with_unit(trimmed(change.from, 9))
    )
}

/// The SI unit of a figure of the request, by the last name in its path. A load can be in volts
/// or ohms, as the request writes it, so it has none here.
fn unit_of(path: &str) -> &'static str {
    let name = path.rsplit('.').next().unwrap_or(path);
    match name.split('[').next().unwrap_or(name) {
        "accuracy" => "ppm",
        "supply" | "negative_rail" | "calibrated_supply" | "thermal_emf" | "margin" => "V",
        "ambient" | "calibrated_at" => "°C",
        "insulation" | "wiring" => "Ω",
        "current" | "quiescent_max" => "A",
        "service" | "lead_time_max" => "s",
        _ => "",
    }
}

/// Rules on the whole purchase that no common set keeps.
pub(super) fn write_joint(page: &mut Page, reasons: &[JointReason]) {
    if reasons.is_empty() {
        return;
    }
    page.heading("Why no common set", "");
    for reason in reasons {
        let text = match &reason.order_code {
            Some(code) => format!(
                "{}: {} has {} in stock, {} needed, {} short",
                reason.rule,
                plain(code),
                reason.allowed,
                reason.needed,
                reason.needed.saturating_sub(reason.allowed)
            ),
            None => format!(
                "{}: {} allowed, {} is the smallest that works",
                reason.rule, reason.allowed, reason.needed
            ),
        };
        page.led(INDENT, "- ", INDENT * 2, None, &text);
    }
}
