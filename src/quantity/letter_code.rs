//! The letter code for resistances of IEC 60062:2016: the letter stands for the multiplier and
//! the decimal point.

use super::Decimal;

/// Letters with their power of ten, as we write them.
const LETTERS: [(char, i32); 5] = [('R', 0), ('K', 3), ('M', 6), ('G', 9), ('T', 12)];

/// Longest code that is read; the longest that we write for nine digits has twelve characters.
const LONGEST: usize = 32;

/// Reads a letter code such as `4K99`, `R10`, `10R` or `10K`: digits around one letter, in ohms.
/// `r` and `k` may be small; `L` is read as the milliohm of the standard. `None` for any other
/// text.
#[must_use]
pub fn from_letter_code(text: &str) -> Option<Decimal> {
    if text.len() > LONGEST {
        return None;
    }
    let at = text.find(|c: char| !c.is_ascii_digit())?;
    let (before, rest) = text.split_at(at);
    let mut rest = rest.chars();
    let power = match rest.next()? {
        'R' | 'r' => 0,
        'K' | 'k' => 3,
        'M' => 6,
        'G' => 9,
        'T' => 12,
        'L' => -3,
        _ => return None,
    };
    let after = rest.as_str();
    if !after.bytes().all(|b| b.is_ascii_digit()) {
        return None;
    }
    // An `i128` holds any 38 digits, more than the longest text has. No digits don't parse.
    let mantissa = format!("{before}{after}").parse::<i128>().ok()?;
    let places = i32::try_from(after.len()).ok()?;
    Some(Decimal::new(mantissa, power - places))
}

/// Writes a resistance in ohms as a letter code: at least two significant digits, capital
/// letters, exact: `R10 1R0 10R 100R 1K0 10K 4K99 1M0`. Zero is `0R0`.
#[must_use]
pub fn to_letter_code(ohms: Decimal) -> String {
    let sign = if ohms.mantissa() < 0 { "-" } else { "" };
    let mut digits = ohms.mantissa().unsigned_abs().to_string();
    let mut exponent = i64::from(ohms.exponent());
    if ohms.mantissa() == 0 {
        return "0R0".to_owned();
    }
    if digits.len() < 2 {
        digits.push('0');
        exponent -= 1;
    }
    // Power of ten of the first digit; it decides the letter.
    let leading = exponent + digits.len() as i64 - 1;
    let (letter, power) = LETTERS
        .iter()
        .rev()
        .find(|(_, power)| leading >= i64::from(*power))
        .copied()
        .unwrap_or(('R', 0));
    if leading < 0 {
        let zeros = "0".repeat(usize::try_from(-leading - 1).unwrap_or(0));
        return format!("{sign}{letter}{zeros}{digits}");
    }
    let whole = usize::try_from(leading - i64::from(power) + 1).unwrap_or(1);
    if digits.len() <= whole {
        let zeros = "0".repeat(whole - digits.len());
        return format!("{sign}{digits}{zeros}{letter}");
    }
    let (before, after) = digits.split_at(whole);
    format!("{sign}{before}{letter}{after}")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn written_codes_are_those_of_the_rule() {
        for (mantissa, exponent, code) in [
            (1, -1, "R10"),
            (1, 0, "1R0"),
            (1, 1, "10R"),
            (1, 2, "100R"),
            (1, 3, "1K0"),
            (1, 4, "10K"),
            (499, 1, "4K99"),
            (1, 6, "1M0"),
            (47, -2, "R47"),
            (5, -2, "R050"),
            (12, -3, "R012"),
            (1025, -1, "102R5"),
            (998_765, -2, "9K98765"),
            (123_456_789, -5, "1K23456789"),
            (2, 12, "2T0"),
            (1, 15, "1000T"),
            (0, 0, "0R0"),
        ] {
            assert_eq!(to_letter_code(Decimal::new(mantissa, exponent)), code);
        }
    }

    #[test]
    fn read_codes_are_exact() {
        for (code, mantissa, exponent) in [
            ("4k99", 499, 1),
            ("R10", 1, -1),
            ("r10", 1, -1),
            ("1M0", 1, 6),
            ("10R", 1, 1),
            ("10K", 1, 4),
            ("0R1", 1, -1),
            ("5L0", 5, -3),
            ("2T2", 22, 11),
            ("1G", 1, 9),
        ] {
            assert_eq!(from_letter_code(code), Some(Decimal::new(mantissa, exponent)), "{code}");
        }
    }

    #[test]
    fn other_texts_are_no_code() {
        for text in
            ["", "R", "K", "10", "1K2K", "10m", "1g0", "1t0", "-1R0", "4.7K", "1R0 ", "Ω", "１R０"]
        {
            assert_eq!(from_letter_code(text), None, "{text}");
        }
        assert_eq!(from_letter_code(&format!("{}R", "9".repeat(1000))), None);
    }
}
