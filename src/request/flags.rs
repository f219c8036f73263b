//! A request of one output from command line flags. The flags become the same tree that a file
//! becomes, and the same reader reads it.

use std::path::PathBuf;
use std::sync::Arc;

use crate::catalog::Fault;
use crate::catalog::yaml::{Key, Node, NodeValue, Spot};
use crate::quantity::shown;

use super::fields::{FIELDS, FieldDef, FieldForm};
use super::model::Request;
use super::read::read_request;
use super::reader::{Reader, Voice};

/// A flag that stands for one field of a request.
#[derive(Clone, Copy, Debug)]
pub struct FlagDef {
    /// Its name without the dashes, such as `negative-rail`.
    pub name: &'static str,
    /// The field for which it stands.
    pub field: &'static FieldDef,
    /// A value as it would be typed, such as `14V..16V`.
    pub example: &'static str,
}

impl FlagDef {
    /// Whether the field is `true` or `false`, so that the flag alone can mean `true`.
    #[must_use]
    pub const fn is_switch(&self) -> bool {
        matches!(self.field.form, FieldForm::Switch)
    }

    /// What counts when the flag is not given, as it would be written; a file has no default for
    /// the name and the quantity.
    #[must_use]
    pub fn default_text(&self) -> Option<&'static str> {
        match self.name {
            "name" => Some(DEFAULT_NAME),
            "quantity" => Some(DEFAULT_QUANTITY),
            _ => self.field.default,
        }
    }
}

/// Flag names, the paths of their fields, and examples, in the order of the help text.
const TABLE: [(&str, &str, &str); 26] = [
    ("name", "outputs[].name", "pt100"),
    ("current", "outputs[].current", "1mA"),
    ("accuracy", "outputs[].accuracy", "0.05%"),
    ("load", "outputs[].load", "0V..1V"),
    ("quantity", "outputs[].quantity", "100"),
    ("currency", "currency", "EUR"),
    ("supply", "conditions.supply", "14V..16V"),
    ("negative-rail", "conditions.negative_rail", "-5.5V..-4.5V"),
    ("ambient", "conditions.ambient", "-20degC..50degC"),
    ("calibrated-at", "conditions.calibrated_at", "25degC"),
    ("calibrated-supply", "conditions.calibrated_supply", "15V"),
    ("calibrated-load", "conditions.calibrated_load", "0V"),
    ("service", "conditions.service", "8760h"),
    ("insulation", "conditions.insulation", "100Gohm"),
    ("guarded", "conditions.guarded", "true"),
    ("thermal-emf", "conditions.thermal_emf", "2uV"),
    ("wiring", "conditions.wiring", "20mohm"),
    ("margin", "conditions.margin", "50mV"),
    ("power-derating", "conditions.power_derating", "0.5"),
    ("box-reading", "conditions.box_reading", "guaranteed"),
    ("quiescent-max", "conditions.quiescent_max", "5mA"),
    ("method", "budget.method", "rss"),
    ("coverage", "budget.coverage", "2"),
    ("network-elements", "network_elements", "2"),
    ("line-cost", "purchase.line_cost", "15.00"),
    ("placement-cost", "purchase.placement_cost", "0.04"),
];

/// The name of the output when `--name` is not given.
pub const DEFAULT_NAME: &str = "output";

/// How many are built when `--quantity` is not given.
pub const DEFAULT_QUANTITY: &str = "1";

/// All flags that describe a request, in the order of the help text. `current`, `accuracy`,
/// `load`, `currency` and `supply` are needed; the name defaults to [`DEFAULT_NAME`], the quantity
/// to [`DEFAULT_QUANTITY`], the rest as in a file.
#[must_use]
pub fn request_flags() -> Vec<FlagDef> {
    TABLE
        .iter()
        .filter_map(|(name, path, example)| {
            let field = FIELDS.iter().find(|field| field.path == *path)?;
            Some(FlagDef { name, field, example })
        })
        .collect()
}

