//! What stands in a field, read and checked by the field's form.

use std::collections::BTreeMap;
use std::path::PathBuf;
use std::sync::Arc;

use crate::quantity::{
    Amperes, Celsius, Decimal, FigureError, Money, Ohms, Quantity, Series, Sign, Volts,
    parse_count, shown,
};

use super::fault::{Fault, Severity};
use super::model::{Place, PriceBreak, PriceList};
use super::schema::{Dimension, Field, FieldForm};
use super::suggest::nearest_name;
use super::yaml::{Key, Node, NodeValue, Spot};

/// Collects the faults of one record.
pub(super) struct Sink {
    pub(super) file: Arc<PathBuf>,
    /// How messages call the record.
    pub(super) record: Option<String>,
    pub(super) faults: Vec<Fault>,
}

impl Sink {
    pub(super) fn place(&self, at: Spot) -> Place {
        Place { file: Arc::clone(&self.file), line: at.line, column: at.column }
    }

    pub(super) fn error(
        &mut self,
        at: Spot,
        field: &str,
        message: impl Into<String>,
        hint: impl Into<String>,
    ) {
        self.faults.push(Fault {
            place: self.place(at),
            severity: Severity::Error,
            record: self.record.clone(),
            field: Some(field.to_owned()).filter(|field| !field.is_empty()),
            message: message.into(),
            hint: Some(hint.into()),
        });
    }

    fn figure_error(&mut self, at: Spot, field: &str, error: FigureError) {
        self.error(at, field, error.message, error.hint);
    }
}

/// A field's content.
#[derive(Clone, Debug, PartialEq)]
pub(super) enum Value {
    Text(String),
    Word(&'static str),
    Date(jiff::civil::Date),
    Count(u64),
    Figure(Decimal),
    Range(Decimal, Decimal),
    Price(PriceList),
    Values(ValueSet),
    Drop(Vec<(Decimal, Decimal)>),
}

/// The values of a resistor record.
#[derive(Clone, Debug, PartialEq)]
pub(super) enum ValueSet {
    /// Rising, each once.
    Listed { values: Vec<Decimal>, written_rising: bool },
    /// Any value in a range.
    Any { low: Decimal, high: Decimal, digits: u32 },
}

/// Reads a field's node. `None` after an error.
pub(super) fn read_value(field: &Field, node: &Node, path: &str, sink: &mut Sink) -> Option<Value> {
    match field.form {
        FieldForm::Text => read_text(node, path, sink).map(Value::Text),
        FieldForm::Word(words) => read_word(words, node, path, sink).map(Value::Word),
        FieldForm::Date => read_date(node, path, sink).map(Value::Date),
        FieldForm::Count { least, most } => {
            read_count(least, most, node, path, sink).map(Value::Count)
        }
        FieldForm::Figure(dimension, sign) => {
            read_figure(dimension, sign, node, path, sink).map(Value::Figure)
        }
        FieldForm::Range(dimension, sign) => {
            read_range(dimension, sign, node, path, sink).map(|(low, high)| Value::Range(low, high))
        }
        FieldForm::PriceList => read_price_list(node, path, sink).map(Value::Price),
        FieldForm::Price => read_single_price(node, path, sink).map(Value::Price),
        FieldForm::Values => read_values(node, path, sink).map(Value::Values),
        FieldForm::DropCurve => read_drop(node, path, sink).map(Value::Drop),
        // The grades are records within the record and are read as such.
        FieldForm::Grades => None,
    }
}

/// What a node is, for messages.
pub(super) fn describe(node: &Node) -> String {
    match &node.value {
        NodeValue::Null => "an empty value".to_owned(),
        NodeValue::Scalar(text) => shown(text),
        NodeValue::Sequence(_) => "a list".to_owned(),
        NodeValue::Mapping(_) => "a mapping".to_owned(),
    }
}

/// The text of a scalar; `wanted` says what should stand here.
fn scalar<'n>(
    node: &'n Node,
    path: &str,
    wanted: &str,
    example: &str,
    sink: &mut Sink,
) -> Option<&'n str> {
    match &node.value {
        NodeValue::Scalar(text) => return Some(text),
        NodeValue::Null => {
            let hint = format!("write {wanted}, {example}, or leave the field out");
            sink.error(node.at, path, "an empty value", hint);
        }
        NodeValue::Sequence(_) | NodeValue::Mapping(_) => {
            let message = format!("{} where {wanted} is wanted", describe(node));
            sink.error(node.at, path, message, format!("write {wanted}, {example}"));
        }
    }
    None
}

