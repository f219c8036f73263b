//! Reading one mapping of a request: known fields, one value of a field, and every fault on the
//! way. Nothing here knows what the fields mean.

use std::collections::BTreeMap;
use std::path::PathBuf;
use std::sync::Arc;

use crate::catalog::yaml::{Node, NodeValue, Spot};
use crate::catalog::{Fault, Place, Severity, nearest_name};
use crate::quantity::{
    Decimal, FigureError, Money, Parse, Quantity, Range, Sign, parse_count, parse_number, shown,
};

use super::fields::{FieldDef, FieldForm, field_at, fields_of};
use super::flags::{flag_of, flag_text};

/// How faults speak of the input: by lines of a file, or by flags.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Voice {
    File,
    Flags,
}

/// Collects the faults of one request.
pub(super) struct Reader {
    file: Arc<PathBuf>,
    voice: Voice,
    faults: Vec<Fault>,
}

/// A mapping whose fields are all known, each there once, none of them empty.
pub(super) struct Group<'a> {
    pub(super) at: Spot,
    pub(super) path: String,
    /// Field name to value. An empty value is a fault already and is kept as `None`, so that it
    /// is not reported as missing too.
    fields: BTreeMap<&'static str, Option<&'a Node>>,
}

/// One field of a group.
pub(super) struct Entry<'a> {
    pub(super) node: &'a Node,
    pub(super) path: String,
}

impl Reader {
    pub(super) fn new(file: Arc<PathBuf>, voice: Voice) -> Self {
        Self { file, voice, faults: Vec::new() }
    }

    /// All faults, in the order in which they stand in the file.
    pub(super) fn into_faults(mut self) -> Vec<Fault> {
        self.faults.sort();
        self.faults.dedup();
        self.faults
    }

    pub(super) fn error(
        &mut self,
        at: Spot,
        path: &str,
        message: impl Into<String>,
        hint: impl Into<String>,
    ) {
        let field = match self.voice {
            Voice::Flags => {
                flag_of(path).map_or_else(|| path.to_owned(), |flag| format!("--{flag}"))
            }
            Voice::File => path.to_owned(),
        };
        self.faults.push(Fault {
            place: Place { file: Arc::clone(&self.file), line: at.line, column: at.column },
            severity: Severity::Error,
            record: Some("request".to_owned()),
            field: Some(field).filter(|field| !field.is_empty()),
            message: message.into(),
            hint: Some(hint.into()),
        });
    }

    /// A field as one would write it, for hints.
    pub(super) fn written(&self, path: &str, value: &str) -> String {
        match (self.voice, flag_of(path)) {
            (Voice::Flags, Some(flag)) => format!("`--{flag} {}`", flag_text(value)),
            _ => {
                let name = path.rsplit('.').next().unwrap_or(path);
                format!("`{name}: {value}`")
            }
        }
    }

    /// Two ends of a range as one would write them, for hints.
    pub(super) fn written_range(&self, path: &str, low: &str, high: &str) -> String {
        self.written(path, &format!("[{}, {}]", low.trim(), high.trim()))
    }

