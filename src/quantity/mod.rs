//! Units, money, preferred values: what a figure in a file means, and how it is shown.

mod decimal;
mod format;
mod letter_code;
mod money;
mod parse;
mod series;
mod units;

pub use decimal::Decimal;
pub use format::{engineering, ppm_text};
pub use letter_code::{from_letter_code, to_letter_code};
pub use money::{ExchangeRate, Money};
pub use parse::{Exact, FigureError, Parse, Sign};
pub use series::Series;
pub use units::{
    Amperes, AmperesPerKelvin, Celsius, Decibels, Farads, Kelvins, KelvinsPerWatt, Ohms, Ppm,
    PpmPerAmpere, PpmPerKelvin, PpmPerVolt, Range, Seconds, Volts, VoltsPerKelvin, Watts,
};