/// The items of a list; `wanted` says what should stand here.
pub(super) fn sequence<'n>(
    node: &'n Node,
    path: &str,
    wanted: &str,
    sink: &mut Sink,
) -> Option<&'n [Node]> {
    match &node.value {
        NodeValue::Sequence(items) if !items.is_empty() => return Some(items),
        NodeValue::Sequence(_) => {
            sink.error(node.at, path, "an empty list", format!("write {wanted}"));
        }
        _ => {
            let message = format!("{} where a list is wanted", describe(node));
            sink.error(node.at, path, message, format!("write {wanted}"));
        }
    }
    None
}

/// The fields of a small mapping that has exactly these, all required.
fn parts<'n, const N: usize>(
    entries: &'n [(Key, Node)],
    at: Spot,
    path: &str,
    names: [&'static str; N],
    sink: &mut Sink,
) -> Option<[&'n Node; N]> {
    let mut found: BTreeMap<&str, &Node> = BTreeMap::new();
    let mut sound = true;
    for (key, node) in entries {
        let inner = format!("{path}.{}", key.text);
        if !names.contains(&key.text.as_str()) {
            unknown_field(key, &inner, names, sink);
            sound = false;
        } else if found.insert(&key.text, node).is_some() {
            sink.error(key.at, &inner, format!("{} stands twice", shown(&key.text)), "keep one");
            sound = false;
        }
    }
    for name in names.iter().filter(|name| !found.contains_key(*name)) {
        let all = names.join("`, `");
        let message = format!("`{name}` is missing");
        sink.error(at, &format!("{path}.{name}"), message, format!("write all of `{all}`"));
        sound = false;
    }
    let nodes = names.map(|name| found.get(name).copied());
    if !sound || nodes.iter().any(Option::is_none) {
        return None;
    }
    // Checked just above; the fallback is never used.
    Some(nodes.map(|node| node.unwrap_or(&NOTHING)))
}

static NOTHING: Node = Node { at: Spot { line: 1, column: 1 }, value: NodeValue::Null };

/// Reports a field that is not known, with the nearest known name.
pub(super) fn unknown_field<'k>(
    key: &Key,
    path: &str,
    known: impl IntoIterator<Item = &'k str>,
    sink: &mut Sink,
) {
    let hint = nearest_name(&key.text, known)
        .map_or_else(|| "leave it out".to_owned(), |name| format!("the nearest known is `{name}`"));
    sink.error(key.at, path, format!("unknown field {}", shown(&key.text)), hint);
}

pub(super) fn read_text(node: &Node, path: &str, sink: &mut Sink) -> Option<String> {
    let text = scalar(node, path, "a text", "in quotes if it has special characters", sink)?;
    // Folded and literal texts end with a line break that nobody means.
    let text = text.trim().replace(['\n', '\r'], " ");
    if text.is_empty() {
        sink.error(node.at, path, "an empty text", "write a text, or leave the field out");
        return None;
    }
    if text.contains(char::is_control) {
        sink.error(node.at, path, "a control character", "write plain characters only");
        return None;
    }
    Some(text)
}

fn read_word(
    words: &'static [&'static str],
    node: &Node,
    path: &str,
    sink: &mut Sink,
) -> Option<&'static str> {
    let all = words.join("`, `");
    let text = scalar(node, path, "one word", &format!("of `{all}`"), sink)?;
    let found = words.iter().copied().find(|word| *word == text);
    if found.is_none() {
        let nearest = nearest_name(text, words.iter().copied()).unwrap_or_default();
        let message = format!("{} is not one of `{all}`", shown(text));
        sink.error(node.at, path, message, format!("the nearest is `{nearest}`"));
    }
    found
}

