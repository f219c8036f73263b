//! Preferred values of IEC 60063:2015.

use super::Decimal;
use super::number::shown;
use super::parse::FigureError;

/// A series of preferred values, by the number of values in a decade.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Series {
    /// 3 values a decade.
    E3,
    /// 6 values a decade.
    E6,
    /// 12 values a decade.
    E12,
    /// 24 values a decade.
    E24,
    /// 48 values a decade.
    E48,
    /// 96 values a decade.
    E96,
    /// 192 values a decade.
    E192,
}

/// Where the standard departs from the rounded formula in E24, and so in E12, E6 and E3: what the
/// formula gives, and what the standard has, in tenths.
const E24_DEPARTURES: [(i128, i128); 8] =
    [(26, 27), (29, 30), (32, 33), (35, 36), (38, 39), (42, 43), (46, 47), (83, 82)];

/// The one departure of E192, in hundredths.
const E192_DEPARTURE: (i128, i128) = (919, 920);

/// Most decades that a range of values may span: from microohms to petaohms and more.
const MOST_DECADES: i128 = 24;

impl Series {
    /// All series.
    pub const ALL: [Self; 7] =
        [Self::E3, Self::E6, Self::E12, Self::E24, Self::E48, Self::E96, Self::E192];

    /// Values in a decade.
    #[must_use]
    pub const fn count(self) -> u32 {
        match self {
            Self::E3 => 3,
            Self::E6 => 6,
            Self::E12 => 12,
            Self::E24 => 24,
            Self::E48 => 48,
            Self::E96 => 96,
            Self::E192 => 192,
        }
    }

    /// The name in a file.
    #[must_use]
    pub const fn word(self) -> &'static str {
        match self {
            Self::E3 => "E3",
            Self::E6 => "E6",
            Self::E12 => "E12",
            Self::E24 => "E24",
            Self::E48 => "E48",
            Self::E96 => "E96",
            Self::E192 => "E192",
        }
    }

    /// Reads a series by its name, `E96`.
    ///
    /// # Errors
    /// Names the series there are.
    pub fn parse(text: &str) -> Result<Self, FigureError> {
        let wanted = text.trim();
        Self::ALL.into_iter().find(|series| series.word() == wanted).ok_or_else(|| {
            let near = Self::ALL.into_iter().find(|series| {
                series.word().eq_ignore_ascii_case(wanted) || series.word().get(1..) == Some(wanted)
            });
            FigureError {
                message: format!("{} is not a series of IEC 60063", shown(wanted)),
                hint: near.map_or_else(
                    || "write one of E3, E6, E12, E24, E48, E96, E192".to_owned(),
                    |series| format!("write `{}`", series.word()),
                ),
            }
        })
    }

    /// The values of the decade from 1 (included) to 10 (not), rising.
    ///
    /// IEC 60063:2015: 10^(k/n) for k = 0 … n−1, rounded to two digits up to E24 and to three
    /// digits above, with the departures that the standard names.
    #[must_use]
    pub fn decade(self) -> Vec<Decimal> {
        let n = self.count();
        let places = if n <= 24 { 1 } else { 2 };
        (0..n)
            .map(|k| {
                // The closest value to a tie is 1.694988, so binary rounding errors don't matter.
                let exact = 10f64.powf(f64::from(k) / f64::from(n)) * 10f64.powi(places);
                let rounded = (exact + 0.5).floor() as i128;
                let departed = if n <= 24 {
                    E24_DEPARTURES.iter().find(|(formula, _)| *formula == rounded)
                } else {
                    Some(&E192_DEPARTURE).filter(|(formula, _)| *formula == rounded)
                };
                Decimal::new(departed.map_or(rounded, |(_, standard)| *standard), -places)
            })
            .collect()
    }

    /// All values from `from` to `to`, ends included, rising.
    ///
    /// # Errors
    /// When `from` is not above zero, the ends are out of order, or they span more than 24
    /// decades.
    pub fn values(self, from: Decimal, to: Decimal) -> Result<Vec<Decimal>, FigureError> {
        let error = |message: &str| FigureError {
            message: message.to_owned(),
            hint: "write the low end first, for example from 10 ohm to 1 Mohm".to_owned(),
        };
        if from.mantissa() <= 0 {
            return Err(error("the low end is not above zero"));
        }
        if from > to {
            return Err(error("the low end is above the high end"));
        }
        let (lowest, highest) = (from.leading_power(), to.leading_power());
        if i128::from(highest) - i128::from(lowest) > MOST_DECADES {
            return Err(error("the range spans more than 24 decades"));
        }
        let decade = self.decade();
        let mut values = Vec::new();
        for power in lowest..=highest {
            let Ok(power) = i32::try_from(power) else { continue };
            values.extend(
                decade
                    .iter()
                    .map(|value| {
                        Decimal::new(value.mantissa(), value.exponent().saturating_add(power))
                    })
                    .filter(|value| from <= *value && *value <= to),
            );
        }
        Ok(values)
    }
}
