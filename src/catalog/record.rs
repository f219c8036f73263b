//! One document read as a record: every fault that it has, or the types that it offers.

use std::collections::BTreeMap;
use std::path::PathBuf;
use std::sync::Arc;

use crate::quantity::shown;

use super::build::{Offer, build};
use super::codes::code_pattern;
use super::doubts::add_doubts;
use super::fault::{Fault, Severity};
use super::model::{Kind, Place};
use super::schema::{Fallback, FieldForm, KIND_WORDS, field_named, fields, why_not};
use super::suggest::nearest_name;
use super::value::{Sink, describe, read_value, sequence, unknown_field};
use super::view::{Entries, Entry, Grade, View};
use super::yaml::{Key, Node, NodeValue, Spot};

/// What became of one document.
#[derive(Debug)]
pub(super) struct ReadRecord {
    /// How messages call it.
    pub(super) name: String,
    pub(super) place: Place,
    /// Its types; none when there is an error among the faults.
    pub(super) offers: Vec<Offer>,
    pub(super) faults: Vec<Fault>,
}

/// Reads a document. `number` counts the documents of its file, from 1.
pub(super) fn read_record(file: &Arc<PathBuf>, number: usize, node: &Node) -> ReadRecord {
    let mut sink = Sink { file: Arc::clone(file), record: None, faults: Vec::new() };
    let name = name_of(node).unwrap_or_else(|| format!("document {number}"));
    sink.record = Some(name.clone());
    let offers = read_types(node, &name, &mut sink).unwrap_or_default();
    let place = sink.place(node.at);
    let failed = sink.faults.iter().any(|fault| fault.severity == Severity::Error);
    ReadRecord {
        name,
        place,
        offers: if failed { Vec::new() } else { offers },
        faults: sink.faults,
    }
}

/// The part, for messages, even where the record is faulty.
fn name_of(node: &Node) -> Option<String> {
    let NodeValue::Mapping(entries) = &node.value else { return None };
    entries.iter().find(|(key, _)| key.text == "part").and_then(|(_, part)| match &part.value {
        NodeValue::Scalar(text) if !text.trim().is_empty() => {
            Some(shown(text).trim_matches('`').to_owned())
        }
        _ => None,
    })
}

fn read_types(node: &Node, name: &str, sink: &mut Sink) -> Option<Vec<Offer>> {
    let NodeValue::Mapping(written) = &node.value else {
        let message = format!("{} where a record is wanted", describe(node));
        sink.error(node.at, "", message, "write fields, the first `kind: reference` or the like");
        return None;
    };
    let kind = read_kind(written, node.at, sink)?;
    let shared = read_entries(kind, written, "", sink);
    let (grades, grades_sound) = read_grades(kind, written, sink);
    report_missing(kind, &shared, &grades, grades_sound, node.at, sink);

    let mut offers = Vec::new();
    let plain = [View { kind, shared: &shared, grade: None }];
    let graded: Vec<View<'_>> =
        grades.iter().map(|grade| View { kind, shared: &shared, grade: Some(grade) }).collect();
    let has_grades = written.iter().any(|(key, _)| key.text == "grades");
    let views = if has_grades { graded.as_slice() } else { plain.as_slice() };
    for view in views {
        let before = sink.faults.len();
        check_relations(*view, sink);
        let pattern = code_pattern(*view, sink);
        label_by_grade(*view, name, before, sink);
        let at = view.grade.map_or(node.at, |grade| grade.at);
        if let Some(pattern) = pattern {
            offers.extend(build(*view, pattern, sink.place(at)));
        }
    }
    if sink.faults.is_empty() {
        if offers.len() != views.len() {
            // The tables and the builder would have to disagree for this.
            sink.error(node.at, "", "the record cannot be built", "please report this record");
            return None;
        }
        add_doubts(views, node.at, sink);
    }
    Some(offers)
}

