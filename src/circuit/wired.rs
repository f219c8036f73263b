//! The network as the budget sees it: each element's share, voltage and power.

use crate::catalog::ResistorType;
use crate::quantity::{Ohms, Ppm, Volts, Watts};

use super::design::Connection;
use super::frame::Frame;

/// A ratio this close to 1 is rounding of the division, not a mismatch.
const ROUNDING: f64 = 8.0 * f64::EPSILON;

/// abs(R*/R − 1), for the wanted and the nominal resistance.
#[must_use]
pub fn mismatch(ideal: Ohms, nominal: Ohms) -> Ppm {
    let ratio = (ideal / nominal - 1.0).abs();
    Ppm::from_ratio(if ratio <= ROUNDING { 0.0 } else { ratio })
}

/// One element of a network as the budget sees it.
#[derive(Clone, Copy, Debug)]
pub struct ElementChoice<'a> {
    /// Its type.
    pub of: &'a ResistorType,
    /// Its nominal value.
    pub ohms: Ohms,
}

impl ElementChoice<'_> {
    /// Whether two elements are of one type, and so drift together: they point to the same entry
    /// of the catalogue. Equal figures are not enough, as two makers may state the same.
    pub(super) fn same_type(&self, other: &Self) -> bool {
        std::ptr::eq(self.of, other.of)
    }
}

/// A network within a frame.
#[derive(Clone, Copy, Debug)]
pub(super) struct Wired<'n> {
    connection: Connection,
    /// R, nominal.
    total: Ohms,
    vref: Volts,
    elements: &'n [ElementChoice<'n>],
}

/// One element within a frame.
#[derive(Clone, Copy, Debug)]
pub(super) struct WiredElement<'n> {
    pub of: &'n ResistorType,
    /// w: its share of a change in R; R_i/R in series, R/R_i in parallel.
    pub share: f64,
    /// V: Vref·R_i/R in series, Vref in parallel.
    pub volts: Volts,
    /// P = V²/R_i.
    pub power: Watts,
}

impl<'n> Wired<'n> {
    pub fn new(
        frame: &Frame<'_>,
        connection: Connection,
        elements: &'n [ElementChoice<'n>],
    ) -> Self {
        let total = connection.join(elements.iter().map(|element| element.ohms));
        Self { connection, total, vref: frame.vref, elements }
    }

    pub const fn elements(&self) -> &'n [ElementChoice<'n>] {
        self.elements
    }

    /// abs(R*/R − 1).
    pub fn mismatch(&self, ideal: Ohms) -> Ppm {
        mismatch(ideal, self.total)
    }

    pub fn element(&self, choice: &ElementChoice<'n>) -> WiredElement<'n> {
        let (share, volts) = match self.connection {
            Connection::Single => (1.0, self.vref),
            Connection::Series => {
                let share = choice.ohms / self.total;
                (share, self.vref * share)
            }
            Connection::Parallel => (self.total / choice.ohms, self.vref),
        };
        WiredElement { of: choice.of, share, volts, power: volts * (volts / choice.ohms) }
    }
}
