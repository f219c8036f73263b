//! Units, preferred values, letter codes and money from the outside: published lists, and
//! properties that hold for any text.

use std::collections::BTreeMap;

use ampthrift::quantity::{
    Amperes, Celsius, Decimal, Exact, ExchangeRate, Farads, Money, Ohms, Parse, Ppm, PpmPerAmpere,
    PpmPerKelvin, Quantity, Seconds, Series, Sign, Volts, engineering, from_letter_code,
    parse_count, parse_number, ppm_text, to_letter_code,
};
use proptest::prelude::*;

/// IEC 60063:2015, all values of all series.
#[test]
fn every_series_is_the_published_list() {
    let text = include_str!("data/e_series.yaml");
    let lists: BTreeMap<String, Vec<i128>> = serde_yaml::from_str(text).unwrap();
    assert_eq!(lists.len(), Series::ALL.len());
    for series in Series::ALL {
        let places = if series.count() <= 24 { -1 } else { -2 };
        let listed: Vec<Decimal> =
            lists[series.word()].iter().map(|value| Decimal::new(*value, places)).collect();
        assert_eq!(series.decade(), listed, "{}", series.word());
        assert_eq!(Series::parse(series.word()).unwrap(), series);
    }
}

/// IEC 60063:2015: E12, E6 (E96, E48) are every second, every fourth value of E24 (E192).
#[test]
fn series_nest() {
    let every = |series: Series, step: usize| -> Vec<Decimal> {
        series.decade().into_iter().step_by(step).collect()
    };
    assert_eq!(Series::E12.decade(), every(Series::E24, 2));
    assert_eq!(Series::E6.decade(), every(Series::E24, 4));
    assert_eq!(Series::E3.decade(), every(Series::E24, 8));
    assert_eq!(Series::E96.decade(), every(Series::E192, 2));
    assert_eq!(Series::E48.decade(), every(Series::E192, 4));
}

#[test]
fn a_range_of_a_series_has_its_ends() {
    let decimal = |text: &str| Exact::<Ohms>::parse(text, Sign::Any).unwrap().decimal();
    let values = |from, to| Series::E96.values(decimal(from), decimal(to)).unwrap();
    let all = values("10 ohm", "1 Mohm");
    assert_eq!(all.len(), 5 * 96 + 1);
    assert_eq!(all.first(), Some(&decimal("10R")));
    assert_eq!(all.last(), Some(&decimal("1M0")));
    assert!(all.windows(2).all(|pair| pair[0] < pair[1]));
    assert_eq!(values("4.99 kohm", "5.23 kohm"), ["4k99", "5k11", "5k23"].map(decimal));
    assert_eq!(values("5 kohm", "5.1 kohm"), []);
    assert_eq!(values("499 mohm", "499 mohm"), [decimal("R499")]);
    assert!(Series::E3.values(decimal("0 ohm"), decimal("1 ohm")).is_err());
    assert!(Series::E3.values(decimal("2 ohm"), decimal("1 ohm")).is_err());
    assert!(Series::E3.values(Decimal::new(1, -300), Decimal::new(1, 300)).is_err());
}

#[test]
fn an_unknown_series_is_told_what_there_is() {
    for (text, hint) in [("e96", "`E96`"), ("96", "`E96`"), ("E100", "E3, E6"), ("", "E3, E6")] {
        let fault = Series::parse(text).unwrap_err();
        assert!(fault.hint.contains(hint), "{text}: {fault}");
    }
}

/// IEC 60062:2016.
#[test]
fn letter_codes_are_the_published_ones() {
    let text = include_str!("data/iec60062_codes.yaml");
    let table: BTreeMap<String, BTreeMap<String, serde_yaml::Value>> =
        serde_yaml::from_str(text).unwrap();
    let codes = &table["values_ohm"];
    assert_eq!(codes.len(), 15);
    for (code, ohms) in codes {
        let ohms = ohms.as_f64().unwrap();
        let read = from_letter_code(code).unwrap();
        assert_eq!(read.to_f64(), ohms, "{code}");
        // We write no zero before the letter, and none behind it where two digits stand already.
        let ours = match code.as_str() {
            "0R1" => "R10",
            "15M0" => "15M",
            other => other,
        };
        assert_eq!(to_letter_code(read), ours);
        assert_eq!(Ohms::parse(code, Sign::Positive).unwrap(), Ohms::new(ohms));
    }
}

