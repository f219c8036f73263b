//! Reading figures with units. Decimal text is scaled exactly and rounded to binary once.

use super::Decimal;
use super::letter_code::from_letter_code;
use super::number::{Mark, Number, check_sign, leading_mark, leading_number, shown};
use super::unit::{self, Base, Form, meant, name_of, read_unit};
use super::units::{
    Amperes, AmperesPerKelvin, Celsius, Decibels, Farads, Kelvins, KelvinsPerWatt, Ohms, Ppm,
    PpmPerAmpere, PpmPerKelvin, PpmPerVolt, Seconds, Volts, VoltsPerKelvin, Watts,
};

/// A figure as written and as computed with.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Exact<Q> {
    decimal: Decimal,
    value: Q,
}

impl<Q: Copy> Exact<Q> {
    /// The exact decimal, in the unit in which the quantity is held.
    #[must_use]
    pub const fn decimal(self) -> Decimal {
        self.decimal
    }

    /// The quantity, rounded to binary once.
    #[must_use]
    pub const fn value(self) -> Q {
        self.value
    }
}

impl<Q: Quantity> Exact<Q> {
    /// From an exact decimal in the unit in which the quantity is held (`Q::SYMBOL`).
    #[must_use]
    pub fn from_decimal(decimal: Decimal) -> Self {
        Self { decimal, value: Q::from_decimal(decimal) }
    }
}

/// Which signs a figure may have.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Sign {
    /// Any.
    Any,
    /// Not below zero.
    NotNegative,
    /// Above zero.
    Positive,
    /// Not below zero, and it bounds both sides: a leading `±` is accepted.
    Bound,
    /// Above zero, and it bounds both sides: a leading `±` is accepted.
    PositiveBound,
}

/// Why a text is not the figure wanted: what was found, and what to write instead.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
#[error("{message}: {hint}")]
pub struct FigureError {
    /// What was found.
    pub message: String,
    /// What to write instead.
    pub hint: String,
}

/// Quantities that can be read from text.
pub trait Parse: Sized {
    /// Reads a figure with its unit.
    ///
    /// # Errors
    /// Says what was found and what to write instead.
    fn parse(text: &str, sign: Sign) -> Result<Self, FigureError>;

    /// The same, with a figure of the field's usual size for hints to show.
    ///
    /// # Errors
    /// Says what was found and what to write instead.
    fn parse_like(text: &str, sign: Sign, example: &str) -> Result<Self, FigureError>;
}

/// The newtypes of `units.rs`, as what can be made from a decimal.
pub trait Quantity: Copy {
    /// Its name, units and an example.
    const FORM: &'static Form;

    /// From an exact decimal in the unit in which the quantity is held, rounded to binary once.
    fn from_decimal(decimal: Decimal) -> Self;
}

macro_rules! readable {
    ($($name:ident $form:ident;)+) => {$(
        impl Quantity for $name {
            const FORM: &'static Form = &unit::$form;
            fn from_decimal(decimal: Decimal) -> Self {
                Self::new(decimal.to_f64())
            }
        }
        impl Parse for $name {
            fn parse(text: &str, sign: Sign) -> Result<Self, FigureError> {
                Self::parse_like(text, sign, Self::FORM.example)
            }
            fn parse_like(text: &str, sign: Sign, example: &str) -> Result<Self, FigureError> {
                Ok(Self::from_decimal(read_figure(text, Self::FORM, sign, example)?))
            }
        }
    )+};
}

readable! {
    Volts VOLTS;
    Amperes AMPERES;
    Ohms OHMS;
    Watts WATTS;
    Farads FARADS;
    Celsius CELSIUS;
    Kelvins KELVINS;
    Seconds SECONDS;
    Decibels DECIBELS;
    Ppm PPM;
    PpmPerKelvin PPM_PER_KELVIN;
    PpmPerVolt PPM_PER_VOLT;
    PpmPerAmpere PPM_PER_AMPERE;
    VoltsPerKelvin VOLTS_PER_KELVIN;
    AmperesPerKelvin AMPERES_PER_KELVIN;
    KelvinsPerWatt KELVINS_PER_WATT;
}

