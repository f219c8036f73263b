//! A lower bound on what any set can cost, from one multiplier for each output and part.
//!
//! Give part p of output o the price μ(o, p). Then any set costs at least
//!
//! L(μ) = Σ over outputs of the cheapest design at the prices μ
//!      + Σ over parts of min(0, v(p)),
//!
//! where v(p) is the least, over steps of the price list and over sets U of users, of
//! line cost + step price · max(step minimum, quantity of U) − Σ over U of μ. For the set's own
//! designs and users the two sums together are no more than its cost, and each is a minimum.
//! Any μ gives a bound, so the multipliers are a certificate that can be checked again.

use std::collections::BTreeMap;

use rayon::prelude::*;

use crate::search::{Amount, Costs, Listing, OfferId, OutputSpace, Pick};

use super::family::{Family, uses};
use super::price::{Step, steps};

/// Where the designs of an output are looked for.
#[derive(Debug)]
pub enum Designs<'s, 'a> {
    /// Among all.
    All(&'s OutputSpace<'a>),
    /// Among those listed.
    Listed(Listing<'s, 'a>),
}

impl<'s, 'a> Designs<'s, 'a> {
    /// The cheapest design, when it costs less than `below`.
    #[must_use]
    pub fn cheapest<C: Amount>(&self, costs: &Costs<C>, below: C) -> Option<(C, Pick)> {
        match self {
            Self::All(space) => space.cheapest(costs, below),
            Self::Listed(listing) => listing.cheapest(costs, below),
        }
    }

    /// The space they are from.
    #[must_use]
    pub const fn space(&self) -> &'s OutputSpace<'a> {
        match self {
            Self::All(space) => space,
            Self::Listed(listing) => listing.space,
        }
    }

    /// The most of each offer that a unit of any of these designs takes.
    fn most_counts(&self) -> BTreeMap<OfferId, u32> {
        let mut most: BTreeMap<OfferId, u32> = BTreeMap::new();
        let mut note = |offer: OfferId, count: u32| {
            let entry = most.entry(offer).or_default();
            *entry = (*entry).max(count);
        };
        let space = self.space();
        let market = space.market;
        match self {
            Self::All(_) => {
                for frame in &space.frames {
                    for r in &frame.references {
                        note(market.reference_offer(r.index), 1);
                    }
                    for a in &frame.amplifiers {
                        note(market.amplifier_offer(a.index), 1);
                    }
                }
                for (value, count) in space.usable_values() {
                    for stocked in market.stocked(value) {
                        note(stocked.offer, count);
                    }
                }
            }
            Self::Listed(listing) => {
                for listed in &listing.frames {
                    for pair in &listed.pairs {
                        note(market.reference_offer(pair.reference), 1);
                        note(market.amplifier_offer(pair.amplifier), 1);
                    }
                    for (offer, count) in listed.networks.iter().flat_map(|n| n.network.uses()) {
                        note(offer, count);
                    }
                }
            }
        }
        let frames: Vec<usize> = match self {
            Self::All(_) => (0..space.frames.len()).collect(),
            Self::Listed(listing) => listing.frames.iter().map(|f| f.frame as usize).collect(),
        };
        for frame in frames {
            if let Some((lift, count)) = space.frames[frame].lift {
                note(market.lift_offer(lift), count);
            }
        }
        most
    }
}

/// Multipliers of one output: prices of parts for all its units.
type Multipliers = Vec<f64>;

/// The best bound found and what it was found with.
#[derive(Clone, Debug)]
pub struct Bound {
    /// The bound in millionths, as computed.
    pub value: f64,
    /// Multipliers by output and offer.
    pub multipliers: Vec<Multipliers>,
    /// The cheapest design of each output at these multipliers, and its cost.
    pub picks: Vec<(f64, Pick)>,
}

impl Bound {
    /// The bound in whole millionths, rounded down with room for the rounding of its sums.
    #[must_use]
    pub fn floor(&self) -> i64 {
        (self.value - self.value.abs() * 1e-12 - 1e-3).ceil() as i64
    }
}

/// One part that several outputs may use.
#[derive(Debug)]
struct Part {
    offer: OfferId,
    steps: Vec<Step>,
    /// Lowest unit price.
    best: f64,
    /// Users: output, most of it in a unit.
    users: Vec<(u32, u32)>,
}

/// The search for good multipliers.
#[derive(Debug)]
pub struct Bounder<'f, 's, 'a> {
    family: &'f Family<'s, 'a>,
    /// What an order line costs; more than it does, when lines are scarce.
    line: f64,
    parts: Vec<Part>,
    /// Place of each offer in `parts`.
    place: BTreeMap<OfferId, usize>,
    costs: Vec<Costs<f64>>,
}

