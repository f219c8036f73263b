//! A frame: one output with reference voltage, lift and adjustment chosen, and what follows from
//! these alone.

use crate::catalog::{Adjustment, Lift};
use crate::quantity::{Amperes, Celsius, Kelvins, Ohms, Range, Volts};
use crate::request::{Conditions, Output, Request};

use super::design::LiftStack;
use super::figure::Note;
use super::limits::LimitId;

/// Voltages this close are one voltage: what lies between is the rounding of sums, and no figure
/// is asked of a record for it.
const SAME_VOLTAGE: Volts = Volts::new(1e-9);

/// One output with its reference voltage, lift and adjustment chosen. Every term and limit is a
/// function of a frame and one part.
#[derive(Clone, Debug)]
pub struct Frame<'a> {
    pub(super) request: &'a Request,
    pub(super) output: &'a Output,
    pub(super) vref: Volts,
    pub(super) lift: Option<LiftStack<'a>>,
    pub(super) adjustment: Option<&'a Adjustment>,
    /// I, nominal.
    pub(super) current: Amperes,
    /// R* = Vref / I.
    pub(super) ideal: Ohms,
    /// Vload.
    pub(super) load: Range<Volts>,
    /// Vlift, least and greatest.
    pub(super) lift_drop: Range<Volts>,
    /// Vx = Vload + Vlift.
    pub(super) node: Range<Volts>,
    /// V+ − Vx: what the reference sees between its supply and ground pins.
    pub(super) reference_supply: Range<Volts>,
    /// V+ − V−.
    pub(super) total_supply: Range<Volts>,
    /// The middle of V−.
    pub(super) negative_middle: Volts,
    /// The middle between V− and V+, each taken at its own middle.
    pub(super) rails_middle: Volts,
    /// The middle of V+ − Vx, each taken at its own middle.
    pub(super) reference_supply_middle: Volts,
    /// T0: where the errors are as stated, or as adjusted.
    pub(super) base: Celsius,
    /// dT: the larger distance of an ambient end from T0.
    pub(super) excursion: Kelvins,
    /// The conditions at adjustment, with one.
    pub(super) calibrated: Option<Calibrated>,
}

/// The conditions at adjustment.
#[derive(Clone, Copy, Debug)]
pub(super) struct Calibrated {
    /// V+ − V−, from the middle of V−.
    pub total_supply: Volts,
    /// Vx, with the middle lift drop.
    pub node: Volts,
    /// V+ − Vx.
    pub reference_supply: Volts,
    supply_assumed: bool,
    load_assumed: bool,
}

impl Calibrated {
    /// The remark for a term that rests on the calibrated supply.
    pub fn supply_note(self) -> Option<Note> {
        self.supply_assumed.then_some(Note::CalibratedAtMiddle { supply: true, load: false })
    }

    /// The remark for a term that rests on the calibrated load.
    pub fn load_note(self) -> Option<Note> {
        self.load_assumed.then_some(Note::CalibratedAtMiddle { supply: false, load: true })
    }

    /// The remark for a term that rests on both.
    pub fn note(self) -> Option<Note> {
        (self.supply_assumed || self.load_assumed).then_some(Note::CalibratedAtMiddle {
            supply: self.supply_assumed,
            load: self.load_assumed,
        })
    }
}

/// How far the farther end of a range is from a point. Rounding noise counts as no distance.
pub(super) fn distance(range: Range<Volts>, point: Volts) -> Volts {
    let farther = (range.low() - point).abs().max((range.high() - point).abs());
    if farther <= SAME_VOLTAGE { Volts::ZERO } else { farther }
}

/// A range from two sums of which the first is not above the second, but for rounding.
fn span(low: Volts, high: Volts) -> Range<Volts> {
    Range::new(low, high).unwrap_or_else(|| Range::point(low))
}

/// Typical forward drop at 25 °C, linear in log I between the stated points; `None` outside them.
fn typical_drop(lift: &Lift, current: Amperes) -> Option<Volts> {
    if let [only] = lift.drop.as_slice() {
        return (only.current == current).then_some(only.drop);
    }
    lift.drop.windows(2).find_map(|pair| match pair {
        [from, to] if from.current <= current && current <= to.current => {
            let share = (current / from.current).ln() / (to.current / from.current).ln();
            Some(from.drop + (to.drop - from.drop) * share)
        }
        _ => None,
    })
}

