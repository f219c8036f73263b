//! Units, money, preferred values: what a figure in a file means, and how it is shown.

mod decimal;
mod format;
mod letter_code;
mod money;
mod number;
mod parse;
mod series;
mod unit;
mod units;

pub use decimal::Decimal;
pub use format::{duration_text, engineering, ppm_text};
pub use letter_code::{from_letter_code, to_letter_code};
pub use money::{ExchangeRate, Money};
pub use number::shown;
pub use parse::{Exact, FigureError, Parse, Quantity, Sign, parse_count, parse_number};
pub use series::Series;
pub use unit::Form;
pub use units::{
    Amperes, AmperesPerKelvin, Celsius, Decibels, Farads, Kelvins, KelvinsPerWatt, Ohms, Ppm,
    PpmPerAmpere, PpmPerKelvin, PpmPerVolt, Range, Seconds, Volts, VoltsPerKelvin, Watts,
};
