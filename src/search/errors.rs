//! Element errors of each resistor type as polynomials in its place in the network.
//!
//! Every element term is its share w times a figure of the type, times 1, the volts across it or
//! the watts in it. So a type's terms sum to w·(a + b·V + c·P), and the sum of their squares to
//! w²·(a + b·V² + c·P²). For elements of one type in rss and gum each term adds before it is
//! squared (JCGM 100:2008, 5.2.2): a·(Σw)² + b·(Σw·V)² + c·(Σw·P)².

use crate::catalog::ResistorType;
use crate::circuit::{Contribution, Frame};
use crate::quantity::{Volts, Watts};
use crate::request::{Budget, Unstated};

use super::combos::{Combo, Slot};
use super::market::Market;

/// The errors of one type.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct TypeErrors {
    /// Whether it may be used at all: temperature, figures stated.
    pub usable: bool,
    /// Coefficients of 1, V, P (or their squares) in the budget.
    pub random: [f64; 3],
    /// Coefficients of 1, V, P in the static sum.
    pub statics: [f64; 3],
    /// Most watts in one element.
    pub watts_most: f64,
    /// Most volts across one element.
    pub volts_most: f64,
}

impl TypeErrors {
    /// Whether an element stands its place.
    #[must_use]
    pub fn stands(&self, slot: &Slot) -> bool {
        self.usable && slot.watts <= self.watts_most && slot.volts <= self.volts_most
    }

    /// The static sum of one element.
    #[must_use]
    pub fn statics_of(&self, slot: &Slot) -> f64 {
        let [a, b, c] = self.statics;
        slot.share * (a + b * slot.volts + c * slot.watts)
    }

    /// The budget share of one element, alone of its type.
    #[must_use]
    pub fn random_of(&self, slot: &Slot, method: Budget) -> f64 {
        let [a, b, c] = self.random;
        match method {
            Budget::WorstCase => slot.share * (a + b * slot.volts + c * slot.watts),
            Budget::Rss | Budget::Gum { .. } => {
                let (v, p) = (slot.volts, slot.watts);
                slot.share * slot.share * (a + b * v * v + c * p * p)
            }
        }
    }
}

/// Budget share and static sum of a whole network whose slots have the given types.
#[must_use]
pub fn network_errors(
    errors: &[TypeErrors],
    method: Budget,
    combo: &Combo,
    types: &[u32],
) -> (f64, f64) {
    let slots = combo.slots();
    let statics = slots
        .iter()
        .zip(types)
        .map(|(slot, &of)| errors[of as usize].statics_of(slot))
        .sum::<f64>();
    let random = match method {
        Budget::WorstCase => slots
            .iter()
            .zip(types)
            .map(|(slot, &of)| errors[of as usize].random_of(slot, method))
            .sum(),
        Budget::Rss | Budget::Gum { .. } => {
            let mut sum = 0.0;
            for (first, &of) in types.iter().enumerate() {
                if types[..first].contains(&of) {
                    continue;
                }
                let [mut w, mut wv, mut wp] = [0.0; 3];
                for (slot, _) in slots.iter().zip(types).filter(|&(_, &other)| other == of) {
                    w += slot.share;
                    wv += slot.share * slot.volts;
                    wp += slot.share * slot.watts;
                }
                let [a, b, c] = errors[of as usize].random;
                sum += a * w * w + b * wv * wv + c * wp * wp;
            }
            sum
        }
    };
    (random, statics)
}

/// The errors of every type of a market in a frame: they are the same in all frames of a request
/// with an adjustment, and in all without. The coefficients are read off the circuit's own terms
/// at unit share, with and without one volt or watt.
#[must_use]
pub fn type_errors(market: &Market<'_>, frame: &Frame<'_>) -> Vec<TypeErrors> {
    let refuse = market.request.rules.unstated == Unstated::Reject;
    let of_type = |of: &&ResistorType| {
        let at = |volts: f64, watts: f64| -> Contribution {
            frame.element_contribution(of, Volts::new(volts), Watts::new(watts))
        };
        let (plain, volt, watt) = (at(0.0, 0.0), at(1.0, 0.0), at(0.0, 1.0));
        let read = |figure: fn(&Contribution) -> f64| {
            [figure(&plain), figure(&volt) - figure(&plain), figure(&watt) - figure(&plain)]
        };
        let bounds = frame.element_bounds(of);
        TypeErrors {
            usable: bounds.temperature_holds && !(refuse && at(1.0, 1.0).unstated),
            random: read(|c| c.random),
            statics: read(|c| c.statics),
            watts_most: bounds.watts.value(),
            volts_most: bounds.volts.map_or(f64::INFINITY, Volts::value),
        }
    };
    market.types.iter().map(of_type).collect()
}
