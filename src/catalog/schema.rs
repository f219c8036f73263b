//! The fields of every kind of record, once: the reader, the JSON Schema and the documentation
//! all take them from here.

use crate::quantity::{
    Amperes, AmperesPerKelvin, Celsius, Decibels, Decimal, Exact, Farads, FigureError, Form,
    Kelvins, KelvinsPerWatt, Parse, Ppm, PpmPerAmpere, PpmPerKelvin, PpmPerVolt, Quantity, Seconds,
    Sign, Volts, VoltsPerKelvin, Watts,
};

use super::model::{GrowthLaw, Kind, Lifecycle, TempcoMethod};

/// A physical quantity as a field's type: what it is called, and how its text is read exactly.
#[derive(Clone, Copy, Debug)]
pub struct Dimension {
    /// Name, units and an example.
    pub form: &'static Form,
    /// Reads a figure, exactly, in the unit in which the quantity is held.
    pub parse: fn(&str, Sign) -> Result<Decimal, FigureError>,
}

impl Dimension {
    /// The dimension of a quantity.
    #[must_use]
    pub const fn of<Q: Quantity>() -> Self {
        Self { form: Q::FORM, parse: read::<Q> }
    }
}

fn read<Q: Quantity>(text: &str, sign: Sign) -> Result<Decimal, FigureError> {
    Exact::<Q>::parse(text, sign).map(Exact::decimal)
}

/// What stands in a field.
#[derive(Clone, Copy, Debug)]
pub enum FieldForm {
    /// Any plain text.
    Text,
    /// One of these words.
    Word(&'static [&'static str]),
    /// An ISO date, `2025-03-04`.
    Date,
    /// A whole number from `least` to `most`.
    Count {
        /// The smallest allowed.
        least: u64,
        /// The largest allowed.
        most: u64,
    },
    /// A figure with its unit.
    Figure(Dimension, Sign),
    /// A list of two figures, low first.
    Range(Dimension, Sign),
    /// A plain number, or a list of `{from, each}` with rising `from`, the first 1.
    PriceList,
    /// A plain number.
    Price,
    /// Resistor values: `{series, from, to}`, `{list}` or `{any, digits}`.
    Values,
    /// A list of `[current, volts]`, both rising.
    DropCurve,
    /// A list of `{grade, …}`.
    Grades,
}

/// What counts when a field is left out.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Fallback {
    /// Nothing: the field is required.
    Required,
    /// Nothing: the figure is not stated.
    Unstated,
    /// This text, as if it were written.
    Text(&'static str),
    /// This range, as if it were written.
    Range(&'static str, &'static str),
    /// What another field says.
    SameAs(&'static str),
}

/// Which way a figure has to go for a better part.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Better {
    /// Smaller is better.
    Low,
    /// Larger is better.
    High,
}

/// One field of a kind of record.
#[derive(Clone, Copy, Debug)]
pub struct Field {
    /// Its name in a file.
    pub name: &'static str,
    /// What stands in it.
    pub form: FieldForm,
    /// What counts when it is left out.
    pub fallback: Fallback,
    /// Which way is better, for figures that have one.
    pub better: Option<Better>,
    /// Whether budgets and limits commonly ask for it although it is optional.
    pub wanted: bool,
    /// What it means, in one line.
    pub doc: &'static str,
}

const fn field(name: &'static str, form: FieldForm, doc: &'static str) -> Field {
    Field { name, form, fallback: Fallback::Unstated, better: None, wanted: false, doc }
}

const fn figure<Q: Quantity>(name: &'static str, sign: Sign, doc: &'static str) -> Field {
    field(name, FieldForm::Figure(Dimension::of::<Q>(), sign), doc)
}

impl Field {
    const fn required(self) -> Self {
        Self { fallback: Fallback::Required, ..self }
    }
    const fn or(self, fallback: Fallback) -> Self {
        Self { fallback, ..self }
    }
    const fn low(self) -> Self {
        Self { better: Some(Better::Low), ..self }
    }
    const fn high(self) -> Self {
        Self { better: Some(Better::High), ..self }
    }
    const fn wanted(self) -> Self {
        Self { wanted: true, ..self }
    }