fn read_date(node: &Node, path: &str, sink: &mut Sink) -> Option<jiff::civil::Date> {
    let text = scalar(node, path, "a date", "`2025-03-04`", sink)?;
    // The library takes longer forms, with a time, too.
    let plain = text.len() == 10 && text.bytes().all(|b| b.is_ascii_digit() || b == b'-');
    let date = plain.then(|| text.parse().ok()).flatten();
    if date.is_none() {
        let message = format!("{} is not a date", shown(text));
        sink.error(node.at, path, message, "write year-month-day, `2025-03-04`");
    }
    date
}

fn read_count(least: u64, most: u64, node: &Node, path: &str, sink: &mut Sink) -> Option<u64> {
    let text = scalar(node, path, "a whole number", "`100`", sink)?;
    let count = match parse_count(text) {
        Ok(count) => count,
        Err(error) => {
            sink.figure_error(node.at, path, error);
            return None;
        }
    };
    if count < least || count > most {
        let message = format!("{} is out of range", shown(text));
        sink.error(node.at, path, message, format!("write a whole number from {least} to {most}"));
        return None;
    }
    Some(count)
}

fn read_figure(
    dimension: Dimension,
    sign: Sign,
    node: &Node,
    path: &str,
    sink: &mut Sink,
) -> Option<Decimal> {
    let example = format!("`{}`", dimension.form.example);
    let text = scalar(node, path, dimension.form.name, &example, sink)?;
    match (dimension.parse)(text, sign) {
        Ok(figure) => Some(figure),
        Err(error) => {
            sink.figure_error(node.at, path, error);
            None
        }
    }
}

/// 0 K on the Celsius scale (SI Brochure, 9th edition, 2019, 2.3.1).
const ABSOLUTE_ZERO: Decimal = Decimal::new(-27315, -2);

fn read_range(
    dimension: Dimension,
    sign: Sign,
    node: &Node,
    path: &str,
    sink: &mut Sink,
) -> Option<(Decimal, Decimal)> {
    let example = dimension.form.example;
    let wanted = format!("a list of two figures, low first, such as `[{example}, {example}]`");
    if let NodeValue::Scalar(text) = &node.value {
        let message = format!("one figure {} where a range is wanted", shown(text));
        sink.error(node.at, path, message, format!("write {wanted}"));
        return None;
    }
    let items = sequence(node, path, &wanted, sink)?;
    let [low, high] = items else {
        let message = format!("a list of {} where a range is wanted", items.len());
        sink.error(node.at, path, message, format!("write {wanted}"));
        return None;
    };
    let low_end = read_figure(dimension, sign, low, &format!("{path}[0]"), sink);
    let high_end = read_figure(dimension, sign, high, &format!("{path}[1]"), sink);
    let (low_end, high_end) = (low_end?, high_end?);
    if dimension.form.name == Celsius::FORM.name && low_end < ABSOLUTE_ZERO {
        let message = format!("{} is below absolute zero", describe(low));
        sink.error(low.at, &format!("{path}[0]"), message, "write a temperature, `-40 degC`");
        return None;
    }
    if low_end > high_end {
        let hint = format!("low end first: swap {} and {}", describe(low), describe(high));
        sink.error(node.at, path, "the low end is above the high end", hint);
        return None;
    }
    Some((low_end, high_end))
}

fn read_money(node: &Node, path: &str, sink: &mut Sink) -> Option<Money> {
    let text = scalar(node, path, "a price", "`4.10`", sink)?;
    match Money::parse(text) {
        Ok(money) => Some(money),
        Err(error) => {
            sink.figure_error(node.at, path, error);
            None
        }
    }
}

fn read_single_price(node: &Node, path: &str, sink: &mut Sink) -> Option<PriceList> {
    if matches!(node.value, NodeValue::Sequence(_)) {
        let hint = "an adjustment is paid per output built: write one plain number, `1.45`";
        sink.error(node.at, path, "a list where one price is wanted", hint);
        return None;
    }
    let each = read_money(node, path, sink)?;
    PriceList::new(vec![PriceBreak { from: 1, each }])
}

