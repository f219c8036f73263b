//! The operating window: every limit once, with id, unit, doc line and formula.

use crate::catalog::{Amplifier, Reference};

use super::contribution::ElementChoice;
use super::design::{Connection, Design};
use super::frame::Frame;

/// The limits of the operating window.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum LimitId {
    /// Placeholder until the table is written.
    LiftCurrent,
}

/// One entry of the limit table.
#[derive(Debug)]
pub struct LimitDef {
    /// Which.
    pub id: LimitId,
    /// Its name in files and JSON.
    pub name: &'static str,
    /// Unit of its value and bound, as in the JSON: V, A, W, F, degC or ppm.
    pub unit: &'static str,
    /// What it means, in one line.
    pub doc: &'static str,
    /// The inequality, as text.
    pub formula: &'static str,
}

/// The limit table, in order of report.
pub const LIMITS: &[LimitDef] = &[];

impl LimitId {
    /// Its entry in the table.
    #[must_use]
    pub fn def(self) -> &'static LimitDef {
        unimplemented!()
    }
}

impl Frame<'_> {
    /// Limits that fail by the frame alone: lift current, lift temperature.
    #[must_use]
    pub fn own_failures(&self) -> Vec<LimitId> {
        unimplemented!()
    }

    /// Limits that a reference fails by itself in this frame.
    #[must_use]
    pub fn reference_failures(&self, _reference: &Reference) -> Vec<LimitId> {
        unimplemented!()
    }

    /// Limits that an amplifier fails by itself in this frame.
    #[must_use]
    pub fn amplifier_failures(&self, _amplifier: &Amplifier) -> Vec<LimitId> {
        unimplemented!()
    }

    /// Limits that a reference and an amplifier fail together (sink, capacitive load, quiescent).
    #[must_use]
    pub fn pair_failures(&self, _reference: &Reference, _amplifier: &Amplifier) -> Vec<LimitId> {
        unimplemented!()
    }

    /// Whether a limit that needs both is left unchecked for want of a figure.
    #[must_use]
    pub fn pair_unstated(&self, _reference: &Reference, _amplifier: &Amplifier) -> bool {
        unimplemented!()
    }

    /// Limits that a network fails: power, voltage, temperature.
    #[must_use]
    pub fn network_failures(
        &self,
        _connection: Connection,
        _elements: &[ElementChoice<'_>],
    ) -> Vec<LimitId> {
        unimplemented!()
    }

    /// Whether a static sum fits the adjustment's range (true without an adjustment).
    #[must_use]
    pub fn statics_fit(&self, _sum: f64) -> bool {
        unimplemented!()
    }

    /// Whether a total meets the output's accuracy.
    #[must_use]
    pub fn accuracy_holds(&self, _total: crate::quantity::Ppm) -> bool {
        unimplemented!()
    }
}

impl Design<'_> {}
