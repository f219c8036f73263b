//! The terms of the voltage reference.

use crate::catalog::{Ageing, GrowthLaw, Reference, TempcoMethod};
use crate::quantity::{Celsius, Kelvins, Ppm, Seconds, Watts};
use crate::request::BoxReading;

use super::figure::{Figure, Note, Size, stated};
use super::frame::{Frame, distance};

/// How much an error stated for a time has grown (or not yet) after `service`.
pub(super) fn growth(ageing: Ageing, service: Seconds) -> f64 {
    let ratio = service / ageing.over;
    match ageing.law {
        GrowthLaw::Sqrt => ratio.sqrt(),
        GrowthLaw::Linear => ratio,
    }
}

pub(super) fn accuracy(_: &Frame<'_>, reference: &Reference) -> Figure<Size> {
    Figure::known(reference.accuracy)
}

pub(super) fn assembly_shift(_: &Frame<'_>, reference: &Reference) -> Figure<Size> {
    stated(reference.assembly_shift, "assembly_shift", false, |shift| shift)
}

pub(super) fn tempco(frame: &Frame<'_>, reference: &Reference) -> Figure<Size> {
    let ambient = frame.conditions().ambient;
    let over = reference.tempco_over;
    let slope = reference.tempco * frame.excursion;
    let (ppm, note) = match (reference.tempco_method, frame.conditions().box_reading) {
        (TempcoMethod::Slope, _) => (slope, None),
        (TempcoMethod::Butterfly, _) => {
            // The cone stands on the 25 °C point; the worst is one flank at the ambient end and
            // the other where the errors were removed.
            let room = Celsius::new(25.0);
            let farther = (ambient.high() - room).abs().max((ambient.low() - room).abs());
            (reference.tempco * (farther + (frame.base - room).abs()), None)
        }
        (TempcoMethod::Box, BoxReading::Slope) => (slope, Some(Note::BoxAsSlope)),
        (TempcoMethod::Box, BoxReading::Guaranteed)
            if over.contains(ambient.low()) && over.contains(ambient.high()) =>
        {
            (reference.tempco * (over.high() - over.low()), Some(Note::BoxGuaranteed))
        }
        (TempcoMethod::Box, BoxReading::Guaranteed) => (slope, Some(Note::BoxTooNarrow)),
    };
    Figure::known(ppm).noted(note)
}

pub(super) fn self_heating(frame: &Frame<'_>, reference: &Reference) -> Figure<Size> {
    let through = reference.quiescent + frame.current;
    let (power, note) = match frame.calibrated {
        // P is linear in V+ − Vx, so its change is that of V+ − Vx times the current.
        Some(at) => (distance(frame.reference_supply, at.reference_supply) * through, at.note()),
        None => {
            let most = frame.reference_supply.high() * through - frame.vref * frame.current;
            (most.max(Watts::ZERO), None)
        }
    };
    let zero_anyway = power.value() == 0.0 || reference.tempco.value() == 0.0;
    stated(reference.thermal, "thermal", zero_anyway, |thermal| {
        reference.tempco * (thermal * power)
    })
    .noted(note)
}

pub(super) fn load_regulation(frame: &Frame<'_>, reference: &Reference) -> Figure<Size> {
    let step = (frame.current - reference.load_tested_at).abs();
    stated(reference.load_regulation, "load_regulation", step.value() == 0.0, |regulation| {
        regulation * step
    })
}

pub(super) fn line_regulation(frame: &Frame<'_>, reference: &Reference) -> Figure<Size> {
    let (point, note) = match (frame.calibrated, reference.line_tested_at) {
        (Some(at), _) => (at.reference_supply, at.note()),
        (None, Some(tested)) => (tested, None),
        (None, None) => (
            frame.reference_supply_middle,
            Some(Note::FromMiddle { field: "line_tested_at", of: "V+ − Vx" }),
        ),
    };
    let step = distance(frame.reference_supply, point);
    stated(reference.line_regulation, "line_regulation", step.value() == 0.0, |regulation| {
        regulation * step
    })
    .noted(note)
}

pub(super) fn drift(frame: &Frame<'_>, reference: &Reference) -> Figure<Size> {
    let service = frame.conditions().service;
    let grown = growth(reference.drift, service);
    stated(reference.drift.error, "drift", service.value() == 0.0, |drift| drift * grown)
}

pub(super) fn hysteresis(frame: &Frame<'_>, reference: &Reference) -> Figure<Size> {
    let still = frame.excursion <= Kelvins::ZERO;
    stated(reference.hysteresis, "hysteresis", still, |shift| if still { Ppm::ZERO } else { shift })
}

pub(super) fn noise(frame: &Frame<'_>, reference: &Reference) -> Figure<Size> {
    stated(reference.noise, "noise", false, |noise| Ppm::from_ratio(noise * 0.5 / frame.vref))
}
