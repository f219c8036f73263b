//! Unit spellings: what they mean, and what was probably meant by those that are none.

/// What a unit without its prefix measures.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Base {
    /// V
    Volt,
    /// A
    Ampere,
    /// ohm, Ω, R
    Ohm,
    /// W
    Watt,
    /// F
    Farad,
    /// K
    Kelvin,
    /// degC, °C: a point of the scale, or a step where a difference is wanted.
    DegreeCelsius,
    /// C alone, which elsewhere is the coulomb.
    BareC,
    /// s, min, h, d, wk, yr
    Second,
    /// dB
    Decibel,
    /// %, ppm
    Ratio,
}

/// A quantity as far as its unit goes: its name, what it is measured in, how it is written.
#[derive(Debug)]
pub struct Form {
    /// With its article, such as `a voltage`.
    pub name: &'static str,
    /// A figure as one would write it.
    pub example: &'static str,
    /// What may stand before the slash.
    pub(super) numerator: &'static [Base],
    /// What may stand behind it; empty when there is no slash.
    pub(super) denominator: &'static [Base],
}

/// All quantities with a unit, for naming what was found.
pub const FORMS: [&Form; 16] = [
    &VOLTS,
    &AMPERES,
    &OHMS,
    &WATTS,
    &FARADS,
    &CELSIUS,
    &KELVINS,
    &SECONDS,
    &DECIBELS,
    &PPM,
    &PPM_PER_KELVIN,
    &PPM_PER_VOLT,
    &PPM_PER_AMPERE,
    &VOLTS_PER_KELVIN,
    &AMPERES_PER_KELVIN,
    &KELVINS_PER_WATT,
];

macro_rules! forms {
    ($($id:ident, $name:literal, $example:literal, [$($n:ident),+] / [$($d:ident),*];)+) => {$(
        pub const $id: Form = Form {
            name: $name,
            example: $example,
            numerator: &[$(Base::$n),+],
            denominator: &[$(Base::$d),*],
        };
    )+};
}

forms! {
    VOLTS, "a voltage", "2.5 V", [Volt] / [];
    AMPERES, "a current", "1 mA", [Ampere] / [];
    OHMS, "a resistance", "4.99 kohm", [Ohm] / [];
    WATTS, "a power", "0.25 W", [Watt] / [];
    FARADS, "a capacitance", "100 pF", [Farad] / [];
    CELSIUS, "a temperature", "25 degC", [DegreeCelsius, BareC] / [];
    KELVINS, "a temperature difference", "10 K", [Kelvin, DegreeCelsius, BareC] / [];
    SECONDS, "a time", "1000 h", [Second] / [];
    DECIBELS, "a ratio in decibels", "120 dB", [Decibel] / [];
    PPM, "a ratio", "0.02 %", [Ratio] / [];
    PPM_PER_KELVIN, "a ratio per kelvin", "5 ppm/K", [Ratio] / [Kelvin, DegreeCelsius];
    PPM_PER_VOLT, "a ratio per volt", "10 ppm/V", [Ratio] / [Volt];
    PPM_PER_AMPERE, "a ratio per ampere", "8 ppm/mA", [Ratio] / [Ampere];
    VOLTS_PER_KELVIN, "a voltage per kelvin", "1.5 uV/K", [Volt] / [Kelvin, DegreeCelsius];
    AMPERES_PER_KELVIN, "a current per kelvin", "2 pA/K", [Ampere] / [Kelvin, DegreeCelsius];
    KELVINS_PER_WATT, "a thermal resistance", "150 K/W", [Kelvin, DegreeCelsius] / [Watt];
}

/// SI prefixes (SI Brochure, 9th edition, 2019, table 7) with their power of ten. Both code
/// points of the micro sign, and the letter u.
const PREFIXES: [(&str, i32); 11] = [
    ("f", -15),
    ("p", -12),
    ("n", -9),
    ("u", -6),
    ("\u{b5}", -6),
    ("\u{3bc}", -6),
    ("m", -3),
    ("k", 3),
    ("M", 6),
    ("G", 9),
    ("T", 12),
];

/// Units that take prefixes.
const PREFIXED: [(&str, Base); 10] = [
    ("V", Base::Volt),
    ("A", Base::Ampere),
    ("ohm", Base::Ohm),
    ("\u{3a9}", Base::Ohm),
    ("\u{2126}", Base::Ohm),
    ("R", Base::Ohm),
    ("W", Base::Watt),
    ("F", Base::Farad),
    ("K", Base::Kelvin),
    ("s", Base::Second),
];

/// Units that don't, with their size as `factor · 10^power` of the unit in which the quantity is
/// held. A year is 8760 h.
const WHOLE: [(&str, Base, i128, i32); 11] = [
    ("degC", Base::DegreeCelsius, 1, 0),
    ("°C", Base::DegreeCelsius, 1, 0),
    ("C", Base::BareC, 1, 0),
    ("min", Base::Second, 60, 0),
    ("h", Base::Second, 3600, 0),
    ("d", Base::Second, 86_400, 0),
    ("wk", Base::Second, 604_800, 0),
    ("yr", Base::Second, 31_536_000, 0),
    ("dB", Base::Decibel, 1, 0),
    ("%", Base::Ratio, 1, 4),
    ("ppm", Base::Ratio, 1, 0),
];