/// The flag for a field's path as it stands in a fault (`outputs[0].load[1]`).
pub(super) fn flag_of(path: &str) -> Option<&'static str> {
    let field = super::fields::field_at(path)?;
    TABLE.iter().find(|(_, known, _)| *known == field.path).map(|(name, ..)| *name)
}

/// A value of a file as it would be typed behind a flag: `[14 V, 16 V]` is `14V..16V`.
pub(super) fn flag_text(value: &str) -> String {
    let inner = value.trim().trim_start_matches('[').trim_end_matches(']');
    let ends: Vec<String> =
        inner.split(',').map(|end| end.split_whitespace().collect::<String>()).collect();
    ends.join("..")
}

/// Reads a request from pairs of flag name (without dashes) and text, in the order typed. A text
/// `a..b` is a range.
///
/// # Errors
/// All faults. Their `field` is the flag (`--supply`), their file is `command line` and their
/// line is 0.
pub fn from_flags(flags: &[(String, String)]) -> Result<Request, Vec<Fault>> {
    let mut reader = Reader::new(Arc::new(PathBuf::from("command line")), Voice::Flags);
    let mut tree = Tree::default();
    for (name, text) in flags {
        match TABLE.iter().find(|(known, ..)| known == name) {
            Some((_, path, _)) => tree.put(path, text),
            None => {
                let message = format!("unknown flag {}", shown(&format!("--{name}")));
                reader.error(NOWHERE, "", message, "see the help text for the flags there are");
            }
        }
    }
    let request = read_request(&tree.finish(), &mut reader);
    let faults = reader.into_faults();
    match request {
        Some(request) if faults.is_empty() => Ok(request),
        _ => Err(faults),
    }
}

/// Flags have no place in a file.
const NOWHERE: Spot = Spot { line: 0, column: 0 };

/// The parts of the document that flags can fill.
#[derive(Default)]
struct Tree {
    top: Vec<(Key, Node)>,
    budget: Vec<(Key, Node)>,
    conditions: Vec<(Key, Node)>,
    purchase: Vec<(Key, Node)>,
    output: Vec<(Key, Node)>,
}

impl Tree {
    fn put(&mut self, path: &str, text: &str) {
        let Some(field) = FIELDS.iter().find(|field| field.path == path) else { return };
        let node = match (field.form, text.split_once("..")) {
            (FieldForm::Range(_) | FieldForm::Load, Some((low, high))) => {
                NodeValue::Sequence(vec![scalar(low), scalar(high)])
            }
            _ => NodeValue::Scalar(text.to_owned()),
        };
        let group = match field.group() {
            "budget" => &mut self.budget,
            "conditions" => &mut self.conditions,
            "purchase" => &mut self.purchase,
            "outputs[]" => &mut self.output,
            _ => &mut self.top,
        };
        group.push((key(field.name()), Node { at: NOWHERE, value: node }));
    }

    fn finish(mut self) -> Node {
        for (name, default) in [("name", DEFAULT_NAME), ("quantity", DEFAULT_QUANTITY)] {
            if !self.output.iter().any(|(key, _)| key.text == name) {
                self.output.push((key(name), scalar(default)));
            }
        }
        let mut top = self.top;
        top.push((key("kind"), scalar("request")));
        top.push((key("conditions"), mapping(self.conditions)));
        for (name, group) in [("budget", self.budget), ("purchase", self.purchase)] {
            if !group.is_empty() {
                top.push((key(name), mapping(group)));
            }
        }
        let outputs = NodeValue::Sequence(vec![mapping(self.output)]);
        top.push((key("outputs"), Node { at: NOWHERE, value: outputs }));
        mapping(top)
    }
}

fn key(text: &str) -> Key {
    Key { at: NOWHERE, text: text.to_owned() }
}

fn scalar(text: &str) -> Node {
    Node { at: NOWHERE, value: NodeValue::Scalar(text.to_owned()) }
}

fn mapping(entries: Vec<(Key, Node)>) -> Node {
    Node { at: NOWHERE, value: NodeValue::Mapping(entries) }
}
