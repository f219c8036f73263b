//! The inequalities of the operating window, left and right side as in the limit table.

use crate::catalog::{Adjustment, Amplifier, Reference, Supply};
use crate::quantity::Ppm;

use super::check::Check;
use super::design::LiftStack;
use super::figure::Figure;
use super::frame::Frame;
use super::wired::WiredElement;

pub(super) fn swing_low(frame: &Frame<'_>, amplifier: &Amplifier) -> Figure<Check> {
    let conditions = frame.conditions();
    let lowest = conditions.negative_rail.high() + amplifier.swing_low + conditions.margin;
    Figure::Known(Check::at_least(frame.node.low(), lowest))
}

pub(super) fn swing_high(frame: &Frame<'_>, amplifier: &Amplifier) -> Figure<Check> {
    let conditions = frame.conditions();
    let highest = conditions.supply.low() - amplifier.swing_high - conditions.margin;
    Figure::Known(Check::at_most(frame.node.high(), highest))
}

pub(super) fn input_low(frame: &Frame<'_>, amplifier: &Amplifier) -> Figure<Check> {
    let lowest = frame.conditions().negative_rail.high() + amplifier.input_low;
    Figure::Known(Check::at_most(lowest, frame.node.low()))
}

pub(super) fn input_high(frame: &Frame<'_>, amplifier: &Amplifier) -> Figure<Check> {
    let highest = frame.conditions().supply.low() - amplifier.input_high;
    Figure::Known(Check::at_most(frame.node.high(), highest))
}

pub(super) fn reference_headroom(frame: &Frame<'_>, reference: &Reference) -> Figure<Check> {
    Figure::Known(Check::at_least(frame.reference_supply.low(), frame.vref + reference.dropout))
}

pub(super) fn reference_input_max(frame: &Frame<'_>, reference: &Reference) -> Figure<Check> {
    Figure::Known(Check::at_most(frame.reference_supply.high(), reference.supply_max))
}

pub(super) fn amplifier_supply_min(frame: &Frame<'_>, amplifier: &Amplifier) -> Figure<Check> {
    Figure::Known(Check::at_most(amplifier.total_supply.low(), frame.total_supply.low()))
}

pub(super) fn amplifier_supply_max(frame: &Frame<'_>, amplifier: &Amplifier) -> Figure<Check> {
    Figure::Known(Check::at_most(frame.total_supply.high(), amplifier.total_supply.high()))
}

pub(super) fn reference_source(frame: &Frame<'_>, reference: &Reference) -> Figure<Check> {
    Figure::Known(Check::at_most(frame.current, reference.source_max))
}

pub(super) fn amplifier_sink(
    _: &Frame<'_>,
    reference: &Reference,
    amplifier: &Amplifier,
) -> Figure<Check> {
    Figure::Known(Check::at_most(reference.quiescent, amplifier.sink_max))
}

pub(super) fn lift_current(frame: &Frame<'_>, lift: &LiftStack<'_>) -> Figure<Check> {
    Figure::Known(Check::at_most(frame.current, lift.of.current_max))
}

pub(super) fn resistor_power(frame: &Frame<'_>, element: &WiredElement<'_>) -> Figure<Check> {
    let allowed = element.of.power * frame.conditions().power_derating;
    Figure::Known(Check::at_most(element.power, allowed))
}

pub(super) fn resistor_voltage(_: &Frame<'_>, element: &WiredElement<'_>) -> Figure<Check> {
    match element.of.voltage_max {
        Some(most) => Figure::Known(Check::at_most(element.volts, most)),
        None => Figure::NotStated("voltage_max"),
    }
}

pub(super) fn temperature(frame: &Frame<'_>, supply: &Supply) -> Figure<Check> {
    let (ambient, range) = (frame.conditions().ambient, supply.temperature);
    let cold = Check::at_least(ambient.low(), range.low());
    Figure::Known(cold.tighter(Check::at_most(ambient.high(), range.high())))
}

pub(super) fn capacitive_load(
    _: &Frame<'_>,
    reference: &Reference,
    amplifier: &Amplifier,
) -> Figure<Check> {
    match (reference.bypass, amplifier.capacitive_load) {
        (None, _) => Figure::Absent,
        (Some(bypass), Some(most)) => Figure::Known(Check::at_most(bypass, most)),
        (Some(_), None) => Figure::NotStated("capacitive_load"),
    }
}

pub(super) fn quiescent(
    frame: &Frame<'_>,
    reference: &Reference,
    amplifier: &Amplifier,
) -> Figure<Check> {
    match (frame.conditions().quiescent_max, amplifier.quiescent) {
        (None, _) => Figure::Absent,
        (Some(most), Some(own)) => Figure::Known(Check::at_most(reference.quiescent + own, most)),
        (Some(_), None) => Figure::NotStated("quiescent"),
    }
}

pub(super) fn adjustment_range(
    _: &Frame<'_>,
    adjustment: &Adjustment,
    statics: Ppm,
) -> Figure<Check> {
    Figure::Known(Check::at_most(statics, adjustment.range))
}