    /// Opens a mapping and checks its keys. `list_path` is the path in the field table
    /// (`outputs[]`), `path` the one for messages (`outputs[3]`).
    pub(super) fn group<'a>(
        &mut self,
        node: &'a Node,
        path: &str,
        list_path: &str,
    ) -> Option<Group<'a>> {
        let NodeValue::Mapping(entries) = &node.value else {
            let example = field_at(path).map_or("kind: request", |field| field.example);
            let message = format!("{} where fields are wanted", described(node));
            self.error(node.at, path, message, format!("write fields, such as {}", shown(example)));
            return None;
        };
        let mut fields: BTreeMap<&'static str, Option<&'a Node>> = BTreeMap::new();
        let mut first_at: BTreeMap<&str, Spot> = BTreeMap::new();
        for (key, value) in entries {
            let inner = joined(path, &key.text);
            let Some(def) = fields_of(list_path).find(|field| field.name() == key.text) else {
                self.unknown_field(key.at, &inner, &key.text, list_path);
                continue;
            };
            if let Some(first) = first_at.insert(&key.text, key.at) {
                let hint = match self.voice {
                    Voice::File => format!("the first is on line {}; keep one", first.line),
                    Voice::Flags => "keep one".to_owned(),
                };
                self.error(key.at, &inner, format!("{} is there twice", shown(&key.text)), hint);
                continue;
            }
            let value = if value.value == NodeValue::Null {
                let hint = format!("write {}, or leave it out", self.written(&inner, def.example));
                self.error(key.at, &inner, format!("{} has no value", shown(&key.text)), hint);
                None
            } else {
                Some(value)
            };
            fields.insert(def.name(), value);
        }
        Some(Group { at: node.at, path: path.to_owned(), fields })
    }

    fn unknown_field(&mut self, at: Spot, path: &str, name: &str, list_path: &str) {
        let elsewhere = super::fields::FIELDS.iter().find(|field| field.name() == name);
        let hint = match elsewhere {
            // A right name in the wrong place is more common than a misspelling.
            Some(field) if field.group().is_empty() => {
                format!("{} stands at the top of the request", shown(name))
            }
            Some(field) => format!("{} belongs under {}", shown(name), shown(field.group())),
            None => nearest_name(name, fields_of(list_path).map(FieldDef::name)).map_or_else(
                || "leave it out".to_owned(),
                |near| format!("the nearest known field is {}", shown(near)),
            ),
        };
        self.error(at, path, format!("unknown field {}", shown(name)), hint);
    }

    /// Whether a required field is there; a fault when it isn't.
    pub(super) fn require(&mut self, group: &Group<'_>, name: &str) -> bool {
        let there = group.fields.contains_key(name);
        if !there {
            let path = joined(&group.path, name);
            let example = field_at(&path).map_or("", |field| field.example);
            let hint = match self.voice {
                Voice::File => format!("add {}", self.written(&path, example)),
                Voice::Flags => format!("give {}", self.written(&path, example)),
            };
            self.error(group.at, &path, format!("no {}", shown(name)), hint);
        }
        there
    }

    /// The text of a field that holds one plain value.
    pub(super) fn scalar<'a>(&mut self, entry: &Entry<'a>) -> Option<&'a str> {
        match &entry.node.value {
            NodeValue::Scalar(text) => Some(text),
            _ => {
                let example = field_at(&entry.path).map_or("a text", |field| field.example);
                let hint = format!("write one value, such as {}", shown(example));
                let message = format!("{} where one value is wanted", described(entry.node));
                self.error(entry.node.at, &entry.path, message, hint);
                None
            }
        }
    }

    /// The items of a list field; an empty item is a fault.
    pub(super) fn items<'a>(&mut self, entry: &Entry<'a>) -> Option<Vec<Entry<'a>>> {
        let NodeValue::Sequence(nodes) = &entry.node.value else {
            let example = field_at(&entry.path).map_or("[…]", |field| field.example);
            let message = format!("{} where a list is wanted", described(entry.node));
            self.error(entry.node.at, &entry.path, message, format!("write {}", shown(example)));
            return None;
        };
        let mut items = Vec::with_capacity(nodes.len());
        for (index, node) in nodes.iter().enumerate() {
            let path = format!("{}[{index}]", entry.path);
            if node.value == NodeValue::Null {
                self.error(node.at, &path, "an empty list item", "write a value, or remove it");
            } else {
                items.push(Entry { node, path });
            }
        }
        Some(items)
    }

    /// Turns a figure error into a fault.
    pub(super) fn checked<T>(
        &mut self,
        entry: &Entry<'_>,
        read: Result<T, FigureError>,
    ) -> Option<T> {
        match read {
            Ok(value) => Some(value),
            Err(error) => {
                self.error(entry.node.at, &entry.path, error.message, error.hint);
                None
            }
        }
    }

    /// A figure with its unit; `None` when it is absent or a fault.
    pub(super) fn figure<Q: Parse>(
        &mut self,
        group: &Group<'_>,
        name: &str,
        sign: Sign,
    ) -> Option<Q> {
        let entry = group.entry(name)?;
        let text = self.scalar(&entry)?;
        self.checked(&entry, Q::parse_like(text, sign, example_figure(&entry.path)))
    }

    /// A range of figures; one figure stands for both ends.
    pub(super) fn range<Q: Parse + Quantity + PartialOrd>(
        &mut self,
        group: &Group<'_>,
        name: &str,
        sign: Sign,
    ) -> Option<Range<Q>> {
        let entry = group.entry(name)?;
        let example = example_figure(&entry.path);
        if let NodeValue::Scalar(text) = &entry.node.value {
            return self.checked(&entry, Q::parse_like(text, sign, example)).map(Range::point);
        }
        let [low, high] = self.ends(&entry)?;
        let (low_text, high_text) = (self.scalar(&low), self.scalar(&high));
        let low_end = self.checked(&low, Q::parse_like(low_text?, sign, example));
        let high_end = self.checked(&high, Q::parse_like(high_text?, sign, example));
        self.ordered(&entry, low_end?, high_end?, low_text?, high_text?)
    }

    /// The two items of a range.
    pub(super) fn ends<'a>(&mut self, entry: &Entry<'a>) -> Option<[Entry<'a>; 2]> {
        let example = field_at(&entry.path).map_or("", |field| field.example);
        let NodeValue::Sequence(nodes) = &entry.node.value else {
            let message = format!("{} where a range is wanted", described(entry.node));
            let hint = format!("write {}", self.written(&entry.path, example));
            self.error(entry.node.at, &entry.path, message, hint);
            return None;
        };
        let items = self.items(entry)?;
        let count = nodes.len();
        if let Ok(ends) = <[Entry<'a>; 2]>::try_from(items) {
            return Some(ends);
        }
        // With an empty item the count is right and the fault is known already.
        if count != 2 {
            let hint = format!(
                "write two figures, low first, such as {}",
                self.written(&entry.path, example)
            );
            let message = format!("a list of {count} where a range of two is wanted");
            self.error(entry.node.at, &entry.path, message, hint);
        }
        None
    }

    /// A range with its ends in order.
    pub(super) fn ordered<Q: Copy + PartialOrd>(
        &mut self,
        entry: &Entry<'_>,
        low: Q,
        high: Q,
        low_text: &str,
        high_text: &str,
    ) -> Option<Range<Q>> {
        let range = Range::new(low, high);
        if range.is_none() {
            let message = format!("{} is above {}", shown(low_text), shown(high_text));
            let hint = format!(
                "the low end comes first: write {}",
                self.written_range(&entry.path, high_text, low_text)
            );
            self.error(entry.node.at, &entry.path, message, hint);
        }
        range
    }

    /// A plain text that is not blank.
    pub(super) fn text(&mut self, group: &Group<'_>, name: &str) -> Option<String> {
        let entry = group.entry(name)?;
        self.entry_text(&entry)
    }

    fn entry_text(&mut self, entry: &Entry<'_>) -> Option<String> {
        let text = self.scalar(entry)?.trim();
        if text.is_empty() {
            let example = field_at(&entry.path).map_or("", |field| field.example);
            let hint = format!("write {}, or leave it out", self.written(&entry.path, example));
            self.error(entry.node.at, &entry.path, "an empty text", hint);
            return None;
        }
        Some(text.to_owned())
    }

    /// A list of texts.
    pub(super) fn texts(&mut self, group: &Group<'_>, name: &str) -> Option<Vec<String>> {
        let entry = group.entry(name)?;
        let items = self.items(&entry)?;
        let texts: Vec<Option<String>> = items.iter().map(|item| self.entry_text(item)).collect();
        texts.into_iter().collect()
    }

    /// One of the words that the field takes.
    pub(super) fn word(&mut self, group: &Group<'_>, name: &str) -> Option<&'static str> {
        let entry = group.entry(name)?;
        self.entry_word(&entry)
    }

    /// The word of a field or of an item of its list.
    pub(super) fn entry_word(&mut self, entry: &Entry<'_>) -> Option<&'static str> {
        let text = self.scalar(entry)?.trim();
        let words = match field_at(&entry.path)?.form {
            FieldForm::Word(words) | FieldForm::Words(words) => words,
            _ => return None,
        };
        let found = words.iter().find(|word| **word == text).copied();
        if found.is_none() {
            let known = words.iter().map(|word| shown(word)).collect::<Vec<_>>().join(", ");
            let near = nearest_name(text, words.iter().copied()).unwrap_or_default();
            let hint = if words.len() == 1 {
                format!("write {known}")
            } else {
                format!("write one of {known}; the nearest is {}", shown(near))
            };
            self.error(entry.node.at, &entry.path, format!("unknown word {}", shown(text)), hint);
        }
        found
    }

    /// `true` or `false`.
    pub(super) fn switch(&mut self, group: &Group<'_>, name: &str) -> Option<bool> {
        let entry = group.entry(name)?;
        // The spellings of YAML 1.2.2, 10.3.2 (core schema).
        match self.scalar(&entry)?.trim() {
            "true" | "True" | "TRUE" => Some(true),
            "false" | "False" | "FALSE" => Some(false),
            other => {
                let message = format!("{} is neither `true` nor `false`", shown(other));
                let meant = match other.to_lowercase().as_str() {
                    "yes" | "on" | "y" | "1" => "write `true`",
                    "no" | "off" | "n" | "0" => "write `false`",
                    _ => "write `true` or `false`",
                };
                self.error(entry.node.at, &entry.path, message, meant);
                None
            }
        }
    }

    /// A whole number within the limits of the field table.
    pub(super) fn count(&mut self, group: &Group<'_>, name: &str) -> Option<u64> {
        let entry = group.entry(name)?;
        let text = self.scalar(&entry)?;
        let count = self.checked(&entry, parse_count(text))?;
        let FieldForm::Count { least, most } = field_at(&entry.path)?.form else { return None };
        if (least..=most).contains(&count) {
            return Some(count);
        }
        let message = if count < least {
            format!("{} is less than {least}", shown(text))
        } else {
            format!("{} is more than {most}", shown(text))
        };
        let hint = format!("write a whole number from {least} to {most}");
        self.error(entry.node.at, &entry.path, message, hint);
        None
    }

    /// A number above zero without a unit.
    pub(super) fn number(&mut self, group: &Group<'_>, name: &str) -> Option<Decimal> {
        let entry = group.entry(name)?;
        let text = self.scalar(&entry)?;
        let example = field_at(&entry.path).map_or("1", |field| field.example);
        self.checked(&entry, parse_number(text, Sign::Positive, example))
    }

    /// An amount of money.
    pub(super) fn money(&mut self, group: &Group<'_>, name: &str) -> Option<Money> {
        let entry = group.entry(name)?;
        let text = self.scalar(&entry)?;
        self.checked(&entry, Money::parse(text))
    }
}

impl<'a> Group<'a> {
    /// A field that is there and not empty.
    pub(super) fn entry(&self, name: &str) -> Option<Entry<'a>> {
        let node = (*self.fields.get(name)?)?;
        Some(Entry { node, path: joined(&self.path, name) })
    }

    /// Whether the field is written at all.
    pub(super) fn has(&self, name: &str) -> bool {
        self.fields.contains_key(name)
    }
}

/// A field's path under a group's.
pub(super) fn joined(path: &str, name: &str) -> String {
    if path.is_empty() { name.to_owned() } else { format!("{path}.{name}") }
}

/// A figure of a field's usual size: its example, or the first end of that.
fn example_figure(path: &str) -> &'static str {
    let example = field_at(path).map_or("", |field| field.example);
    let ends = example.strip_prefix('[').and_then(|list| list.split(',').next());
    ends.unwrap_or(example)
}

/// What a node is, for messages.
pub(super) fn described(node: &Node) -> String {
    match &node.value {
        NodeValue::Null => "an empty value".to_owned(),
        NodeValue::Scalar(text) => shown(text),
        NodeValue::Sequence(items) => format!("a list of {}", items.len()),
        NodeValue::Mapping(_) => "a mapping".to_owned(),
    }
}
