//! What the request's rules leave of the catalogue, as flat lists of offers with prices in the
//! request's currency.

use std::collections::BTreeMap;

use crate::catalog::{
    Adjustment, Amplifier, Catalog, Fault, Kind, Lift, Reference, ResistorType, Severity, Supply,
    Values,
};
use crate::quantity::{Decimal, Exact, Money, Ohms};
use crate::request::Request;

use super::candidates;
use super::rules::{Rulebook, Ruling};

/// Something that can be ordered, by its place in [`Market`]'s lists: references first, then
/// amplifiers, lifts and resistors.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct OfferId(pub u32);

impl OfferId {
    /// As an index.
    #[must_use]
    pub const fn index(self) -> usize {
        self.0 as usize
    }
}

/// Prices and order rules of one type, in millionths of the request's currency.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Tariff {
    /// Smallest quantity and unit price of each step, quantity rising, first 1.
    pub breaks: Vec<(u64, i64)>,
    /// Fewest units an order takes.
    pub minimum: u64,
    /// Orders are multiples of this.
    pub multiple: u64,
    /// Most units that can be bought, where the request wants parts in stock.
    pub most: Option<u64>,
}

impl Tariff {
    /// The fewest units that can be ordered to have `needed`.
    #[must_use]
    pub fn least_order(&self, needed: u64) -> u64 {
        needed.max(self.minimum).div_ceil(self.multiple).saturating_mul(self.multiple)
    }
}

/// One resistor value on offer.
#[derive(Clone, Copy, Debug)]
pub struct Stocked {
    /// Index of its type in [`Market::types`].
    pub of: u32,
    /// Its offer.
    pub offer: OfferId,
    /// Made to order: a network holds one such type and value at most.
    pub made_to_order: bool,
}

