//! What a quantity of one offer costs, and what a set of designs costs.

use std::cell::RefCell;
use std::collections::{BTreeMap, HashMap};

use ampthrift::catalog::{Kind, Supply};
use ampthrift::request::Request;
use num_bigint::BigInt;
use num_rational::BigRational;
use num_traits::ToPrimitive;

use super::designs::{Pick, Shelf};

/// A purchase of one offer, money in millionths.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Buy {
    pub bought: u64,
    pub each: i128,
    pub cost: i128,
}

/// One unit price in the request's currency, rounded half up to a millionth.
pub fn converted(request: &Request, supply: &Supply, micros: i128) -> i128 {
    let Some(currency) = &supply.currency else { return micros };
    if *currency == request.currency {
        return micros;
    }
    let rate = request.exchange[currency].0.to_rational();
    let exact = rate * BigRational::from_integer(BigInt::from(micros));
    let half = BigRational::new(BigInt::from(1), BigInt::from(2));
    (exact + half).floor().to_integer().to_i128().unwrap()
}

/// The unit price at a bought quantity.
fn unit_price(request: &Request, supply: &Supply, bought: u64) -> i128 {
    let mut micros = 0;
    for step in supply.price.breaks() {
        if step.from <= bought {
            micros = step.each.micros();
        }
    }
    converted(request, supply, micros)
}

/// The cheapest way to get at least `needed`; at equal cost the smaller. `None` if there is none.
pub fn buy(request: &Request, supply: &Supply, needed: u64) -> Option<Buy> {
    let last_step = supply.price.breaks().iter().map(|step| step.from).max().unwrap();
    // From here on the unit price is constant, so that more never costs less.
    let enough = needed.max(supply.order_minimum).max(last_step) + supply.order_multiple;
    let most = match (request.rules.in_stock, supply.stock) {
        (true, Some(stock)) => enough.min(stock),
        _ => enough,
    };
    let mut best: Option<Buy> = None;
    let first = needed.max(supply.order_minimum).next_multiple_of(supply.order_multiple);
    let mut bought = first;
    while bought <= most {
        let each = unit_price(request, supply, bought);
        let cost = each * i128::from(bought);
        if best.is_none_or(|so_far| cost < so_far.cost) {
            best = Some(Buy { bought, each, cost });
        }
        bought += supply.order_multiple;
    }
    best
}

/// What one output's design takes from the shelf.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Usage {
    /// Offers and how many of each are needed, in rising order.
    pub parts: Vec<(usize, u64)>,
    /// Placement and adjustment.
    pub fixed: i128,
}

/// One thing that can be ordered.
struct Offer<'a> {
    kind: Kind,
    code: String,
    supply: &'a Supply,
}

/// The shelf's offers with their price lists, and the costs worked out so far.
pub struct Book<'a> {
    request: &'a Request,
    offers: Vec<Offer<'a>>,
    known: RefCell<HashMap<(usize, u64), Option<Buy>>>,
}

impl<'a> Book<'a> {
    pub fn new(shelf: &Shelf<'a>) -> Self {
        let offer = |kind, code: &str, supply| Offer { kind, code: code.to_owned(), supply };
        let mut offers = Vec::new();
        let references = shelf.references.iter();
        offers.extend(references.map(|r| offer(Kind::Reference, &r.order_code, &r.supply)));
        let amplifiers = shelf.amplifiers.iter();
        offers.extend(amplifiers.map(|a| offer(Kind::Amplifier, &a.order_code, &a.supply)));
        let values = shelf.values.iter();
        offers.extend(values.map(|v| offer(Kind::Resistor, &v.code, &v.of.supply)));
        let lifts = shelf.lifts.iter();
        offers.extend(lifts.map(|l| offer(Kind::Lift, &l.order_code, &l.supply)));
        Self { request: shelf.request, offers, known: RefCell::default() }
    }

    /// Kind and order code of an offer.
    pub fn label(&self, offer: usize) -> (Kind, &str) {
        (self.offers[offer].kind, &self.offers[offer].code)
    }

    pub fn buy(&self, offer: usize, needed: u64) -> Option<Buy> {
        if let Some(known) = self.known.borrow().get(&(offer, needed)) {
            return *known;
        }
        let found = buy(self.request, self.offers[offer].supply, needed);
        self.known.borrow_mut().insert((offer, needed), found);
        found
    }

    /// The stock of an order code.
    pub fn stock(&self, code: &str) -> Option<u64> {
        self.offers.iter().find(|offer| offer.code == code)?.supply.stock
    }

    /// How many units stock is short of for the smallest order that has `needed`.
    pub fn shortage(&self, offer: usize, needed: u64) -> u64 {
        let supply = self.offers[offer].supply;
        let mut order = supply.order_multiple;
        while order < needed || order < supply.order_minimum {
            order += supply.order_multiple;
        }
        order.saturating_sub(supply.stock.unwrap())
    }

    /// The least that one unit can cost, whatever is bought.
    pub fn least_price(&self, offer: usize) -> i128 {
        let supply = self.offers[offer].supply;
        let steps = supply.price.breaks().iter();
        steps.map(|step| converted(self.request, supply, step.each.micros())).min().unwrap()
    }

    /// What a design of an output takes.
    pub fn usage(&self, shelf: &Shelf<'_>, pick: Pick, quantity: u64) -> Usage {
        let amplifiers = shelf.references.len();
        let values = amplifiers + shelf.amplifiers.len();
        let lifts = values + shelf.values.len();
        let mut parts = BTreeMap::new();
        parts.insert(pick.reference, quantity);
        parts.insert(amplifiers + pick.amplifier, quantity);
        for value in &shelf.networks[pick.network].values {
            *parts.entry(values + value).or_insert(0) += quantity;
        }
        if let Some((lift, count)) = pick.lift {
            parts.insert(lifts + lift, quantity * u64::from(count));
        }
        let placed: u64 = parts.values().sum();
        let adjustment = pick.adjustment.map_or(0, |at| {
            let supply = &shelf.adjustments[at].supply;
            unit_price(self.request, supply, 1) * i128::from(quantity)
        });
        let placement = self.request.purchase.placement_cost.micros() * i128::from(placed);
        Usage { parts: parts.into_iter().collect(), fixed: placement + adjustment }
    }

    /// Needs of several designs together.
    pub fn together(usages: &[&Usage]) -> Vec<(usize, u64)> {
        let mut parts: Vec<(usize, u64)> = Vec::new();
        for usage in usages {
            for &(offer, needed) in &usage.parts {
                match parts.iter_mut().find(|(other, _)| *other == offer) {
                    Some((_, sum)) => *sum += needed,
                    None => parts.push((offer, needed)),
                }
            }
        }
        parts
    }

    /// The total of a set of designs; `None` when stock or `lines_max` forbids it.
    pub fn cost(&self, usages: &[&Usage]) -> Option<i128> {
        let purchase = &self.request.purchase;
        let parts = Self::together(usages);
        if purchase.lines_max.is_some_and(|most| parts.len() as u64 > most) {
            return None;
        }
        let mut sum = purchase.line_cost.micros() * parts.len() as i128;
        for (offer, needed) in parts {
            sum += self.buy(offer, needed)?.cost;
        }
        Some(sum + usages.iter().map(|usage| usage.fixed).sum::<i128>())
    }
}
