//! The extremes of one output's conditions, in plain numbers.

use ampthrift::catalog::{Adjustment, Lift};
use ampthrift::request::{Load, Output, Request};

/// Every extreme that a term or a limit looks at, in SI units and °C.
pub struct Corners {
    pub current: f64,
    pub plus_low: f64,
    pub plus_high: f64,
    pub minus_low: f64,
    pub minus_high: f64,
    pub cold: f64,
    pub hot: f64,
    /// The temperature from which changes are counted.
    pub t0: f64,
    /// The larger distance of an ambient end from `t0`.
    pub dt: f64,
    pub lift_low: f64,
    pub lift_high: f64,
    pub x_low: f64,
    pub x_high: f64,
    /// Middle of the load plus the middle lift drop.
    pub x_middle: f64,
    /// V+ and Vx at adjustment, with an adjustment.
    pub calibrated: Option<(f64, f64)>,
}

/// The load's voltage range at a current.
pub fn load_volts(load: Load, current: f64) -> (f64, f64) {
    match load {
        Load::Voltage(range) => (range.low().value(), range.high().value()),
        Load::Resistance(range) => (range.low().value() * current, range.high().value() * current),
    }
}

/// A diode's typical drop at 25 °C: linear in the logarithm of the current between the stated
/// points, nothing outside them.
pub fn typical_drop(lift: &Lift, current: f64) -> Option<f64> {
    for point in &lift.drop {
        if point.current.value() == current {
            return Some(point.drop.value());
        }
    }
    for pair in lift.drop.windows(2) {
        let (i1, v1) = (pair[0].current.value(), pair[0].drop.value());
        let (i2, v2) = (pair[1].current.value(), pair[1].drop.value());
        if i1 < current && current < i2 {
            let along = (current.ln() - i1.ln()) / (i2.ln() - i1.ln());
            return Some(v1 + along * (v2 - v1));
        }
    }
    None
}

/// Least and greatest drop of a stack over the ambient, never below zero.
fn stack_drop(lift: &Lift, count: u32, current: f64, cold: f64, hot: f64) -> Option<(f64, f64)> {
    let typical = typical_drop(lift, current)?;
    let mut all = Vec::new();
    for t in [cold, hot] {
        for sign in [-1.0, 1.0] {
            let one =
                typical + lift.drop_tempco.value() * (t - 25.0) + sign * lift.drop_spread.value();
            all.push((f64::from(count) * one).max(0.0));
        }
    }
    let low = all.iter().copied().fold(f64::INFINITY, f64::min);
    let high = all.iter().copied().fold(0.0, f64::max);
    Some((low, high))
}

impl Corners {
    /// `None` when the lift's curve does not reach the current.
    pub fn new(
        request: &Request,
        output: &Output,
        lift: Option<(&Lift, u32)>,
        adjustment: Option<&Adjustment>,
    ) -> Option<Self> {
        let c = &request.conditions;
        let current = output.current.value().value();
        let (cold, hot) = (c.ambient.low().value(), c.ambient.high().value());
        let (plus_low, plus_high) = (c.supply.low().value(), c.supply.high().value());
        let t0 = if adjustment.is_some() { c.calibrated_at.value() } else { 25.0 };
        let (load_low, load_high) = load_volts(output.load, current);
        let (lift_low, lift_high) = match lift {
            None => (0.0, 0.0),
            Some((diode, count)) => stack_drop(diode, count, current, cold, hot)?,
        };
        let lift_middle = (lift_low + lift_high) / 2.0;
        let calibrated = adjustment.map(|_| {
            let plus = match c.calibrated_supply {
                Some(volts) => volts.value(),
                None => (plus_low + plus_high) / 2.0,
            };
            let load = match c.calibrated_load {
                Some(load) => load_volts(load, current).0,
                None => (load_low + load_high) / 2.0,
            };
            (plus, load + lift_middle)
        });
        Some(Self {
            current,
            plus_low,
            plus_high,
            minus_low: c.negative_rail.low().value(),
            minus_high: c.negative_rail.high().value(),
            cold,
            hot,
            t0,
            dt: (hot - t0).abs().max((cold - t0).abs()),
            lift_low,
            lift_high,
            x_low: load_low + lift_low,
            x_high: load_high + lift_high,
            x_middle: (load_low + load_high) / 2.0 + lift_middle,
            calibrated,
        })
    }

    /// Middle of the negative rail.
    pub fn minus_middle(&self) -> f64 {
        (self.minus_low + self.minus_high) / 2.0
    }

    /// Middle of the positive rail.
    pub fn plus_middle(&self) -> f64 {
        (self.plus_low + self.plus_high) / 2.0
    }

    /// The middle between the rails.
    pub fn rails_middle(&self) -> f64 {
        (self.minus_middle() + self.plus_middle()) / 2.0
    }
}
