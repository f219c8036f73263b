//! One inequality of the operating window, and when it holds.

use crate::quantity::{Amperes, Celsius, Farads, Ppm, Volts, Watts};

/// An inequality still holds when it fails by no more than this share of its larger side.
const RELATIVE: f64 = 1e-9;

/// A quantity that limits are stated in.
pub(super) trait Side: Copy {
    /// An inequality still holds when it fails by no more than this, in the unit.
    const ABSOLUTE: f64;
    /// The figure in the unit.
    fn figure(self) -> f64;
}

macro_rules! sides {
    ($($name:ident $absolute:literal;)+) => {$(
        impl Side for $name {
            const ABSOLUTE: f64 = $absolute;
            fn figure(self) -> f64 {
                self.value()
            }
        }
    )+};
}

sides! {
    Volts 1e-9;
    Amperes 0.0;
    Watts 0.0;
    Farads 0.0;
    Celsius 1e-9;
    Ppm 0.0;
}

/// Both sides of an inequality, and whether it holds.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Check {
    /// Left side.
    pub value: f64,
    /// Right side.
    pub bound: f64,
    /// How far on the passing side.
    pub margin: f64,
    /// Whether it holds, with the tolerance for rounding.
    pub holds: bool,
}

impl Check {
    fn of<Q: Side>(value: Q, bound: Q, margin: f64) -> Self {
        let (value, bound) = (value.figure(), bound.figure());
        let allowed = (RELATIVE * value.abs().max(bound.abs())).max(Q::ABSOLUTE);
        Self { value, bound, margin, holds: margin >= -allowed }
    }

    /// `value <= bound`.
    pub(super) fn at_most<Q: Side>(value: Q, bound: Q) -> Self {
        Self::of(value, bound, bound.figure() - value.figure())
    }

    /// `value >= bound`.
    pub(super) fn at_least<Q: Side>(value: Q, bound: Q) -> Self {
        Self::of(value, bound, value.figure() - bound.figure())
    }

    /// The largest value that an `at_most` of this bound lets hold, tolerance included.
    pub(super) fn most<Q: Side>(&self) -> f64 {
        (self.bound / (1.0 - RELATIVE)).max(self.bound + Q::ABSOLUTE)
    }

    /// The one with the smaller margin.
    pub(super) fn tighter(self, other: Self) -> Self {
        if other.margin < self.margin { other } else { self }
    }
}
