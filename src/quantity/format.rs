//! Figures for people: a few significant digits, with the prefix that fits.

use super::units::Seconds;

/// Prefixes of the report by their power of ten.
const PREFIXES: [(i32, &str); 10] = [
    (-15, "f"),
    (-12, "p"),
    (-9, "n"),
    (-6, "µ"),
    (-3, "m"),
    (0, ""),
    (3, "k"),
    (6, "M"),
    (9, "G"),
    (12, "T"),
];

/// Units that take a prefix, alone or before a slash.
const PREFIXED: [&str; 7] = ["V", "A", "Ω", "W", "F", "K", "s"];

/// A figure with so many significant digits at most and the prefix that leaves one to three
/// digits before the point: `249 kΩ`, `1.25 µA`, `0 V`. Trailing zeros behind the point are left
/// out. Units that take no prefix (`ppm`, `°C`, `dB`, `%`) stay as they are. `value` is in the
/// unit given.
#[must_use]
pub fn engineering(value: f64, unit: &str, digits: usize) -> String {
    if value == 0.0 || !value.is_finite() {
        // No minus in front of zero.
        return format!("{} {unit}", if value == 0.0 { 0.0 } else { value });
    }
    let (sign, figures, leading) = significant(value, digits);
    let head = unit.split('/').next().unwrap_or(unit);
    let power = if PREFIXED.contains(&head) { leading.div_euclid(3) * 3 } else { 0 };
    let nearest = power.clamp(-15, 12);
    let prefix = PREFIXES.iter().find(|(p, _)| *p == nearest).map_or("", |(_, name)| name);
    format!("{sign}{} {prefix}{unit}", placed(&figures, leading - nearest))
}

/// An error in ppm: four significant digits, none behind a thousandth of a ppm, and whole ppm from
/// a thousand up.
#[must_use]
pub fn ppm_text(ppm: f64) -> String {
    /// Below half of this nothing is left to show.
    const LEAST: f64 = 1e-3;
    if !ppm.is_finite() {
        return format!("{ppm} ppm");
    }
    let size = ppm.abs();
    if size > 0.0 && size < LEAST / 2.0 {
        return if ppm < 0.0 { "> -0.001 ppm".to_owned() } else { "< 0.001 ppm".to_owned() };
    }
    if size >= 1000.0 {
        return format!("{ppm:.0} ppm");
    }
    let rounded = (ppm / LEAST).round() * LEAST;
    engineering(rounded, "ppm", 4)
}

/// A time in the unit in which it is a short number: years, weeks, days, hours, or seconds with a
/// prefix. A year is 8760 h.
#[must_use]
pub fn duration_text(time: Seconds) -> String {
    let seconds = time.value();
    let units = [(31_536_000.0, "yr"), (604_800.0, "wk"), (86_400.0, "d"), (3600.0, "h")];
    for (size, name) in units {
        let count = seconds / size;
        // Only whole numbers of a unit are easier to read than hours.
        if count != 0.0 && count.fract() == 0.0 {
            return format!("{count} {name}");
        }
    }
    if seconds.abs() >= 3600.0 {
        return engineering(seconds / 3600.0, "h", 4);
    }
    engineering(seconds, "s", 4)
}

/// Sign, significant digits without trailing zeros, and the power of ten of the first.
fn significant(value: f64, digits: usize) -> (&'static str, String, i32) {
    let sign = if value < 0.0 { "-" } else { "" };
    // 17 digits tell any two binary numbers apart; more would be noise.
    let text = format!("{:.*e}", digits.clamp(1, 17) - 1, value.abs());
    let (mantissa, exponent) = text.split_once('e').unwrap_or((&text, "0"));
    let figures: String = mantissa.chars().filter(char::is_ascii_digit).collect();
    (sign, figures.trim_end_matches('0').to_owned(), exponent.parse().unwrap_or(0))
}

/// Digits with the first one at a power of ten.
fn placed(figures: &str, leading: i32) -> String {
    if leading < 0 {
        let zeros = "0".repeat(leading.unsigned_abs() as usize - 1);
        return format!("0.{zeros}{figures}");
    }
    let whole = leading.unsigned_abs() as usize + 1;
    if figures.len() <= whole {
        return format!("{figures:0<whole$}");
    }
    let (before, after) = figures.split_at(whole);
    format!("{before}.{after}")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_prefix_leaves_one_to_three_digits() {
        for (value, unit, digits, text) in [
            (249e3, "Ω", 4, "249 kΩ"),
            (1.25e-6, "A", 4, "1.25 µA"),
            (0.0, "V", 4, "0 V"),
            (-0.0, "V", 4, "0 V"),
            (-0.0123, "V", 3, "-12.3 mV"),
            (999.96, "V", 4, "1 kV"),
            (999.94, "V", 4, "999.9 V"),
            (4990.0, "Ω", 3, "4.99 kΩ"),
            (249e3, "Ω", 2, "250 kΩ"),
            (100e9, "Ω", 3, "100 GΩ"),
            (5e15, "Ω", 3, "5000 TΩ"),
            (2e-18, "A", 3, "0.002 fA"),
            (1.5e-6, "V/K", 3, "1.5 µV/K"),
            (-40.0, "°C", 3, "-40 °C"),
            (1234.0, "ppm", 4, "1234 ppm"),
            (0.05, "ppm", 4, "0.05 ppm"),
            (120.0, "dB", 3, "120 dB"),
            (f64::NAN, "V", 3, "NaN V"),
        ] {
            assert_eq!(engineering(value, unit, digits), text);
        }
    }

    #[test]
    fn ppm_have_no_more_digits_than_mean_something() {
        for (ppm, text) in [
            (0.0, "0 ppm"),
            (12_345.6, "12346 ppm"),
            (1132.4, "1132 ppm"),
            (999.96, "1000 ppm"),
            (399.94, "399.9 ppm"),
            (12.345, "12.35 ppm"),
            (1.23456, "1.235 ppm"),
            (0.0123, "0.012 ppm"),
            (1e-9, "< 0.001 ppm"),
            (-1e-9, "> -0.001 ppm"),
            (-5.5, "-5.5 ppm"),
        ] {
            assert_eq!(ppm_text(ppm), text);
        }
    }

    #[test]
    fn times_are_shown_in_the_unit_that_makes_them_whole() {
        for (seconds, text) in [
            (0.0, "0 s"),
            (31_536_000.0, "1 yr"),
            (12.0 * 604_800.0, "12 wk"),
            (3_600_000.0, "1000 h"),
            (86_400.0 * 3.0, "3 d"),
            (5400.0, "1.5 h"),
            (0.02, "20 ms"),
        ] {
            assert_eq!(duration_text(Seconds::new(seconds)), text);
        }
    }
}
