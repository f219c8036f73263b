//! The fields of a request, once: the reader takes its known names from here, and the command
//! line, the JSON Schema and the documentation take the rest.

use crate::catalog::Lifecycle;
use crate::quantity::{Amperes, Celsius, Form, Ohms, Ppm, Quantity, Seconds, Volts};

/// What stands in a field.
#[derive(Clone, Copy, Debug)]
pub enum FieldForm {
    /// Any plain text.
    Text,
    /// A list of plain texts.
    Texts,
    /// One of these words.
    Word(&'static [&'static str]),
    /// A list of these words.
    Words(&'static [&'static str]),
    /// `true` or `false`.
    Switch,
    /// A whole number.
    Count {
        /// The smallest allowed.
        least: u64,
        /// The largest allowed.
        most: u64,
    },
    /// A number above 0 without a unit.
    Number,
    /// A list of numbers without a unit.
    Numbers,
    /// An amount of money: a plain decimal of at most 6 decimals.
    Money,
    /// A figure with its unit.
    Figure(&'static Form),
    /// A list of two figures, low first, or one figure that stands for both ends.
    Range(&'static Form),
    /// A range in volts or in ohms.
    Load,
    /// One figure in volts or in ohms.
    LoadPoint,
    /// A mapping of currencies to what one unit of each costs.
    Rates,
    /// A mapping with fields of its own.
    Group,
    /// A list of mappings with fields of their own.
    Groups,
}

/// One field.
#[derive(Clone, Copy, Debug)]
pub struct FieldDef {
    /// Its path, such as `conditions.supply`; list items have `[]`: `outputs[].current`.
    pub path: &'static str,
    /// What stands in it.
    pub form: FieldForm,
    /// Whether its group needs it. (`outputs[].current` or `.currents`: one of the two.)
    pub required: bool,
    /// What counts when it is left out, as it would be written.
    pub default: Option<&'static str>,
    /// What it means, in one line.
    pub doc: &'static str,
    /// A value as it would be written in a file.
    pub example: &'static str,
}

impl FieldDef {
    /// The last part of the path: the key in the file.
    #[must_use]
    pub fn name(&self) -> &'static str {
        self.path.rsplit('.').next().unwrap_or(self.path)
    }

    /// The path of the group that it stands in, empty for the document.
    #[must_use]
    pub fn group(&self) -> &'static str {
        self.path.rsplit_once('.').map_or("", |(group, _)| group)
    }
}

const METHODS: &[&str] = &["worst-case", "rss", "gum"];
const BOX_READINGS: &[&str] = &["slope", "guaranteed"];
const UNSTATED: &[&str] = &["note", "reject"];
const LIFECYCLES: &[&str] = &[
    Lifecycle::ALL[0].word(),
    Lifecycle::ALL[1].word(),
    Lifecycle::ALL[2].word(),
    Lifecycle::ALL[3].word(),
];

/// Largest whole number in a request.
const MOST: u64 = 1_000_000_000;

const fn required(
    path: &'static str,
    form: FieldForm,
    example: &'static str,
    doc: &'static str,
) -> FieldDef {
    FieldDef { path, form, required: true, default: None, doc, example }
}

const fn optional(
    path: &'static str,
    form: FieldForm,
    example: &'static str,
    doc: &'static str,
) -> FieldDef {
    FieldDef { path, form, required: false, default: None, doc, example }
}

const fn defaulted(
    path: &'static str,
    form: FieldForm,
    default: &'static str,
    example: &'static str,
    doc: &'static str,
) -> FieldDef {
    FieldDef { path, form, required: false, default: Some(default), doc, example }
}

