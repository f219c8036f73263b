//! The terms of the board and of the adjustment.

use crate::catalog::Adjustment;
use crate::quantity::{Ohms, Ppm, Volts};

use super::figure::{Figure, Note, Size};
use super::frame::Frame;

/// A leak that counts only where insulation is given, and not under a driven ring.
fn leak(frame: &Frame<'_>, size: impl FnOnce(Ohms) -> Ppm) -> Figure<Size> {
    match frame.conditions().insulation {
        None => Figure::Absent,
        Some(_) if frame.conditions().guarded => {
            Figure::known(Ppm::ZERO).noted(Some(Note::Guarded))
        }
        Some(insulation) => Figure::known(size(insulation)),
    }
}

pub(super) fn leak_across(frame: &Frame<'_>) -> Figure<Size> {
    leak(frame, |insulation| Ppm::from_ratio(frame.ideal / insulation))
}

pub(super) fn leak_ground(frame: &Frame<'_>) -> Figure<Size> {
    let (negative, supply) = (frame.conditions().negative_rail, frame.conditions().supply);
    let rails = [Volts::ZERO, negative.low(), negative.high(), supply.low(), supply.high()];
    let most = rails
        .into_iter()
        .flat_map(|rail| [frame.node.low() - rail, frame.node.high() - rail])
        .fold(Volts::ZERO, |most, across| most.max(across.abs()));
    leak(frame, |insulation| Ppm::from_ratio(most / insulation / frame.current))
}

pub(super) fn thermal_emf(frame: &Frame<'_>) -> Figure<Size> {
    Figure::known(Ppm::from_ratio(frame.conditions().thermal_emf / frame.vref))
}

pub(super) fn wiring(frame: &Frame<'_>) -> Figure<Size> {
    Figure::known(Ppm::from_ratio(frame.conditions().wiring / frame.ideal))
}

pub(super) fn residual(_: &Frame<'_>, adjustment: &Adjustment) -> Figure<Size> {
    Figure::known(adjustment.residual)
}

pub(super) fn adjustment_tempco(frame: &Frame<'_>, adjustment: &Adjustment) -> Figure<Size> {
    Figure::known(adjustment.tempco * frame.excursion)
}
