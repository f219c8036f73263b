//! Notes and cautions, last.

use std::collections::{BTreeMap, BTreeSet};

use super::page::{INDENT, Page, plain, tied};
use super::words;
use crate::answers::{Choice, Verdict};
use crate::circuit::Evaluation;
use crate::report::Ink;

/// What the records lack, remarks on terms of a family, and the notes of the answer.
pub(super) fn write(page: &mut Page, choice: &Choice) {
    let evaluations: Vec<&Evaluation> = choice
        .outputs
        .iter()
        .filter_map(|output| match &output.verdict {
            Verdict::Chosen(_, evaluation) => Some(evaluation.as_ref()),
            Verdict::NoCommonSet | Verdict::Infeasible(_) => None,
        })
        .collect();
    let mut notes = not_stated(&evaluations);
    // One output has its remarks under its budget.
    if choice.outputs.len() > 1 {
        notes.extend(term_remarks(&evaluations));
    }
    notes.extend(choice.notes.iter().map(|note| plain(note)));
    if notes.is_empty() {
        return;
    }
    page.heading("Notes", "");
    for note in notes {
        // A danger to life must not look like the other notes.
        match note.strip_prefix(DANGER) {
            Some(rest) => {
                page.led(INDENT, &format!("- {DANGER} "), INDENT * 2, Some(Ink::Bad), rest)
            }
            None => page.led(INDENT, "- ", INDENT * 2, None, &note),
        }
    }
}

/// How a note on a danger to life starts.
const DANGER: &str = "Danger:";

/// The figures that are not counted because no record states them, by part.
fn not_stated(evaluations: &[&Evaluation]) -> Vec<String> {
    let mut parts: BTreeMap<&str, BTreeSet<&str>> = BTreeMap::new();
    for figure in evaluations.iter().flat_map(|evaluation| &evaluation.not_stated) {
        parts.entry(&figure.order_code).or_default().insert(figure.field);
    }
    let note = |(code, fields): (&str, BTreeSet<&str>)| {
        let fields: Vec<&str> = fields.into_iter().collect();
        format!("not stated for {}, so not counted: {}", plain(code), fields.join(", "))
    };
    parts.into_iter().map(note).collect()
}

/// Remarks on terms that count, each once, with the terms that carry it.
fn term_remarks(evaluations: &[&Evaluation]) -> Vec<String> {
    let mut remarks: Vec<(&str, Vec<&str>)> = Vec::new();
    let lines = evaluations.iter().flat_map(|evaluation| &evaluation.terms);
    for line in lines.filter(|line| line.ppm.value() > 0.0) {
        let Some(note) = &line.note else { continue };
        let name = line.term.def().name;
        match remarks.iter_mut().find(|(known, _)| known == note) {
            Some((_, names)) if names.contains(&name) => {}
            Some((_, names)) => names.push(name),
            None => remarks.push((note, vec![name])),
        }
    }
    let text = |(note, names): (&str, Vec<&str>)| {
        let names: Vec<String> = names.iter().map(|name| tied(&words(name))).collect();
        format!("{}: {}", names.join(", "), plain(note))
    };
    remarks.into_iter().map(text).collect()
}