/// All fields, in the order in which a request is best written.
pub const FIELDS: &[FieldDef] = &[
    required("kind", FieldForm::Word(&["request"]), "request", "what the document is"),
    optional("title", FieldForm::Text, "Borehole string, excitation board", "heading of reports"),
    required("currency", FieldForm::Text, "EUR", "currency of all totals"),
    optional(
        "exchange",
        FieldForm::Rates,
        "{USD: 0.92}",
        "what one unit of another currency costs, for prices stated in it",
    ),
    optional("budget", FieldForm::Group, "{method: rss}", "how the error terms are combined"),
    defaulted(
        "budget.method",
        FieldForm::Word(METHODS),
        "worst-case",
        "rss",
        "how the error terms are combined into a total",
    ),
    defaulted(
        "budget.coverage",
        FieldForm::Number,
        "2",
        "2",
        "coverage factor of the gum method (only with it)",
    ),
    required(
        "conditions",
        FieldForm::Group,
        "{supply: [14.5 V, 16 V]}",
        "conditions common to all outputs",
    ),
    required(
        "conditions.supply",
        FieldForm::Range(Volts::FORM),
        "[14.5 V, 16 V]",
        "positive rail V+, above 0 V",
    ),
    defaulted(
        "conditions.negative_rail",
        FieldForm::Range(Volts::FORM),
        "0 V",
        "[-5.5 V, -4.5 V]",
        "negative rail V-, never above 0 V",
    ),
    defaulted(
        "conditions.ambient",
        FieldForm::Range(Celsius::FORM),
        "25 degC",
        "[-20 degC, 50 degC]",
        "ambient temperature",
    ),
    defaulted(
        "conditions.calibrated_at",
        FieldForm::Figure(Celsius::FORM),
        "25 degC",
        "25 degC",
        "temperature at the adjustment",
    ),
    optional(
        "conditions.calibrated_supply",
        FieldForm::Figure(Volts::FORM),
        "15 V",
        "positive rail at the adjustment; the middle of the supply when left out",
    ),
    optional(
        "conditions.calibrated_load",
        FieldForm::LoadPoint,
        "0 V",
        "load at the adjustment, in volts or ohms; the middle of the load when left out",
    ),
    defaulted(
        "conditions.service",
        FieldForm::Figure(Seconds::FORM),
        "0 h",
        "8760 h",
        "time since assembly or adjustment",
    ),
    optional(
        "conditions.insulation",
        FieldForm::Figure(Ohms::FORM),
        "100 Gohm",
        "insulation of the board, across R and from X to the worst rail; not counted when left out",
    ),
    defaulted(
        "conditions.guarded",
        FieldForm::Switch,
        "false",
        "true",
        "whether a ring driven by the amplifier takes the leaks",
    ),
    defaulted(
        "conditions.thermal_emf",
        FieldForm::Figure(Volts::FORM),
        "0 uV",
        "2 uV",
        "thermal EMF in the loop",
    ),
    defaulted(
        "conditions.wiring",
        FieldForm::Figure(Ohms::FORM),
        "0 ohm",
        "20 mohm",
        "joints and tracks in series with R",
    ),
    defaulted(
        "conditions.margin",
        FieldForm::Figure(Volts::FORM),
        "50 mV",
        "50 mV",
        "added to the amplifier's swing_low and swing_high",
    ),
    defaulted(
        "conditions.power_derating",
        FieldForm::Number,
        "0.5",
        "0.5",
        "share of a resistor's rated power that may be used, above 0 and at most 1",
    ),
    defaulted(
        "conditions.box_reading",
        FieldForm::Word(BOX_READINGS),
        "slope",
        "guaranteed",
        "how a reference's box tempco is read",
    ),
    optional(
        "conditions.quiescent_max",
        FieldForm::Figure(Amperes::FORM),
        "5 mA",
        "most quiescent current of reference and amplifier together, per output",
    ),
    optional("rules", FieldForm::Group, "{in_stock: true}", "which parts may be used"),
    defaulted(
        "rules.lifecycle",
        FieldForm::Words(LIFECYCLES),
        "[active, last-buy]",
        "[active]",
        "allowed sale states",
    ),
    optional("rules.lead_time_max", FieldForm::Figure(Seconds::FORM), "16 wk", "longest lead time"),
    defaulted(
        "rules.in_stock",
        FieldForm::Switch,
        "false",
        "true",
        "whether the bought quantity has to be in stock",
    ),
    optional("rules.makers", FieldForm::Texts, "[Maker A, Maker B]", "only parts of these makers"),
    optional("rules.packages", FieldForm::Texts, "[SO-8, 0805]", "only these packages"),
    defaulted(
        "rules.forbid",
        FieldForm::Texts,
        "[]",
        "[REF-A*]",
        "order codes not to use; * stands for any text",
    ),
    defaulted(
        "rules.require",
        FieldForm::Texts,
        "[]",
        "[REF-A*]",
        "of each kind of part named here, only these order codes; * stands for any text",
    ),
    defaulted(
        "rules.unstated",
        FieldForm::Word(UNSTATED),
        "note",
        "reject",
        "what is done with a part that lacks a figure which the budget needs",
    ),
    defaulted(
        "network_elements",
        FieldForm::Count { least: 1, most: 3 },
        "2",
        "2",
        "most resistors in one network",
    ),
    defaulted(
        "adjustments",
        FieldForm::Switch,
        "true",
        "false",
        "whether the search may use adjustments",
    ),
    optional("purchase", FieldForm::Group, "{line_cost: 15.00}", "how the purchase is counted"),
    defaulted(
        "purchase.line_cost",
        FieldForm::Money,
        "0",
        "15.00",
        "cost of each distinct order code bought",
    ),
    defaulted(
        "purchase.placement_cost",
        FieldForm::Money,
        "0",
        "0.04",
        "cost of placing one component, on each unit built",
    ),
    optional(
        "purchase.lines_max",
        FieldForm::Count { least: 1, most: MOST },
        "12",
        "most order lines",
    ),
    required(
        "outputs",
        FieldForm::Groups,
        "[{name: pt100, current: 1 mA, accuracy: 400 ppm, load: [0 V, 1 V], quantity: 250}]",
        "the current sources asked for",
    ),
    required("outputs[].name", FieldForm::Text, "pt100", "name of the output, unique"),
    required("outputs[].current", FieldForm::Figure(Amperes::FORM), "1 mA", "nominal current"),
    optional(
        "outputs[].currents",
        FieldForm::Group,
        "{mantissas: [1, 2, 5], from: 1 uA, to: 100 uA}",
        "several outputs that differ in the current only, instead of `current`",
    ),
    required(
        "outputs[].currents.mantissas",
        FieldForm::Numbers,
        "[1, 2, 5]",
        "currents wanted in a decade: at least 1 and below 10, each once",
    ),
    required("outputs[].currents.from", FieldForm::Figure(Amperes::FORM), "1 uA", "lowest current"),
    required(
        "outputs[].currents.to",
        FieldForm::Figure(Amperes::FORM),
        "100 uA",
        "highest current",
    ),
    required(
        "outputs[].accuracy",
        FieldForm::Figure(Ppm::FORM),
        "400 ppm",
        "largest total error, of the nominal current",
    ),
    required("outputs[].load", FieldForm::Load, "[0 V, 1 V]", "load, in volts or in ohms"),
    required(
        "outputs[].quantity",
        FieldForm::Count { least: 1, most: MOST },
        "250",
        "how many are built",
    ),
];