/// How many offers of a kind a rule removed.
pub type RuleRemovals = BTreeMap<(Kind, &'static str), u64>;

/// Prices and quantities that are too large to be counted exactly.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct TooDear;

/// Every price of a catalogue, used or not, in a currency for which the request has no rate.
#[must_use]
pub fn price_faults(catalog: &Catalog, request: &Request) -> Vec<Fault> {
    supplies(catalog)
        .filter_map(|supply| {
            let currency = supply.currency.as_ref()?;
            let known = *currency == request.currency || request.exchange.contains_key(currency);
            (!known).then(|| Fault {
                place: supply.place.clone(),
                severity: Severity::Error,
                record: Some(match &supply.grade {
                    Some(grade) => format!("{} grade {grade}", supply.part),
                    None => supply.part.clone(),
                }),
                field: Some("currency".to_owned()),
                message: format!("priced in {currency}, for which the request has no rate"),
                hint: Some(format!("add to the request: exchange: {{{currency}: 1.00}}")),
            })
        })
        .collect()
}

fn supplies(catalog: &Catalog) -> impl Iterator<Item = &Supply> {
    let parts = catalog.references.iter().map(|p| &p.supply);
    parts
        .chain(catalog.amplifiers.iter().map(|p| &p.supply))
        .chain(catalog.resistors.iter().map(|p| &p.supply))
        .chain(catalog.lifts.iter().map(|p| &p.supply))
        .chain(catalog.adjustments.iter().map(|p| &p.supply))
}

/// What the rules leave, as flat lists.
#[derive(Debug)]
pub struct Market<'a> {
    /// The request.
    pub request: &'a Request,
    /// References left.
    pub references: Vec<&'a Reference>,
    /// Amplifiers left.
    pub amplifiers: Vec<&'a Amplifier>,
    /// Lifts left.
    pub lifts: Vec<&'a Lift>,
    /// Resistor types left.
    pub types: Vec<&'a ResistorType>,
    /// Adjustments left, with their price per output built.
    pub adjustments: Vec<(&'a Adjustment, i64)>,
    /// Distinct resistor values on offer, ascending.
    pub values: Vec<Exact<Ohms>>,
    /// For each value (by `value_starts`), the types that have it.
    stocked: Vec<Stocked>,
    value_starts: Vec<u32>,
    /// Value index of each resistor offer, from `first_resistor` on.
    offer_values: Vec<(u32, u32)>,
    first_resistor: u32,
    tariffs: Vec<Tariff>,
    offer_tariff: Vec<u32>,
    /// Offers removed by rules.
    pub removed: RuleRemovals,
    /// Remarks on the rules: patterns that match nothing, figures not stated.
    pub notes: Vec<String>,
}

impl<'a> Market<'a> {
    /// Applies the rules of a request to a catalogue whose prices all have a rate.
    ///
    /// # Errors
    /// Amounts beyond exact counting.
    pub fn new(catalog: &'a Catalog, request: &'a Request) -> Result<Self, TooDear> {
        let mut book = Rulebook::new(catalog, request);
        let mut tariffs = Tariffs { request, list: Vec::new() };

        let references =
            book.keep(Kind::Reference, &catalog.references, |r| (r.order_code.as_str(), &r.supply));
        let amplifiers =
            book.keep(Kind::Amplifier, &catalog.amplifiers, |a| (a.order_code.as_str(), &a.supply));
        let lifts = book.keep(Kind::Lift, &catalog.lifts, |l| (l.order_code.as_str(), &l.supply));
        let adjustments = if request.adjustments {
            book.keep(Kind::Adjustment, &catalog.adjustments, |a| {
                (a.order_code.as_str(), &a.supply)
            })
        } else {
            Vec::new()
        };

        let mut offer_tariff = Vec::new();
        for supply in references
            .iter()
            .map(|r| &r.supply)
            .chain(amplifiers.iter().map(|a| &a.supply))
            .chain(lifts.iter().map(|l| &l.supply))
        {
            offer_tariff.push(tariffs.add(supply)?);
        }
        let adjustments = adjustments
            .into_iter()
            .map(|adjustment| {
                let tariff = tariffs.convert(&adjustment.supply)?;
                Ok((adjustment, tariff.breaks[0].1))
            })
            .collect::<Result<Vec<_>, TooDear>>()?;

        let types: Vec<&ResistorType> =
            catalog.resistors.iter().filter(|of| book.rule_on_type(of) == Ruling::Kept).collect();
        let mut on_offer: Vec<(Decimal, u32, bool)> = Vec::new();
        for (index, of) in types.iter().enumerate() {
            if let Values::Listed(values) = &of.values {
                for value in values {
                    if book.rule_on_value(&value.order_code) == Ruling::Kept {
                        on_offer.push((value.ohms.decimal(), index as u32, false));
                    }
                }
            }
        }
        let voltages = distinct_voltages(&references);
        for (index, ohms) in candidates::made_to_order(request, &types, &voltages, &on_offer) {
            if book.rule_on_value(&types[index as usize].order_code(ohms)) == Ruling::Kept {
                on_offer.push((ohms, index, true));
            }
        }
        let mut keyed: Vec<(f64, (Decimal, u32, bool))> =
            on_offer.into_iter().map(|entry| (entry.0.to_f64(), entry)).collect();
        keyed.sort_by(|a, b| a.0.total_cmp(&b.0).then(a.1.1.cmp(&b.1.1)));

        let (removed, notes) = book.into_removed_and_notes();
        let first_resistor = offer_tariff.len() as u32;
        let type_tariffs =
            types.iter().map(|of| tariffs.add(&of.supply)).collect::<Result<Vec<_>, _>>()?;
        let mut market = Self {
            request,
            references,
            amplifiers,
            lifts,
            types,
            adjustments,
            values: Vec::new(),
            stocked: Vec::with_capacity(keyed.len()),
            value_starts: Vec::new(),
            offer_values: Vec::with_capacity(keyed.len()),
            first_resistor,
            tariffs: tariffs.list,
            offer_tariff,
            removed,
            notes,
        };
        for (ohms, (decimal, of, made_to_order)) in keyed {
            if market.values.last().is_none_or(|last| last.value().value() != ohms) {
                market.value_starts.push(market.stocked.len() as u32);
                market.values.push(Exact::from_decimal(decimal));
            }
            let offer = OfferId(market.offer_tariff.len() as u32);
            market.offer_tariff.push(type_tariffs[of as usize]);
            market.offer_values.push((market.values.len() as u32 - 1, of));
            market.stocked.push(Stocked { of, offer, made_to_order });
        }
        market.value_starts.push(market.stocked.len() as u32);
        market.check_amounts()?;
        Ok(market)
    }

    /// How many offers there are.
    #[must_use]
    pub fn offers(&self) -> usize {
        self.offer_tariff.len()
    }

    /// The prices of an offer.
    #[must_use]
    pub fn tariff(&self, offer: OfferId) -> &Tariff {
        &self.tariffs[self.offer_tariff[offer.index()] as usize]
    }

    /// The offer of a reference.
    #[must_use]
    pub const fn reference_offer(&self, index: u32) -> OfferId {
        OfferId(index)
    }

    /// The offer of an amplifier.
    #[must_use]
    pub const fn amplifier_offer(&self, index: u32) -> OfferId {
        OfferId(self.references.len() as u32 + index)
    }

    /// The offer of a lift.
    #[must_use]
    pub const fn lift_offer(&self, index: u32) -> OfferId {
        OfferId((self.references.len() + self.amplifiers.len()) as u32 + index)
    }

    /// The types that have a value.
    #[must_use]
    pub fn stocked(&self, value: u32) -> &[Stocked] {
        let value = value as usize;
        &self.stocked[self.value_starts[value] as usize..self.value_starts[value + 1] as usize]
    }

    /// Value and type of a resistor offer.
    #[must_use]
    pub fn resistor(&self, offer: OfferId) -> (u32, u32) {
        self.offer_values[(offer.0 - self.first_resistor) as usize]
    }

    /// The kind of an offer.
    #[must_use]
    pub fn kind(&self, offer: OfferId) -> Kind {
        if offer.0 >= self.first_resistor {
            Kind::Resistor
        } else if offer >= self.lift_offer(0) {
            Kind::Lift
        } else if offer >= self.amplifier_offer(0) {
            Kind::Amplifier
        } else {
            Kind::Reference
        }
    }

    /// The order code of an offer.
    #[must_use]
    pub fn order_code(&self, offer: OfferId) -> String {
        let index = offer.0;
        match self.kind(offer) {
            Kind::Reference => self.references[index as usize].order_code.clone(),
            Kind::Amplifier => {
                self.amplifiers[(index - self.amplifier_offer(0).0) as usize].order_code.clone()
            }
            Kind::Lift | Kind::Adjustment => {
                self.lifts[(index - self.lift_offer(0).0) as usize].order_code.clone()
            }
            Kind::Resistor => {
                let (value, of) = self.resistor(offer);
                resistor_code(self.types[of as usize], self.values[value as usize])
            }
        }
    }

    /// Keeps every sum of amounts that a search can form far inside 64 bits.
    fn check_amounts(&self) -> Result<(), TooDear> {
        const MOST: i128 = i64::MAX as i128 / 64;
        let dearest = |offers: &mut dyn Iterator<Item = &Tariff>| {
            offers
                .map(|t| {
                    let top = t.breaks.iter().map(|&(_, each)| each).max().unwrap_or(0);
                    let last = t.breaks.last().map_or(1, |&(from, _)| from);
                    (i128::from(top), i128::from(last.max(t.minimum) + t.multiple))
                })
                .fold((0, 1), |most, next| (most.0.max(next.0), most.1.max(next.1)))
        };
        let (each, buy) = dearest(&mut self.tariffs.iter());
        let built: i128 = self.request.outputs.iter().map(|o| i128::from(o.quantity)).sum();
        let purchase = &self.request.purchase;
        let steps = self.adjustments.iter().map(|a| i128::from(a.1)).max().unwrap_or(0);
        let diodes = self.lifts.iter().map(|l| l.in_series_max).max().unwrap_or(0);
        let parts_per_output = 5 + i128::from(diodes);
        let total = each
            .saturating_mul(built.saturating_mul(parts_per_output).saturating_add(buy))
            .saturating_add(
                purchase
                    .line_cost
                    .micros()
                    .saturating_mul(parts_per_output * self.request.outputs.len() as i128),
            )
            .saturating_add(
                purchase.placement_cost.micros().saturating_mul(built * parts_per_output),
            )
            .saturating_add(steps.saturating_mul(built));
        if total > MOST { Err(TooDear) } else { Ok(()) }
    }
}

/// The order code of one value of a type: as listed, or made from the pattern.
fn resistor_code(of: &ResistorType, ohms: Exact<Ohms>) -> String {
    if let Values::Listed(values) = &of.values
        && let Ok(at) =
            values.binary_search_by(|v| v.ohms.value().value().total_cmp(&ohms.value().value()))
    {
        return values[at].order_code.clone();
    }
    of.order_code(ohms.decimal())
}

/// The distinct output voltages, ascending.
pub(super) fn distinct_voltages(references: &[&Reference]) -> Vec<Exact<crate::quantity::Volts>> {
    let mut voltages: Vec<_> = references.iter().map(|r| r.output).collect();
    voltages.sort_by(|a, b| a.value().value().total_cmp(&b.value().value()));
    voltages.dedup_by(|a, b| a.value() == b.value());
    voltages
}

/// Price lists in the request's currency.
struct Tariffs<'a> {
    request: &'a Request,
    list: Vec<Tariff>,
}

impl Tariffs<'_> {
    fn convert(&self, supply: &Supply) -> Result<Tariff, TooDear> {
        let rate = supply.currency.as_ref().and_then(|c| self.request.exchange.get(c));
        let in_micros = |each: Money| {
            let each = rate.map_or(each, |rate| rate.convert(each));
            i64::try_from(each.micros()).map_err(|_| TooDear)
        };
        let breaks = supply
            .price
            .breaks()
            .iter()
            .map(|step| Ok((step.from, in_micros(step.each)?)))
            .collect::<Result<Vec<_>, TooDear>>()?;
        Ok(Tariff {
            breaks,
            minimum: supply.order_minimum,
            multiple: supply.order_multiple,
            most: if self.request.rules.in_stock { supply.stock } else { None },
        })
    }

    fn add(&mut self, supply: &Supply) -> Result<u32, TooDear> {
        let tariff = self.convert(supply)?;
        self.list.push(tariff);
        Ok(self.list.len() as u32 - 1)
    }
}
