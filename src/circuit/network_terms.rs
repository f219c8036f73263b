//! The terms of the set resistor. Those of an element are already weighted by its share w.

use crate::quantity::Ppm;

use super::figure::{Figure, Size, stated};
use super::frame::Frame;
use super::reference_terms::growth;
use super::wired::{Wired, WiredElement};

pub(super) fn mismatch(frame: &Frame<'_>, network: &Wired<'_>) -> Figure<Size> {
    Figure::known(network.mismatch(frame.ideal))
}

pub(super) fn tolerance(_: &Frame<'_>, element: &WiredElement<'_>) -> Figure<Size> {
    Figure::known(element.of.tolerance * element.share)
}

pub(super) fn assembly_shift(_: &Frame<'_>, element: &WiredElement<'_>) -> Figure<Size> {
    stated(element.of.assembly_shift, "assembly_shift", false, |shift| shift * element.share)
}

pub(super) fn tempco(frame: &Frame<'_>, element: &WiredElement<'_>) -> Figure<Size> {
    Figure::known(element.of.tempco * frame.excursion * element.share)
}

pub(super) fn self_heating(_: &Frame<'_>, element: &WiredElement<'_>) -> Figure<Size> {
    let zero_anyway = element.of.tempco.value() == 0.0;
    stated(element.of.thermal, "thermal", zero_anyway, |thermal| -> Ppm {
        element.of.tempco * (thermal * element.power) * element.share
    })
}

pub(super) fn stability(frame: &Frame<'_>, element: &WiredElement<'_>) -> Figure<Size> {
    let service = frame.conditions().service;
    stated(element.of.stability.error, "stability", service.value() == 0.0, |error| {
        error * growth(element.of.stability, service) * element.share
    })
}

pub(super) fn voltage_coefficient(_: &Frame<'_>, element: &WiredElement<'_>) -> Figure<Size> {
    stated(element.of.voltage_coefficient, "voltage_coefficient", false, |coefficient| {
        coefficient * element.volts * element.share
    })
}