    /// Whether the field may stand in a grade.
    #[must_use]
    pub fn in_grades(&self) -> bool {
        !matches!(self.name, "part" | "kind" | "grades")
    }
}

/// The words of the `kind` field.
pub const KIND_WORDS: [&str; 5] = [
    Kind::Reference.word(),
    Kind::Amplifier.word(),
    Kind::Resistor.word(),
    Kind::Lift.word(),
    Kind::Adjustment.word(),
];

const LIFECYCLE_WORDS: [&str; 4] = [
    Lifecycle::Active.word(),
    Lifecycle::Preview.word(),
    Lifecycle::LastBuy.word(),
    Lifecycle::Obsolete.word(),
];

const METHOD_WORDS: [&str; 3] =
    [TempcoMethod::Slope.word(), TempcoMethod::Box.word(), TempcoMethod::Butterfly.word()];

const LAW_WORDS: [&str; 2] = [GrowthLaw::Sqrt.word(), GrowthLaw::Linear.word()];

/// Counts are read up to here, so that a count times a price stays exact.
pub(super) const MOST: u64 = 1_000_000_000;

/// More diodes in series than any supply could feed; it bounds the search.
const MOST_IN_SERIES: u64 = 100;

use FieldForm::{Count, Date, DropCurve, Grades, Price, PriceList, Text, Values, Word};
use Sign::{Any, Bound, NotNegative, Positive};

/// Fields of every kind.
const COMMON: &[Field] = &[
    field("kind", Word(&KIND_WORDS), "what the record describes").required(),
    field("part", Text, "the maker's part, without the grade").required(),
    field("source", Text, "where the figures come from"),
    field("updated", Date, "when the record was last checked"),
    field(
        "order_code",
        Text,
        "the code to order it by; {grade} and {value} are replaced (default: part-grade, for resistors part-grade-value)",
    ),
    field("lifecycle", Word(&LIFECYCLE_WORDS), "state of sale").or(Fallback::Text("active")),
    field("currency", Text, "currency of the price, when it is not the request's"),
    field("grades", Grades, "selections of the part, each with the fields that differ"),
];

/// Fields of everything that is ordered and placed.
const ORDERED: &[Field] = &[
    field("price", PriceList, "price of one: a number, or a list of {from, each}").required(),
    field("maker", Text, "who makes it"),
    field("package", Text, "case style"),
    field("temperature", FieldForm::Range(Dimension::of::<Celsius>(), Any), "operating range")
        .or(Fallback::Range("-40 degC", "85 degC")),
    figure::<Seconds>("lead_time", NotNegative, "time from order to delivery"),
    field("stock", Count { least: 0, most: MOST }, "units in stock, for resistors of each value"),
    field("order_minimum", Count { least: 1, most: MOST }, "fewest units that an order takes")
        .or(Fallback::Text("1")),
    field("order_multiple", Count { least: 1, most: MOST }, "orders are multiples of this")
        .or(Fallback::Text("1")),
];

const REFERENCE: &[Field] = &[
    figure::<Volts>("output", Positive, "nominal output voltage").required(),
    figure::<Ppm>("accuracy", Bound, "initial accuracy, either side of nominal").required().low(),
    figure::<PpmPerKelvin>("tempco", Bound, "temperature coefficient").required().low(),
    figure::<Volts>("dropout", NotNegative, "supply needed above the output").required().low(),
    figure::<Volts>("supply_max", Positive, "largest voltage from supply pin to ground pin")
        .required()
        .high(),
    figure::<Amperes>("source_max", Positive, "largest output current").required().high(),
    figure::<Amperes>("quiescent", NotNegative, "largest quiescent current").required().low(),
    field("tempco_method", Word(&METHOD_WORDS), "how the tempco is defined")
        .or(Fallback::Text("slope")),
    field(
        "tempco_over",
        FieldForm::Range(Dimension::of::<Celsius>(), Any),
        "range of the tempco figure",
    )
    .or(Fallback::SameAs("temperature")),
    figure::<PpmPerAmpere>("load_regulation", Bound, "change with load current").low().wanted(),
    figure::<Amperes>(
        "load_tested_at",
        NotNegative,
        "load current at which the accuracy is tested",
    )
    .or(Fallback::Text("0 A")),
    figure::<PpmPerVolt>("line_regulation", Bound, "change with supply").low().wanted(),
    figure::<Volts>("line_tested_at", Positive, "supply at which the accuracy is tested"),
    figure::<Ppm>("drift", Bound, "change over drift_hours").low().wanted(),
    figure::<Seconds>("drift_hours", Positive, "the time for which the drift is stated")
        .or(Fallback::Text("1000 h")),
    field("drift_law", Word(&LAW_WORDS), "how the drift grows with time")
        .or(Fallback::Text("sqrt")),
    figure::<Ppm>("hysteresis", Bound, "change after a temperature cycle").low().wanted(),
    figure::<Ppm>("assembly_shift", Bound, "change at soldering").low().wanted(),
    figure::<KelvinsPerWatt>("thermal", NotNegative, "thermal resistance to ambient")
        .low()
        .wanted(),
    figure::<Volts>("noise", NotNegative, "peak-to-peak noise, 0.1 Hz to 10 Hz").low().wanted(),
    figure::<Farads>("bypass", NotNegative, "capacitor that it needs to its ground pin").low(),
];

