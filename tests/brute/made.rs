//! Values of made-to-order resistor types, in exact fractions.

use ampthrift::quantity::Decimal;
use num_bigint::BigInt;
use num_rational::BigRational;
use num_traits::{One, Signed, Zero};

fn ten_to(exponent: i32) -> BigRational {
    let power = num_traits::pow(BigInt::from(10), exponent.unsigned_abs() as usize);
    let power = BigRational::from_integer(power);
    if exponent < 0 { power.recip() } else { power }
}

/// The two numbers of so many significant digits around a target; one if the target is such a
/// number; none if it is not positive.
pub fn around(target: &BigRational, digits: u32) -> Vec<BigRational> {
    if !target.is_positive() {
        return Vec::new();
    }
    let mut exponent = 0;
    while ten_to(exponent) > *target {
        exponent -= 1;
    }
    while ten_to(exponent + 1) <= *target {
        exponent += 1;
    }
    let step = ten_to(exponent + 1 - i32::try_from(digits).unwrap());
    let below = (target / &step).floor();
    if &below * &step == *target {
        return vec![target.clone()];
    }
    vec![&below * &step, (below + BigRational::one()) * step]
}

/// What one made-to-order value, used `copies` times beside other elements, must be so that the
/// whole is `wanted`.
pub fn left_over(
    wanted: &BigRational,
    others: &[BigRational],
    copies: usize,
    parallel: bool,
) -> Option<BigRational> {
    let copies = BigRational::from_integer(BigInt::from(copies));
    if parallel {
        let conductance: BigRational =
            others.iter().map(BigRational::recip).fold(BigRational::zero(), |sum, g| sum + g);
        let rest = wanted.recip() - conductance;
        rest.is_positive().then(|| copies / rest)
    } else {
        let sum = others.iter().fold(BigRational::zero(), |sum, r| sum + r);
        let rest = wanted - sum;
        rest.is_positive().then(|| rest / copies)
    }
}

/// IEC 60062 letter code: at least two significant digits, a capital letter for the point.
pub fn letter_code(ohms: Decimal) -> String {
    let mut digits = ohms.mantissa().to_string();
    let mut exponent = ohms.exponent();
    if digits.len() < 2 {
        digits.push('0');
        exponent -= 1;
    }
    // The place of the decimal point, counted in digits from the left.
    let point = i32::try_from(digits.len()).unwrap() + exponent;
    let (letter, shift) = match point {
        ..=3 => ('R', 0),
        4..=6 => ('K', 3),
        7..=9 => ('M', 6),
        10..=12 => ('G', 9),
        _ => ('T', 12),
    };
    let before = point - shift;
    if before <= 0 {
        let zeros = "0".repeat(usize::try_from(-before).unwrap());
        return format!("{letter}{zeros}{digits}");
    }
    let before = usize::try_from(before).unwrap();
    while digits.len() < before {
        digits.push('0');
    }
    let (whole, fraction) = digits.split_at(before);
    format!("{whole}{letter}{fraction}")
}
