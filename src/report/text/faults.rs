//! Faults of the user's files: place first, so that an editor can jump there.

use super::page::{Page, counted, plain};
use crate::catalog::{Fault, Severity};
use crate::report::{Ink, Screen};

/// All faults by place, each once, and a line that counts them.
#[must_use]
pub fn faults(faults: &[Fault], screen: Screen) -> String {
    let mut page = Page::new(screen);
    write(&mut page, faults);
    if !faults.is_empty() {
        page.line(0, &summary(faults));
    }
    page.finish()
}

/// The faults by place, each once.
pub(super) fn write(page: &mut Page, faults: &[Fault]) {
    let mut sorted: Vec<&Fault> = faults.iter().collect();
    sorted.sort();
    sorted.dedup();
    for fault in sorted {
        write_fault(page, fault);
    }
}

/// `2 errors, 1 doubt`.
pub(super) fn summary(faults: &[Fault]) -> String {
    let number = |severity| faults.iter().filter(|fault| fault.severity == severity).count() as u64;
    let errors = number(Severity::Error);
    let doubts = number(Severity::Doubt);
    let errors_text = counted(errors, "error", "errors");
    let doubts_text = counted(doubts, "doubt", "doubts");
    match (errors, doubts) {
        (_, 0) => errors_text,
        (0, _) => doubts_text,
        _ => format!("{errors_text}, {doubts_text}"),
    }
}

fn write_fault(page: &mut Page, fault: &Fault) {
    let (word, ink) = match fault.severity {
        Severity::Error => ("error", Ink::Bad),
        Severity::Doubt => ("doubt", Ink::Bold),
    };
    let lead = format!("{}: {word}: ", place(fault));
    let text = format!("{}{}", subject(fault), plain(&fault.message));
    page.led(0, &lead, 4, Some(ink), &text);
    if let Some(hint) = &fault.hint {
        page.led(4, "hint: ", 10, None, &plain(hint));
    }
}

/// `file:line:column`; what has no line (a folder, the command line) goes without.
fn place(fault: &Fault) -> String {
    let file = plain(&fault.place.file.display().to_string());
    if fault.place.line == 0 {
        file
    } else {
        format!("{file}:{}:{}", fault.place.line, fault.place.column)
    }
}

/// `RECORD, FIELD: `.
fn subject(fault: &Fault) -> String {
    match (&fault.record, &fault.field) {
        (Some(record), Some(field)) => format!("{}, {}: ", plain(record), plain(field)),
        (Some(one), None) | (None, Some(one)) => format!("{}: ", plain(one)),
        (None, None) => String::new(),
    }
}
