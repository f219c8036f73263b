//! Which limits each part fails, asked by the search before it puts a design together.

use crate::catalog::{Amplifier, Reference, Supply};
use crate::quantity::Ppm;

use super::check::Check;
use super::design::Connection;
use super::figure::Figure;
use super::frame::Frame;
use super::limits::{LIMITS, LimitDef, LimitFn, LimitId};
use super::wired::{ElementChoice, Wired};

/// The limits whose check is known and does not hold. Nothing is allocated when none fails.
fn failing(mut check: impl FnMut(&LimitDef) -> Option<Figure<Check>>) -> Vec<LimitId> {
    LIMITS
        .iter()
        .filter(|limit| matches!(check(limit), Some(Figure::Known(Check { holds: false, .. }))))
        .map(|limit| limit.id)
        .collect()
}

impl Frame<'_> {
    fn placed(&self, limit: &LimitDef, supply: &Supply) -> Option<Figure<Check>> {
        match limit.check {
            LimitFn::Placed(check) => Some(check(self, supply)),
            _ => None,
        }
    }

    /// Limits that fail by the frame alone: lift current, lift temperature.
    #[must_use]
    pub fn own_failures(&self) -> Vec<LimitId> {
        let Some(lift) = self.lift else { return Vec::new() };
        failing(|limit| match limit.check {
            LimitFn::Lift(check) => Some(check(self, &lift)),
            _ => self.placed(limit, &lift.of.supply),
        })
    }

    /// Limits that a reference fails by itself in this frame.
    #[must_use]
    pub fn reference_failures(&self, reference: &Reference) -> Vec<LimitId> {
        failing(|limit| match limit.check {
            LimitFn::Reference(check) => Some(check(self, reference)),
            _ => self.placed(limit, &reference.supply),
        })
    }

    /// Limits that an amplifier fails by itself in this frame.
    #[must_use]
    pub fn amplifier_failures(&self, amplifier: &Amplifier) -> Vec<LimitId> {
        failing(|limit| match limit.check {
            LimitFn::Amplifier(check) => Some(check(self, amplifier)),
            _ => self.placed(limit, &amplifier.supply),
        })
    }

    /// Limits that a reference and an amplifier fail together (sink, capacitive load, quiescent).
    #[must_use]
    pub fn pair_failures(&self, reference: &Reference, amplifier: &Amplifier) -> Vec<LimitId> {
        failing(|limit| match limit.check {
            LimitFn::Pair(check) => Some(check(self, reference, amplifier)),
            _ => None,
        })
    }

    /// Whether a limit that needs both is left unchecked for want of a figure.
    #[must_use]
    pub fn pair_unstated(&self, reference: &Reference, amplifier: &Amplifier) -> bool {
        LIMITS.iter().any(|limit| match limit.check {
            LimitFn::Pair(check) => {
                matches!(check(self, reference, amplifier), Figure::NotStated(_))
            }
            _ => false,
        })
    }

    /// Limits that a network fails: power, voltage, temperature.
    #[must_use]
    pub fn network_failures(
        &self,
        connection: Connection,
        elements: &[ElementChoice<'_>],
    ) -> Vec<LimitId> {
        let wired = Wired::new(self, connection, elements);
        let fails = |figure| matches!(figure, Figure::Known(Check { holds: false, .. }));
        LIMITS
            .iter()
            .filter(|limit| {
                elements.iter().any(|choice| match limit.check {
                    LimitFn::Element(check) => fails(check(self, &wired.element(choice))),
                    LimitFn::Placed(check) => fails(check(self, &choice.of.supply)),
                    _ => false,
                })
            })
            .map(|limit| limit.id)
            .collect()
    }

    /// Whether a static sum (ppm) fits the adjustment's range (true without an adjustment).
    #[must_use]
    pub fn statics_fit(&self, sum: f64) -> bool {
        let Some(adjustment) = self.adjustment else { return true };
        failing(|limit| match limit.check {
            LimitFn::Adjustment(check) => Some(check(self, adjustment, Ppm::new(sum))),
            _ => None,
        })
        .is_empty()
    }

    /// Whether a total meets the output's accuracy.
    #[must_use]
    pub fn accuracy_holds(&self, total: Ppm) -> bool {
        Check::at_most(total, self.output.accuracy).holds
    }
}