/// Least and greatest drop of a stack over the ambient: n·(drop + tempco·(T − 25 °C) ± spread),
/// not below 0.
fn stack_drop(
    stack: LiftStack<'_>,
    current: Amperes,
    ambient: Range<Celsius>,
) -> Option<Range<Volts>> {
    let typical = typical_drop(stack.of, current)?;
    let at = |t: Celsius| typical + stack.of.drop_tempco * (t - Celsius::new(25.0));
    let (cold, hot) = (at(ambient.low()), at(ambient.high()));
    let count = f64::from(stack.count);
    let least = ((cold.min(hot) - stack.of.drop_spread) * count).max(Volts::ZERO);
    let greatest = ((cold.max(hot) + stack.of.drop_spread) * count).max(Volts::ZERO);
    Some(span(least, greatest))
}

impl<'a> Frame<'a> {
    /// Works out what follows from the choice of reference voltage, lift and adjustment.
    ///
    /// # Errors
    /// `LimitId::LiftCurrent` when the lift's curve does not reach the output's current.
    pub fn new(
        request: &'a Request,
        output: &'a Output,
        vref: Volts,
        lift: Option<LiftStack<'a>>,
        adjustment: Option<&'a Adjustment>,
    ) -> Result<Self, LimitId> {
        let conditions = &request.conditions;
        let (supply, negative) = (conditions.supply, conditions.negative_rail);
        let current = output.current.value();
        let load = output.load.voltage(current);
        let lift_drop = match lift {
            Some(stack) => {
                stack_drop(stack, current, conditions.ambient).ok_or(LimitId::LiftCurrent)?
            }
            None => Range::point(Volts::ZERO),
        };
        let node = span(load.low() + lift_drop.low(), load.high() + lift_drop.high());
        let node_middle = load.middle() + lift_drop.middle();
        let calibrated = adjustment.map(|_| {
            let supply_at = conditions.calibrated_supply.unwrap_or_else(|| supply.middle());
            let load_at = conditions.calibrated_load.map_or(load, |at| at.voltage(current));
            let node = load_at.middle() + lift_drop.middle();
            Calibrated {
                total_supply: supply_at - negative.middle(),
                node,
                reference_supply: supply_at - node,
                supply_assumed: conditions.calibrated_supply.is_none(),
                load_assumed: conditions.calibrated_load.is_none(),
            }
        });
        let base = if adjustment.is_some() { conditions.calibrated_at } else { Celsius::new(25.0) };
        let ambient = conditions.ambient;
        Ok(Self {
            request,
            output,
            vref,
            lift,
            adjustment,
            current,
            ideal: vref / current,
            load,
            lift_drop,
            node,
            reference_supply: span(supply.low() - node.high(), supply.high() - node.low()),
            total_supply: span(supply.low() - negative.high(), supply.high() - negative.low()),
            negative_middle: negative.middle(),
            rails_middle: (negative.middle() + supply.middle()) * 0.5,
            reference_supply_middle: supply.middle() - node_middle,
            base,
            excursion: (ambient.high() - base).abs().max((ambient.low() - base).abs()),
            calibrated,
        })
    }

    pub(super) const fn conditions(&self) -> &'a Conditions {
        &self.request.conditions
    }

    /// The reference voltage.
    #[must_use]
    pub const fn vref(&self) -> Volts {
        self.vref
    }

    /// The output's nominal current.
    #[must_use]
    pub const fn current(&self) -> Amperes {
        self.current
    }

    /// R* = Vref / I, the resistance that would make the current exact.
    #[must_use]
    pub const fn ideal_ohms(&self) -> Ohms {
        self.ideal
    }

    /// The voltage of node X: load plus lift.
    #[must_use]
    pub const fn node(&self) -> Range<Volts> {
        self.node
    }

    /// The lift's drop, least and greatest; 0 without a lift.
    #[must_use]
    pub const fn lift_drop(&self) -> Range<Volts> {
        self.lift_drop
    }

    /// The lift, if any.
    #[must_use]
    pub const fn lift(&self) -> Option<LiftStack<'a>> {
        self.lift
    }

    /// The adjustment, if any.
    #[must_use]
    pub const fn adjustment(&self) -> Option<&'a Adjustment> {
        self.adjustment
    }
}
