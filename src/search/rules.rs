//! The request's rules on offers.

use std::collections::BTreeMap;

use crate::catalog::{Catalog, Kind, ResistorType, Supply, Values};
use crate::request::Request;

use super::glob;
use super::market::RuleRemovals;

/// What the rules say of one offer.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Ruling {
    /// It may be used.
    Kept,
    /// It may not.
    Removed,
}

/// The rules applied, with a count of what they removed.
pub(super) struct Rulebook<'a> {
    request: &'a Request,
    /// Kinds for which `require` names something.
    restricted: Vec<Kind>,
    /// Offers removed.
    pub(super) removed: RuleRemovals,
    /// Offers removed because a figure is not stated, by rule.
    unstated: BTreeMap<&'static str, u64>,
    /// Remarks.
    pub(super) notes: Vec<String>,
}

impl<'a> Rulebook<'a> {
    pub(super) fn new(catalog: &Catalog, request: &'a Request) -> Self {
        let mut book = Self {
            request,
            restricted: Vec::new(),
            removed: BTreeMap::new(),
            unstated: BTreeMap::new(),
            notes: Vec::new(),
        };
        for pattern in &request.rules.forbid {
            if kinds_named(catalog, pattern).is_empty() {
                book.warn_of_pattern(catalog, "forbid", pattern);
            }
        }
        for pattern in &request.rules.require {
            let kinds = kinds_named(catalog, pattern);
            if kinds.is_empty() {
                book.warn_of_pattern(catalog, "require", pattern);
            }
            book.restricted.extend(kinds);
        }
        book
    }

    fn warn_of_pattern(&mut self, catalog: &Catalog, rule: &str, pattern: &str) {
        let nearest = crate::catalog::find_suggestion(pattern, all_codes(catalog));
        let hint = nearest.map_or_else(String::new, |code| format!("; the nearest is {code}"));
        self.notes.push(format!("rules.{rule}: {pattern} matches no order code{hint}"));
    }

    /// The parts of one kind that the rules leave.
    pub(super) fn keep<'p, P>(
        &mut self,
        kind: Kind,
        parts: &'p [P],
        describe: impl Fn(&'p P) -> (&'p str, &'p Supply),
    ) -> Vec<&'p P> {
        let mut kept = Vec::new();
        for part in parts {
            let (code, supply) = describe(part);
            let rule = self.rule_on_supply(kind, supply).or_else(|| self.rule_on_code(kind, code));
            match rule {
                None => kept.push(part),
                Some(rule) => *self.removed.entry((kind, rule)).or_default() += 1,
            }
        }
        kept
    }

    /// Whether a resistor type as a whole may be used; its values are judged one by one.
    pub(super) fn rule_on_type(&mut self, of: &ResistorType) -> Ruling {
        match self.rule_on_supply(Kind::Resistor, &of.supply) {
            None => Ruling::Kept,
            Some(rule) => {
                let offers = match &of.values {
                    Values::Listed(values) => values.len() as u64,
                    Values::MadeToOrder { .. } => 1,
                };
                *self.removed.entry((Kind::Resistor, rule)).or_default() += offers;
                Ruling::Removed
            }
        }
    }

    /// Whether one resistor value may be used.
    pub(super) fn rule_on_value(&mut self, code: &str) -> Ruling {
        match self.rule_on_code(Kind::Resistor, code) {
            None => Ruling::Kept,
            Some(rule) => {
                *self.removed.entry((Kind::Resistor, rule)).or_default() += 1;
                Ruling::Removed
            }
        }
    }

    fn rule_on_supply(&mut self, kind: Kind, supply: &Supply) -> Option<&'static str> {
        let rules = &self.request.rules;
        if !rules.lifecycle.contains(&supply.lifecycle) {
            return Some("lifecycle");
        }
        // An adjustment is a step, not a thing that is bought.
        if kind == Kind::Adjustment {
            return None;
        }
        if let Some(longest) = rules.lead_time_max {
            match supply.lead_time {
                None => return Some(self.not_stated("lead_time_max")),
                Some(time) if time > longest => return Some("lead_time_max"),
                Some(_) => {}
            }
        }
        if rules.in_stock && supply.stock.is_none() {
            return Some(self.not_stated("in_stock"));
        }
        for (name, allowed, stated) in [
            ("makers", &rules.makers, &supply.maker),
            ("packages", &rules.packages, &supply.package),
        ] {
            if let Some(allowed) = allowed {
                match stated {
                    None => return Some(self.not_stated(name)),
                    Some(stated) if !allowed.contains(stated) => return Some(name),
                    Some(_) => {}
                }
            }
        }
        None
    }

    fn rule_on_code(&self, kind: Kind, code: &str) -> Option<&'static str> {
        let rules = &self.request.rules;
        if rules.forbid.iter().any(|pattern| glob::matches(pattern, code)) {
            return Some("forbid");
        }
        let required = !self.restricted.contains(&kind)
            || rules.require.iter().any(|pattern| glob::matches(pattern, code));
        (!required).then_some("require")
    }

    fn not_stated(&mut self, rule: &'static str) -> &'static str {
        *self.unstated.entry(rule).or_default() += 1;
        rule
    }

    /// The remarks, with one line for each rule that met parts which don't state its figure.
    pub(super) fn into_removed_and_notes(mut self) -> (RuleRemovals, Vec<String>) {
        for (rule, count) in &self.unstated {
            let field = match *rule {
                "lead_time_max" => "lead_time",
                "in_stock" => "stock",
                "makers" => "maker",
                _ => "package",
            };
            let records =
                if *count == 1 { "1 record does" } else { &format!("{count} records do") };
            self.notes.push(format!(
                "rules.{rule}: {records} not state `{field}` and cannot be used under this rule"
            ));
        }
        (self.removed, self.notes)
    }
}

/// Every order code that is written down (made-to-order codes are open).
fn all_codes(catalog: &Catalog) -> impl Iterator<Item = &str> {
    let listed = catalog.resistors.iter().flat_map(|of| match &of.values {
        Values::Listed(values) => values.iter().map(|v| v.order_code.as_str()).collect(),
        Values::MadeToOrder { .. } => vec![of.code_pattern.as_str()],
    });
    catalog
        .references
        .iter()
        .map(|p| p.order_code.as_str())
        .chain(catalog.amplifiers.iter().map(|p| p.order_code.as_str()))
        .chain(listed)
        .chain(catalog.lifts.iter().map(|p| p.order_code.as_str()))
        .chain(catalog.adjustments.iter().map(|p| p.order_code.as_str()))
}

/// The kinds of which a pattern matches some order code.
fn kinds_named(catalog: &Catalog, pattern: &str) -> Vec<Kind> {
    let hit = |code: &str| glob::matches(pattern, code);
    let resistor = |of: &ResistorType| match &of.values {
        Values::Listed(values) => values.iter().any(|v| hit(&v.order_code)),
        Values::MadeToOrder { .. } => glob::may_match_type(pattern, &of.code_pattern),
    };
    let mut kinds = Vec::new();
    if catalog.references.iter().any(|p| hit(&p.order_code)) {
        kinds.push(Kind::Reference);
    }
    if catalog.amplifiers.iter().any(|p| hit(&p.order_code)) {
        kinds.push(Kind::Amplifier);
    }
    if catalog.resistors.iter().any(resistor) {
        kinds.push(Kind::Resistor);
    }
    if catalog.lifts.iter().any(|p| hit(&p.order_code)) {
        kinds.push(Kind::Lift);
    }
    if catalog.adjustments.iter().any(|p| hit(&p.order_code)) {
        kinds.push(Kind::Adjustment);
    }
    kinds
}
