//! The number at the head of a figure, read exactly, before its unit is looked at.

use super::Decimal;
use super::parse::{FigureError, Sign};

/// Most significant digits of a figure. More than any measurement has, and few enough that
/// scaling by a unit (8 more digits for a year) stays within an `i128`.
const MOST_DIGITS: usize = 30;

/// Figures are refused at and above this power of ten, and below its inverse, in their SI unit.
/// It keeps every product that the budget forms far from infinity.
const LARGEST_POWER: i64 = 30;

/// Most characters of a user's text that a message repeats.
const SHOWN: usize = 40;

/// A user's text as a message repeats it: in backquotes, on one line, cut when it is long.
#[must_use]
pub fn shown(text: &str) -> String {
    let mut out = String::from("`");
    for (index, c) in text.trim().chars().enumerate() {
        if index == SHOWN {
            out.push('…');
            break;
        }
        if c.is_control() {
            out.extend(c.escape_default());
        } else {
            out.push(c);
        }
    }
    out.push('`');
    out
}

/// The sign written in front of a number.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Mark {
    Absent,
    Plus,
    Minus,
    PlusMinus,
}

/// Splits off the sign. U+2212 is a minus.
pub(super) fn leading_mark(text: &str) -> (Mark, &str) {
    let mut chars = text.chars();
    let mark = match chars.next() {
        Some('+') => Mark::Plus,
        Some('-' | '\u{2212}') => Mark::Minus,
        Some('±') => Mark::PlusMinus,
        _ => return (Mark::Absent, text),
    };
    (mark, chars.as_str().trim_start())
}

/// An unsigned number as written: `mantissa · 10^exponent`, not yet bounded.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Number<'a> {
    mantissa: i128,
    exponent: i64,
    /// The digits as written, for hints.
    pub(super) text: &'a str,
}

/// Reads an unsigned decimal at the start of `text`, and returns what follows it. `whole` is the
/// complete text for messages, `example` a figure of the kind wanted.
pub(super) fn leading_number<'a>(
    text: &'a str,
    whole: &str,
    example: &str,
) -> Result<(Number<'a>, &'a str), FigureError> {
    let bytes = text.as_bytes();
    let digit_at = |at: usize| bytes.get(at).filter(|b| b.is_ascii_digit()).copied();
    let mut at = 0;
    let mut mantissa: i128 = 0;
    let mut exponent: i64 = 0;
    let mut significant = 0usize;
    // Zeros are held back until a digit follows, so that trailing ones cost nothing.
    let mut zeros = 0usize;
    let mut any = false;
    let mut after_point = false;
    loop {
        match bytes.get(at) {
            Some(b'.') if !after_point => after_point = true,
            Some(digit) if digit.is_ascii_digit() => {
                any = true;
                if after_point {
                    exponent -= 1;
                }
                if *digit == b'0' {
                    // Leading zeros only move the point, and that is counted above.
                    zeros += usize::from(significant > 0);
                } else {
                    significant = significant.saturating_add(zeros + 1);
                    if significant > MOST_DIGITS {
                        return Err(FigureError {
                            message: format!(
                                "{} has more than {MOST_DIGITS} significant digits",
                                shown(whole)
                            ),
                            hint: format!("round it, for example `{example}`"),
                        });
                    }
                    for _ in 0..=zeros {
                        mantissa *= 10;
                    }
                    mantissa += i128::from(digit - b'0');
                    zeros = 0;
                }
            }
            _ => break,
        }
        at += 1;
    }
    if !any {
        return Err(no_number(text, whole, example));
    }
    exponent += i64::try_from(zeros).unwrap_or(i64::MAX / 2);
    // An exponent needs a digit, so that a unit starting with e is not eaten.
    if matches!(bytes.get(at), Some(b'e' | b'E')) {
        let after = text.get(at + 1..).unwrap_or_default();
        let (negative, skipped) = match after.chars().next() {
            Some('-') => (true, 1),
            Some('\u{2212}') => (true, '\u{2212}'.len_utf8()),
            Some('+') => (false, 1),
            _ => (false, 0),
        };
        let mut digits = at + 1 + skipped;
        if digit_at(digits).is_some() {
            let mut power: i64 = 0;
            while let Some(digit) = digit_at(digits) {
                power = (power * 10 + i64::from(digit - b'0')).min(1_000_000_000);
                digits += 1;
            }
            exponent += if negative { -power } else { power };
            at = digits;
        }
    }
    // `at` stands after an ASCII character or at the start, so both cuts are on boundaries.
    let number = Number { mantissa, exponent, text: text.get(..at).unwrap_or_default() };
    let rest = text.get(at..).unwrap_or_default();
    odd_separator(number.text, rest, whole)?;
    Ok((number, rest))
}