fn read_price_list(node: &Node, path: &str, sink: &mut Sink) -> Option<PriceList> {
    if matches!(node.value, NodeValue::Scalar(_) | NodeValue::Null) {
        return read_single_price(node, path, sink);
    }
    let example = "a plain number, or a list such as `[{from: 1, each: 4.10}]`";
    let items = sequence(node, path, example, sink)?;
    let mut breaks: Vec<PriceBreak> = Vec::with_capacity(items.len());
    let mut sound = true;
    for (index, item) in items.iter().enumerate() {
        let inner = format!("{path}[{index}]");
        let Some((from, from_at, each)) = read_price_break(item, &inner, sink) else {
            sound = false;
            continue;
        };
        let problem = match breaks.last() {
            None if index == 0 && from != 1 => Some("the first `from` is not 1"),
            Some(last) if last.from >= from => Some("`from` does not rise"),
            _ => None,
        };
        if let Some(message) = problem {
            let hint = "start with `from: 1` and let `from` rise";
            sink.error(from_at, &format!("{inner}.from"), message, hint);
            sound = false;
        }
        breaks.push(PriceBreak { from, each });
    }
    PriceList::new(breaks).filter(|_| sound)
}

fn read_price_break(item: &Node, path: &str, sink: &mut Sink) -> Option<(u64, Spot, Money)> {
    let NodeValue::Mapping(entries) = &item.value else {
        let message = format!("{} where a price break is wanted", describe(item));
        sink.error(item.at, path, message, "write `{from: 100, each: 0.62}`");
        return None;
    };
    let [from, each] = parts(entries, item.at, path, ["from", "each"], sink)?;
    let count = read_count(1, super::schema::MOST, from, &format!("{path}.from"), sink);
    let money = read_money(each, &format!("{path}.each"), sink);
    Some((count?, from.at, money?))
}

fn read_values(node: &Node, path: &str, sink: &mut Sink) -> Option<ValueSet> {
    let forms = "`{series: E96, from: 10 ohm, to: 1 Mohm}`, `{list: [1 kohm]}` or \
                 `{any: [10 ohm, 100 kohm], digits: 6}`";
    let NodeValue::Mapping(entries) = &node.value else {
        let message = format!("{} where a mapping is wanted", describe(node));
        sink.error(node.at, path, message, format!("write {forms}"));
        return None;
    };
    let has = |name: &str| entries.iter().any(|(key, _)| key.text == name);
    let ways = [has("series"), has("list"), has("any")];
    if ways.iter().filter(|way| **way).count() > 1 {
        sink.error(node.at, path, "more than one of `series`, `list`, `any`", "keep one");
        return None;
    }
    match ways {
        [true, ..] => {
            let names = ["series", "from", "to"];
            let [series, from, to] = parts(entries, node.at, path, names, sink)?;
            read_series(series, from, to, path, sink)
        }
        [_, true, _] => {
            let [list] = parts(entries, node.at, path, ["list"], sink)?;
            read_value_list(list, &format!("{path}.list"), sink)
        }
        [.., true] => {
            let [any, digits] = parts(entries, node.at, path, ["any", "digits"], sink)?;
            let ohms = Dimension::of::<Ohms>();
            let range = read_range(ohms, Sign::Positive, any, &format!("{path}.any"), sink);
            let digits = read_count(1, 9, digits, &format!("{path}.digits"), sink);
            let (low, high) = range?;
            Some(ValueSet::Any { low, high, digits: u32::try_from(digits?).ok()? })
        }
        _ => {
            let known = ["series", "from", "to", "list", "any", "digits"];
            let before = sink.faults.len();
            for (key, _) in entries.iter().filter(|(key, _)| !known.contains(&key.text.as_str())) {
                unknown_field(key, &format!("{path}.{}", key.text), known, sink);
            }
            // A misspelt name is the likelier reason, and told alone.
            if sink.faults.len() == before {
                let message = "none of `series`, `list`, `any`";
                sink.error(node.at, path, message, format!("write {forms}"));
            }
            None
        }
    }
}

