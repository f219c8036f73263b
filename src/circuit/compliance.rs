//! What load a design can drive.

use crate::quantity::{Decibels, Ohms, Volts};

use super::design::Design;
use super::evaluation::{Compliance, LimitLine};
use super::frame::Frame;
use super::limits::LoadEnd;

/// The compliance of a design whose limits are worked out.
///
/// A limit that depends on the load voltage has a margin that changes volt by volt with it, so the
/// extreme load is the asked one moved by the smallest margin at that end.
pub(super) fn compliance(
    frame: &Frame<'_>,
    design: &Design<'_>,
    limits: &[LimitLine],
) -> Compliance {
    let room = |end: LoadEnd| {
        let margins =
            limits.iter().filter(|line| line.limit.def().load_end == end).map(|line| line.margin);
        Volts::new(margins.fold(f64::INFINITY, f64::min))
    };
    Compliance {
        load_min: frame.load.low() - room(LoadEnd::Low),
        load_max: frame.load.high() + room(LoadEnd::High),
        output: output_resistance(frame, design),
    }
}

/// 1/R_out = I·((10^(−cmrr/20) + 10^(−open_loop_gain/20))/Vref + line_regulation) + 1/insulation
/// unless guarded; `None` when no part of it is stated, or all are zero.
fn output_resistance(frame: &Frame<'_>, design: &Design<'_>) -> Option<Ohms> {
    let amplifier = design.amplifier;
    let input_error: f64 = [amplifier.cmrr, amplifier.open_loop_gain]
        .into_iter()
        .flatten()
        .map(Decibels::attenuation)
        .sum();
    // The relative change of the current per volt of load, in 1/V.
    let line =
        design.reference.line_regulation.map_or(0.0, |line| (line * Volts::new(1.0)).ratio());
    let per_volt = input_error / frame.vref.value() + line;
    let leak = frame
        .conditions()
        .insulation
        .filter(|_| !frame.conditions().guarded)
        .map_or(0.0, |insulation| 1.0 / insulation.value());
    let siemens = frame.current.value() * per_volt + leak;
    (siemens > 0.0).then(|| Ohms::new(1.0 / siemens))
}