/// SI Brochure, 9th edition (2019), table 7; case matters.
#[test]
fn prefixes_are_those_of_the_si() {
    for (prefix, power) in [
        ("f", -15),
        ("p", -12),
        ("n", -9),
        ("u", -6),
        ("\u{b5}", -6),
        ("\u{3bc}", -6),
        ("m", -3),
        ("", 0),
        ("k", 3),
        ("M", 6),
        ("G", 9),
        ("T", 12),
    ] {
        for unit in ["V", "A", "ohm", "\u{3a9}", "\u{2126}", "R", "W", "F", "K", "s"] {
            let text = format!("2.5 {prefix}{unit}");
            let wanted = Decimal::new(25, power - 1);
            let read = match unit {
                "V" => Exact::<Volts>::parse(&text, Sign::Any).map(Exact::decimal),
                "A" => Exact::<Amperes>::parse(&text, Sign::Any).map(Exact::decimal),
                "W" => {
                    Exact::<ampthrift::quantity::Watts>::parse(&text, Sign::Any).map(Exact::decimal)
                }
                "F" => Exact::<Farads>::parse(&text, Sign::Any).map(Exact::decimal),
                "K" => Exact::<ampthrift::quantity::Kelvins>::parse(&text, Sign::Any)
                    .map(Exact::decimal),
                "s" => Exact::<Seconds>::parse(&text, Sign::Any).map(Exact::decimal),
                _ => Exact::<Ohms>::parse(&text, Sign::Any).map(Exact::decimal),
            };
            assert_eq!(read.unwrap(), wanted, "{text}");
        }
    }
    for wrong in ["K", "g", "t", "P", "U", "N", "c", "da", "h"] {
        assert!(Volts::parse(&format!("1 {wrong}V"), Sign::Any).is_err(), "{wrong}");
    }
}

#[test]
fn equal_figures_are_the_same_number_however_they_are_written() {
    let amperes = |text: &str| Amperes::parse(text, Sign::Any).unwrap().value().to_bits();
    for text in ["7.5 uA", "7.5e-6 A", "7.50µA", "0.0075 mA", "7500000 pA", "75e2nA", "+7.5 μA"] {
        assert_eq!(amperes(text), amperes("7500 nA"), "{text}");
        assert_eq!(amperes(text), 7.5e-6f64.to_bits());
    }
    let ppm = |text: &str| Ppm::parse(text, Sign::Bound).unwrap().value();
    assert_eq!(ppm("0.02 %"), 200.0);
    assert_eq!(ppm("±200ppm"), 200.0);
    assert_eq!(PpmPerAmpere::parse("8 ppm/mA", Sign::Bound).unwrap().value(), 8000.0);
    assert_eq!(Seconds::parse("1 yr", Sign::Any), Seconds::parse("8760 h", Sign::Any));
}

/// Every reader of text, on the same text. Used to show that none of them panics.
fn read_all(text: &str) {
    fn read<Q: Parse>(text: &str) {
        for sign in [Sign::Any, Sign::NotNegative, Sign::Positive, Sign::Bound, Sign::PositiveBound]
        {
            if let Err(fault) = Q::parse(text, sign) {
                assert!(!fault.message.is_empty() && !fault.hint.is_empty());
                assert!(fault.message.chars().count() < 250, "{fault}");
            }
        }
    }
    read::<Exact<Volts>>(text);
    read::<Ohms>(text);
    read::<Celsius>(text);
    read::<Seconds>(text);
    read::<PpmPerKelvin>(text);
    read::<PpmPerAmpere>(text);
    let _ = parse_number(text, Sign::Any, "1");
    let _ = parse_count(text);
    let _ = Money::parse(text);
    let _ = ExchangeRate::parse(text);
    let _ = Series::parse(text);
    let _ = from_letter_code(text);
}

#[test]
fn long_texts_are_refused_quickly() {
    let digits = "9".repeat(1_000_000);
    for text in [
        format!("{digits} V"),
        format!("0.{digits} V"),
        format!("1e{digits} V"),
        format!("1e-{digits} V"),
        format!("1{} V", "0".repeat(1_000_000)),
        format!("1 {}", "V".repeat(1_000_000)),
        format!("{digits}R"),
        "\u{2212}".repeat(1_000_000),
    ] {
        assert!(Volts::parse(&text, Sign::Any).is_err());
        assert!(Ohms::parse(&text, Sign::Any).is_err());
        read_all(&text);
    }
    // Zeros that mean nothing are no digits.
    let zeros = "0".repeat(1_000_000);
    assert_eq!(Volts::parse(&format!("{zeros}1.5{zeros} V"), Sign::Any), Ok(Volts::new(1.5)));
    assert_eq!(Volts::parse(&format!("0.{zeros} V"), Sign::Any), Ok(Volts::ZERO));
}

