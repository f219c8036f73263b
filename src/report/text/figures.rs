//! Figures for people: no more digits than mean something.

use super::page::tied;
use crate::quantity::{Amperes, Money, Ohms, Ppm, engineering, ppm_text};

/// Digits enough for every value that can be ordered.
const NOMINAL_DIGITS: usize = 9;
/// Digits of a worked-out figure.
const WORKED_DIGITS: usize = 3;

/// A nominal current, `7.5 µA`.
pub(super) fn current(current: Amperes) -> String {
    engineering(current.value(), Amperes::SYMBOL, NOMINAL_DIGITS)
}

/// A nominal resistance, `2.49 kΩ`.
pub(super) fn nominal_ohms(ohms: Ohms) -> String {
    engineering(ohms.value(), Ohms::SYMBOL, NOMINAL_DIGITS)
}

/// The nominal resistance of a network: a parallel one has no short decimal.
pub(super) fn network_ohms(ohms: Ohms) -> String {
    engineering(ohms.value(), Ohms::SYMBOL, 6)
}

/// A worked-out figure in the unit of a limit, `450 mV`; `degC` becomes `°C`.
pub(super) fn worked(figure: f64, unit: &str) -> String {
    match unit {
        "degC" => format!("{} °C", trimmed(figure, 1)),
        "K" => format!("{} K", trimmed(figure, 1)),
        "ppm" => ppm_text(figure),
        _ => engineering(figure, unit, WORKED_DIGITS),
    }
}

/// Money with its currency in front, `EUR 1234.56`.
pub(super) fn money(currency: &str, money: Money) -> String {
    tied(&format!("{currency} {money}"))
}

/// Amounts of one column, with as many decimals as the one that needs most, so that they line up.
pub(super) fn aligned(amounts: impl Iterator<Item = Money>) -> Vec<String> {
    let mut texts: Vec<String> = amounts.map(|money| money.to_string()).collect();
    let decimals = |text: &str| text.rsplit_once('.').map_or(0, |(_, decimals)| decimals.len());
    let most = texts.iter().map(|text| decimals(text)).max().unwrap_or(0);
    for text in &mut texts {
        text.push_str(&"0".repeat(most - decimals(text)));
    }
    texts
}

/// At most so many decimals, without trailing zeros.
pub(super) fn trimmed(figure: f64, decimals: usize) -> String {
    let text = format!("{:.decimals$}", figure + 0.0);
    let text = if text.contains('.') {
        text.trim_end_matches('0').trim_end_matches('.').to_owned()
    } else {
        text
    };
    if text == "-0" { "0".to_owned() } else { text }
}

/// The decimals that a ppm figure deserves beside this target: about a thousandth of it.
pub(super) fn decimals_beside(target: Ppm) -> usize {
    match target.value() {
        t if t >= 1000.0 => 0,
        t if t >= 100.0 => 1,
        t if t >= 10.0 => 2,
        t if t >= 1.0 => 3,
        _ => 5,
    }
}

/// A ppm figure with fixed decimals, so that a column lines up; what would round to nothing is
/// shown as `<0.1`.
pub(super) fn fixed_ppm(ppm: Ppm, decimals: usize) -> String {
    let text = format!("{:.decimals$}", ppm.value());
    let vanishes = ppm.value() > 0.0 && text.chars().all(|c| matches!(c, '0' | '.'));
    if vanishes { format!("<{:.decimals$}", 10f64.powi(-exponent(decimals))) } else { text }
}

fn exponent(decimals: usize) -> i32 {
    i32::try_from(decimals).unwrap_or(0)
}

/// A figure that has to be reached coming from another one, to five significant digits and
/// rounded away from there: the figure shown does as well.
pub(super) fn reaching(from: f64, to: f64) -> String {
    if to == 0.0 || !to.is_finite() {
        return trimmed(to, 1);
    }
    // The power of ten of the fifth digit; figures of a request lie far inside this range.
    let fifth = (to.abs().log10().floor() as i32 - 4).clamp(-15, 15);
    let steps = to / 10f64.powi(fifth);
    let whole = steps.round();
    // What is exact but for binary rounding stays as it is.
    let steps = if (steps - whole).abs() <= 1e-6 {
        whole
    } else if to > from {
        steps.ceil()
    } else {
        steps.floor()
    };
    let decimals = usize::try_from(-fifth).unwrap_or(0);
    trimmed(steps * 10f64.powi(fifth), decimals)
}

