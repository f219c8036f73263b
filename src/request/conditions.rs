//! The conditions common to all outputs.

use crate::catalog::yaml::Spot;
use crate::quantity::{Celsius, Decimal, Ohms, Parse, Range, Seconds, Sign, Volts, shown};

use super::model::{BoxReading, Conditions, Load};
use super::reader::{Entry, Group, Reader};

/// Absolute zero on the Celsius scale (SI Brochure, 9th edition, 2019, 2.3.1).
const ABSOLUTE_ZERO: Celsius = Celsius::new(-273.15);

/// Default ambient and calibration temperature.
const ROOM: Celsius = Celsius::new(25.0);

/// Conditions with the places that later checks name.
pub(super) struct ReadConditions {
    pub(super) checked: Conditions,
    /// Where `calibrated_load` stands, and its text.
    pub(super) calibrated_load_at: Option<(Spot, String)>,
}

/// What was stated, or the default. A faulty statement gets the default too, so that reading goes
/// on; the request is refused anyway.
pub(super) fn stated_or<T>(stated: Option<T>, default: T) -> T {
    stated.unwrap_or(default)
}

pub(super) fn read_conditions(top: &Group<'_>, reader: &mut Reader) -> Option<ReadConditions> {
    if !reader.require(top, "conditions") {
        return None;
    }
    let entry = top.entry("conditions")?;
    let group = reader.group(entry.node, &entry.path, "conditions")?;
    reader.require(&group, "supply");
    let supply: Option<Range<Volts>> = reader.range(&group, "supply", Sign::Positive);
    let negative_rail = read_negative_rail(&group, reader);
    let ambient: Option<Range<Celsius>> = reader.range(&group, "ambient", Sign::Any);
    let calibrated_at: Option<Celsius> = reader.figure(&group, "calibrated_at", Sign::Any);
    for (name, coldest) in [("ambient", ambient.map(Range::low)), ("calibrated_at", calibrated_at)]
    {
        refuse_below_absolute_zero(&group, name, coldest, reader);
    }
    refuse_outside(&group, "calibrated_at", calibrated_at, "ambient", ambient, reader);
    let calibrated_supply = reader.figure(&group, "calibrated_supply", Sign::Positive);
    refuse_outside(&group, "calibrated_supply", calibrated_supply, "supply", supply, reader);
    let calibrated_load = read_calibrated_load(&group, reader);
    let service = reader.figure(&group, "service", Sign::NotNegative);
    let insulation = reader.figure(&group, "insulation", Sign::Positive);
    let guarded = reader.switch(&group, "guarded");
    let thermal_emf = reader.figure(&group, "thermal_emf", Sign::Bound);
    let wiring = reader.figure(&group, "wiring", Sign::NotNegative);
    let margin = reader.figure(&group, "margin", Sign::NotNegative);
    let power_derating = read_power_derating(&group, reader);
    let box_reading = reader.word(&group, "box_reading");
    let quiescent_max = reader.figure(&group, "quiescent_max", Sign::Positive);
    Some(ReadConditions {
        checked: Conditions {
            supply: supply?,
            negative_rail: stated_or(negative_rail, Range::point(Volts::ZERO)),
            ambient: stated_or(ambient, Range::point(ROOM)),
            calibrated_at: stated_or(calibrated_at, ROOM),
            calibrated_supply,
            calibrated_load: calibrated_load.as_ref().map(|(load, ..)| *load),
            service: stated_or(service, Seconds::ZERO),
            insulation,
            guarded: stated_or(guarded, false),
            thermal_emf: stated_or(thermal_emf, Volts::ZERO),
            wiring: stated_or(wiring, Ohms::ZERO),
            margin: stated_or(margin, Volts::new(0.05)),
            power_derating: stated_or(power_derating, 0.5),
            box_reading: match box_reading {
                Some("guaranteed") => BoxReading::Guaranteed,
                _ => BoxReading::Slope,
            },
            quiescent_max,
        },
        calibrated_load_at: calibrated_load.map(|(_, at, text)| (at, text)),
    })
}