fn read_kind(written: &[(Key, Node)], start: Spot, sink: &mut Sink) -> Option<Kind> {
    let all = KIND_WORDS.join("`, `");
    let Some((_, node)) = written.iter().find(|(key, _)| key.text == "kind") else {
        let near = written.iter().map(|(key, _)| key).find(|key| key.text.to_lowercase() == "kind");
        let at = near.map_or(start, |key| key.at);
        sink.error(at, "kind", "`kind` is missing", format!("write one of `{all}`"));
        return None;
    };
    let NodeValue::Scalar(word) = &node.value else {
        let message = format!("{} where a word is wanted", describe(node));
        sink.error(node.at, "kind", message, format!("write one of `{all}`"));
        return None;
    };
    let kind = Kind::ALL.into_iter().find(|kind| kind.word() == word);
    if kind.is_none() {
        let hint = if word == "request" {
            "a request is a file of its own, outside the catalogue's folder".to_owned()
        } else {
            let nearest = nearest_name(word, KIND_WORDS).unwrap_or_default();
            format!("the nearest is `{nearest}`; there are `{all}`")
        };
        sink.error(node.at, "kind", format!("{} is no kind of record", shown(word)), hint);
    }
    kind
}

/// Reads the fields of a record, or of a grade when `prefix` is its path.
fn read_entries(kind: Kind, written: &[(Key, Node)], prefix: &str, sink: &mut Sink) -> Entries {
    let in_grade = !prefix.is_empty();
    let mut entries = Entries::new();
    let mut lines: BTreeMap<&str, usize> = BTreeMap::new();
    for (key, node) in written {
        let name = key.text.as_str();
        let path = if in_grade { format!("{prefix}.{name}") } else { name.to_owned() };
        let field = field_named(kind, name);
        let grade_name = in_grade && name == "grade";
        let known = field.is_some() || grade_name;
        if known && let Some(first) = lines.insert(name, key.at.line) {
            let hint = format!("keep one; the other is on line {first}");
            sink.error(key.at, &path, format!("`{name}` stands twice"), hint);
            continue;
        }
        match field {
            Some(field) if !in_grade || field.in_grades() => {
                let value = read_value(field, node, &path, sink);
                entries.insert(field.name, Entry { value, at: node.at, path });
            }
            Some(_) => {
                let hint = "a grade is a selection of its record's part; move it to the record";
                sink.error(key.at, &path, format!("`{name}` in a grade"), hint);
            }
            None if grade_name => {}
            None => report_unknown(kind, key, &path, in_grade, sink),
        }
    }
    entries
}

fn report_unknown(kind: Kind, key: &Key, path: &str, in_grade: bool, sink: &mut Sink) {
    if let Some(why) = why_not(kind, &key.text) {
        sink.error(key.at, path, format!("unknown field {}", shown(&key.text)), why);
    } else if key.text == "grade" {
        let hint = "grades are listed: `grades: [{grade: A, …}]`";
        sink.error(key.at, path, "unknown field `grade`", hint);
    } else {
        let known = fields(kind).filter(|field| !in_grade || field.in_grades());
        unknown_field(key, path, known.map(|field| field.name), sink);
    }
}

/// The grades, and whether all of them could be told apart.
fn read_grades(kind: Kind, written: &[(Key, Node)], sink: &mut Sink) -> (Vec<Grade>, bool) {
    let Some((_, node)) = written.iter().find(|(key, _)| key.text == "grades") else {
        return (Vec::new(), true);
    };
    let wanted = "a list of grades, such as `[{grade: A, tempco: 5 ppm/K}]`, or leave it out";
    let Some(items) = sequence(node, "grades", wanted, sink) else { return (Vec::new(), false) };
    let part = sink.record.clone();
    let mut grades: Vec<Grade> = Vec::with_capacity(items.len());
    let mut sound = true;
    for (index, item) in items.iter().enumerate() {
        let path = format!("grades[{index}]");
        let NodeValue::Mapping(fields) = &item.value else {
            let message = format!("{} where a grade is wanted", describe(item));
            sink.error(item.at, &path, message, "write `{grade: A, …}`");
            sound = false;
            continue;
        };
        let name = read_grade_name(fields, item.at, &path, sink);
        if let (Some(part), Some(name)) = (&part, &name) {
            sink.record = Some(format!("{part} grade {name}"));
        }
        let entries = read_entries(kind, fields, &path, sink);
        sink.record.clone_from(&part);
        let Some(name) = name else {
            sound = false;
            continue;
        };
        if let Some(first) = grades.iter().find(|grade| grade.name == name) {
            let message = format!("the grade {} stands twice", shown(&name));
            let hint = format!("name each grade once; the other is on line {}", first.at.line);
            sink.error(item.at, &format!("{path}.grade"), message, hint);
        }
        grades.push(Grade { name, at: item.at, path, entries });
    }
    (grades, sound)
}

