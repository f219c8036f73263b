//! What one output is built from.

use super::figures::{network_ohms, nominal_ohms};
use super::page::{Page, plain, tied};
use crate::answers::{ChosenDesign, ChosenElement};
use crate::circuit::Connection;

/// Width of the labels of a design's parts.
pub(super) const LABEL: usize = 10;

/// All parts, one a line.
pub(super) fn write(page: &mut Page, design: &ChosenDesign) {
    page.field("reference", LABEL, &plain(&design.reference));
    page.field("amplifier", LABEL, &plain(&design.amplifier));
    page.field("resistor", LABEL, &network(design));
    page.field("lift", LABEL, &lift(design).unwrap_or_else(|| "none".to_owned()));
    let adjustment = design.adjustment.as_deref().map_or_else(|| "none".to_owned(), plain);
    page.field("adjustment", LABEL, &adjustment);
}

/// All parts in one sentence, only those there are.
pub(super) fn sentence(design: &ChosenDesign) -> String {
    let mut text =
        format!("{}, {}, {}", plain(&design.reference), plain(&design.amplifier), network(design));
    if let Some(lift) = lift(design) {
        text.push_str(&format!(", lift {lift}"));
    }
    if let Some(adjustment) = &design.adjustment {
        text.push_str(&format!(", adjusted by {}", plain(adjustment)));
    }
    text
}

/// `2 × CODE`.
pub(super) fn lift(design: &ChosenDesign) -> Option<String> {
    design.lift.as_ref().map(|(code, count)| several(u64::from(*count), &plain(code)))
}

/// The set resistor: its elements, how they are joined, and what they make together.
pub(super) fn network(design: &ChosenDesign) -> String {
    let joined = match design.connection {
        Connection::Single => {
            let codes = design.elements.iter().map(|element| plain(&element.order_code));
            let codes: Vec<String> = codes.collect();
            return format!("{}, {}", codes.join(" + "), tied(&nominal_ohms(design.ohms)));
        }
        Connection::Series => "in series",
        Connection::Parallel => "in parallel",
    };
    let mut groups: Vec<(u64, &ChosenElement)> = Vec::new();
    for element in &design.elements {
        match groups.iter_mut().find(|(_, known)| *known == element) {
            Some((count, _)) => *count += 1,
            None => groups.push((1, element)),
        }
    }
    let groups: Vec<String> = groups
        .iter()
        .map(|(count, element)| {
            let value = tied(&format!("({})", nominal_ohms(element.ohms)));
            format!("{} {value}", several(*count, &plain(&element.order_code)))
        })
        .collect();
    format!("{} {joined}, together {}", groups.join(" + "), tied(&network_ohms(design.ohms)))
}

fn several(count: u64, code: &str) -> String {
    if count == 1 { code.to_owned() } else { format!("{}{code}", tied(&format!("{count} × "))) }
}
