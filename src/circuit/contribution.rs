//! What one part adds to the budget, as the few numbers that the search adds up.

use crate::catalog::{Amplifier, Reference, ResistorType};
use crate::quantity::{Ohms, Ppm};
use crate::request::Budget;

use super::design::Connection;
use super::frame::Frame;

/// What one part adds to a design's budget within a frame.
///
/// `random` adds over parts: for the worst-case method in ppm; for rss and gum in ppm², each term
/// already weighted so that the total is `systematic + sqrt(random)`. `systematic` (ppm) is used
/// by rss and gum only; the worst-case method puts everything in `random`.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Contribution {
    /// ppm (worst-case) or ppm² (rss, gum).
    pub random: f64,
    /// Systematic ppm (rss, gum).
    pub systematic: f64,
    /// Static ppm that an adjustment has to take up, worst case; 0 without an adjustment.
    pub statics: f64,
    /// Whether a figure that is needed here is not stated.
    pub unstated: bool,
}

/// The total of a whole design from its summed contributions.
#[must_use]
pub fn total_of(budget: Budget, random: f64, systematic: f64) -> Ppm {
    Ppm::new(match budget {
        Budget::WorstCase => random,
        Budget::Rss | Budget::Gum { .. } => systematic + random.sqrt(),
    })
}

/// One element of a network as the budget sees it.
#[derive(Clone, Copy, Debug)]
pub struct ElementChoice<'a> {
    /// Its type.
    pub of: &'a ResistorType,
    /// Its nominal value.
    pub ohms: Ohms,
}

impl Frame<'_> {
    /// What the frame itself adds: board leaks, wiring, EMF, adjustment residual and tempco.
    #[must_use]
    pub fn own_contribution(&self) -> Contribution {
        unimplemented!()
    }

    /// What a reference adds.
    #[must_use]
    pub fn reference_contribution(&self, _reference: &Reference) -> Contribution {
        unimplemented!()
    }

    /// What an amplifier adds.
    #[must_use]
    pub fn amplifier_contribution(&self, _amplifier: &Amplifier) -> Contribution {
        unimplemented!()
    }

    /// What a network adds (mismatch and all element terms).
    #[must_use]
    pub fn network_contribution(
        &self,
        _connection: Connection,
        _elements: &[ElementChoice<'_>],
    ) -> Contribution {
        unimplemented!()
    }
}
