//! Exact decimal numbers: what was written, before it is rounded to binary.

use std::cmp::Ordering;
use std::fmt;

use num_bigint::BigInt;
use num_rational::BigRational;
use num_traits::Zero;

/// An exact decimal number, `mantissa · 10^exponent`, with no trailing zero in the mantissa
/// (so that equal numbers are equal structs; zero has exponent 0).
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub struct Decimal {
    mantissa: i128,
    exponent: i32,
}

impl Decimal {
    /// `mantissa · 10^exponent`, normalised.
    #[must_use]
    pub const fn new(mut mantissa: i128, mut exponent: i32) -> Self {
        if mantissa == 0 {
            return Self { mantissa: 0, exponent: 0 };
        }
        while mantissa % 10 == 0 {
            mantissa /= 10;
            exponent += 1;
        }
        Self { mantissa, exponent }
    }

    /// The integer before the power of ten.
    #[must_use]
    pub const fn mantissa(self) -> i128 {
        self.mantissa
    }

    /// The power of ten.
    #[must_use]
    pub const fn exponent(self) -> i32 {
        self.exponent
    }

    /// The nearest binary number, rounded once.
    #[must_use]
    pub fn to_f64(self) -> f64 {
        // Both operands are exact up to here, so one operation rounds once.
        if self.mantissa.unsigned_abs() < 1 << 53 && self.exponent.unsigned_abs() <= 22 {
            let power = 10f64.powi(self.exponent.abs());
            let mantissa = self.mantissa as f64;
            return if self.exponent < 0 { mantissa / power } else { mantissa * power };
        }
        // The standard library's decimal reader rounds correctly.
        format!("{}e{}", self.mantissa, self.exponent).parse().unwrap_or(f64::NAN)
    }

    /// The power of ten of the first digit: 3 for 4990. Zero has 0.
    #[must_use]
    pub fn leading_power(self) -> i64 {
        let digits = self.mantissa.unsigned_abs().checked_ilog10().unwrap_or(0);
        i64::from(self.exponent) + i64::from(digits)
    }

    /// The number as an exact fraction.
    #[must_use]
    pub fn to_rational(self) -> BigRational {
        let power = num_traits::pow(BigInt::from(10), self.exponent.unsigned_abs() as usize);
        if self.exponent >= 0 {
            BigRational::from_integer(BigInt::from(self.mantissa) * power)
        } else {
            BigRational::new(BigInt::from(self.mantissa), power)
        }
    }

    /// The number when it is an exact decimal of at most 38 digits, else `None`.
    #[must_use]
    pub fn from_rational(value: &BigRational) -> Option<Self> {
        let (mut twos, mut fives) = (0u32, 0u32);
        let mut rest = value.denom().clone();
        for (prime, count) in [(2u32, &mut twos), (5, &mut fives)] {
            while (&rest % prime).is_zero() {
                rest /= prime;
                *count += 1;
            }
        }
        if rest != BigInt::from(1) {
            return None;
        }
        let places = twos.max(fives);
        let scaled =
            value.numer() * num_traits::pow(BigInt::from(10), places as usize) / value.denom();
        let mantissa = i128::try_from(scaled).ok()?;
        Some(Self::new(mantissa, -i32::try_from(places).ok()?))
    }
}

impl PartialOrd for Decimal {
    fn partial_cmp(&self, other: &Self) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}

impl Ord for Decimal {
    fn cmp(&self, other: &Self) -> Ordering {
        let signs = self.mantissa.signum().cmp(&other.mantissa.signum());
        if signs != Ordering::Equal || self.mantissa == 0 {
            return signs;
        }
        // Powers apart decide without the long fractions that they would make.
        let powers = self.leading_power().cmp(&other.leading_power());
        if powers != Ordering::Equal {
            return if self.mantissa > 0 { powers } else { powers.reverse() };
        }
        // With the same leading power the exponents are at most 38 apart.
        let common = self.exponent.min(other.exponent);
        let scaled = |value: &Self| {
            let places = value.exponent.abs_diff(common) as usize;
            BigInt::from(value.mantissa) * num_traits::pow(BigInt::from(10), places)
        };
        scaled(self).cmp(&scaled(other))
    }
}

/// Longest run of zeros that a decimal text writes out.
const MOST_ZEROS: u32 = 60;

impl fmt::Display for Decimal {
    /// The exact decimal: plain digits, with an exponent only where they would be very many.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        if self.exponent.unsigned_abs() > MOST_ZEROS {
            return write!(f, "{}e{}", self.mantissa, self.exponent);
        }
        let sign = if self.mantissa < 0 { "-" } else { "" };
        let digits = self.mantissa.unsigned_abs().to_string();
        let places = self.exponent.unsigned_abs() as usize;
        if self.exponent >= 0 {
            return write!(f, "{sign}{digits}{}", "0".repeat(places));
        }
        let digits = format!("{digits:0>width$}", width = places + 1);
        let (whole, fraction) = digits.split_at(digits.len() - places);
        write!(f, "{sign}{whole}.{fraction}")
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn equal_numbers_are_equal_structs() {
        assert_eq!(Decimal::new(7500, -9), Decimal::new(75, -7));
        assert_eq!(Decimal::new(0, 12), Decimal::new(0, 0));
    }

    #[test]
    fn order_is_that_of_the_numbers() {
        let rising = [
            Decimal::new(-2, 400_000_000),
            Decimal::new(-12, 0),
            Decimal::new(-119, -1),
            Decimal::new(0, 0),
            Decimal::new(1, -400_000_000),
            Decimal::new(9, -1),
            Decimal::new(1, 0),
            Decimal::new(11, -1),
            Decimal::new(i128::MAX, 2_000_000),
        ];
        for (i, a) in rising.iter().enumerate() {
            for (j, b) in rising.iter().enumerate() {
                assert_eq!(a.cmp(b), i.cmp(&j), "{a:?} {b:?}");
            }
        }
    }

    #[test]
    fn text_is_exact() {
        for (mantissa, exponent, text) in
            [(0, 0, "0"), (499, 1, "4990"), (-499, -2, "-4.99"), (5, -3, "0.005"), (1, 61, "1e61")]
        {
            assert_eq!(Decimal::new(mantissa, exponent).to_string(), text);
        }
    }

    #[test]
    fn fractions_come_back_when_they_are_decimals() {
        let value = Decimal::new(12_345, -7);
        assert_eq!(Decimal::from_rational(&value.to_rational()), Some(value));
        let third = BigRational::new(BigInt::from(1), BigInt::from(3));
        assert_eq!(Decimal::from_rational(&third), None);
    }
}
