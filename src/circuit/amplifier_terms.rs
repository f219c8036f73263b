//! The terms of the amplifier.

use crate::catalog::Amplifier;
use crate::quantity::{Amperes, Celsius, Decibels, Kelvins, Ppm, Volts};

use super::figure::{Figure, Note, Size, stated};
use super::frame::{Frame, distance};

const ROOM: Celsius = Celsius::new(25.0);

pub(super) fn offset(frame: &Frame<'_>, amplifier: &Amplifier) -> Figure<Size> {
    Figure::known(Ppm::from_ratio(amplifier.offset / frame.vref))
}

pub(super) fn offset_drift(frame: &Frame<'_>, amplifier: &Amplifier) -> Figure<Size> {
    let still = frame.excursion <= Kelvins::ZERO;
    stated(amplifier.offset_drift, "offset_drift", still, |drift| {
        Ppm::from_ratio(drift * frame.excursion / frame.vref)
    })
}

pub(super) fn bias(frame: &Frame<'_>, amplifier: &Amplifier) -> Figure<Size> {
    Figure::known(Ppm::from_ratio(amplifier.bias / frame.current))
}

/// The largest bias current at a temperature by the laws that the record states; `None` when it
/// states neither.
fn bias_at(amplifier: &Amplifier, at: Celsius) -> Option<Amperes> {
    let from_room = at - ROOM;
    let doubled = amplifier
        .bias_doubling
        .map(|step| amplifier.bias * 2f64.powf(from_room.max(Kelvins::ZERO) / step));
    let drifted = amplifier.bias_drift.map(|drift| amplifier.bias + drift * from_room.abs());
    let largest = match (doubled, drifted) {
        (Some(doubled), Some(drifted)) => doubled.max(drifted),
        (one, other) => one.or(other)?,
    };
    Some(amplifier.bias_over_range.map_or(largest, |most| largest.min(most)))
}

/// The largest change of the bias current since T0; `None` when no law is stated.
fn bias_change(frame: &Frame<'_>, amplifier: &Amplifier) -> Option<Amperes> {
    let ambient = frame.conditions().ambient;
    let Some(base) = bias_at(amplifier, frame.base) else {
        // Only a largest figure over the range: at 25 °C `bias` is known to lie below it, at
        // another T0 nothing is known but that both are between 0 and it.
        let most = amplifier.bias_over_range?;
        return Some(if frame.base == ROOM { most - amplifier.bias } else { most });
    };
    // Every law has its lowest point at 25 °C, so the extremes are there and at the ends.
    let between = ambient.contains(ROOM).then_some(ROOM);
    [Some(ambient.low()), Some(ambient.high()), between]
        .into_iter()
        .flatten()
        .filter_map(|at| Some((bias_at(amplifier, at)? - base).abs()))
        .reduce(Amperes::max)
}

pub(super) fn bias_drift(frame: &Frame<'_>, amplifier: &Amplifier) -> Figure<Size> {
    let still = frame.excursion <= Kelvins::ZERO;
    stated(bias_change(frame, amplifier), "bias_doubling", still, |change| {
        if still { Ppm::ZERO } else { Ppm::from_ratio(change / frame.current) }
    })
}

/// An input error that stays in proportion to a step of some voltage.
fn rejected(
    frame: &Frame<'_>,
    rejection: Option<Decibels>,
    field: &'static str,
    step: Volts,
) -> Figure<Size> {
    stated(rejection, field, step.value() == 0.0, |rejection| {
        Ppm::from_ratio(step * rejection.attenuation() / frame.vref)
    })
}

pub(super) fn cmrr(frame: &Frame<'_>, amplifier: &Amplifier) -> Figure<Size> {
    let (point, note) = match (frame.calibrated, amplifier.tested_common_mode) {
        (Some(at), _) => (at.node, at.load_note()),
        (None, Some(tested)) => (frame.negative_middle + tested, None),
        (None, None) => (
            frame.rails_middle,
            Some(Note::FromMiddle { field: "tested_common_mode", of: "the rails" }),
        ),
    };
    rejected(frame, amplifier.cmrr, "cmrr", distance(frame.node, point)).noted(note)
}

pub(super) fn psrr(frame: &Frame<'_>, amplifier: &Amplifier) -> Figure<Size> {
    let (point, note) = match (frame.calibrated, amplifier.tested_supply) {
        (Some(at), _) => (at.total_supply, at.supply_note()),
        (None, Some(tested)) => (tested, None),
        (None, None) => (
            frame.conditions().supply.middle() - frame.negative_middle,
            Some(Note::FromMiddle { field: "tested_supply", of: "the total supply" }),
        ),
    };
    rejected(frame, amplifier.psrr, "psrr", distance(frame.total_supply, point)).noted(note)
}

pub(super) fn gain(frame: &Frame<'_>, amplifier: &Amplifier) -> Figure<Size> {
    let (point, note) = match frame.calibrated {
        Some(at) => (at.node, at.load_note()),
        None => (frame.rails_middle, Some(Note::FromMiddleOfRails)),
    };
    let step = distance(frame.node, point);
    rejected(frame, amplifier.open_loop_gain, "open_loop_gain", step).noted(note)
}

pub(super) fn noise(frame: &Frame<'_>, amplifier: &Amplifier) -> Figure<Size> {
    stated(amplifier.noise, "noise", false, |noise| Ppm::from_ratio(noise * 0.5 / frame.vref))
}

pub(super) fn current_noise(frame: &Frame<'_>, amplifier: &Amplifier) -> Figure<Size> {
    stated(amplifier.current_noise, "current_noise", false, |noise| {
        Ppm::from_ratio(noise * 0.5 / frame.current)
    })
}