/// How long to go on.
#[derive(Clone, Copy, Debug)]
pub struct Effort {
    /// Most steps.
    pub steps: u32,
    /// Idle steps before the step size is halved.
    pub patience: u32,
}

impl<'f, 's, 'a> Bounder<'f, 's, 'a> {
    /// Starts at the lowest unit price of every part, or at given multipliers.
    #[must_use]
    pub fn new(
        family: &'f Family<'s, 'a>,
        designs: &[Designs<'s, 'a>],
        extra_line_cost: i64,
        start: Option<&[Multipliers]>,
    ) -> Self {
        let mut users: BTreeMap<OfferId, Vec<(u32, u32)>> = BTreeMap::new();
        for (output, of) in designs.iter().enumerate() {
            for (offer, count) in of.most_counts() {
                users.entry(offer).or_default().push((output as u32, count));
            }
        }
        let parts: Vec<Part> = users
            .into_iter()
            .map(|(offer, users)| {
                let steps: Vec<Step> = if family.terms.priced {
                    steps(family.market.tariff(offer)).collect()
                } else {
                    vec![Step { minimum: 0, each: 0, most: None }]
                };
                let best = steps.iter().map(|s| s.each).min().unwrap_or(i64::HUGE) as f64;
                Part { offer, steps, best, users }
            })
            .collect();
        let place = parts.iter().enumerate().map(|(i, p)| (p.offer, i)).collect();
        let costs = (0..designs.len())
            .map(|output| {
                let mut one = vec![f64::HUGE; family.market.offers()];
                let quantity = family.quantities[output] as f64;
                for part in &parts {
                    if part.users.iter().any(|u| u.0 as usize == output) {
                        let least = part.best * quantity;
                        let from = start.map_or(least, |s| s[output][part.offer.index()]);
                        one[part.offer.index()] =
                            if from < f64::HUGE { from.max(least) } else { least };
                    }
                }
                let component = family.component_cost(output) as f64;
                let steps = family.adjustment_costs(output).into_iter().map(|c| c as f64).collect();
                Costs::proportional(family.market, one, component, steps)
            })
            .collect();
        let line = (family.terms.line + extra_line_cost) as f64;
        Self { family, line, parts, place, costs }
    }

    /// Looks for multipliers with a high bound. `ceiling` is the cost of a known set. `None` when
    /// some output has no design left.
    #[must_use]
    pub fn raise(
        &mut self,
        designs: &[Designs<'s, 'a>],
        ceiling: i64,
        effort: Effort,
        stop: &(dyn Fn() -> bool + Sync),
    ) -> Option<Bound> {
        let mut best = self.evaluate(designs)?;
        let (mut reached, mut usage) = best;
        let mut record = self.record(reached.0, reached.1);
        let mut direction: Vec<BTreeMap<OfferId, f64>> = vec![BTreeMap::new(); designs.len()];
        let (mut size, mut idle) = (1.0, 0);
        for _ in 0..effort.steps {
            let gap = ceiling as f64 - record.value;
            if gap < 0.5 || size < 5e-3 || stop() {
                break;
            }
            let norm = self.turn(&mut direction, &usage);
            if norm <= 0.0 {
                break;
            }
            let step = size * (ceiling as f64 - record.value) / norm;
            self.advance(&direction, step);
            best = self.evaluate(designs)?;
            (reached, usage) = best;
            if reached.0 > record.value + gap * 1e-6 {
                record = self.record(reached.0, reached.1);
                idle = 0;
            } else {
                idle += 1;
                if idle >= effort.patience {
                    size *= 0.5;
                    idle = 0;
                    self.restore(&record);
                    (_, usage) = self.evaluate(designs)?;
                    direction.iter_mut().for_each(BTreeMap::clear);
                }
            }
        }
        self.restore(&record);
        Some(record)
    }

    /// The costs of an output at the present multipliers.
    #[must_use]
    pub fn costs(&self, output: usize) -> &Costs<f64> {
        &self.costs[output]
    }

    fn record(&self, value: f64, picks: Vec<(f64, Pick)>) -> Bound {
        let multipliers = self.costs.iter().map(|c| c.one.clone()).collect();
        Bound { value, multipliers, picks }
    }

    fn restore(&mut self, bound: &Bound) {
        for (costs, multipliers) in self.costs.iter_mut().zip(&bound.multipliers) {
            costs.one.clone_from(multipliers);
        }
    }

