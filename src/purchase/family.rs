//! The family as one purchase: which designs, and what they cost together, in exact money.

use std::collections::BTreeMap;

use crate::search::{Amount, Costs, Market, OfferId, OutputSpace, Pick};

use super::price::{Buy, cheapest_buy};

/// All outputs that are bought together.
#[derive(Debug)]
pub struct Family<'s, 'a> {
    /// The market.
    pub market: &'s Market<'a>,
    /// One space an output; none is empty of designs.
    pub spaces: Vec<&'s OutputSpace<'a>>,
    /// How many of each output are built.
    pub quantities: Vec<u64>,
    /// What is counted.
    pub terms: Terms,
}

/// What the total is made of, in millionths.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Terms {
    /// Per distinct order code.
    pub line: i64,
    /// Per component placed.
    pub placement: i64,
    /// Most order lines.
    pub lines_max: Option<u64>,
    /// Whether parts and adjustments have their price; without it only lines count.
    pub priced: bool,
}

/// The exact cost of having units of an offer.
pub type Demand = BTreeMap<OfferId, u64>;

impl<'s, 'a> Family<'s, 'a> {
    /// The outputs of these spaces, with the request's purchase rules.
    #[must_use]
    pub fn new(market: &'s Market<'a>, spaces: Vec<&'s OutputSpace<'a>>) -> Self {
        let purchase = &market.request.purchase;
        // The market has checked that every amount fits.
        let micros = |m: crate::quantity::Money| i64::try_from(m.micros()).unwrap_or(i64::MAX / 64);
        let quantities = spaces.iter().map(|s| s.output.quantity).collect();
        Self {
            market,
            spaces,
            quantities,
            terms: Terms {
                line: micros(purchase.line_cost),
                placement: micros(purchase.placement_cost),
                lines_max: purchase.lines_max,
                priced: true,
            },
        }
    }

    /// The most of one offer that a unit of any design takes.
    #[must_use]
    pub fn most_count(&self) -> u32 {
        let lifts = self.market.lifts.iter().map(|l| l.in_series_max).max().unwrap_or(1);
        self.market.request.network_elements.max(lifts)
    }

    /// The cheapest buy of a quantity.
    #[must_use]
    pub fn buy(&self, offer: OfferId, needed: u64) -> Option<Buy> {
        cheapest_buy(self.market.tariff(offer), needed)
    }

    /// Cost of having `needed` of an offer, its order line included; more than any design costs
    /// when it cannot be had.
    #[must_use]
    pub fn cost(&self, offer: OfferId, needed: u64) -> i64 {
        if needed == 0 {
            return 0;
        }
        match self.buy(offer, needed) {
            Some(buy) if self.terms.priced => buy.cost + self.terms.line,
            Some(_) => self.terms.line,
            None => i64::HUGE,
        }
    }

    /// Costs of every part for one output, all other outputs' demand given: what the total grows
    /// by.
    #[must_use]
    pub fn marginal_costs(&self, output: usize, others: &Demand) -> Costs<i64> {
        let quantity = self.quantities[output];
        Costs::by_count(
            self.market,
            self.most_count(),
            self.component_cost(output),
            self.adjustment_costs(output),
            |offer, count| {
                let held = others.get(&offer).copied().unwrap_or(0);
                let after = self.cost(offer, held + quantity * u64::from(count));
                if after >= i64::HUGE { i64::HUGE } else { after - self.cost(offer, held) }
            },
        )
    }

    /// Cost of placing one component in each unit of an output.
    #[must_use]
    pub fn component_cost(&self, output: usize) -> i64 {
        self.terms.placement * self.quantities[output] as i64
    }

    /// Cost of each adjustment for all units of an output.
    #[must_use]
    pub fn adjustment_costs(&self, output: usize) -> Vec<i64> {
        let quantity = if self.terms.priced { self.quantities[output] as i64 } else { 0 };
        self.market.adjustments.iter().map(|&(_, each)| each * quantity).collect()
    }

    /// The offers of a design with their counts a unit.
    #[must_use]
    pub fn uses(&self, output: usize, pick: &Pick) -> Vec<(OfferId, u32)> {
        uses(self.spaces[output], pick)
    }

    /// Cost of a design that is not in its parts: placement and adjustment.
    #[must_use]
    pub fn besides_parts(&self, output: usize, pick: &Pick) -> i64 {
        let space = self.spaces[output];
        let frame = &space.frames[pick.frame as usize];
        let components =
            2 + pick.network.offers().len() as i64 + frame.lift.map_or(0, |(_, n)| i64::from(n));
        let step = frame.adjustment.map_or(0, |a| self.adjustment_costs(output)[a as usize]);
        components * self.component_cost(output) + step
    }

    /// What all outputs but one need together.
    #[must_use]
    pub fn demand(&self, picks: &[Option<Pick>], but: Option<usize>) -> Demand {
        let mut demand = Demand::new();
        for (output, pick) in picks.iter().enumerate() {
            if let (Some(pick), true) = (pick, Some(output) != but) {
                for (offer, count) in self.uses(output, pick) {
                    *demand.entry(offer).or_default() += self.quantities[output] * u64::from(count);
                }
            }
        }
        demand
    }

    /// The exact total of a whole set; `None` when a part cannot be had or the lines are too many.
    #[must_use]
    pub fn total(&self, picks: &[Pick]) -> Option<i64> {
        let demand = self.demand_of(picks);
        let most = self.terms.lines_max.unwrap_or(u64::MAX);
        if demand.len() as u64 > most { None } else { self.weighed(picks, &demand, 0) }
    }

    /// The total of a set with its demand when each line costs so much more than it does; `None`
    /// when a part cannot be had.
    #[must_use]
    pub fn weighed(&self, picks: &[Pick], demand: &Demand, extra_line: i64) -> Option<i64> {
        let mut total = 0;
        for (&offer, &needed) in demand {
            let cost = self.cost(offer, needed);
            if cost >= i64::HUGE {
                return None;
            }
            total += cost + extra_line;
        }
        for (output, pick) in picks.iter().enumerate() {
            total += self.besides_parts(output, pick);
        }
        Some(total)
    }

    /// What a whole set needs.
    #[must_use]
    pub fn demand_of(&self, picks: &[Pick]) -> Demand {
        let some: Vec<Option<Pick>> = picks.iter().copied().map(Some).collect();
        self.demand(&some, None)
    }
}

/// The offers of a design with their counts a unit.
#[must_use]
pub fn uses(space: &OutputSpace<'_>, pick: &Pick) -> Vec<(OfferId, u32)> {
    let market = space.market;
    let mut all = vec![
        (market.reference_offer(pick.reference), 1),
        (market.amplifier_offer(pick.amplifier), 1),
    ];
    all.extend(pick.network.uses());
    if let Some((lift, count)) = space.frames[pick.frame as usize].lift {
        all.push((market.lift_offer(lift), count));
    }
    all
}
