//! The error budget of one design, term by term.

use std::ptr;

use ampthrift::catalog::{Ageing, Amplifier, GrowthLaw, TempcoMethod};
use ampthrift::request::{BoxReading, Budget, Request};

use super::corners::Corners;
use super::physics::{Built, Joined};
use super::window::loads;

/// Distances below this are rounding, not a distance.
const NO_DISTANCE: f64 = 1e-12;

/// The listed terms, the worst-case sum of the static ones, and the figures not stated.
pub struct Sums<'a> {
    pub terms: Vec<(&'static str, f64)>,
    pub statics: f64,
    pub missing: Vec<(&'a str, &'static str)>,
    adjusted: bool,
}

impl<'a> Sums<'a> {
    fn plain(&mut self, name: &'static str, ppm: f64) {
        self.terms.push((name, ppm));
    }

    /// A term that an adjustment removes; `worst` is its size when everything adds.
    fn fixed(&mut self, name: &'static str, ppm: f64, worst: f64) {
        self.statics += worst;
        self.terms.push((name, if self.adjusted { 0.0 } else { ppm }));
    }

    /// A factor times a figure that may not be stated; nothing is missed where the factor is 0.
    fn scaled(
        &mut self,
        name: &'static str,
        code: &'a str,
        field: &'static str,
        figure: Option<f64>,
        factor: f64,
        is_static: bool,
    ) {
        match figure {
            Some(figure) if is_static => self.fixed(name, figure * factor, figure * factor),
            Some(figure) => self.plain(name, figure * factor),
            None if factor != 0.0 => self.missing.push((code, field)),
            None => {}
        }
    }
}

/// The largest distance of a range from a point.
fn distance(low: f64, high: f64, point: f64) -> f64 {
    let far = (low - point).abs().max((high - point).abs());
    if far < NO_DISTANCE { 0.0 } else { far }
}

/// How far an error stated for a time has grown after the service time.
fn growth(ageing: Ageing, service: f64) -> f64 {
    let ratio = service / ageing.over.value();
    match ageing.law {
        GrowthLaw::Sqrt => ratio.sqrt(),
        GrowthLaw::Linear => ratio,
    }
}

/// All terms of a design.
pub fn all<'a>(request: &Request, built: &Built<'a>, at: &Corners) -> Sums<'a> {
    let mut sums = Sums {
        terms: Vec::with_capacity(32),
        statics: 0.0,
        missing: Vec::new(),
        adjusted: built.adjustment.is_some(),
    };
    reference(&mut sums, request, built, at);
    amplifier(&mut sums, built, at);
    network(&mut sums, request, built, at);
    board(&mut sums, request, built, at);
    sums
}

fn reference<'a>(sums: &mut Sums<'a>, request: &Request, built: &Built<'a>, at: &Corners) {
    let part = built.reference;
    let code = part.order_code.as_str();
    let vref = part.output.value().value();
    let tempco = part.tempco.value();
    let accuracy = part.accuracy.value();
    sums.fixed("reference_accuracy", accuracy, accuracy);
    let shift = part.assembly_shift.map(|ppm| ppm.value());
    sums.scaled("reference_assembly_shift", code, "assembly_shift", shift, 1.0, true);

    let over = part.tempco_over;
    let covers = over.low().value() <= at.cold && at.hot <= over.high().value();
    let kelvins = match part.tempco_method {
        TempcoMethod::Butterfly => {
            (at.hot - 25.0).abs().max((at.cold - 25.0).abs()) + (at.t0 - 25.0).abs()
        }
        TempcoMethod::Box if request.conditions.box_reading == BoxReading::Guaranteed && covers => {
            over.high().value() - over.low().value()
        }
        TempcoMethod::Box | TempcoMethod::Slope => at.dt,
    };
    sums.plain("reference_tempco", tempco * kelvins);

    let power =
        |plus: f64, x: f64| (plus - x) * (part.quiescent.value() + at.current) - vref * at.current;
    let hottest = power(at.plus_high, at.x_low);
    let watts = match at.calibrated {
        None => hottest,
        Some((plus, x)) => {
            let then = power(plus, x);
            (hottest - then).abs().max((power(at.plus_low, at.x_high) - then).abs())
        }
    };
    let watts = if watts.abs() < NO_DISTANCE { 0.0 } else { watts };
    let thermal = part.thermal.map(|k| k.value());
    sums.scaled("reference_self_heating", code, "thermal", thermal, tempco * watts, false);

    let away = (at.current - part.load_tested_at.value()).abs();
    let regulation = part.load_regulation.map(|r| r.value());
    sums.scaled("reference_load_regulation", code, "load_regulation", regulation, away, true);

    let point = match (at.calibrated, part.line_tested_at) {
        (Some((plus, x)), _) => plus - x,
        (None, Some(tested)) => tested.value(),
        (None, None) => at.plus_middle() - at.x_middle,
    };
    let away = distance(at.plus_low - at.x_high, at.plus_high - at.x_low, point);
    let regulation = part.line_regulation.map(|r| r.value());
    sums.scaled("reference_line_regulation", code, "line_regulation", regulation, away, false);

    let grown = growth(part.drift, request.conditions.service.value());
    let drift = part.drift.error.map(|ppm| ppm.value());
    sums.scaled("reference_drift", code, "drift", drift, grown, false);
    let hysteresis = part.hysteresis.map(|ppm| ppm.value());
    let warmed = if at.dt > 0.0 { 1.0 } else { 0.0 };
    sums.scaled("reference_hysteresis", code, "hysteresis", hysteresis, warmed, false);
    let noise = part.noise.map(|volts| volts.value());
    sums.scaled("reference_noise", code, "noise", noise, 0.5 / vref * 1e6, false);
}