    /// The bound at the present multipliers, the designs that reach it, and how far each output's
    /// use of a part exceeds what the purchase side takes.
    #[expect(clippy::type_complexity, reason = "two plain pairs, used in one place")]
    fn evaluate(
        &self,
        designs: &[Designs<'s, 'a>],
    ) -> Option<((f64, Vec<(f64, Pick)>), Vec<BTreeMap<OfferId, f64>>)> {
        let picks: Vec<(f64, Pick)> = designs
            .par_iter()
            .zip(&self.costs)
            .map(|(of, costs)| of.cheapest(costs, f64::HUGE))
            .collect::<Option<_>>()?;
        let mut usage: Vec<BTreeMap<OfferId, f64>> = picks
            .iter()
            .zip(designs)
            .map(|((_, pick), of)| {
                uses(of.space(), pick).into_iter().map(|(o, n)| (o, f64::from(n))).collect()
            })
            .collect();
        let mut value: f64 = picks.iter().map(|p| p.0).sum();
        for part in &self.parts {
            let (cost, taken) = self.purchase_side(part);
            value += cost;
            for (output, count) in taken {
                *usage[output as usize].entry(part.offer).or_default() -= count;
            }
        }
        Some(((value, picks), usage))
    }

    /// min(0, v) of a part, and how much of it each output takes at that minimum.
    fn purchase_side(&self, part: &Part) -> (f64, Vec<(u32, f64)>) {
        let mu = |output: u32| self.costs[output as usize].one[part.offer.index()];
        let quantity = |output: u32| self.family.quantities[output as usize] as f64;
        // Nothing below zero unless the users' surplus over the lowest price pays the line.
        let surplus: f64 = part
            .users
            .iter()
            .map(|&(o, n)| f64::from(n) * (mu(o) - part.best * quantity(o)).max(0.0))
            .sum();
        if surplus <= self.line {
            return (0.0, Vec::new());
        }
        let mut users: Vec<(f64, u32, u32)> =
            part.users.iter().map(|&(o, n)| (mu(o) / quantity(o), o, n)).collect();
        users.sort_by(|a, b| b.0.total_cmp(&a.0).then(a.1.cmp(&b.1)));
        let mut best = (0.0, Vec::new());
        for step in &part.steps {
            let (each, minimum) = (step.each as f64, step.minimum as f64);
            let mut most = step.most.map_or(f64::INFINITY, |m| m as f64);
            let mut taken = Vec::new();
            let (mut bought, mut worth) = (0.0, 0.0);
            for &(density, output, count) in &users {
                let whole = f64::from(count) * quantity(output);
                // Up to the step's minimum a further user costs nothing more.
                let room = if density > each { whole } else { (minimum - bought).max(0.0) };
                let units = whole.min(room).min(most);
                if units <= 0.0 {
                    break;
                }
                most -= units;
                bought += units;
                worth += units * density;
                taken.push((output, units / quantity(output)));
            }
            let value = self.line + each * bought.max(minimum) - worth;
            if value < best.0 {
                best = (value, taken);
            }
        }
        best
    }

    /// Turns the direction towards the present usage; gives its scaled square length.
    fn turn(
        &self,
        direction: &mut [BTreeMap<OfferId, f64>],
        usage: &[BTreeMap<OfferId, f64>],
    ) -> f64 {
        let mut norm = 0.0;
        for (output, (old, new)) in direction.iter_mut().zip(usage).enumerate() {
            for value in old.values_mut() {
                *value *= 0.9;
            }
            for (&offer, &value) in new {
                *old.entry(offer).or_default() += 0.1 * value;
            }
            old.retain(|_, value| value.abs() > 1e-6);
            norm += old
                .iter()
                .map(|(&offer, value)| self.scale(output, offer) * value * value)
                .sum::<f64>();
        }
        norm
    }

    /// Parts of a like cost should move alike: the square of the scale of a multiplier.
    fn scale(&self, output: usize, offer: OfferId) -> f64 {
        let part = &self.parts[self.place[&offer]];
        part.best * self.family.quantities[output] as f64 + self.line + 1.0
    }

    fn advance(&mut self, direction: &[BTreeMap<OfferId, f64>], step: f64) {
        for (output, moves) in direction.iter().enumerate() {
            let quantity = self.family.quantities[output] as f64;
            for (&offer, &value) in moves {
                let least = self.parts[self.place[&offer]].best * quantity;
                let by = step * self.scale(output, offer) * value;
                let mu = &mut self.costs[output].one[offer.index()];
                // Below the lowest price a multiplier only loosens the bound.
                *mu = (*mu + by).max(least);
            }
        }
    }
}
