//! Checked fields as the model's types.

use crate::quantity::{Exact, Quantity, Range, to_letter_code};

use super::model::{
    Adjustment, Ageing, Amplifier, DropPoint, GrowthLaw, Kind, Lifecycle, Lift, ListedValue, Place,
    Reference, ResistorType, Supply, TempcoMethod, Values,
};
use super::value::ValueSet;
use super::view::View;

/// One type, ready for the catalogue.
#[derive(Clone, Debug, PartialEq)]
pub(super) enum Offer {
    Reference(Reference),
    Amplifier(Amplifier),
    Resistor(ResistorType),
    Lift(Lift),
    Adjustment(Adjustment),
}

impl Offer {
    pub(super) const fn supply(&self) -> &Supply {
        match self {
            Self::Reference(part) => &part.supply,
            Self::Amplifier(part) => &part.supply,
            Self::Resistor(part) => &part.supply,
            Self::Lift(part) => &part.supply,
            Self::Adjustment(part) => &part.supply,
        }
    }

    /// The code, with `{value}` still in it for resistors.
    pub(super) fn code(&self) -> &str {
        match self {
            Self::Reference(part) => &part.order_code,
            Self::Amplifier(part) => &part.order_code,
            Self::Resistor(part) => &part.code_pattern,
            Self::Lift(part) => &part.order_code,
            Self::Adjustment(part) => &part.order_code,
        }
    }
}

/// Builds a type. `None` when a field is missing or faulty, which has been reported.
pub(super) fn build(view: View<'_>, code: String, place: Place) -> Option<Offer> {
    let supply = supply(view, place)?;
    Some(match view.kind {
        Kind::Reference => Offer::Reference(reference(view, code, supply)?),
        Kind::Amplifier => Offer::Amplifier(amplifier(view, code, supply)?),
        Kind::Resistor => Offer::Resistor(resistor(view, code, supply)?),
        Kind::Lift => Offer::Lift(lift(view, code, supply)?),
        Kind::Adjustment => Offer::Adjustment(adjustment(view, code, supply)?),
    })
}

fn supply(view: View<'_>, place: Place) -> Option<Supply> {
    let lifecycle = view.word("lifecycle")?;
    // An adjustment has none of the order fields: it is a step that can be had at any time, at
    // any temperature.
    let step = view.kind == Kind::Adjustment;
    let everywhere = Range::new(
        crate::quantity::Celsius::new(f64::NEG_INFINITY),
        crate::quantity::Celsius::new(f64::INFINITY),
    );
    let temperature = if step { everywhere } else { view.range("temperature") };
    let one = |name| if step { Some(1) } else { view.count(name) };
    Some(Supply {
        part: view.text("part")?,
        grade: view.grade.map(|grade| grade.name.clone()),
        maker: view.text("maker"),
        source: view.text("source"),
        updated: view.date("updated"),
        package: view.text("package"),
        temperature: temperature?,
        lifecycle: Lifecycle::ALL.into_iter().find(|state| state.word() == lifecycle)?,
        lead_time: if step { None } else { view.figure("lead_time") },
        stock: view.count("stock"),
        currency: view.text("currency"),
        order_minimum: one("order_minimum")?,
        order_multiple: one("order_multiple")?,
        price: view.price()?,
        place,
    })
}

fn ageing(view: View<'_>, error: &str, over: &str, law: &str) -> Option<Ageing> {
    let law = view.word(law)?;
    Some(Ageing {
        error: view.figure(error),
        over: view.figure(over)?,
        law: GrowthLaw::ALL.into_iter().find(|known| known.word() == law)?,
    })
}