/// Bias current at a temperature, where a law for it is stated.
fn bias_at(part: &Amplifier, celsius: f64) -> f64 {
    let bias = part.bias.value();
    let mut most: f64 = 0.0;
    if let Some(doubling) = part.bias_doubling {
        let above = celsius - 25.0;
        let grown = if above > 0.0 { bias * 2f64.powf(above / doubling.value()) } else { bias };
        most = most.max(grown);
    }
    if let Some(drift) = part.bias_drift {
        most = most.max(bias + drift.value() * (celsius - 25.0).abs());
    }
    match part.bias_over_range {
        Some(limit) => most.min(limit.value()),
        None => most,
    }
}

/// Change of the bias current over the ambient; `None` when no law is stated.
fn bias_change(part: &Amplifier, at: &Corners) -> Option<f64> {
    let no_curve = part.bias_doubling.is_none() && part.bias_drift.is_none();
    if no_curve && part.bias_over_range.is_none() {
        return None;
    }
    if at.dt == 0.0 {
        return Some(0.0);
    }
    if no_curve {
        let limit = part.bias_over_range?.value();
        return Some(if at.t0 == 25.0 { limit - part.bias.value() } else { limit });
    }
    let mut most: f64 = 0.0;
    let mut points = vec![at.cold, at.hot];
    if at.cold < 25.0 && 25.0 < at.hot {
        points.push(25.0);
    }
    for celsius in points {
        most = most.max((bias_at(part, celsius) - bias_at(part, at.t0)).abs());
    }
    Some(most)
}

fn amplifier<'a>(sums: &mut Sums<'a>, built: &Built<'a>, at: &Corners) {
    let part = built.amplifier;
    let code = part.order_code.as_str();
    let vref = built.reference.output.value().value();
    let per_volt = 1e6 / vref;
    let per_ampere = 1e6 / at.current;

    let offset = part.offset.value() * per_volt;
    sums.fixed("amplifier_offset", offset, offset);
    let drift = part.offset_drift.map(|d| d.value());
    let factor = at.dt * per_volt;
    sums.scaled("amplifier_offset_drift", code, "offset_drift", drift, factor, false);
    let bias = part.bias.value() * per_ampere;
    sums.fixed("amplifier_bias", bias, bias);
    match bias_change(part, at) {
        Some(amperes) => sums.plain("amplifier_bias_drift", amperes * per_ampere),
        None if at.dt > 0.0 => sums.missing.push((code, "bias_doubling")),
        None => {}
    }

    let left_over = |decibels: f64| 10f64.powf(-decibels / 20.0);
    let point = match (at.calibrated, part.tested_common_mode) {
        (Some((_, x)), _) => x,
        (None, Some(tested)) => at.minus_middle() + tested.value(),
        (None, None) => at.rails_middle(),
    };
    let factor = distance(at.x_low, at.x_high, point) * per_volt;
    let rejection = part.cmrr.map(|db| left_over(db.value()));
    sums.scaled("amplifier_cmrr", code, "cmrr", rejection, factor, false);

    let point = match (at.calibrated, part.tested_supply) {
        (Some((plus, _)), _) => plus - at.minus_middle(),
        (None, Some(tested)) => tested.value(),
        (None, None) => at.plus_middle() - at.minus_middle(),
    };
    let away = distance(at.plus_low - at.minus_high, at.plus_high - at.minus_low, point);
    let rejection = part.psrr.map(|db| left_over(db.value()));
    sums.scaled("amplifier_psrr", code, "psrr", rejection, away * per_volt, false);

    let point = match at.calibrated {
        Some((_, x)) => x,
        None => at.rails_middle(),
    };
    let factor = distance(at.x_low, at.x_high, point) * per_volt;
    let gain = part.open_loop_gain.map(|db| left_over(db.value()));
    sums.scaled("amplifier_gain", code, "open_loop_gain", gain, factor, false);

    let noise = part.noise.map(|volts| volts.value());
    sums.scaled("amplifier_noise", code, "noise", noise, 0.5 * per_volt, false);
    let noise = part.current_noise.map(|amperes| amperes.value());
    let name = "amplifier_current_noise";
    sums.scaled(name, code, "current_noise", noise, 0.5 * per_ampere, false);
}