/// The error for a text that does not start with a digit.
fn no_number(text: &str, whole: &str, example: &str) -> FigureError {
    if whole.trim().is_empty() {
        return FigureError {
            message: "the figure is empty".to_owned(),
            hint: format!("write it, for example `{example}`"),
        };
    }
    let lower: String = text.trim_start_matches('.').chars().take(3).collect::<String>();
    let lower = lower.to_ascii_lowercase();
    if lower == "nan" || lower == "inf" {
        return FigureError {
            message: format!("{} is not a number", shown(whole)),
            hint: format!(
                "write a finite figure, for example `{example}`, or leave the field out if it is \
                 not known"
            ),
        };
    }
    if text.starts_with(',') && text.chars().nth(1).is_some_and(|c| c.is_ascii_digit()) {
        return FigureError {
            message: format!("{} has a decimal comma", shown(whole)),
            hint: format!("write {}", shown(&format!("0{}", text.replacen(',', ".", 1)))),
        };
    }
    let bare = whole.trim_start();
    if let Some(rest) = bare.strip_prefix("+/-").or_else(|| bare.strip_prefix("+-")) {
        return FigureError {
            message: format!("{} starts with two signs", shown(whole)),
            hint: format!("write {}", shown(&format!("±{}", rest.trim_start()))),
        };
    }
    FigureError {
        message: format!("{} does not start with a number", shown(whole)),
        hint: format!("write a number with its unit, for example `{example}`"),
    }
}

/// Digits behind a comma, a space, an apostrophe or an underscore.
fn odd_separator(number: &str, rest: &str, whole: &str) -> Result<(), FigureError> {
    let mut chars = rest.chars();
    let separator = match chars.next() {
        Some(c) if c == ',' || c == '_' || c == '\'' || c == '’' || c.is_whitespace() => c,
        _ => return Ok(()),
    };
    let behind = chars.as_str();
    if !behind.starts_with(|c: char| c.is_ascii_digit()) {
        return Ok(());
    }
    let joined = shown(&format!("{number}{behind}"));
    if separator != ',' {
        return Err(FigureError {
            message: format!("{} has a separator between its digits", shown(whole)),
            hint: format!("write {joined}"),
        });
    }
    let with_point = shown(&format!("{number}.{behind}"));
    let group = behind.chars().take_while(char::is_ascii_digit).count();
    Err(FigureError {
        message: format!("{} has a decimal comma", shown(whole)),
        hint: if number.contains('.') {
            format!("write {joined}")
        } else if group == 3 {
            format!("write {with_point}, or {joined} if the comma separates thousands")
        } else {
            format!("write {with_point}")
        },
    })
}

impl Number<'_> {
    /// Multiplies by `factor · 10^power`, gives it its sign, and bounds it.
    pub(super) fn scaled(
        self,
        factor: i128,
        power: i32,
        mark: Mark,
        whole: &str,
        example: &str,
    ) -> Result<Decimal, FigureError> {
        let error = |what: &str| FigureError {
            message: format!("{} is too {what}", shown(whole)),
            hint: format!("write a figure that a part can have, for example `{example}`"),
        };
        if self.mantissa == 0 {
            return Ok(Decimal::new(0, 0));
        }
        let mantissa = self.mantissa.checked_mul(factor).ok_or_else(|| error("large"))?;
        let exponent = self.exponent.saturating_add(i64::from(power));
        let digits = i64::from(mantissa.unsigned_abs().ilog10());
        let leading = exponent.saturating_add(digits);
        if leading >= LARGEST_POWER {
            return Err(error("large"));
        }
        if leading < -LARGEST_POWER {
            return Err(error("small"));
        }
        let exponent = i32::try_from(exponent).map_err(|_| error("small"))?;
        Ok(Decimal::new(if mark == Mark::Minus { -mantissa } else { mantissa }, exponent))
    }
}

/// Checks the sign against what the figure may have.
pub(super) fn check_sign(
    value: Decimal,
    mark: Mark,
    sign: Sign,
    whole: &str,
    example: &str,
) -> Result<(), FigureError> {
    let bound = matches!(sign, Sign::Bound | Sign::PositiveBound);
    if mark == Mark::PlusMinus && !bound {
        return Err(FigureError {
            message: format!("{} has a `±`, and this figure has one side only", shown(whole)),
            hint: format!("write it with one sign, for example `{example}`"),
        });
    }
    let positive = matches!(sign, Sign::Positive | Sign::PositiveBound);
    if value.mantissa() < 0 && sign != Sign::Any {
        let wanted = if positive { "above 0" } else { "of 0 or more" };
        let reason = if bound { "; it counts for both sides" } else { "" };
        return Err(FigureError {
            message: format!("{} is below zero", shown(whole)),
            hint: format!("write a figure {wanted}, for example `{example}`{reason}"),
        });
    }
    if value.mantissa() == 0 && positive {
        return Err(FigureError {
            message: format!("{} is zero", shown(whole)),
            hint: format!("write a figure above 0, for example `{example}`"),
        });
    }
    Ok(())
}