fn read_negative_rail(group: &Group<'_>, reader: &mut Reader) -> Option<Range<Volts>> {
    let rail: Range<Volts> = reader.range(group, "negative_rail", Sign::Any)?;
    if rail.high() > Volts::ZERO {
        let entry = group.entry("negative_rail")?;
        let message = "the negative rail is above 0 V";
        let hint = format!(
            "write 0 V or less, such as {}",
            reader.written(&entry.path, "[-5.5 V, -4.5 V]")
        );
        reader.error(entry.node.at, &entry.path, message, hint);
        return None;
    }
    Some(rail)
}

fn refuse_below_absolute_zero(
    group: &Group<'_>,
    name: &str,
    coldest: Option<Celsius>,
    reader: &mut Reader,
) {
    if let (Some(entry), Some(coldest)) = (group.entry(name), coldest)
        && coldest < ABSOLUTE_ZERO
    {
        let hint = format!("write {}", reader.written(&entry.path, "25 degC"));
        reader.error(entry.node.at, &entry.path, "a temperature below -273.15 degC", hint);
    }
}

/// A calibrated condition has to lie in the range of that condition, where both are stated.
fn refuse_outside<Q: Copy + PartialOrd>(
    group: &Group<'_>,
    name: &str,
    at: Option<Q>,
    range_name: &str,
    range: Option<Range<Q>>,
    reader: &mut Reader,
) {
    let (Some(entry), Some(at), Some(range)) = (group.entry(name), at, range) else { return };
    if range.contains(at) {
        return;
    }
    let Some(text) = reader.scalar(&entry) else { return };
    let message = format!("{} is outside {}", shown(text), shown(range_name));
    let hint =
        format!("write a figure within {}, or widen that, or leave this out", shown(range_name));
    reader.error(entry.node.at, &entry.path, message, hint);
}

fn read_calibrated_load(group: &Group<'_>, reader: &mut Reader) -> Option<(Load, Spot, String)> {
    let entry = group.entry("calibrated_load")?;
    let text = reader.scalar(&entry)?;
    let load = match read_load_figure(&entry, text, reader)? {
        LoadFigure::Volts(volts) => Load::Voltage(Range::point(volts)),
        LoadFigure::Ohms(ohms) => Load::Resistance(Range::point(ohms)),
    };
    Some((load, entry.node.at, text.to_owned()))
}

/// One end of a load.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum LoadFigure {
    Volts(Volts),
    Ohms(Ohms),
}

/// A figure in volts of any sign, or in ohms of 0 or more.
pub(super) fn read_load_figure(
    entry: &Entry<'_>,
    text: &str,
    reader: &mut Reader,
) -> Option<LoadFigure> {
    let as_volts = match Volts::parse(text, Sign::Any) {
        Ok(volts) => return Some(LoadFigure::Volts(volts)),
        Err(error) => error,
    };
    let as_ohms = match Ohms::parse(text, Sign::Any) {
        Ok(_) => {
            let ohms = reader.checked(entry, Ohms::parse(text, Sign::NotNegative))?;
            return Some(LoadFigure::Ohms(ohms));
        }
        Err(error) => error,
    };
    // Both fail alike where the number is wrong; else it is the unit.
    let message = if as_volts.message == as_ohms.message {
        as_volts.message
    } else {
        format!("{} is neither in volts nor in ohms", shown(text))
    };
    let hint = if as_volts.hint == as_ohms.hint {
        as_volts.hint
    } else {
        format!("as a voltage: {}; as a resistance: {}", as_volts.hint, as_ohms.hint)
    };
    reader.error(entry.node.at, &entry.path, message, hint);
    None
}

fn read_power_derating(group: &Group<'_>, reader: &mut Reader) -> Option<f64> {
    let share = reader.number(group, "power_derating")?;
    if share > Decimal::new(1, 0) {
        let entry = group.entry("power_derating")?;
        let message = format!("{} is more than the whole rated power", shown(&share.to_string()));
        let hint = format!(
            "write a share above 0 and at most 1, such as {}",
            reader.written(&entry.path, "0.5")
        );
        reader.error(entry.node.at, &entry.path, message, hint);
        return None;
    }
    Some(share.to_f64())
}
