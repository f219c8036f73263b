//! The outputs asked for, and the expansion of `currents`.

use std::collections::{BTreeMap, BTreeSet};

use crate::catalog::yaml::{NodeValue, Spot};
use crate::quantity::{Amperes, Decimal, Exact, Ppm, Range, Sign, Volts, parse_number, shown};

use super::conditions::{LoadFigure, ReadConditions, read_load_figure};
use super::model::{Load, Output};
use super::reader::{Entry, Group, Reader};

/// Most outputs of a request, after expansion.
const MOST_OUTPUTS: usize = 10_000;

/// Prefixes in the names of expanded outputs, by power of ten.
const PREFIXES: [(i64, &str); 10] = [
    (-15, "f"),
    (-12, "p"),
    (-9, "n"),
    (-6, "u"),
    (-3, "m"),
    (0, ""),
    (3, "k"),
    (6, "M"),
    (9, "G"),
    (12, "T"),
];

pub(super) fn read_outputs(
    top: &Group<'_>,
    conditions: Option<&ReadConditions>,
    reader: &mut Reader,
) -> Option<Vec<Output>> {
    if !reader.require(top, "outputs") {
        return None;
    }
    let list = top.entry("outputs")?;
    let items = reader.items(&list)?;
    if matches!(&list.node.value, NodeValue::Sequence(nodes) if nodes.is_empty()) {
        let hint = "ask for at least one output";
        reader.error(list.node.at, &list.path, "an empty list of outputs", hint);
        return None;
    }
    let mut outputs: Vec<Output> = Vec::new();
    let mut names: BTreeMap<String, Spot> = BTreeMap::new();
    let mut uncalibrated: Vec<String> = Vec::new();
    for item in &items {
        let Some(group) = reader.group(item.node, &item.path, "outputs[]") else { continue };
        let room = MOST_OUTPUTS.saturating_sub(outputs.len());
        if room == 0 {
            too_many(item.node.at, &item.path, reader);
            break;
        }
        let Some(new) = read_output(&group, room, reader) else { continue };
        let Some(name_entry) = group.entry("name") else { continue };
        refuse_repeated_names(&name_entry, &new, &mut names, reader);
        if let Some(read) = conditions
            && let Some(point) = read.checked.calibrated_load
            && let Some(outside) = new.iter().find(|output| !within(point, output))
        {
            uncalibrated.push(outside.name.clone());
        }
        outputs.extend(new);
    }
    if let (Some(first), Some((at, text))) =
        (uncalibrated.first(), conditions.and_then(|read| read.calibrated_load_at.as_ref()))
    {
        let others = match uncalibrated.len() - 1 {
            0 => String::new(),
            more => format!(" and of {more} more"),
        };
        let message =
            format!("{} is outside the load of output {}{others}", shown(text), shown(first));
        let hint = "write a figure within every output's load, or leave it out for the middle";
        reader.error(*at, "conditions.calibrated_load", message, hint);
    }
    Some(outputs)
}

fn too_many(at: Spot, path: &str, reader: &mut Reader) {
    let message = format!("more than {MOST_OUTPUTS} outputs in one request");
    reader.error(at, path, message, "ask for fewer currents, or split the request");
}

/// Whether a calibration point lies in an output's load.
fn within(point: Load, output: &Output) -> bool {
    match (point, output.load) {
        (Load::Voltage(at), Load::Voltage(range)) => range.contains(at.low()),
        (Load::Resistance(at), Load::Resistance(range)) => range.contains(at.low()),
        (point, load) => {
            let current = output.current.value();
            let at = point.voltage(current).low();
            let range = load.voltage(current);
            // A product of two rounded figures may miss an end by its own rounding.
            let slack = Volts::new(1e-9 * at.abs().max(range.high().abs()).value());
            range.low() - slack <= at && at <= range.high() + slack
        }
    }
}

fn refuse_repeated_names(
    entry: &Entry<'_>,
    new: &[Output],
    names: &mut BTreeMap<String, Spot>,
    reader: &mut Reader,
) {
    let mut repeated: Option<(String, Spot)> = None;
    for output in new {
        match names.get(&output.name) {
            Some(first) if repeated.is_none() => repeated = Some((output.name.clone(), *first)),
            Some(_) => {}
            None => {
                names.insert(output.name.clone(), entry.node.at);
            }
        }
    }
    if let Some((name, first)) = repeated {
        let message = format!("the output name {} is there twice", shown(&name));
        let hint = format!("the first is on line {}; give each output its own name", first.line);
        reader.error(entry.node.at, &entry.path, message, hint);
    }
}

/// The outputs of one entry of the list; `None` after a fault.
fn read_output(group: &Group<'_>, room: usize, reader: &mut Reader) -> Option<Vec<Output>> {
    for name in ["name", "accuracy", "load", "quantity"] {
        reader.require(group, name);
    }
    let name = reader.text(group, "name");
    let currents = read_currents(group, room, reader);
    let accuracy: Option<Ppm> = reader.figure(group, "accuracy", Sign::PositiveBound);
    let load = read_load(group, reader);
    let quantity = reader.count(group, "quantity");
    let (name, currents, accuracy, load, quantity) =
        (name?, currents?, accuracy?, load?, quantity?);
    let output = |name: String, current| Output { name, current, accuracy, load, quantity };
    Some(match currents {
        Currents::One(current) => vec![output(name, current)],
        Currents::Several(several) => several
            .into_iter()
            .map(|current| {
                output(format!("{name}@{}", short_text(current)), Exact::from_decimal(current))
            })
            .collect(),
    })
}

enum Currents {
    One(Exact<Amperes>),
    /// Rising, in amperes.
    Several(Vec<Decimal>),
}

