//! Money in whole millionths, so that sums and comparisons are exact.

use std::iter::Sum;
use std::ops::{Add, Mul, Sub};

use super::Decimal;

/// An amount of money in millionths of the currency unit.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Money(i128);

impl Money {
    /// Nothing.
    pub const ZERO: Self = Self(0);

    /// From whole millionths.
    #[must_use]
    pub const fn from_micros(micros: i128) -> Self {
        Self(micros)
    }

    /// Whole millionths.
    #[must_use]
    pub const fn micros(self) -> i128 {
        self.0
    }
}

impl Add for Money {
    type Output = Self;
    fn add(self, other: Self) -> Self {
        Self(self.0 + other.0)
    }
}

impl Sub for Money {
    type Output = Self;
    fn sub(self, other: Self) -> Self {
        Self(self.0 - other.0)
    }
}

impl Mul<u64> for Money {
    type Output = Self;
    fn mul(self, times: u64) -> Self {
        Self(self.0 * i128::from(times))
    }
}

impl Sum for Money {
    fn sum<I: Iterator<Item = Self>>(amounts: I) -> Self {
        amounts.fold(Self::ZERO, Add::add)
    }
}

/// What one unit of a foreign currency costs.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct ExchangeRate(pub Decimal);
