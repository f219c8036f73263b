//! Order codes are unique over a catalogue. Of offers with one code all are left out, since no
//! one can tell which of them would be delivered.

use std::collections::{BTreeMap, BTreeSet};

use crate::quantity::{Decimal, Range, from_letter_code, to_letter_code};

use super::build::Offer;
use super::fault::{Fault, Severity};
use super::model::{Place, ResistorType, Values};

/// The codes of a type that is made to order: those of all its values.
struct Open<'a> {
    offer: usize,
    before: &'a str,
    behind: &'a str,
    range: Range<Decimal>,
    digits: u32,
}

impl<'a> Open<'a> {
    fn of(offer: usize, part: &'a ResistorType) -> Option<Self> {
        let Values::MadeToOrder { range, digits } = part.values else { return None };
        let (before, behind) = part.code_pattern.split_once("{value}")?;
        Some(Self { offer, before, behind, range, digits })
    }

    /// Whether a code is that of a value which the type can be ordered in.
    fn includes(&self, code: &str) -> bool {
        let middle = code.strip_prefix(self.before).and_then(|rest| rest.strip_suffix(self.behind));
        let Some(middle) = middle else { return false };
        from_letter_code(middle).is_some_and(|value| {
            self.range.contains(value)
                && value.mantissa().to_string().len() <= self.digits as usize
                && to_letter_code(value) == middle
        })
    }

    /// Whether two made-to-order types can share a code. Where what stands around the value
    /// differs, this is judged on the safe side.
    fn overlaps(&self, other: &Self) -> bool {
        let value_text =
            |text: &str| text.chars().all(|c| c.is_ascii_digit() || "RKMGT".contains(c));
        let rest = |a: &'a str, b: &'a str| {
            a.strip_prefix(b).or_else(|| b.strip_prefix(a)).map(value_text)
        };
        let tail = |a: &'a str, b: &'a str| {
            a.strip_suffix(b).or_else(|| b.strip_suffix(a)).map(value_text)
        };
        let same = self.before == other.before && self.behind == other.behind;
        let ranges =
            self.range.low() <= other.range.high() && other.range.low() <= self.range.high();
        let texts = rest(self.before, other.before) == Some(true)
            && tail(self.behind, other.behind) == Some(true);
        texts && (!same || ranges)
    }
}

/// Leaves out what shares an order code, and reports every place.
pub(super) fn drop_clashes(offers: Vec<Offer>, faults: &mut Vec<Fault>) -> Vec<Offer> {
    // Per offer, its clashing codes, each with the other offers that have it.
    let mut clashes: BTreeMap<usize, BTreeMap<String, BTreeSet<usize>>> = BTreeMap::new();
    find_clashes(&offers, &mut |code, one, other| {
        for (a, b) in [(one, other), (other, one)] {
            clashes.entry(a).or_default().entry(code.to_owned()).or_default().insert(b);
        }
    });
    for (index, codes) in &clashes {
        faults.extend(offers.get(*index).and_then(|offer| describe(offer, codes, &offers)));
    }
    let keep = offers.into_iter().enumerate().filter_map(|(index, mut offer)| {
        let Some(codes) = clashes.get(&index) else { return Some(offer) };
        // A listed value is an offer of its own; anything else goes as a whole.
        let Offer::Resistor(part) = &mut offer else { return None };
        let Values::Listed(values) = &mut part.values else { return None };
        values.retain(|value| !codes.contains_key(&value.order_code));
        (!values.is_empty()).then_some(offer)
    });
    keep.collect()
}

/// Calls back with every code that two offers share.
fn find_clashes(offers: &[Offer], found: &mut impl FnMut(&str, usize, usize)) {
    let mut first: BTreeMap<&str, usize> = BTreeMap::new();
    let mut open: Vec<Open<'_>> = Vec::new();
    for (index, offer) in offers.iter().enumerate() {
        if let Offer::Resistor(part) = offer
            && let Some(this) = Open::of(index, part)
        {
            for other in open.iter().filter(|other| other.overlaps(&this)) {
                found(&part.code_pattern, other.offer, index);
            }
            open.push(this);
            continue;
        }
        for code in fixed_codes(offer) {
            match first.get(code) {
                Some(&other) => found(code, other, index),
                None => {
                    first.insert(code, index);
                }
            }
        }
    }
    for this in &open {
        for (code, other) in first.iter().filter(|(code, _)| this.includes(code)) {
            found(code, this.offer, *other);
        }
    }
}

fn fixed_codes(offer: &Offer) -> Vec<&str> {
    match offer {
        Offer::Resistor(part) => match &part.values {
            Values::Listed(values) => {
                values.iter().map(|value| value.order_code.as_str()).collect()
            }
            Values::MadeToOrder { .. } => Vec::new(),
        },
        other => vec![other.code()],
    }
}

fn describe(
    offer: &Offer,
    codes: &BTreeMap<String, BTreeSet<usize>>,
    offers: &[Offer],
) -> Option<Fault> {
    let (code, _) = codes.first_key_value()?;
    let others: BTreeSet<usize> = codes.values().flatten().copied().collect();
    let other = others.first().and_then(|index| offers.get(*index))?.supply();
    let supply = offer.supply();
    let more = match codes.len() - 1 {
        0 => String::new(),
        more => format!(" (and {more} more of this type)"),
    };
    let elsewhere = match others.len() - 1 {
        0 => String::new(),
        more => format!(" and {more} more"),
    };
    let Place { file, line, .. } = &other.place;
    let where_else = if *file == supply.place.file {
        format!("line {line}")
    } else {
        format!("{}:{line}", file.display())
    };
    let same_record = other.part == supply.part && *file == supply.place.file;
    let hint = if same_record && other.grade.is_some() && supply.grade.is_some() {
        "put {grade} into `order_code`, or give each grade its own"
    } else {
        "an order code names one thing; of these, all are left out"
    };
    Some(Fault {
        place: supply.place.clone(),
        severity: Severity::Error,
        record: Some(match &supply.grade {
            Some(grade) => format!("{} grade {grade}", supply.part),
            None => supply.part.clone(),
        }),
        field: Some("order_code".to_owned()),
        message: format!("the order code `{code}`{more} is also that of {where_else}{elsewhere}"),
        hint: Some(hint.to_owned()),
    })
}
