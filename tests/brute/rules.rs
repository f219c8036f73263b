//! Which offers the rules of a request leave.

use ampthrift::catalog::{Catalog, Kind, Supply, Values};
use ampthrift::request::{Request, Rules};

/// Whether a code fits a pattern in which `*` stands for any text.
pub fn fits(pattern: &str, code: &str) -> bool {
    match pattern.split_once('*') {
        None => pattern == code,
        Some((head, tail)) => code.strip_prefix(head).is_some_and(|rest| {
            let ends = rest.char_indices().map(|(at, _)| at).chain([rest.len()]);
            ends.map(|at| &rest[at..]).any(|end| fits(tail, end))
        }),
    }
}

fn fits_any(patterns: &[String], code: &str) -> bool {
    patterns.iter().any(|pattern| fits(pattern, code))
}

/// The rules, with the kinds that `require` names worked out.
pub struct Sieve<'a> {
    rules: &'a Rules,
    named: Vec<Kind>,
}

impl<'a> Sieve<'a> {
    pub fn new(catalog: &Catalog, request: &'a Request) -> Self {
        let rules = &request.rules;
        let named = Kind::ALL
            .into_iter()
            .filter(|&kind| codes(catalog, kind).iter().any(|code| fits_any(&rules.require, code)))
            .collect();
        Self { rules, named }
    }

    /// Whether `forbid` and `require` leave a code.
    pub fn leaves_code(&self, kind: Kind, code: &str) -> bool {
        !fits_any(&self.rules.forbid, code)
            && (!self.named.contains(&kind) || fits_any(&self.rules.require, code))
    }

    /// Whether the rules on a type's figures leave it.
    pub fn leaves_type(&self, kind: Kind, supply: &Supply) -> bool {
        let rules = self.rules;
        if !rules.lifecycle.contains(&supply.lifecycle) {
            return false;
        }
        if kind == Kind::Adjustment {
            return true;
        }
        let in_time = match (rules.lead_time_max, supply.lead_time) {
            (None, _) => true,
            (Some(_), None) => false,
            (Some(most), Some(time)) => time <= most,
        };
        let listed = |allowed: &Option<Vec<String>>, word: &Option<String>| match (allowed, word) {
            (None, _) => true,
            (Some(_), None) => false,
            (Some(words), Some(word)) => words.contains(word),
        };
        in_time
            && (!rules.in_stock || supply.stock.is_some())
            && listed(&rules.makers, &supply.maker)
            && listed(&rules.packages, &supply.package)
    }
}

/// The order codes of a kind; one stands for all values of a type that is made to order.
fn codes(catalog: &Catalog, kind: Kind) -> Vec<String> {
    match kind {
        Kind::Reference => catalog.references.iter().map(|r| r.order_code.clone()).collect(),
        Kind::Amplifier => catalog.amplifiers.iter().map(|a| a.order_code.clone()).collect(),
        Kind::Lift => catalog.lifts.iter().map(|l| l.order_code.clone()).collect(),
        Kind::Adjustment => catalog.adjustments.iter().map(|a| a.order_code.clone()).collect(),
        Kind::Resistor => {
            let mut all = Vec::new();
            for of in &catalog.resistors {
                match &of.values {
                    Values::Listed(values) => {
                        all.extend(values.iter().map(|value| value.order_code.clone()));
                    }
                    Values::MadeToOrder { .. } => {
                        all.push(of.code_pattern.replace("{value}", "1K0"));
                    }
                }
            }
            all
        }
    }
}