const AMPLIFIER: &[Field] = &[
    figure::<Volts>("offset", Bound, "largest offset voltage at 25 degC").required().low(),
    figure::<Amperes>("bias", Bound, "largest bias current at 25 degC").required().low(),
    figure::<Volts>(
        "swing_low",
        NotNegative,
        "lowest output above the negative rail, sinking a reference's quiescent current",
    )
    .required()
    .low(),
    figure::<Volts>("swing_high", NotNegative, "highest output below the positive rail")
        .required()
        .low(),
    figure::<Volts>(
        "input_low",
        Any,
        "lowest common mode above the negative rail; may be negative",
    )
    .required()
    .low(),
    figure::<Volts>(
        "input_high",
        Any,
        "highest common mode below the positive rail; may be negative",
    )
    .required()
    .low(),
    field(
        "supply",
        FieldForm::Range(Dimension::of::<Volts>(), NotNegative),
        "total supply, least and most",
    )
    .required(),
    figure::<Amperes>("sink_max", Positive, "largest current that the output sinks")
        .required()
        .high(),
    figure::<VoltsPerKelvin>("offset_drift", Bound, "offset drift").low().wanted(),
    figure::<Kelvins>("bias_doubling", Positive, "temperature step that doubles the bias current")
        .high(),
    figure::<AmperesPerKelvin>("bias_drift", Bound, "linear drift of the bias current").low(),
    figure::<Amperes>("bias_over_range", Bound, "largest bias current over the operating range")
        .low(),
    figure::<Decibels>("cmrr", NotNegative, "common-mode rejection").high().wanted(),
    figure::<Decibels>("psrr", NotNegative, "supply rejection").high().wanted(),
    figure::<Decibels>("open_loop_gain", NotNegative, "open-loop gain").high().wanted(),
    figure::<Volts>("tested_supply", Positive, "total supply at which the offset is tested"),
    figure::<Volts>(
        "tested_common_mode",
        Any,
        "common mode above the negative rail at which the offset is tested",
    ),
    figure::<Volts>("noise", NotNegative, "peak-to-peak noise, 0.1 Hz to 10 Hz").low().wanted(),
    figure::<Amperes>("current_noise", NotNegative, "peak-to-peak current noise, 0.1 Hz to 10 Hz")
        .low()
        .wanted(),
    figure::<Amperes>("quiescent", NotNegative, "quiescent current").low().wanted(),
    figure::<Farads>("capacitive_load", NotNegative, "largest capacitive load").high().wanted(),
];