/// A total beside its target, with decimals enough that the two don't read the same unless they
/// are: a total that misses by little must be seen to miss.
pub(super) fn total_beside(total: Ppm, target: Ppm) -> String {
    let start = decimals_beside(target);
    (start..start + 6)
        .map(|decimals| trimmed(total.value(), decimals))
        .find(|text| text.parse() != Ok(target.value()))
        .unwrap_or_else(|| trimmed(total.value(), start))
}

/// A target as asked for, `400 ppm`.
pub(super) fn target(target: Ppm) -> String {
    format!("{} ppm", trimmed(target.value(), 6))
}

/// What part of the target is left, `21 %`; rounded down so that room is never overstated.
pub(super) fn room(total: Ppm, target: Ppm) -> String {
    let left = (target.value() - total.value()) / target.value() * 100.0;
    if left <= 0.0 {
        "0 %".to_owned()
    } else if left < 0.1 {
        "<0.1 %".to_owned()
    } else if left < 10.0 {
        // A whisker is added so that 5 % computed as 4.9999999 stays 5 %.
        format!("{} %", trimmed(((left + 1e-9) * 10.0).floor() / 10.0, 1))
    } else {
        format!("{} %", (left + 1e-9).floor())
    }
}

/// A share in percent of the target, for the budget table.
pub(super) fn share(part: Ppm, target: Ppm) -> String {
    let percent = part.value() / target.value() * 100.0;
    if percent > 0.0 && percent < 0.5 { "<1 %".to_owned() } else { format!("{percent:.0} %") }
}

/// A bar of `share` (0 to 1) of `width` columns, to an eighth of a column.
pub(super) fn bar(share: f64, width: usize) -> String {
    const EIGHTHS: [&str; 8] = ["", "▏", "▎", "▍", "▌", "▋", "▊", "▉"];
    if share.is_nan() || share <= 0.0 {
        return String::new();
    }
    // The cast keeps to the width: the share has been held between 0 and 1.
    let eighths = ((share.min(1.0) * width as f64 * 8.0).round() as usize).max(1);
    let rest = EIGHTHS.get(eighths % 8).copied().unwrap_or("");
    format!("{}{rest}", "█".repeat(eighths / 8))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn room_is_never_overstated() {
        let room_of = |total: f64| room(Ppm::new(total), Ppm::new(400.0));
        assert_eq!(room_of(312.4), "21 %");
        assert_eq!(room_of(380.0), "5 %");
        assert_eq!(room_of(399.0), "0.2 %");
        assert_eq!(room_of(399.99), "<0.1 %");
        assert_eq!(room_of(400.0), "0 %");
        assert_eq!(room_of(0.0), "100 %");
    }

    #[test]
    fn a_near_miss_is_seen_to_miss() {
        assert_eq!(total_beside(Ppm::new(400.02), Ppm::new(400.0)), "400.02");
        assert_eq!(total_beside(Ppm::new(312.44), Ppm::new(400.0)), "312.4");
        assert_eq!(total_beside(Ppm::new(400.0), Ppm::new(400.0)), "400");
    }

    #[test]
    fn columns_line_up_and_nothing_vanishes() {
        assert_eq!(fixed_ppm(Ppm::new(105.0), 1), "105.0");
        assert_eq!(fixed_ppm(Ppm::new(0.01), 1), "<0.1");
        assert_eq!(fixed_ppm(Ppm::new(0.2), 0), "<1");
        assert_eq!(fixed_ppm(Ppm::new(0.0), 1), "0.0");
    }

    #[test]
    fn a_figure_to_reach_is_enough_as_shown() {
        assert_eq!(reaching(20.0, 396.312_224_27), "396.32");
        assert_eq!(reaching(50.0, 31.508_26), "31.508");
        assert_eq!(reaching(400.0, 500.0), "500");
        assert_eq!(reaching(1000.0, 4_135.251), "4135.3");
        assert_eq!(reaching(5.4, 0.0), "0");
        assert_eq!(reaching(1e-3, 2.5e-3), "0.0025");
    }

    #[test]
    fn bars_grow_by_eighths() {
        assert_eq!(bar(0.0, 10), "");
        assert_eq!(bar(1e-9, 10), "▏");
        assert_eq!(bar(0.05, 10), "▌");
        assert_eq!(bar(0.5, 10), "█████");
        assert_eq!(bar(7.0, 3), "███");
    }

    #[test]
    fn temperatures_take_no_prefix() {
        assert_eq!(worked(-20.0, "degC"), "-20 °C");
        assert_eq!(worked(8364.94, "ppm"), "8365 ppm");
        assert_eq!(trimmed(-0.01, 1), "0");
    }
}
