//! Exact decimal numbers: what was written, before it is rounded to binary.

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
        // The standard library's decimal reader rounds correctly; arithmetic here would round twice.
        format!("{}e{}", self.mantissa, self.exponent).parse().unwrap_or(f64::NAN)
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
    fn partial_cmp(&self, other: &Self) -> Option<std::cmp::Ordering> {
        Some(self.cmp(other))
    }
}

impl Ord for Decimal {
    fn cmp(&self, other: &Self) -> std::cmp::Ordering {
        self.to_rational().cmp(&other.to_rational())
    }
}