fn reference(view: View<'_>, order_code: String, supply: Supply) -> Option<Reference> {
    let method = view.word("tempco_method")?;
    Some(Reference {
        order_code,
        supply,
        output: view.exact("output")?,
        accuracy: view.figure("accuracy")?,
        tempco: view.figure("tempco")?,
        tempco_method: TempcoMethod::ALL.into_iter().find(|known| known.word() == method)?,
        tempco_over: view.range("tempco_over")?,
        dropout: view.figure("dropout")?,
        supply_max: view.figure("supply_max")?,
        source_max: view.figure("source_max")?,
        quiescent: view.figure("quiescent")?,
        load_regulation: view.figure("load_regulation"),
        load_tested_at: view.figure("load_tested_at")?,
        line_regulation: view.figure("line_regulation"),
        line_tested_at: view.figure("line_tested_at"),
        drift: ageing(view, "drift", "drift_hours", "drift_law")?,
        hysteresis: view.figure("hysteresis"),
        assembly_shift: view.figure("assembly_shift"),
        thermal: view.figure("thermal"),
        noise: view.figure("noise"),
        bypass: view.figure("bypass"),
    })
}

fn amplifier(view: View<'_>, order_code: String, supply: Supply) -> Option<Amplifier> {
    Some(Amplifier {
        order_code,
        supply,
        offset: view.figure("offset")?,
        bias: view.figure("bias")?,
        swing_low: view.figure("swing_low")?,
        swing_high: view.figure("swing_high")?,
        input_low: view.figure("input_low")?,
        input_high: view.figure("input_high")?,
        total_supply: view.range("supply")?,
        sink_max: view.figure("sink_max")?,
        offset_drift: view.figure("offset_drift"),
        bias_doubling: view.figure("bias_doubling"),
        bias_drift: view.figure("bias_drift"),
        bias_over_range: view.figure("bias_over_range"),
        cmrr: view.figure("cmrr"),
        psrr: view.figure("psrr"),
        open_loop_gain: view.figure("open_loop_gain"),
        tested_supply: view.figure("tested_supply"),
        tested_common_mode: view.figure("tested_common_mode"),
        noise: view.figure("noise"),
        current_noise: view.figure("current_noise"),
        quiescent: view.figure("quiescent"),
        capacitive_load: view.figure("capacitive_load"),
    })
}

fn resistor(view: View<'_>, code_pattern: String, supply: Supply) -> Option<ResistorType> {
    let values = match view.values()? {
        ValueSet::Listed { values, .. } => Values::Listed(
            values
                .into_iter()
                .map(|ohms| ListedValue {
                    ohms: Exact::from_decimal(ohms),
                    order_code: code_pattern.replace("{value}", &to_letter_code(ohms)),
                })
                .collect(),
        ),
        ValueSet::Any { low, high, digits } => {
            Values::MadeToOrder { range: Range::new(low, high)?, digits }
        }
    };
    Some(ResistorType {
        code_pattern,
        supply,
        tolerance: view.figure("tolerance")?,
        tempco: view.figure("tempco")?,
        power: view.figure("power")?,
        values,
        thermal: view.figure("thermal"),
        stability: ageing(view, "stability", "stability_hours", "stability_law")?,
        voltage_coefficient: view.figure("voltage_coefficient"),
        voltage_max: view.figure("voltage_max"),
        assembly_shift: view.figure("assembly_shift"),
    })
}

fn lift(view: View<'_>, order_code: String, supply: Supply) -> Option<Lift> {
    let drop = view.drop()?.into_iter().map(|(current, drop)| DropPoint {
        current: Quantity::from_decimal(current),
        drop: Quantity::from_decimal(drop),
    });
    Some(Lift {
        order_code,
        supply,
        drop: drop.collect(),
        current_max: view.figure("current_max")?,
        drop_spread: view.figure("drop_spread")?,
        drop_tempco: view.figure("drop_tempco")?,
        in_series_max: u32::try_from(view.count("in_series_max")?).ok()?,
    })
}

fn adjustment(view: View<'_>, order_code: String, supply: Supply) -> Option<Adjustment> {
    Some(Adjustment {
        order_code,
        supply,
        residual: view.figure("residual")?,
        range: view.figure("range")?,
        tempco: view.figure("tempco")?,
    })
}