fn read_currents(group: &Group<'_>, room: usize, reader: &mut Reader) -> Option<Currents> {
    if !group.has("currents") {
        reader.require(group, "current");
        return reader.figure(group, "current", Sign::Positive).map(Currents::One);
    }
    if let Some(current) = group.entry("current") {
        let hint = "keep `current` for one output, or `currents` for several";
        reader.error(current.node.at, &current.path, "both `current` and `currents`", hint);
    }
    let entry = group.entry("currents")?;
    let group = reader.group(entry.node, &entry.path, "outputs[].currents")?;
    for name in ["mantissas", "from", "to"] {
        reader.require(&group, name);
    }
    let mantissas = read_mantissas(&group, reader);
    let from: Option<Exact<Amperes>> = reader.figure(&group, "from", Sign::Positive);
    let to: Option<Exact<Amperes>> = reader.figure(&group, "to", Sign::Positive);
    let (mantissas, from, to) = (mantissas?, from?.decimal(), to?.decimal());
    if from > to {
        let at = group.entry("from")?;
        let message = "`from` is above `to`";
        reader.error(at.node.at, &at.path, message, "swap the two: the low end is `from`");
        return None;
    }
    let absurd = mantissas.len() > MOST_OUTPUTS;
    let currents = if absurd { Vec::new() } else { expanded(&mantissas, from, to) };
    if absurd || currents.len() > room {
        too_many(entry.node.at, &entry.path, reader);
        return None;
    }
    if currents.is_empty() {
        let hint = "widen the range, or name the currents one by one";
        reader.error(entry.node.at, &entry.path, "no current lies between the ends", hint);
        return None;
    }
    Some(Currents::Several(currents))
}

/// The mantissas: at least 1 and below 10, each once.
fn read_mantissas(group: &Group<'_>, reader: &mut Reader) -> Option<BTreeSet<Decimal>> {
    let entry = group.entry("mantissas")?;
    let items = reader.items(&entry)?;
    if matches!(&entry.node.value, NodeValue::Sequence(nodes) if nodes.is_empty()) {
        let hint = "write at least one, such as `mantissas: [1, 2, 5]`";
        reader.error(entry.node.at, &entry.path, "an empty list", hint);
        return None;
    }
    let mut mantissas = BTreeSet::new();
    let mut sound = true;
    for item in &items {
        let text = reader.scalar(item);
        let read =
            text.and_then(|text| reader.checked(item, parse_number(text, Sign::Positive, "2.5")));
        let (Some(text), Some(value)) = (text, read) else {
            sound = false;
            continue;
        };
        if value < Decimal::new(1, 0) || value >= Decimal::new(1, 1) {
            let message = format!("the mantissa {} is not from 1 to below 10", shown(text));
            let one = Decimal::new(value.mantissa(), 0);
            let fixed = Decimal::new(
                one.mantissa(),
                i32::try_from(-one.leading_power()).unwrap_or_default(),
            );
            let hint =
                format!("write {}: the decades follow from the ends", shown(&fixed.to_string()));
            reader.error(item.node.at, &item.path, message, hint);
            sound = false;
        } else if !mantissas.insert(value) {
            let message = format!("the mantissa {} is there twice", shown(text));
            reader.error(item.node.at, &item.path, message, "keep one");
            sound = false;
        }
    }
    (sound && items.len() == mantissas.len()).then_some(mantissas)
}

/// All m · 10^k from `from` to `to`, ends included, rising.
fn expanded(mantissas: &BTreeSet<Decimal>, from: Decimal, to: Decimal) -> Vec<Decimal> {
    let mut currents = Vec::new();
    for power in from.leading_power()..=to.leading_power() {
        let Ok(power) = i32::try_from(power) else { continue };
        currents.extend(
            mantissas
                .iter()
                .map(|m| Decimal::new(m.mantissa(), m.exponent() + power))
                .filter(|current| from <= *current && *current <= to),
        );
    }
    currents
}

/// A current with the prefix that leaves one to three digits before the point, exactly and
/// without a space: `500nA`.
fn short_text(current: Decimal) -> String {
    let power = (current.leading_power().div_euclid(3) * 3).clamp(-15, 12);
    let prefix = PREFIXES.iter().find(|(p, _)| *p == power).map_or("", |(_, name)| name);
    let shift = i32::try_from(power).unwrap_or_default();
    let scaled = Decimal::new(current.mantissa(), current.exponent() - shift);
    format!("{scaled}{prefix}A")
}

fn read_load(group: &Group<'_>, reader: &mut Reader) -> Option<Load> {
    let entry = group.entry("load")?;
    if let NodeValue::Scalar(text) = &entry.node.value {
        return Some(match read_load_figure(&entry, text, reader)? {
            LoadFigure::Volts(volts) => Load::Voltage(Range::point(volts)),
            LoadFigure::Ohms(ohms) => Load::Resistance(Range::point(ohms)),
        });
    }
    let [low, high] = reader.ends(&entry)?;
    let (low_text, high_text) = (reader.scalar(&low), reader.scalar(&high));
    let low_end = read_load_figure(&low, low_text?, reader);
    let high_end = read_load_figure(&high, high_text?, reader);
    match (low_end?, high_end?) {
        (LoadFigure::Volts(a), LoadFigure::Volts(b)) => {
            reader.ordered(&entry, a, b, low_text?, high_text?).map(Load::Voltage)
        }
        (LoadFigure::Ohms(a), LoadFigure::Ohms(b)) => {
            reader.ordered(&entry, a, b, low_text?, high_text?).map(Load::Resistance)
        }
        _ => {
            let hint = format!(
                "write both in volts or both in ohms, such as {}",
                reader.written(&entry.path, "[0 ohm, 400 ohm]")
            );
            reader.error(entry.node.at, &entry.path, "a load of volts and ohms", hint);
            None
        }
    }
}
