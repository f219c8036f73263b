//! Money in whole millionths, so that sums and comparisons are exact.

use std::fmt;
use std::iter::Sum;
use std::ops::{Add, Mul, Sub};

use num_bigint::BigInt;
use num_rational::BigRational;

use super::Decimal;
use super::number::shown;
use super::parse::{FigureError, Sign, parse_number};

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

impl Money {
    /// Reads a plain decimal such as `4.10`: not negative, at most 6 decimals, at most 10^9.
    ///
    /// # Errors
    /// Says what was found and what to write instead.
    pub fn parse(text: &str) -> Result<Self, FigureError> {
        let whole = text.trim();
        let error = |message: &str, hint: String| FigureError {
            message: format!("{} {message}", shown(whole)),
            hint,
        };
        let example = "write a plain decimal such as `4.10`";
        let value = parse_number(whole, Sign::NotNegative, "4.10").map_err(|fault| {
            let behind = whole.trim_start_matches(|c: char| c.is_ascii_digit() || c == '.');
            if whole.starts_with(|c: char| c.is_ascii_digit())
                && behind.trim().chars().all(|c| c.is_alphabetic() || "€$£¥".contains(c))
                && !behind.is_empty()
            {
                error(
                    "is not a plain amount",
                    format!("{example}; the currency has a field of its own"),
                )
            } else {
                fault
            }
        })?;
        if whole.contains(['e', 'E']) {
            return Err(error("has an exponent", format!("write {}", shown(&value.to_string()))));
        }
        // The written decimals count, so that what is refused can be seen in the file.
        let decimals = whole.split_once('.').map_or(0, |(_, fraction)| fraction.len());
        if decimals > DECIMALS as usize {
            return Err(error(
                "has more than 6 decimals",
                "round it to 6 decimals, for example `0.012346`".to_owned(),
            ));
        }
        if value > Decimal::new(1, 9) {
            return Err(error("is more than 1000000000", example.to_owned()));
        }
        let power = value.exponent().saturating_add(DECIMALS).unsigned_abs();
        Ok(Self(value.mantissa() * 10i128.pow(power)))
    }
}

/// Decimals of a millionth.
const DECIMALS: i32 = 6;

impl fmt::Display for Money {
    /// The exact decimal, with at least two decimals: `4.10`, `0.0375`.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let sign = if self.0 < 0 { "-" } else { "" };
        let micros = self.0.unsigned_abs();
        let fraction = format!("{:06}", micros % 1_000_000);
        let meaning = fraction.trim_end_matches('0').len().max(2);
        let fraction = fraction.get(..meaning).unwrap_or(&fraction);
        write!(f, "{sign}{}.{fraction}", micros / 1_000_000)
    }
}

/// What one unit of a foreign currency costs, above zero.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct ExchangeRate(pub Decimal);

impl ExchangeRate {
    /// Reads a positive decimal such as `0.92`, from 10^-9 to 10^9.
    ///
    /// # Errors
    /// Says what was found and what to write instead.
    pub fn parse(text: &str) -> Result<Self, FigureError> {
        let rate = parse_number(text, Sign::Positive, "0.92")?;
        if rate < Decimal::new(1, -9) || rate > Decimal::new(1, 9) {
            return Err(FigureError {
                message: format!("{} is no plausible rate", shown(text)),
                hint: "write what one unit of that currency costs, for example `0.92`".to_owned(),
            });
        }
        Ok(Self(rate))
    }

    /// Converts an amount, rounded half up to a millionth, exactly.
    #[must_use]
    pub fn convert(self, amount: Money) -> Money {
        // Long integers, because a rate may have thirty digits.
        let ten = |power: u32| num_traits::pow(BigInt::from(10), power as usize);
        let product = BigInt::from(amount.0) * BigInt::from(self.0.mantissa());
        let exponent = self.0.exponent();
        let micros = if exponent >= 0 {
            product * ten(exponent.unsigned_abs())
        } else {
            let unit = ten(exponent.unsigned_abs());
            BigRational::new(product * 2 + &unit, unit * 2).floor().to_integer()
        };
        // Read amounts and rates are far below the limit; a larger product stays at it.
        Money(i128::try_from(micros).unwrap_or(i128::MAX))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn micros(text: &str) -> i128 {
        Money::parse(text).map(Money::micros).unwrap_or_else(|fault| panic!("{fault}"))
    }

    #[test]
    fn amounts_are_whole_millionths() {
        assert_eq!(micros("4.10"), 4_100_000);
        assert_eq!(micros("0.0375"), 37_500);
        assert_eq!(micros("0.000001"), 1);
        assert_eq!(micros("0"), 0);
        assert_eq!(micros("15"), 15_000_000);
        assert_eq!(micros("1000000000"), 1_000_000_000_000_000);
    }

    #[test]
    fn amounts_are_shown_with_two_decimals_or_as_many_as_they_have() {
        for (micros, text) in [
            (4_100_000, "4.10"),
            (37_500, "0.0375"),
            (0, "0.00"),
            (1, "0.000001"),
            (1_234_560_000, "1234.56"),
            (-2_500_000, "-2.50"),
        ] {
            assert_eq!(Money::from_micros(micros).to_string(), text);
        }
    }

    #[test]
    fn other_texts_are_refused_with_advice() {
        for (text, message, hint) in [
            ("-1", "below zero", "4.10"),
            ("4,10", "decimal comma", "`4.10`"),
            ("4.10 EUR", "not a plain amount", "currency"),
            ("4.10€", "not a plain amount", "currency"),
            ("0.1234567", "more than 6 decimals", "6 decimals"),
            ("1.0000000", "more than 6 decimals", "6 decimals"),
            ("1e2", "exponent", "`100`"),
            ("1000000000.01", "more than 1000000000", "4.10"),
            ("", "empty", "4.10"),
            ("NaN", "not a number", "4.10"),
        ] {
            let fault = Money::parse(text).expect_err(text);
            assert!(fault.message.contains(message), "{text}: {fault}");
            assert!(fault.hint.contains(hint), "{text}: {fault}");
        }
    }

    #[test]
    fn conversion_rounds_half_up_to_a_millionth() {
        let rate = |text: &str| ExchangeRate::parse(text).unwrap_or_else(|e| panic!("{e}"));
        let convert = |text, micros| rate(text).convert(Money::from_micros(micros)).micros();
        assert_eq!(convert("0.92", 4_100_000), 3_772_000);
        assert_eq!(convert("0.5", 1), 1);
        assert_eq!(convert("0.49999999", 1), 0);
        assert_eq!(convert("1.5", 3), 5);
        assert_eq!(convert("200", 7), 1400);
        // 10^15 millionths at thirty digits: 123456789012345.678… rounds up.
        assert_eq!(
            convert("0.123456789012345678901234567890", 1_000_000_000_000_000),
            123_456_789_012_346
        );
    }

    #[test]
    fn rates_are_positive_and_plausible() {
        for text in ["0", "-0.9", "1e10", "1e-10", "0,92", "92 %", "inf"] {
            assert!(ExchangeRate::parse(text).is_err(), "{text}");
        }
    }
}