impl<Q: Quantity> Parse for Exact<Q> {
    fn parse(text: &str, sign: Sign) -> Result<Self, FigureError> {
        Self::parse_like(text, sign, Q::FORM.example)
    }
    fn parse_like(text: &str, sign: Sign, example: &str) -> Result<Self, FigureError> {
        Ok(Self::from_decimal(read_figure(text, Q::FORM, sign, example)?))
    }
}

/// Reads a number without a unit, such as a share or a coverage factor. `example` is one that
/// the hint can show.
///
/// # Errors
/// Says what was found and what to write instead.
pub fn parse_number(text: &str, sign: Sign, example: &str) -> Result<Decimal, FigureError> {
    let whole = text.trim();
    let (mark, unsigned) = leading_mark(whole);
    let (number, rest) = leading_number(unsigned, whole, example)?;
    if !rest.is_empty() {
        return Err(FigureError {
            message: format!("{} is not a plain number", shown(whole)),
            hint: format!("write a number without a unit, for example `{example}`"),
        });
    }
    let value = number.scaled(1, 0, mark, whole, example)?;
    check_sign(value, mark, sign, whole, example)?;
    Ok(value)
}

/// The largest count that is read: 10^9, so that a count times a price stays far inside `Money`.
const LARGEST_COUNT: u64 = 1_000_000_000;

/// Reads a whole number of 0 or more, such as a quantity of parts; at most 10^9.
///
/// # Errors
/// Says what was found and what to write instead.
pub fn parse_count(text: &str) -> Result<u64, FigureError> {
    let whole = text.trim();
    let error = |message: String| FigureError {
        message,
        hint: "write a whole number in digits only, for example `250`".to_owned(),
    };
    if whole.is_empty() || !whole.bytes().all(|b| b.is_ascii_digit()) {
        return Err(error(format!("{} is not a whole number", shown(whole))));
    }
    match whole.parse::<u64>() {
        Ok(count) if count <= LARGEST_COUNT => Ok(count),
        _ => Err(error(format!("{} is more than {LARGEST_COUNT}", shown(whole)))),
    }
}

/// Reads a figure of one form, exactly, in the unit in which that quantity is held.
fn read_figure(text: &str, form: &Form, sign: Sign, example: &str) -> Result<Decimal, FigureError> {
    let whole = text.trim();
    let (mark, unsigned) = leading_mark(whole);
    let resistance = form.numerator == [Base::Ohm] && form.denominator.is_empty();
    if resistance && let Some(coded) = from_letter_code(unsigned) {
        let value = if mark == Mark::Minus {
            Decimal::new(-coded.mantissa(), coded.exponent())
        } else {
            coded
        };
        check_sign(value, mark, sign, whole, example)?;
        return Ok(value);
    }
    let (number, rest) = leading_number(unsigned, whole, example)?;
    let spelling = rest.trim_start();
    match read_unit(spelling) {
        Some(unit) if form.takes(unit) => {
            let value = number.scaled(unit.factor, unit.power, mark, whole, example)?;
            check_sign(value, mark, sign, whole, example)?;
            Ok(value)
        }
        _ => Err(unit_error(whole, mark, number, spelling, form, example)),
    }
}