fn read_series(
    series: &Node,
    from: &Node,
    to: &Node,
    path: &str,
    sink: &mut Sink,
) -> Option<ValueSet> {
    let ohms = Dimension::of::<Ohms>();
    let low = read_figure(ohms, Sign::Positive, from, &format!("{path}.from"), sink);
    let high = read_figure(ohms, Sign::Positive, to, &format!("{path}.to"), sink);
    let inner = format!("{path}.series");
    let text = scalar(series, &inner, "a series of IEC 60063", "`E96`", sink)?;
    let series = match Series::parse(text) {
        Ok(found) => found,
        Err(error) => {
            sink.figure_error(series.at, &inner, error);
            return None;
        }
    };
    match series.values(low?, high?) {
        Ok(values) if values.is_empty() => {
            let message = format!("no value of {} lies between the ends", series.word());
            sink.error(from.at, path, message, "widen the range, or list the values");
            None
        }
        Ok(values) => Some(ValueSet::Listed { values, written_rising: true }),
        Err(error) => {
            sink.figure_error(from.at, path, error);
            None
        }
    }
}

fn read_value_list(list: &Node, path: &str, sink: &mut Sink) -> Option<ValueSet> {
    let items = sequence(list, path, "the values, such as `[1 kohm, 2 kohm]`", sink)?;
    let ohms = Dimension::of::<Ohms>();
    let mut seen: BTreeMap<Decimal, usize> = BTreeMap::new();
    let mut written_rising = true;
    let mut sound = true;
    for (index, item) in items.iter().enumerate() {
        let inner = format!("{path}[{index}]");
        let Some(value) = read_figure(ohms, Sign::Positive, item, &inner, sink) else {
            sound = false;
            continue;
        };
        written_rising &= seen.last_key_value().is_none_or(|(largest, _)| *largest < value);
        if let Some(first) = seen.insert(value, index) {
            let message = format!("{} stands twice", describe(item));
            sink.error(item.at, &inner, message, format!("it is also item {first} of the list"));
            sound = false;
        }
    }
    sound.then(|| ValueSet::Listed { values: seen.into_keys().collect(), written_rising })
}

fn read_drop(node: &Node, path: &str, sink: &mut Sink) -> Option<Vec<(Decimal, Decimal)>> {
    let example = "a list of pairs such as `[[1 uA, 0.25 V], [1 mA, 0.6 V]]`";
    let items = sequence(node, path, example, sink)?;
    let mut points: Vec<(Decimal, Decimal)> = Vec::with_capacity(items.len());
    let mut sound = true;
    for (index, item) in items.iter().enumerate() {
        let inner = format!("{path}[{index}]");
        let pair = match &item.value {
            NodeValue::Sequence(pair) => pair.as_slice(),
            _ => &[],
        };
        let [current, drop] = pair else {
            let message = format!("{} where a pair of current and drop is wanted", describe(item));
            sink.error(item.at, &inner, message, "write `[1 mA, 0.6 V]`");
            sound = false;
            continue;
        };
        let amperes = Dimension::of::<Amperes>();
        let i = read_figure(amperes, Sign::Positive, current, &format!("{inner}[0]"), sink);
        let volts = Dimension::of::<Volts>();
        let v = read_figure(volts, Sign::Positive, drop, &format!("{inner}[1]"), sink);
        let (Some(i), Some(v)) = (i, v) else {
            sound = false;
            continue;
        };
        if let Some((last_i, last_v)) = points.last() {
            let falls = [(i <= *last_i, current, 0, "current"), (v <= *last_v, drop, 1, "drop")];
            for (falls, figure, part, what) in falls {
                if falls {
                    let message = format!("the {what} {} does not rise", describe(figure));
                    let hint = "let current and drop rise from point to point";
                    sink.error(figure.at, &format!("{inner}[{part}]"), message, hint);
                    sound = false;
                }
            }
        }
        points.push((i, v));
    }
    sound.then_some(points)
}
