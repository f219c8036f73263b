//! What one output is built from.

use crate::catalog::{Adjustment, Amplifier, Lift, Reference, ResistorType};
use crate::quantity::{Exact, Ohms};

/// How the elements of a network are joined.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Connection {
    /// One resistor.
    Single,
    /// End to end.
    Series,
    /// Side by side.
    Parallel,
}

impl Connection {
    /// The word in the JSON output.
    #[must_use]
    pub const fn word(self) -> &'static str {
        match self {
            Self::Single => "single",
            Self::Series => "series",
            Self::Parallel => "parallel",
        }
    }

    /// The resistance of elements joined this way.
    #[must_use]
    pub fn join(self, elements: impl Iterator<Item = Ohms>) -> Ohms {
        match self {
            Self::Single | Self::Series => elements.sum(),
            Self::Parallel => Ohms::new(1.0 / elements.map(|r| 1.0 / r.value()).sum::<f64>()),
        }
    }
}

/// One resistor of a network.
#[derive(Clone, Debug, PartialEq)]
pub struct Element<'a> {
    /// Its type: elements of one type drift together.
    pub of: &'a ResistorType,
    /// Nominal value.
    pub ohms: Exact<Ohms>,
    /// The code to order it by.
    pub order_code: String,
}

/// The set resistor as built: one element, or two or three joined.
#[derive(Clone, Debug, PartialEq)]
pub struct Network<'a> {
    /// How they are joined.
    pub connection: Connection,
    /// The elements, by order code.
    pub elements: Vec<Element<'a>>,
}

impl Network<'_> {
    /// Nominal resistance of the whole.
    #[must_use]
    pub fn ohms(&self) -> Ohms {
        self.connection.join(self.elements.iter().map(|element| element.ohms.value()))
    }
}

/// A number of lift diodes in series.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct LiftStack<'a> {
    /// The diode.
    pub of: &'a Lift,
    /// How many, at least 1.
    pub count: u32,
}

/// What one output is built from.
#[derive(Clone, Debug, PartialEq)]
pub struct Design<'a> {
    /// The reference.
    pub reference: &'a Reference,
    /// The amplifier.
    pub amplifier: &'a Amplifier,
    /// The set resistor.
    pub network: Network<'a>,
    /// The lift, if any.
    pub lift: Option<LiftStack<'a>>,
    /// The adjustment, if any.
    pub adjustment: Option<&'a Adjustment>,
}