/// The error for a unit that is absent, unknown, or of another quantity.
fn unit_error(
    whole: &str,
    mark: Mark,
    number: Number<'_>,
    spelling: &str,
    form: &Form,
    example: &str,
) -> FigureError {
    let figure = shown(whole);
    if spelling.is_empty() {
        return FigureError {
            message: format!("{figure} has no unit"),
            hint: format!("write the unit as well, for example `{example}`"),
        };
    }
    if whole.contains("..") {
        return FigureError {
            message: format!("{figure} is not one figure"),
            hint: format!("write one figure such as `{example}`, or a range as a list of two"),
        };
    }
    let sign = match mark {
        Mark::Absent | Mark::Plus => "",
        Mark::Minus => "-",
        Mark::PlusMinus => "±",
    };
    let resistance = form.numerator == [Base::Ohm] && form.denominator.is_empty();
    let mut fixes: Vec<String> = meant(spelling, form)
        .iter()
        .map(|fix| shown(&format!("{sign}{} {fix}", number.text)))
        .collect();
    if resistance && spelling == "K" {
        fixes.push(shown(&format!("{sign}{} kohm", number.text)));
    }
    // `5 V max`: what stands before the first space is a figure already.
    if let Some((first, _)) = spelling.split_once(char::is_whitespace)
        && read_unit(first).is_some_and(|unit| form.takes(unit))
    {
        fixes = vec![shown(&format!("{sign}{} {first}", number.text))];
    }
    let found = read_unit(spelling);
    let message = match found.map(name_of) {
        Some(Some(name)) => format!("{figure} is {name}, and {} is wanted", form.name),
        _ => {
            format!("{figure} has an unknown unit {}, and {} is wanted", shown(spelling), form.name)
        }
    };
    let hint = if fixes.is_empty() {
        format!("write {}, for example `{example}`", form.name)
    } else if fixes.len() == 1 && spelling.eq_ignore_ascii_case("kohm") {
        format!("the prefix kilo is a small k: write {}", fixes.join(" or "))
    } else {
        format!("write {}", fixes.join(" or "))
    };
    FigureError { message, hint }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn read<Q: Quantity>(text: &str) -> String {
        match Exact::<Q>::parse(text, Sign::Any) {
            Ok(figure) => figure.decimal().to_string(),
            Err(fault) => panic!("{text}: {fault}"),
        }
    }

    #[test]
    fn units_are_read_in_every_spelling() {
        assert_eq!(read::<Volts>("10V"), "10");
        assert_eq!(read::<Volts>(" 1e-3 V "), "0.001");
        assert_eq!(read::<Volts>("\u{2212}5.5 V"), "-5.5");
        assert_eq!(read::<Volts>("1E\u{2212}3 V"), "0.001");
        assert_eq!(read::<Volts>(".5 V"), "0.5");
        assert_eq!(read::<Volts>("+2.50\u{a0}V"), "2.5");
        assert_eq!(read::<Amperes>("0.5 nA"), "0.0000000005");
        assert_eq!(read::<Celsius>("-40 degC"), "-40");
        assert_eq!(read::<Celsius>("85°C"), "85");
        assert_eq!(read::<Celsius>("25 C"), "25");
        assert_eq!(read::<Kelvins>("10 K"), "10");
        assert_eq!(read::<Kelvins>("10 degC"), "10");
        assert_eq!(read::<Decibels>("120 dB"), "120");
        assert_eq!(read::<Ppm>("0.02 %"), "200");
        assert_eq!(read::<Ppm>("5ppm"), "5");
        for text in ["5 ppm/K", "5ppm/degC", "5 ppm/°C", "0.0005 %/K", "5 ppm / K"] {
            assert_eq!(read::<PpmPerKelvin>(text), "5", "{text}");
        }
        assert_eq!(read::<PpmPerVolt>("10 ppm/mV"), "10000");
        assert_eq!(read::<PpmPerVolt>("0.001 %/V"), "10");
        assert_eq!(read::<PpmPerAmpere>("8 ppm/mA"), "8000");
        assert_eq!(read::<PpmPerAmpere>("0.01 %/mA"), "100000");
        assert_eq!(read::<PpmPerAmpere>("8 ppm/A"), "8");
        assert_eq!(read::<VoltsPerKelvin>("-2 mV/°C"), "-0.002");
        assert_eq!(read::<VoltsPerKelvin>("1.5 µV/K"), "0.0000015");
        assert_eq!(read::<AmperesPerKelvin>("2 pA/K"), "0.000000000002");
        for text in ["150 K/W", "150 degC/W", "150 °C/W", "0.15 K/mW"] {
            assert_eq!(read::<KelvinsPerWatt>(text), "150", "{text}");
        }
        for (text, seconds) in [
            ("2 s", "2"),
            ("20 ms", "0.02"),
            ("2 min", "120"),
            ("2 h", "7200"),
            ("2 d", "172800"),
            ("12 wk", "7257600"),
            ("1 yr", "31536000"),
        ] {
            assert_eq!(read::<Seconds>(text), seconds, "{text}");
        }
        for text in ["4.99 kohm", "4.99kΩ", "4.99 k\u{2126}", "4.99 kR", "4k99", "4K99", "4990R"] {
            assert_eq!(read::<Ohms>(text), "4990", "{text}");
        }
        assert_eq!(read::<Ohms>("10 R"), "10");
        assert_eq!(read::<Ohms>("10K"), "10000");
        assert_eq!(read::<Ohms>("R10"), "0.1");
    }

    fn refused<Q: Parse + std::fmt::Debug>(text: &str, sign: Sign) -> FigureError {
        Q::parse(text, sign).expect_err(text)
    }

    /// Each text with parts of its message and of its hint.
    fn check<Q: Parse + std::fmt::Debug>(cases: &[(&str, Sign, &str, &str)]) {
        for (text, sign, message, hint) in cases {
            let fault = refused::<Q>(text, *sign);
            assert!(fault.message.contains(message), "{text}: {fault}");
            assert!(fault.hint.contains(hint), "{text}: {fault}");
        }
    }

    #[test]
    fn wrong_figures_say_what_was_found_and_what_to_write() {
        check::<Volts>(&[
            ("10", Sign::Any, "`10` has no unit", "`2.5 V`"),
            ("0", Sign::Any, "has no unit", "`2.5 V`"),
            ("10 mA", Sign::Any, "`10 mA` is a current, and a voltage is wanted", "`2.5 V`"),
            ("5 V/V", Sign::Any, "unknown unit `V/V`", "`2.5 V`"),
            ("5 v", Sign::Any, "unknown unit `v`", "write `5 V`"),
            ("5 Mv", Sign::Any, "unknown unit `Mv`", "write `5 mV` or `5 MV`"),
            ("-5 volts", Sign::Any, "unknown unit", "write `-5 V`"),
            ("5 V max", Sign::Any, "unknown unit", "write `5 V`"),
            ("4,99 V", Sign::Any, "decimal comma", "write `4.99 V`"),
            ("1,000 V", Sign::Any, "decimal comma", "`1.000 V`, or `1000 V` if"),
            (",5 V", Sign::Any, "decimal comma", "`0.5 V`"),
            ("1,234.5 V", Sign::Any, "decimal comma", "separates thousands"),
            ("10 000 V", Sign::Any, "separator between its digits", "write `10000 V`"),
            ("1_000 V", Sign::Any, "separator between its digits", "write `1000 V`"),
            ("NaN V", Sign::Any, "not a number", "`2.5 V`"),
            (".inf", Sign::Any, "not a number", "`2.5 V`"),
            ("-inf V", Sign::Any, "not a number", "`2.5 V`"),
            ("1e400 V", Sign::Any, "too large", "`2.5 V`"),
            ("1e-400 V", Sign::Any, "too small", "`2.5 V`"),
            ("", Sign::Any, "empty", "`2.5 V`"),
            ("V", Sign::Any, "does not start with a number", "`2.5 V`"),
            ("±5 V", Sign::Positive, "one side only", "`2.5 V`"),
            ("-5 V", Sign::Positive, "`-5 V` is below zero", "above 0"),
            ("-5 V", Sign::NotNegative, "below zero", "0 or more"),
            ("0 V", Sign::Positive, "is zero", "above 0"),
            ("+/-5 V", Sign::Bound, "two signs", "write `±5 V`"),
            ("14V..16V", Sign::Any, "not one figure", "list of two"),
            ("1.2.3 V", Sign::Any, "unknown unit", "`2.5 V`"),
            ("5 V\n6", Sign::Any, "`5 V\\n6`", "write `5 V`"),
        ]);
        check::<Ohms>(&[
            ("10 Kohm", Sign::Any, "unknown unit `Kohm`", "small k: write `10 kohm`"),
            ("10 K", Sign::Any, "a temperature difference", "`10 kohm`"),
            ("10 k", Sign::Any, "unknown unit `k`", "write `10 kohm`"),
            ("10m", Sign::Any, "unknown unit `m`", "write `10 mohm`"),
            ("4.7K", Sign::Any, "a temperature difference", "`4.7 kohm`"),
            ("-4k99", Sign::Positive, "below zero", "`4.99 kohm`"),
            ("4k99 ohm", Sign::Any, "unknown unit", "`4.99 kohm`"),
            ("5 OHM", Sign::Any, "unknown unit", "write `5 ohm`"),
            ("5 ohms", Sign::Any, "unknown unit", "write `5 ohm`"),
        ]);
        check::<Celsius>(&[
            ("25 K", Sign::Any, "a temperature difference, and a temperature", "`25 degC`"),
            ("25 mC", Sign::Any, "unknown unit", "`25 degC`"),
            ("25 °", Sign::Any, "unknown unit", "write `25 degC`"),
        ]);
        check::<PpmPerKelvin>(&[
            ("5 ppm", Sign::Bound, "a ratio, and a ratio per kelvin", "`5 ppm/K`"),
            ("5 ppm/C", Sign::Bound, "unknown unit `ppm/C`", "write `5 ppm/K`"),
            ("5 PPM/k", Sign::Bound, "unknown unit", "write `5 ppm/K`"),
            ("±-5 ppm/K", Sign::Bound, "does not start with a number", "`5 ppm/K`"),
            ("-5 ppm/K", Sign::PositiveBound, "below zero", "both sides"),
        ]);
        check::<Seconds>(&[
            ("5 hours", Sign::Any, "unknown unit", "write `5 h`"),
            ("5 m", Sign::Any, "unknown unit", "write `5 min`"),
            ("1 kh", Sign::Any, "unknown unit", "`1000 h`"),
        ]);
    }

    #[test]
    fn a_bound_may_have_both_signs() {
        for sign in [Sign::Bound, Sign::PositiveBound] {
            assert_eq!(Ppm::parse("± 0.1 %", sign), Ok(Ppm::new(1000.0)));
        }
        assert_eq!(Ppm::parse("±0 ppm", Sign::Bound), Ok(Ppm::ZERO));
        assert_eq!(Volts::parse("-0 V", Sign::NotNegative).map(Volts::value), Ok(0.0));
    }

    #[test]
    fn plain_numbers_and_counts() {
        assert_eq!(parse_number("0.50", Sign::Positive, "0.5"), Ok(Decimal::new(5, -1)));
        assert_eq!(parse_number("\u{2212}2e1", Sign::Any, "0.5"), Ok(Decimal::new(-20, 0)));
        for (text, message) in
            [("50 %", "not a plain number"), ("0,5", "decimal comma"), ("0", "zero"), ("", "empty")]
        {
            let fault = parse_number(text, Sign::Positive, "0.5").expect_err(text);
            assert!(fault.message.contains(message), "{text}: {fault}");
        }
        assert_eq!(parse_count(" 250 "), Ok(250));
        assert_eq!(parse_count("1000000000"), Ok(LARGEST_COUNT));
        for text in
            ["", "-1", "+1", "1.0", "1e3", "1_000", "1000000001", "99999999999999999999", "２"]
        {
            assert!(parse_count(text).is_err(), "{text}");
        }
    }

    #[test]
    fn every_example_reads_as_its_own_form() {
        for form in unit::FORMS {
            assert!(read_figure(form.example, form, Sign::Positive, "").is_ok(), "{}", form.name);
        }
    }
}
