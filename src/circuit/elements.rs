//! Resistor types by themselves, as the search sees them before it knows a network: what one
//! element adds at unit share, and the most that it stands.

use crate::catalog::ResistorType;
use crate::quantity::{Volts, Watts};

use super::check::Check;
use super::contribution::Contribution;
use super::figure::Figure;
use super::frame::Frame;
use super::limits::{LIMITS, LimitFn};
use super::terms::{TERMS, TermFn};
use super::wired::WiredElement;

/// The most that one element stands, the tolerance of the limits included.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ElementBounds {
    /// Most power.
    pub watts: Watts,
    /// Most voltage; `None` when not stated.
    pub volts: Option<Volts>,
    /// Whether the ambient lies within its operating range.
    pub temperature_holds: bool,
}

impl Frame<'_> {
    /// What one element adds when the whole of R is of this type (share 1), with this much voltage
    /// across it and power in it. Every element term is its share times a figure that is constant,
    /// or in proportion to the voltage, or to the power.
    #[must_use]
    pub fn element_contribution(
        &self,
        of: &ResistorType,
        volts: Volts,
        power: Watts,
    ) -> Contribution {
        let element = WiredElement { of, share: 1.0, volts, power };
        let mut sum = Contribution::default();
        for term in TERMS {
            if let TermFn::Element(figure) = term.figure {
                self.gather(&mut sum, term, figure(self, &element));
            }
        }
        for limit in LIMITS {
            if let LimitFn::Element(check) = limit.check {
                sum.unstated |= matches!(check(self, &element), Figure::NotStated(_));
            }
        }
        sum
    }

    /// The most that an element of a type stands.
    #[must_use]
    pub fn element_bounds(&self, of: &ResistorType) -> ElementBounds {
        let element = WiredElement { of, share: 1.0, volts: Volts::ZERO, power: Watts::ZERO };
        let mut bounds = ElementBounds {
            watts: Watts::new(f64::INFINITY),
            volts: None,
            temperature_holds: true,
        };
        for limit in LIMITS {
            match limit.check {
                LimitFn::Element(check) => {
                    let Figure::Known(check) = check(self, &element) else { continue };
                    match limit.unit {
                        "W" => bounds.watts = bounds.watts.min(Watts::new(check.most::<Watts>())),
                        _ => bounds.volts = Some(Volts::new(check.most::<Volts>())),
                    }
                }
                LimitFn::Placed(check) => {
                    bounds.temperature_holds &= !matches!(
                        check(self, &of.supply),
                        Figure::Known(Check { holds: false, .. })
                    );
                }
                _ => {}
            }
        }
        bounds
    }
}