/// The fields of one group, by the group's path (`""` for the document).
pub fn fields_of(group: &str) -> impl Iterator<Item = &'static FieldDef> {
    FIELDS.iter().filter(move |field| field.group() == group)
}

/// The definition of a path as it stands in a fault: `outputs[3].load[0]` is `outputs[].load`.
#[must_use]
pub fn field_at(path: &str) -> Option<&'static FieldDef> {
    let mut plain = String::with_capacity(path.len());
    let mut inside = false;
    for c in path.chars() {
        match c {
            '[' => inside = true,
            ']' => inside = false,
            '.' if !inside => plain.push(c),
            _ if !inside => plain.push(c),
            _ => continue,
        }
        if c == '[' {
            plain.push_str("[]");
        }
    }
    let trimmed = plain.strip_suffix("[]").unwrap_or(&plain);
    FIELDS.iter().find(|field| field.path == trimmed)
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::collections::BTreeSet;

    #[test]
    fn paths_are_unique_and_every_group_is_a_field_before_its_own_fields() {
        let mut seen = BTreeSet::from([""]);
        for field in FIELDS {
            let group = field.group().trim_end_matches("[]");
            assert!(seen.contains(group), "{}", field.path);
            assert!(seen.insert(field.path), "{} twice", field.path);
            assert!(!field.doc.is_empty() && !field.doc.ends_with('.'));
        }
    }

    #[test]
    fn a_path_with_places_in_lists_finds_its_definition() {
        for (path, found) in [
            ("currency", Some("currency")),
            ("conditions.supply[1]", Some("conditions.supply")),
            ("outputs[12].load[0]", Some("outputs[].load")),
            ("outputs[0].currents.from", Some("outputs[].currents.from")),
            ("outputs", Some("outputs")),
            ("outputs[0].colour", None),
        ] {
            assert_eq!(field_at(path).map(|field| field.path), found, "{path}");
        }
    }
}
