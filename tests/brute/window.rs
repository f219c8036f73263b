//! The operating window and what load a design can drive.

use ampthrift::request::Request;

use super::corners::Corners;
use super::physics::{Built, Joined, Line, at_most};

/// Absolute tolerance of volts and kelvins.
const TINY: f64 = 1e-9;

/// `value >= bound`.
fn above(name: &'static str, value: f64, bound: f64, unit: &'static str, tiny: f64) -> Line {
    let holds = at_most(bound, value, tiny);
    Line { name, value, bound, margin: value - bound, unit, holds, tied: false }
}

/// `value <= bound`.
fn below(name: &'static str, value: f64, bound: f64, unit: &'static str, tiny: f64) -> Line {
    let holds = at_most(value, bound, tiny);
    Line { name, value, bound, margin: bound - value, unit, holds, tied: false }
}

/// The entry with the smallest margin, but failing if any fails.
fn tightest(lines: &[Line]) -> Option<Line> {
    let mut worst = *lines.first()?;
    for line in lines {
        if line.margin < worst.margin {
            worst = *line;
        }
    }
    let rounding = 1e-12 * worst.value.abs().max(worst.bound.abs());
    let same = |line: &&Line| (line.margin - worst.margin).abs() <= rounding;
    worst.tied = lines.iter().filter(same).count() > 1;
    worst.holds = lines.iter().all(|line| line.holds);
    Some(worst)
}

/// Voltage across and power in each element.
pub fn loads(built: &Built<'_>) -> Vec<(f64, f64)> {
    let vref = built.reference.output.value().value();
    let whole = built.ohms();
    let each = |ohms: f64| {
        let volts = match built.joined {
            Joined::Single | Joined::Series => vref * ohms / whole,
            Joined::Parallel => vref,
        };
        (volts, volts * volts / ohms)
    };
    built.pieces.iter().map(|piece| each(piece.ohms)).collect()
}

/// All limits that apply.
pub fn limits<'a>(
    request: &Request,
    built: &Built<'a>,
    at: &Corners,
    statics: f64,
    missing: &mut Vec<(&'a str, &'static str)>,
) -> Vec<Line> {
    let conditions = &request.conditions;
    let (reference, amplifier) = (built.reference, built.amplifier);
    let vref = reference.output.value().value();
    let margin = conditions.margin.value();
    let mut lines = vec![
        above(
            "swing_low",
            at.x_low,
            at.minus_high + amplifier.swing_low.value() + margin,
            "V",
            TINY,
        ),
        below(
            "swing_high",
            at.x_high,
            at.plus_low - amplifier.swing_high.value() - margin,
            "V",
            TINY,
        ),
        below("input_low", at.minus_high + amplifier.input_low.value(), at.x_low, "V", TINY),
        below("input_high", at.x_high, at.plus_low - amplifier.input_high.value(), "V", TINY),
        above(
            "reference_headroom",
            at.plus_low - at.x_high,
            vref + reference.dropout.value(),
            "V",
            TINY,
        ),
        below(
            "reference_input_max",
            at.plus_high - at.x_low,
            reference.supply_max.value(),
            "V",
            TINY,
        ),
        below(
            "amplifier_supply_min",
            amplifier.total_supply.low().value(),
            at.plus_low - at.minus_high,
            "V",
            TINY,
        ),
        below(
            "amplifier_supply_max",
            at.plus_high - at.minus_low,
            amplifier.total_supply.high().value(),
            "V",
            TINY,
        ),
        below("reference_source", at.current, reference.source_max.value(), "A", 0.0),
        below("amplifier_sink", reference.quiescent.value(), amplifier.sink_max.value(), "A", 0.0),
    ];
    if let Some((diode, _)) = built.lift {
        lines.push(below("lift_current", at.current, diode.current_max.value(), "A", 0.0));
    }
    let mut powers = Vec::new();
    let mut volts = Vec::new();
    for (piece, (across, power)) in built.pieces.iter().zip(loads(built)) {
        let allowed = piece.of.power.value() * conditions.power_derating;
        powers.push(below("resistor_power", power, allowed, "W", 0.0));
        match piece.of.voltage_max {
            Some(most) => volts.push(below("resistor_voltage", across, most.value(), "V", TINY)),
            None => missing.push((piece.code, "voltage_max")),
        }
    }
    lines.extend(tightest(&powers));
    lines.extend(tightest(&volts));
    let mut ranges = vec![reference.supply.temperature, amplifier.supply.temperature];
    ranges.extend(built.pieces.iter().map(|piece| piece.of.supply.temperature));
    ranges.extend(built.lift.map(|(diode, _)| diode.supply.temperature));
    let mut ends = Vec::new();
    for range in ranges {
        ends.push(above("temperature", at.cold, range.low().value(), "degC", TINY));
        ends.push(below("temperature", at.hot, range.high().value(), "degC", TINY));
    }
    lines.extend(tightest(&ends));
    if let Some(bypass) = reference.bypass {
        match amplifier.capacitive_load {
            Some(most) => {
                lines.push(below("capacitive_load", bypass.value(), most.value(), "F", 0.0));
            }
            None => missing.push((&amplifier.order_code, "capacitive_load")),
        }
    }
    if let Some(most) = conditions.quiescent_max {
        match amplifier.quiescent {
            Some(own) => {
                let both = reference.quiescent.value() + own.value();
                lines.push(below("quiescent", both, most.value(), "A", 0.0));
            }
            None => missing.push((&amplifier.order_code, "quiescent")),
        }
    }
    if let Some(adjustment) = built.adjustment {
        lines.push(below("adjustment_range", statics, adjustment.range.value(), "ppm", 0.0));
    }
    lines
}

/// Lowest and highest load voltage at which every limit still holds.
pub fn compliance(request: &Request, built: &Built<'_>, at: &Corners) -> (f64, f64) {
    let (reference, amplifier) = (built.reference, built.amplifier);
    let margin = request.conditions.margin.value();
    let vref = reference.output.value().value();
    let low = (at.minus_high + amplifier.swing_low.value() + margin)
        .max(at.minus_high + amplifier.input_low.value())
        .max(at.plus_high - reference.supply_max.value());
    let high = (at.plus_low - amplifier.swing_high.value() - margin)
        .min(at.plus_low - amplifier.input_high.value())
        .min(at.plus_low - vref - reference.dropout.value());
    (low - at.lift_low, high - at.lift_high)
}

/// Output resistance; `None` when nothing that lowers it is stated.
pub fn output_ohms(request: &Request, built: &Built<'_>, at: &Corners) -> Option<f64> {
    let vref = built.reference.output.value().value();
    let left_over = |decibels: f64| 10f64.powf(-decibels / 20.0);
    let mut parts = Vec::new();
    parts.extend(built.amplifier.cmrr.map(|db| at.current * left_over(db.value()) / vref));
    parts
        .extend(built.amplifier.open_loop_gain.map(|db| at.current * left_over(db.value()) / vref));
    parts.extend(built.reference.line_regulation.map(|line| at.current * line.value() * 1e-6));
    if !request.conditions.guarded {
        parts.extend(request.conditions.insulation.map(|ohms| 1.0 / ohms.value()));
    }
    let sum: f64 = parts.iter().sum();
    (sum > 0.0).then(|| 1.0 / sum)
}
