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
                Ok(Self::from_decimal(read_figure(text, Self::FORM, sign)?))
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
        Ok(Self::from_decimal(read_figure(text, Q::FORM, sign)?))
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
fn read_figure(text: &str, form: &Form, sign: Sign) -> Result<Decimal, FigureError> {
    let whole = text.trim();
    let (mark, unsigned) = leading_mark(whole);
    let resistance = form.numerator == [Base::Ohm] && form.denominator.is_empty();
    if resistance && let Some(coded) = from_letter_code(unsigned) {
        let value = if mark == Mark::Minus {
            Decimal::new(-coded.mantissa(), coded.exponent())
        } else {
            coded
        };
        check_sign(value, mark, sign, whole, form.example)?;
        return Ok(value);
    }
    let (number, rest) = leading_number(unsigned, whole, form.example)?;
    let spelling = rest.trim_start();
    match read_unit(spelling) {
        Some(unit) if form.takes(unit) => {
            let value = number.scaled(unit.factor, unit.power, mark, whole, form.example)?;
            check_sign(value, mark, sign, whole, form.example)?;
            Ok(value)
        }
        _ => Err(unit_error(whole, mark, number, spelling, form)),
    }
}

/// The error for a unit that is absent, unknown, or of another quantity.
fn unit_error(
    whole: &str,
    mark: Mark,
    number: Number<'_>,
    spelling: &str,
    form: &Form,
) -> FigureError {
    let figure = shown(whole);
    let example = form.example;
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