const RESISTOR: &[Field] = &[
    figure::<Ppm>("tolerance", Bound, "tolerance at 25 degC").required().low(),
    figure::<PpmPerKelvin>("tempco", Bound, "temperature coefficient").required().low(),
    figure::<Watts>("power", Positive, "rated power at the hottest ambient used").required().high(),
    field("values", Values, "values that can be ordered").required(),
    figure::<KelvinsPerWatt>("thermal", NotNegative, "thermal resistance to ambient")
        .low()
        .wanted(),
    figure::<Ppm>("stability", Bound, "change over stability_hours").low().wanted(),
    figure::<Seconds>("stability_hours", Positive, "the time for which the stability is stated")
        .or(Fallback::Text("1000 h")),
    field("stability_law", Word(&LAW_WORDS), "how the change grows with time")
        .or(Fallback::Text("sqrt")),
    figure::<PpmPerVolt>("voltage_coefficient", Bound, "change with voltage").low().wanted(),
    figure::<Volts>("voltage_max", Positive, "largest voltage across it").high().wanted(),
    figure::<Ppm>("assembly_shift", Bound, "change at soldering").low().wanted(),
];

const LIFT: &[Field] = &[
    field(
        "drop",
        DropCurve,
        "typical forward drop at 25 degC: a list of [current, volts], both rising",
    )
    .required(),
    figure::<Amperes>("current_max", Positive, "largest forward current").required().high(),
    figure::<Volts>("drop_spread", Bound, "spread of the drop, either side")
        .or(Fallback::Text("0 V"))
        .low(),
    figure::<VoltsPerKelvin>("drop_tempco", Any, "change of the drop with temperature, signed")
        .or(Fallback::Text("-2 mV/K")),
    field("in_series_max", Count { least: 1, most: MOST_IN_SERIES }, "most diodes in series")
        .or(Fallback::Text("4")),
];

const ADJUSTMENT: &[Field] = &[
    field("price", Price, "price per output built").required(),
    figure::<Ppm>("residual", Bound, "error that is left").required().low(),
    figure::<Ppm>("range", Bound, "largest static error that it takes up").required().high(),
    figure::<PpmPerKelvin>("tempco", Bound, "its own temperature coefficient")
        .or(Fallback::Text("0 ppm/K"))
        .low(),
];

/// The fields of a kind of record: those of every kind first, then its own.
pub fn fields(kind: Kind) -> impl Iterator<Item = &'static Field> {
    let (ordered, own) = match kind {
        Kind::Reference => (ORDERED, REFERENCE),
        Kind::Amplifier => (ORDERED, AMPLIFIER),
        Kind::Resistor => (ORDERED, RESISTOR),
        Kind::Lift => (ORDERED, LIFT),
        Kind::Adjustment => (&[] as &[Field], ADJUSTMENT),
    };
    COMMON.iter().chain(ordered).chain(own)
}

/// The field of a kind with this name.
#[must_use]
pub fn field_named(kind: Kind, name: &str) -> Option<&'static Field> {
    fields(kind).find(|field| field.name == name)
}

/// Why a kind does not have a field that other parts have.
#[must_use]
pub(super) fn why_not(kind: Kind, name: &str) -> Option<String> {
    let elsewhere = ORDERED.iter().any(|field| field.name == name);
    (kind == Kind::Adjustment && elsewhere).then(|| {
        format!("leave `{name}` out: an adjustment is a step at test, not an ordered part")
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::collections::BTreeSet;

    #[test]
    fn every_field_is_named_once_and_explained() {
        for kind in Kind::ALL {
            let mut names = BTreeSet::new();
            for field in fields(kind) {
                assert!(names.insert(field.name), "{} twice", field.name);
                assert!(!field.doc.is_empty() && !field.doc.ends_with('.'), "{}", field.name);
                let figure = matches!(field.form, FieldForm::Figure(..));
                assert!(figure || field.better.is_none(), "{}", field.name);
                assert!(!field.wanted || field.fallback == Fallback::Unstated, "{}", field.name);
            }
            assert_eq!(KIND_WORDS.iter().filter(|word| **word == kind.word()).count(), 1);
        }
    }

    #[test]
    fn an_adjustment_has_no_fields_of_an_ordered_part() {
        for name in [
            "stock",
            "order_minimum",
            "order_multiple",
            "lead_time",
            "maker",
            "package",
            "temperature",
        ] {
            assert!(field_named(Kind::Adjustment, name).is_none());
            assert!(why_not(Kind::Adjustment, name).is_some_and(|why| why.contains(name)));
            assert!(field_named(Kind::Lift, name).is_some());
        }
        assert_eq!(why_not(Kind::Adjustment, "colour"), None);
    }
}
