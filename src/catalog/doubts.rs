//! What is allowed but looks wrong: said by the check of a catalogue, and never in the way.

use super::fault::{Fault, Severity};
use super::model::PriceList;
use super::record::label_by_grade;
use super::schema::{Better, Field, FieldForm, fields};
use super::value::{Sink, Value, ValueSet};
use super::view::View;
use super::yaml::Spot;
use super::{Fallback, Kind};

/// Adds the doubts about a sound record: those of each type, and those of its grades together.
pub(super) fn add_doubts(views: &[View<'_>], start: Spot, sink: &mut Sink) {
    let name = sink.record.clone().unwrap_or_default();
    for view in views {
        let before = sink.faults.len();
        for (field, message, hint) in type_doubts(*view) {
            doubt(*view, start, field, message, hint, sink);
        }
        label_by_grade(*view, &name, before, sink);
    }
    dear_grades(views, &name, sink);
    let Some(first) = views.first() else { return };
    if views.iter().any(|view| view.value("source").is_none()) {
        let hint = "say where the figures come from, so that they can be checked";
        doubt(*first, start, "source", "`source` is missing".to_owned(), hint, sink);
    }
    let lacking: Vec<&str> = fields(first.kind)
        .filter(|field| field.wanted && views.iter().any(|view| view.value(field.name).is_none()))
        .map(|field| field.name)
        .collect();
    if !lacking.is_empty() {
        let message = format!("not stated: {}", lacking.join(", "));
        let hint = "budgets that need them list them as not stated and count nothing for them";
        doubt(*first, start, "", message, hint, sink);
    }
}

fn doubt(view: View<'_>, start: Spot, field: &str, message: String, hint: &str, sink: &mut Sink) {
    let entry = view.entry(field);
    let field = entry.map_or_else(|| field.to_owned(), |entry| entry.path.clone());
    sink.faults.push(Fault {
        place: sink.place(entry.map_or(start, |entry| entry.at)),
        severity: Severity::Doubt,
        record: sink.record.clone(),
        field: Some(field).filter(|field| !field.is_empty()),
        message,
        hint: Some(hint.to_owned()),
    });
}

/// Field, message, hint.
type Doubt = (&'static str, String, &'static str);

fn type_doubts(view: View<'_>) -> Vec<Doubt> {
    let mut doubts = match view.kind {
        Kind::Reference => reference_doubts(view),
        Kind::Amplifier => amplifier_doubts(view),
        Kind::Resistor => resistor_doubts(view),
        Kind::Lift => lift_doubts(view),
        Kind::Adjustment => Vec::new(),
    };
    if let Some(price) = view.price() {
        let rises = price.breaks().windows(2).find_map(|pair| match pair {
            [few, many] if many.each > few.each => Some(many.from),
            _ => None,
        });
        if let Some(from) = rises {
            let message = format!("the price rises at quantity {from}");
            doubts.push(("price", message, "larger quantities are commonly cheaper"));
        }
    }
    for name in ["accuracy", "tempco", "tolerance", "offset", "bias"] {
        let required = fields(view.kind)
            .any(|field| field.name == name && field.fallback == Fallback::Required);
        if required && number(view, name) == Some(0.0) {
            doubts.push((name, format!("`{name}` is zero"), "no part is perfect"));
        }
    }
    doubts
}

fn number(view: View<'_>, name: &str) -> Option<f64> {
    view.decimal(name).map(|figure| figure.to_f64())
}

/// Five per cent, in ppm: beyond it a reference is hardly one for a precision source.
const POOR_ACCURACY: f64 = 50_000.0;

fn reference_doubts(view: View<'_>) -> Vec<Doubt> {
    let mut doubts = Vec::new();
    if number(view, "accuracy").is_some_and(|accuracy| accuracy > POOR_ACCURACY) {
        let message = "`accuracy` is worse than 5 %".to_owned();
        doubts.push(("accuracy", message, "look whether the unit is right"));
    }
    if let (Some(Value::Range(low, high)), Some(Value::Range(coldest, hottest))) =
        (view.value("tempco_over").as_deref(), view.value("temperature").as_deref())
        && (low > coldest || high < hottest)
    {
        let message = "`tempco_over` is narrower than `temperature`".to_owned();
        doubts.push(("tempco_over", message, "outside it the tempco is a guess"));
    }
    if let (Some(output), Some(dropout), Some(most)) =
        (number(view, "output"), number(view, "dropout"), number(view, "supply_max"))
        && output + dropout > most
    {
        let message = "`supply_max` is below `output` plus `dropout`".to_owned();
        doubts.push(("supply_max", message, "no supply can feed this part"));
    }
    if let (Some(tested), Some(most)) = (number(view, "load_tested_at"), number(view, "source_max"))
        && tested > most
    {
        let message = "`load_tested_at` is above `source_max`".to_owned();
        doubts.push(("load_tested_at", message, "look whether the prefixes are right"));
    }
    doubts.extend(hours_alone(view, "drift", "drift_hours"));
    doubts
}

fn hours_alone(view: View<'_>, figure: &str, hours: &'static str) -> Option<Doubt> {
    (view.entry(hours).is_some() && view.value(figure).is_none()).then(|| {
        let message = format!("`{hours}` without `{figure}`");
        (hours, message, "alone it says nothing")
    })
}

/// Rejections and gains that amplifiers have, in dB (common practice).
const PLAUSIBLE_DECIBELS: std::ops::RangeInclusive<f64> = 40.0..=200.0;

fn amplifier_doubts(view: View<'_>) -> Vec<Doubt> {
    let mut doubts = Vec::new();
    let laws = ["bias_doubling", "bias_drift", "bias_over_range"];
    if laws.iter().all(|law| view.value(law).is_none()) {
        let message = "no law for the bias current over temperature".to_owned();
        let hint = "state one of `bias_doubling`, `bias_drift`, `bias_over_range`";
        doubts.push(("bias", message, hint));
    }
    for name in ["cmrr", "psrr", "open_loop_gain"] {
        if number(view, name).is_some_and(|decibels| !PLAUSIBLE_DECIBELS.contains(&decibels)) {
            let message = format!("`{name}` is outside 40 dB to 200 dB");
            doubts.push((name, message, "look whether it is in decibels"));
        }
    }
    if let (Some(tested), Some(Value::Range(least, most))) =
        (view.decimal("tested_supply"), view.value("supply").as_deref())
        && (tested < *least || tested > *most)
    {
        let message = "`tested_supply` is outside `supply`".to_owned();
        doubts.push(("tested_supply", message, "it is the total from rail to rail"));
    }
    doubts
}

fn resistor_doubts(view: View<'_>) -> Vec<Doubt> {
    let mut doubts = Vec::new();
    if let Some(ValueSet::Listed { written_rising: false, .. }) = view.values() {
        let message = "the list of values does not rise".to_owned();
        doubts.push(("values", message, "look whether a prefix is wrong"));
    }
    doubts.extend(hours_alone(view, "stability", "stability_hours"));
    doubts
}

/// Boltzmann constant, J/K, and elementary charge, C: both exact (SI Brochure, 9th edition, 2019).
const BOLTZMANN: f64 = 1.380_649e-23;
const ELEMENTARY_CHARGE: f64 = 1.602_176_634e-19;

/// Change of an ideal junction's drop per decade of current at 25 °C: kT/q·ln 10, in volts.
fn ideal_slope() -> f64 {
    BOLTZMANN * 298.15 / ELEMENTARY_CHARGE * std::f64::consts::LN_10
}

/// Tempco of a silicon junction's drop: about -2 mV/K; nothing below -5 mV/K (common practice).
const STEEPEST_TEMPCO: f64 = -5e-3;

fn lift_doubts(view: View<'_>) -> Vec<Doubt> {
    let mut doubts = Vec::new();
    let points: Vec<(f64, f64)> = view
        .drop()
        .unwrap_or_default()
        .iter()
        .map(|(current, drop)| (current.to_f64(), drop.to_f64()))
        .collect();
    let plausible = ideal_slope()..=2.0 * ideal_slope();
    let odd = points.windows(2).find_map(|pair| match pair {
        [(i0, v0), (i1, v1)] => {
            let slope = (v1 - v0) / (i1 / i0).log10();
            (!plausible.contains(&slope)).then_some(slope)
        }
        _ => None,
    });
    if let Some(slope) = odd {
        let message = format!(
            "the drop changes by {:.0} mV a decade, a junction's by {:.0} to {:.0}",
            slope * 1e3,
            plausible.start() * 1e3,
            plausible.end() * 1e3
        );
        doubts.push(("drop", message, "look whether the prefixes are right"));
    }
    if number(view, "drop_tempco").is_some_and(|tempco| !(STEEPEST_TEMPCO..=0.0).contains(&tempco))
    {
        let message = "`drop_tempco` is outside -5 mV/K to 0".to_owned();
        doubts.push(("drop_tempco", message, "a junction's drop falls by about 2 mV/K"));
    }
    doubts
}

/// Grades that cost more than another of the same record and are better in nothing.
fn dear_grades(views: &[View<'_>], name: &str, sink: &mut Sink) {
    for view in views {
        let Some(grade) = view.grade else { continue };
        let beaten = views.iter().find_map(|other| {
            let cheaper = other.grade?;
            (cheaper.name != grade.name && dearer(*view, *other)? && !better(*view, *other))
                .then_some(cheaper)
        });
        if let Some(cheaper) = beaten {
            let before = sink.faults.len();
            let message = format!("dearer than grade {} and better in nothing", cheaper.name);
            doubt(*view, grade.at, "price", message, "look at the figures of both", sink);
            label_by_grade(*view, name, before, sink);
        }
    }
}

/// Whether one costs more at some quantity and less at none.
fn dearer(view: View<'_>, other: View<'_>) -> Option<bool> {
    let (own, theirs) = (view.price()?, other.price()?);
    if view.text("currency") != other.text("currency") {
        return None;
    }
    let each = |list: &PriceList, count| {
        list.breaks().iter().rev().find(|step| step.from <= count).map(|step| step.each)
    };
    let counts = own.breaks().iter().chain(theirs.breaks()).map(|step| step.from);
    let pairs: Vec<_> = counts.map(|count| (each(&own, count), each(&theirs, count))).collect();
    Some(pairs.iter().all(|(a, b)| a >= b) && pairs.iter().any(|(a, b)| a > b))
}

/// Whether one is better than the other in anything, or differs in what cannot be ranked.
fn better(view: View<'_>, other: View<'_>) -> bool {
    let ignored = ["price", "order_code", "source", "updated", "currency"];
    fields(view.kind).filter(|field| !ignored.contains(&field.name)).any(|field| {
        let (own, theirs) = (view.value(field.name), other.value(field.name));
        own != theirs && !clearly_worse(field, own.as_deref(), theirs.as_deref())
    })
}

fn clearly_worse(field: &Field, own: Option<&Value>, theirs: Option<&Value>) -> bool {
    match (field.form, field.better, own, theirs) {
        (
            FieldForm::Figure(..),
            Some(better),
            Some(Value::Figure(own)),
            Some(Value::Figure(theirs)),
        ) => match better {
            Better::Low => own > theirs,
            Better::High => own < theirs,
        },
        // What only the other states is no advantage of this one.
        (_, Some(_), None, Some(_)) => true,
        _ => false,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_ideal_slope_is_that_of_the_textbooks() {
        // 59.16 mV a decade at 298.15 K (computed from the exact constants).
        assert!((ideal_slope() - 0.059_159_35).abs() < 1e-8);
    }
}