fn decimals() -> impl Strategy<Value = Decimal> {
    (-999_999_999i128..=999_999_999, -15i32..6).prop_map(|(m, e)| Decimal::new(m, e))
}

fn shown_back<Q: Quantity + Parse>(value: f64, unit: &str) -> Q {
    Q::parse(&engineering(value, unit, 17), Sign::Any).unwrap()
}

proptest! {
    #[test]
    fn no_text_panics(text in "(?s).{0,60}") {
        read_all(&text);
    }

    /// Texts from the pieces that figures are made of reach further than arbitrary ones.
    #[test]
    fn no_nearly_right_text_panics(
        pieces in proptest::collection::vec(
            prop::sample::select(vec![
                "1", "0", "99", ".", ",", "e", "E", "-", "\u{2212}", "+", "±", " ", "/", "k", "K",
                "M", "m", "u", "µ", "μ", "R", "L", "V", "A", "ohm", "Ω", "Ω", "°C", "degC", "C",
                "%", "ppm", "h", "min", "wk", "yr", "s", "dB", "..", "nan", "inf", "_", "\u{a0}",
            ]),
            0..12,
        )
    ) {
        read_all(&pieces.concat());
    }

    /// Scaling by a prefix is exact: the same decimal, shifted, rounded to binary once.
    #[test]
    fn scaling_is_exact(value in decimals()) {
        for (prefix, power) in [("n", -9), ("u", -6), ("m", -3), ("", 0), ("k", 3)] {
            let read = Exact::<Volts>::parse(&format!("{value} {prefix}V"), Sign::Any).unwrap();
            let wanted = if value.mantissa() == 0 {
                value
            } else {
                Decimal::new(value.mantissa(), value.exponent() + power)
            };
            prop_assert_eq!(read.decimal(), wanted);
            // The standard library's own reader, as an independent relation.
            let independent: f64 =
                format!("{}e{}", value.mantissa(), value.exponent() + power).parse().unwrap();
            prop_assert_eq!(read.value().value(), independent);
        }
    }

    #[test]
    fn a_letter_code_reads_back(mantissa in 0i128..=999_999_999, exponent in -12i32..9) {
        let ohms = Decimal::new(mantissa, exponent);
        let code = to_letter_code(ohms);
        prop_assert_eq!(from_letter_code(&code), Some(ohms), "{}", code);
        let significant = code.chars().filter(char::is_ascii_digit).count();
        prop_assert!(significant >= 2);
    }

    #[test]
    fn what_is_shown_reads_back(value in -1e12f64..1e12, small in -1e-6f64..1e-6) {
        for value in [value, small] {
            prop_assert_eq!(shown_back::<Volts>(value, "V").value(), value);
            prop_assert_eq!(shown_back::<Ohms>(value, "Ω").value(), value);
        }
    }

    #[test]
    fn fewer_digits_stay_close(value in 1e-12f64..1e12, digits in 1usize..8) {
        let read = Volts::parse(&engineering(value, "V", digits), Sign::Any).unwrap().value();
        let step = 10f64.powi(1 - i32::try_from(digits).unwrap());
        prop_assert!((read / value - 1.0).abs() <= step / 2.0 * (1.0 + 1e-9));
    }

    #[test]
    fn shown_ppm_are_close(ppm in 0.01f64..1e6) {
        let read = Ppm::parse(&ppm_text(ppm), Sign::Any).unwrap().value();
        prop_assert!((read - ppm).abs() <= (ppm * 5.1e-4).max(0.51e-3));
    }

    #[test]
    fn amounts_read_back(micros in 0i128..=1_000_000_000_000_000) {
        let amount = Money::from_micros(micros);
        prop_assert_eq!(Money::parse(&amount.to_string()).unwrap(), amount);
    }

    #[test]
    fn decimals_order_as_fractions_do(a in decimals(), b in decimals()) {
        prop_assert_eq!(a.cmp(&b), a.to_rational().cmp(&b.to_rational()));
        prop_assert_eq!(Decimal::from_rational(&a.to_rational()), Some(a));
    }

    /// Half up, against plain integer arithmetic.
    #[test]
    fn conversion_is_exact(micros in 0i128..1_000_000_000_000, rate in 1i128..100_000) {
        let converted = ExchangeRate(Decimal::new(rate, -4)).convert(Money::from_micros(micros));
        prop_assert_eq!(converted.micros(), (micros * rate + 5_000) / 10_000);
    }
}
