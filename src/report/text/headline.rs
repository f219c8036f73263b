//! The first line, and the line that says what is proved.

use super::figures::money;
use super::page::{Page, counted, plain, tied};
use crate::answers::{Choice, Status, Verdict};
use crate::quantity::Money;
use crate::report::Ink;

/// The status, the price and the size of the answer; the request's title under it.
pub(super) fn write(page: &mut Page, choice: &Choice) {
    let lead = format!("{}: ", choice.status.word());
    let ink = match choice.status {
        Status::Optimal => Ink::Good,
        Status::Gap => Ink::Bold,
        Status::Infeasible => Ink::Bad,
    };
    page.led(0, &lead, INDENT_OF_MORE, Some(ink), &summary(choice));
    if let Some(title) = &choice.title {
        page.wrapped(0, 0, &plain(title));
    }
}

const INDENT_OF_MORE: usize = 2;

fn summary(choice: &Choice) -> String {
    let total = choice.outputs.len();
    let failed =
        choice.outputs.iter().filter(|o| matches!(o.verdict, Verdict::Infeasible(_))).count();
    let cost = choice.totals.map(|(total, _)| money(&choice.currency, total));
    let lines = choice.purchase.as_ref().map_or(0, |bill| bill.lines.len());
    let lines = tied(&counted(lines as u64, "order line", "order lines"));
    let outputs = |number: usize| tied(&counted(number as u64, "output", "outputs"));
    match (cost, failed) {
        (Some(cost), 0) => {
            let gap = if choice.status == Status::Gap { above_bound(choice) } else { None };
            let gap = gap.map_or(String::new(), |percent| {
                format!("; stopped early, at most {percent} above the cheapest")
            });
            format!("{cost} for {}, {lines}{gap}", outputs(total))
        }
        (None, 0) => "every output has a design, but no common set keeps the rules on the \
                      purchase"
            .to_owned(),
        (_, failed) if failed == total && total == 1 => "no design passes".to_owned(),
        (_, failed) if failed == total => "no output has a design".to_owned(),
        (Some(cost), failed) => format!(
            "{} of {} without a design; the rest costs {cost}, {lines}",
            failed,
            outputs(total)
        ),
        (None, failed) => format!(
            "{} of {} without a design, and no common set of the rest keeps the rules on the \
             purchase",
            failed,
            outputs(total)
        ),
    }
}

/// How far the total can be above the true minimum, in percent, rounded up.
fn above_bound(choice: &Choice) -> Option<String> {
    let (total, bound) = choice.totals?;
    let over = (total - bound).micros();
    if bound.micros() <= 0 || over <= 0 {
        return None;
    }
    // Tenths of a percent, rounded up in whole numbers.
    let tenths = over.checked_mul(1000)?.checked_add(bound.micros() - 1)? / bound.micros();
    Some(tied(&format!("{}.{} %", tenths / 10, tenths % 10)))
}

/// What the search proved about the total.
pub(super) fn write_proof(page: &mut Page, choice: &Choice) {
    let Some((total, bound)) = choice.totals else { return };
    if choice.outputs.iter().all(|o| matches!(o.verdict, Verdict::Infeasible(_))) {
        return;
    }
    page.gap();
    page.led(0, "proof: ", INDENT_OF_MORE, Some(Ink::Bold), &proof(choice, total, bound));
}

fn proof(choice: &Choice, total: Money, bound: Money) -> String {
    let bound_text = money(&choice.currency, bound);
    if bound >= total && choice.status == Status::Infeasible {
        return format!(
            "for the outputs that have a design, no set of parts costs less than {bound_text}"
        );
    }
    if bound >= total {
        return format!("optimal; no set of parts that passes costs less than {bound_text}");
    }
    let gap = above_bound(choice)
        .map_or(String::new(), |percent| format!(", so this one is at most {percent} too dear"));
    format!(
        "not finished; no set of parts that passes costs less than {bound_text}{gap}. A longer \
         time limit may close the gap"
    )
}