/// Words for units that people write, in lower case, and the spelling that is read.
const WORDS: [(&str, &str); 38] = [
    ("volt", "V"),
    ("volts", "V"),
    ("amp", "A"),
    ("amps", "A"),
    ("ampere", "A"),
    ("amperes", "A"),
    ("ohms", "ohm"),
    ("watt", "W"),
    ("watts", "W"),
    ("farad", "F"),
    ("farads", "F"),
    ("kelvin", "K"),
    ("kelvins", "K"),
    ("celsius", "degC"),
    ("deg", "degC"),
    ("°", "degC"),
    ("℃", "degC"),
    ("deg c", "degC"),
    ("ºc", "degC"),
    ("sec", "s"),
    ("second", "s"),
    ("seconds", "s"),
    ("m", "min"),
    ("mins", "min"),
    ("minutes", "min"),
    ("hr", "h"),
    ("hrs", "h"),
    ("hour", "h"),
    ("hours", "h"),
    ("day", "d"),
    ("days", "d"),
    ("w", "wk"),
    ("week", "wk"),
    ("weeks", "wk"),
    ("y", "yr"),
    ("year", "yr"),
    ("years", "yr"),
    ("percent", "%"),
];

/// A unit that was read: `factor · 10^power` of the unit in which the quantity is held.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Unit {
    pub(super) numerator: Base,
    pub(super) denominator: Option<Base>,
    pub(super) factor: i128,
    pub(super) power: i32,
}

/// Reads a unit; `None` when it is not one.
pub(super) fn read_unit(text: &str) -> Option<Unit> {
    let Some((above, below)) = text.split_once('/') else {
        let (base, factor, power) = read_atom(text)?;
        return Some(Unit { numerator: base, denominator: None, factor, power });
    };
    let (numerator, factor, power) = read_atom(above.trim_end())?;
    let (denominator, one, below_power) = read_atom(below.trim_start())?;
    // Only units of size 10^n can stand behind the slash exactly.
    (one == 1).then_some(Unit {
        numerator,
        denominator: Some(denominator),
        factor,
        power: power - below_power,
    })
}

fn read_atom(text: &str) -> Option<(Base, i128, i32)> {
    if let Some((_, base, factor, power)) = WHOLE.iter().find(|(name, ..)| *name == text) {
        return Some((*base, *factor, *power));
    }
    let symbol_of = |text: &str| PREFIXED.iter().find(|(symbol, _)| *symbol == text);
    if let Some((_, base)) = symbol_of(text) {
        return Some((*base, 1, 0));
    }
    PREFIXES.iter().find_map(|(prefix, power)| {
        let (_, base) = symbol_of(text.strip_prefix(prefix)?)?;
        Some((*base, 1, *power))
    })
}

impl Form {
    /// Whether a unit measures this quantity.
    pub(super) fn takes(&self, unit: Unit) -> bool {
        self.numerator.contains(&unit.numerator)
            && match unit.denominator {
                Some(base) => self.denominator.contains(&base),
                None => self.denominator.is_empty(),
            }
    }
}

/// What a unit measures, with its article.
pub(super) fn name_of(unit: Unit) -> Option<&'static str> {
    FORMS.iter().find(|form| form.takes(unit)).map(|form| form.name)
}

/// Spellings that were probably meant by a text that is no unit, or not one of this quantity:
/// the right case, a word's symbol, a missing unit behind a prefix. Few, best first.
pub(super) fn meant(text: &str, form: &Form) -> Vec<String> {
    match (text.split_once('/'), form.denominator) {
        (None, []) => atoms_meant(text, form.numerator),
        (Some((above, below)), [_, ..]) => {
            let above = atoms_meant(above.trim(), form.numerator);
            let below = atoms_meant(below.trim(), form.denominator);
            above.iter().flat_map(|a| below.iter().map(move |b| format!("{a}/{b}"))).collect()
        }
        _ => Vec::new(),
    }
}

fn atoms_meant(text: &str, wanted: &[Base]) -> Vec<String> {
    // Longer texts are no misspelling of a unit, and the comparison below would be wasted on them.
    if text.chars().count() > 12 {
        return Vec::new();
    }
    if read_atom(text).is_some_and(|(base, ..)| wanted.contains(&base)) {
        return vec![text.to_owned()];
    }
    let lower = text.to_lowercase();
    let mut found = Vec::new();
    let mut add = |spelling: String| {
        if !found.contains(&spelling) {
            found.push(spelling);
        }
    };
    for (name, base, ..) in WHOLE {
        if wanted.contains(&base) && name.to_lowercase() == lower {
            add(name.to_owned());
        }
    }
    for (symbol, base) in &PREFIXED {
        if !wanted.contains(base) {
            continue;
        }
        if symbol.to_lowercase() == lower {
            add((*symbol).to_owned());
        }
        for (prefix, _) in &PREFIXES {
            let spelling = format!("{prefix}{symbol}");
            if spelling.to_lowercase() == lower {
                add(spelling);
            }
            // A prefix alone: people write `10 k` and mean kilohms. Not for times, where `m`
            // and `M` are minutes and months to some.
            if *base != Base::Second && text == *prefix {
                add(format!("{prefix}{symbol}"));
            }
        }
    }
    if wanted.contains(&Base::Kelvin) && (text == "C" || lower == "c") {
        add("K".to_owned());
    }
    for (word, spelling) in WORDS {
        if word == lower && read_atom(spelling).is_some_and(|(base, ..)| wanted.contains(&base)) {
            add(spelling.to_owned());
        }
    }
    found.truncate(2);
    found
}
