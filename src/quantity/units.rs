//! Physical quantities as types of their own, so that a volt cannot be added to an ampere.
//!
//! Every quantity is held as an `f64` in its SI unit; ratios are held in ppm, because ppm is
//! what the error budget adds and `0.02 %` is then exactly 200.
//!
//! ```compile_fail
//! use ampthrift::quantity::{Amperes, Volts};
//! let _ = Volts::new(1.0) + Amperes::new(1.0);
//! ```
//!
//! A temperature is a point, a difference of two is in kelvins, and two points don't add:
//!
//! ```compile_fail
//! use ampthrift::quantity::Celsius;
//! let _ = Celsius::new(25.0) + Celsius::new(25.0);
//! ```

use std::iter::Sum;
use std::ops::{Add, Div, Mul, Neg, Sub};

macro_rules! quantity {
    ($($(#[$doc:meta])* $name:ident, $symbol:literal;)+) => {$(
        $(#[$doc])*
        #[derive(Clone, Copy, Debug, Default, PartialEq, PartialOrd)]
        pub struct $name(f64);

        impl $name {
            /// The unit symbol in which the figure is held.
            pub const SYMBOL: &'static str = $symbol;
            /// Zero of this quantity.
            pub const ZERO: Self = Self(0.0);
            /// Wraps a figure given in the unit of [`Self::SYMBOL`].
            #[must_use]
            pub const fn new(figure: f64) -> Self { Self(figure) }
            /// The figure in the unit of [`Self::SYMBOL`].
            #[must_use]
            pub const fn value(self) -> f64 { self.0 }
            /// The larger of two.
            #[must_use]
            pub const fn max(self, other: Self) -> Self { Self(self.0.max(other.0)) }
            /// The smaller of two.
            #[must_use]
            pub const fn min(self, other: Self) -> Self { Self(self.0.min(other.0)) }
        }
    )+};
}

/// Arithmetic of quantities that are magnitudes (all but temperature points).
macro_rules! linear {
    ($($name:ident)+) => {$(
        impl $name {
            /// The magnitude without its sign.
            #[must_use]
            pub const fn abs(self) -> Self { Self(self.0.abs()) }
        }
        impl Add for $name { type Output = Self; fn add(self, o: Self) -> Self { Self(self.0 + o.0) } }
        impl Sub for $name { type Output = Self; fn sub(self, o: Self) -> Self { Self(self.0 - o.0) } }
        impl Neg for $name { type Output = Self; fn neg(self) -> Self { Self(-self.0) } }
        impl Mul<f64> for $name { type Output = Self; fn mul(self, k: f64) -> Self { Self(self.0 * k) } }
        impl Div<f64> for $name { type Output = Self; fn div(self, k: f64) -> Self { Self(self.0 / k) } }
        impl Div for $name { type Output = f64; fn div(self, o: Self) -> f64 { self.0 / o.0 } }
        impl Sum for $name { fn sum<I: Iterator<Item = Self>>(i: I) -> Self { Self(i.map(|q| q.0).sum()) } }
    )+};
}

/// `a * b = c`, with the commuted product and both quotients.
macro_rules! product {
    ($($a:ident * $b:ident = $c:ident;)+) => {$(
        impl Mul<$b> for $a { type Output = $c; fn mul(self, o: $b) -> $c { $c(self.0 * o.0) } }
        impl Mul<$a> for $b { type Output = $c; fn mul(self, o: $a) -> $c { $c(self.0 * o.0) } }
        impl Div<$a> for $c { type Output = $b; fn div(self, o: $a) -> $b { $b(self.0 / o.0) } }
        impl Div<$b> for $c { type Output = $a; fn div(self, o: $b) -> $a { $a(self.0 / o.0) } }
    )+};
}

quantity! {
    /// Electric potential difference in volts.
    Volts, "V";
    /// Electric current in amperes.
    Amperes, "A";
    /// Resistance in ohms.
    Ohms, "Ω";
    /// Power in watts.
    Watts, "W";
    /// Capacitance in farads.
    Farads, "F";
    /// A point on the Celsius scale.
    Celsius, "°C";
    /// A temperature difference in kelvins.
    Kelvins, "K";
    /// Time in seconds.
    Seconds, "s";
    /// A voltage ratio in decibels (20·log10).
    Decibels, "dB";
    /// A ratio in parts per million.
    Ppm, "ppm";
    /// A relative change per kelvin, in ppm/K.
    PpmPerKelvin, "ppm/K";
    /// A relative change per volt, in ppm/V.
    PpmPerVolt, "ppm/V";
    /// A relative change per ampere, in ppm/A.
    PpmPerAmpere, "ppm/A";
    /// Voltage drift in V/K.
    VoltsPerKelvin, "V/K";
    /// Current drift in A/K.
    AmperesPerKelvin, "A/K";
    /// Thermal resistance in K/W.
    KelvinsPerWatt, "K/W";
}

linear! {
    Volts Amperes Ohms Watts Farads Kelvins Seconds Decibels Ppm
    PpmPerKelvin PpmPerVolt PpmPerAmpere VoltsPerKelvin AmperesPerKelvin KelvinsPerWatt
}

product! {
    Amperes * Ohms = Volts;
    Volts * Amperes = Watts;
    PpmPerKelvin * Kelvins = Ppm;
    PpmPerVolt * Volts = Ppm;
    PpmPerAmpere * Amperes = Ppm;
    VoltsPerKelvin * Kelvins = Volts;
    AmperesPerKelvin * Kelvins = Amperes;
    KelvinsPerWatt * Watts = Kelvins;
}

impl Sub for Celsius {
    type Output = Kelvins;
    fn sub(self, other: Self) -> Kelvins {
        Kelvins(self.0 - other.0)
    }
}

impl Add<Kelvins> for Celsius {
    type Output = Self;
    fn add(self, difference: Kelvins) -> Self {
        Self(self.0 + difference.0)
    }
}

impl Ppm {
    /// The ratio of two like quantities, in ppm.
    #[must_use]
    pub const fn from_ratio(ratio: f64) -> Self {
        Self(ratio * 1e6)
    }

    /// The plain ratio (1 for a million ppm).
    #[must_use]
    pub const fn ratio(self) -> f64 {
        self.0 * 1e-6
    }
}

impl Decibels {
    /// The voltage ratio that a rejection of this many decibels leaves: 10^(−dB/20).
    #[must_use]
    pub fn attenuation(self) -> f64 {
        10f64.powf(-self.0 / 20.0)
    }
}

/// A closed range, `low <= high`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Range<Q> {
    low: Q,
    high: Q,
}

impl<Q: Copy + PartialOrd> Range<Q> {
    /// A range; `None` when the ends are out of order or not comparable.
    #[must_use]
    pub fn new(low: Q, high: Q) -> Option<Self> {
        (low <= high).then_some(Self { low, high })
    }

    /// A range of one point.
    #[must_use]
    pub const fn point(at: Q) -> Self {
        Self { low: at, high: at }
    }

    /// The low end.
    #[must_use]
    pub const fn low(self) -> Q {
        self.low
    }

    /// The high end.
    #[must_use]
    pub const fn high(self) -> Q {
        self.high
    }

    /// Whether a point lies in the range, ends included.
    #[must_use]
    pub fn contains(self, at: Q) -> bool {
        self.low <= at && at <= self.high
    }
}

impl Range<Volts> {
    /// The middle of the range.
    #[must_use]
    pub fn middle(self) -> Volts {
        (self.low + self.high) * 0.5
    }
}