fn read_grade_name(
    fields: &[(Key, Node)],
    at: Spot,
    path: &str,
    sink: &mut Sink,
) -> Option<String> {
    let path = format!("{path}.grade");
    let Some((_, node)) = fields.iter().find(|(key, _)| key.text == "grade") else {
        sink.error(at, &path, "`grade` is missing", "name the grade, `grade: A`");
        return None;
    };
    super::value::read_text(node, &path, sink)
}

/// Required fields, looked for after merging. A field that is missing everywhere is reported once.
fn report_missing(
    kind: Kind,
    shared: &Entries,
    grades: &[Grade],
    grades_sound: bool,
    start: Spot,
    sink: &mut Sink,
) {
    let part = sink.record.clone();
    let required = fields(kind).filter(|field| field.fallback == Fallback::Required);
    for field in required.filter(|field| !shared.contains_key(field.name)) {
        let name = field.name;
        let example = match field.form {
            FieldForm::Figure(dimension, _) => format!(", such as `{}`", dimension.form.example),
            _ => String::new(),
        };
        let hint = format!("write `{name}`: {}{example}", field.doc);
        let message = format!("`{name}` is missing");
        let lacking: Vec<&Grade> =
            grades.iter().filter(|grade| !grade.entries.contains_key(name)).collect();
        if !grades_sound && field.in_grades() {
            // It may stand in a grade that could not be read.
            continue;
        }
        if lacking.len() == grades.len() || !field.in_grades() {
            sink.error(start, name, message, hint);
            continue;
        }
        for grade in lacking {
            if let Some(part) = &part {
                sink.record = Some(format!("{part} grade {}", grade.name));
            }
            sink.error(grade.at, &format!("{}.{name}", grade.path), message.clone(), hint.clone());
        }
        sink.record.clone_from(&part);
    }
}

/// Relations between the figures of one type.
fn check_relations(view: View<'_>, sink: &mut Sink) {
    if view.kind != Kind::Amplifier {
        return;
    }
    let stated = (view.decimal("bias"), view.decimal("bias_over_range"));
    if let (Some(bias), Some(over_range)) = stated
        && over_range < bias
        && let Some(entry) =
            view.entry(if view.in_grade("bias_over_range") || !view.in_grade("bias") {
                "bias_over_range"
            } else {
                "bias"
            })
    {
        let message = "`bias_over_range` is below `bias`";
        let hint = "the range contains 25 degC, so its largest bias is no smaller";
        sink.error(entry.at, &entry.path, message, hint);
    }
}

/// Faults found on a merged type name its grade, unless they stand in the shared fields; those
/// are found again for every grade and kept once.
pub(super) fn label_by_grade(view: View<'_>, name: &str, before: usize, sink: &mut Sink) {
    let found = sink.faults.split_off(before.min(sink.faults.len()));
    for mut fault in found {
        let own = fault.field.as_deref().is_some_and(|field| field.starts_with("grades["));
        if let (true, Some(grade)) = (own, view.grade) {
            fault.record = Some(format!("{name} grade {}", grade.name));
        }
        if !sink.faults.contains(&fault) {
            sink.faults.push(fault);
        }
    }
}