/// A term over several elements: each element's figure (`None` where it is not stated) and the
/// factor it is multiplied by.
fn over_elements<'a>(
    sums: &mut Sums<'a>,
    budget: Budget,
    built: &Built<'a>,
    name: &'static str,
    field: &'static str,
    is_static: bool,
    figures: &[(Option<f64>, f64)],
) {
    let mut worst = 0.0;
    let mut by_type: Vec<(*const _, f64)> = Vec::new();
    let mut listed = false;
    for (piece, &(figure, factor)) in built.pieces.iter().zip(figures) {
        let Some(figure) = figure else {
            if factor != 0.0 {
                sums.missing.push((piece.code, field));
            }
            continue;
        };
        listed = true;
        let ppm = figure * factor;
        worst += ppm;
        let this: *const _ = ptr::from_ref(piece.of);
        match by_type.iter_mut().find(|(other, _)| ptr::eq(*other, this)) {
            Some((_, sum)) => *sum += ppm,
            None => by_type.push((this, ppm)),
        }
    }
    if !listed {
        return;
    }
    let ppm = match budget {
        Budget::WorstCase => worst,
        Budget::Rss | Budget::Gum { .. } => {
            by_type.iter().map(|(_, sum)| sum * sum).sum::<f64>().sqrt()
        }
    };
    if is_static {
        sums.fixed(name, ppm, worst);
    } else {
        sums.plain(name, ppm);
    }
}

fn network<'a>(sums: &mut Sums<'a>, request: &Request, built: &Built<'a>, at: &Corners) {
    let vref = built.reference.output.value().value();
    let whole = built.ohms();
    let mismatch = (vref / at.current / whole - 1.0).abs() * 1e6;
    sums.fixed("resistor_mismatch", mismatch, mismatch);

    let service = request.conditions.service.value();
    let mut tolerance = Vec::new();
    let mut assembly = Vec::new();
    let mut tempco = Vec::new();
    let mut heating = Vec::new();
    let mut stability = Vec::new();
    let mut voltage = Vec::new();
    for (piece, (across, power)) in built.pieces.iter().zip(loads(built)) {
        let of = piece.of;
        let share = match built.joined {
            Joined::Single | Joined::Series => piece.ohms / whole,
            Joined::Parallel => whole / piece.ohms,
        };
        tolerance.push((Some(of.tolerance.value()), share));
        assembly.push((of.assembly_shift.map(|ppm| ppm.value()), share));
        tempco.push((Some(of.tempco.value()), share * at.dt));
        heating.push((of.thermal.map(|k| k.value()), share * of.tempco.value() * power));
        stability
            .push((of.stability.error.map(|p| p.value()), share * growth(of.stability, service)));
        voltage.push((of.voltage_coefficient.map(|c| c.value()), share * across));
    }
    let mut term = |name, field, is_static, figures: &[_]| {
        over_elements(sums, request.budget, built, name, field, is_static, figures);
    };
    term("resistor_tolerance", "tolerance", true, &tolerance);
    term("resistor_assembly_shift", "assembly_shift", true, &assembly);
    term("resistor_tempco", "tempco", false, &tempco);
    term("resistor_self_heating", "thermal", true, &heating);
    term("resistor_stability", "stability", false, &stability);
    term("resistor_voltage_coefficient", "voltage_coefficient", true, &voltage);
}

fn board(sums: &mut Sums<'_>, request: &Request, built: &Built<'_>, at: &Corners) {
    let conditions = &request.conditions;
    let vref = built.reference.output.value().value();
    let wanted = vref / at.current;
    if let Some(insulation) = conditions.insulation {
        let mut volts: f64 = 0.0;
        for x in [at.x_low, at.x_high] {
            for rail in [0.0, at.minus_low, at.minus_high, at.plus_low, at.plus_high] {
                volts = volts.max((x - rail).abs());
            }
        }
        let leaks = if conditions.guarded { 0.0 } else { 1e6 / insulation.value() };
        sums.plain("board_leak_across", wanted * leaks);
        sums.plain("board_leak_ground", volts / at.current * leaks);
    }
    sums.plain("board_thermal_emf", conditions.thermal_emf.value() / vref * 1e6);
    let wiring = conditions.wiring.value() / wanted * 1e6;
    sums.fixed("board_wiring", wiring, wiring);
    if let Some(adjustment) = built.adjustment {
        sums.plain("adjustment_residual", adjustment.residual.value());
        sums.plain("adjustment_tempco", adjustment.tempco.value() * at.dt);
    }
}
