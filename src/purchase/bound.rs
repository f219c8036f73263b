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

use std::collections::{BTreeMap, BTreeSet};

use rayon::prelude::*;

use crate::search::{Amount, Costs, Listing, OfferId, OutputSpace, Pick};

use super::family::Family;
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

    /// The listing, if they are listed.
    #[must_use]
    pub const fn listing(&self) -> Option<&Listing<'s, 'a>> {
        match self {
            Self::All(_) => None,
            Self::Listed(listing) => Some(listing),
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

/// The best bound found and what it was found with.
#[derive(Clone, Debug)]
pub struct Bound {
    /// The bound in millionths, as computed.
    pub value: f64,
    /// The cheapest design of each output at the multipliers, and its cost.
    pub picks: Vec<(f64, Pick)>,
    /// How often the designs on the way to this bound used each part.
    pub rates: Vec<UseRate>,
    /// Multipliers that are not at their start: part, user, value.
    moved: Vec<(u32, u32, f64)>,
}

/// How often the designs on the way to a bound used a part, 0 to 1, late ones counting more.
#[derive(Clone, Debug)]
pub struct UseRate {
    /// The part.
    pub offer: OfferId,
    /// By any output.
    pub any: f64,
    /// By each output that did.
    pub by_output: Vec<(u32, f64)>,
    /// What the part costs those that use it.
    pub stake: f64,
}

impl Bound {
    /// The bound in whole millionths, rounded down with room for the rounding of its sums.
    #[must_use]
    pub fn floor(&self) -> i64 {
        (self.value - self.value.abs() * 1e-12 - 1e-3).ceil() as i64
    }
}

/// One output that may use a part.
#[derive(Clone, Copy, Debug)]
struct User {
    output: u32,
    /// Most of the part in a unit.
    most: u32,
    /// Units of the output.
    quantity: f64,
    /// Price of one in each unit, for all units: where it started and where it is.
    start: f64,
    mu: f64,
    moved: bool,
}

/// One part that several outputs may use.
#[derive(Debug)]
struct Part {
    offer: OfferId,
    /// What its order line costs; nothing where it is paid already.
    line: f64,
    steps: Vec<Step>,
    /// The lowest unit price that its users together can reach.
    best: f64,
    users: Vec<User>,
}

impl Part {
    /// What the users' multipliers come to beyond the lowest price.
    fn surplus(&self) -> f64 {
        let beyond = |u: &User| f64::from(u.most) * (u.mu - self.best * u.quantity).max(0.0);
        self.users.iter().map(beyond).sum()
    }
}

/// The search for good multipliers.
#[derive(Debug)]
pub struct Bounder<'f, 's, 'a> {
    family: &'f Family<'s, 'a>,
    /// Order lines that are paid already.
    paid: f64,
    parts: Vec<Part>,
    /// Place of each offer in `parts`; none for a part that one output alone can use.
    place: Vec<u32>,
    costs: Vec<Costs<f64>>,
}

const NO_PLACE: u32 = u32::MAX;

/// How long to go on.
#[derive(Clone, Copy, Debug)]
pub struct Effort {
    /// Most steps.
    pub steps: u32,
    /// Idle steps before the step size is halved.
    pub patience: u32,
}

/// Move of a multiplier, by part and user.
type Moves = BTreeMap<(u32, u32), f64>;

impl<'f, 's, 'a> Bounder<'f, 's, 'a> {
    /// Sets up multipliers for what these designs use: from those of an earlier search, and with
    /// each part's line cost shared out among the outputs that can still use it. A part that one
    /// output alone can use has its exact cost there and no multiplier.
    #[must_use]
    pub fn new(
        family: &'f Family<'s, 'a>,
        designs: &[Designs<'s, 'a>],
        extra_line_cost: i64,
        sunk: &BTreeSet<OfferId>,
        earlier: Option<&Self>,
    ) -> Self {
        let line = (family.terms.line + extra_line_cost) as f64;
        let market = family.market;
        let mut users: Vec<Vec<User>> = vec![Vec::new(); market.offers()];
        for (output, of) in designs.iter().enumerate() {
            let quantity = family.quantities[output] as f64;
            for (offer, most) in of.most_counts() {
                let mu = earlier.map_or(0.0, |e| e.costs[output].of(offer, 1));
                let output = output as u32;
                users[offer.index()].push(User {
                    output,
                    most,
                    quantity,
                    start: mu,
                    mu,
                    moved: false,
                });
            }
        }
        let most = family.most_count();
        let mut costs: Vec<Costs<f64>> = (0..designs.len())
            .map(|output| {
                let component = family.component_cost(output) as f64;
                let steps = family.adjustment_costs(output).into_iter().map(|c| c as f64).collect();
                Costs::by_count(market, most, component, steps, |_, _| f64::HUGE)
            })
            .collect();
        let mut bounder_parts = Vec::new();
        let mut place = vec![NO_PLACE; market.offers()];
        for (index, users) in users.into_iter().enumerate() {
            let offer = OfferId(index as u32);
            match users.as_slice() {
                [] => {}
                [only] => {
                    let output = only.output as usize;
                    costs[output].set(offer, |count| {
                        let needed = family.quantities[output] * u64::from(count);
                        match family.cost(offer, needed) {
                            cost if cost >= i64::HUGE => f64::HUGE,
                            cost if sunk.contains(&offer) => {
                                cost as f64 + extra_line_cost as f64 - line
                            }
                            cost => cost as f64 + extra_line_cost as f64,
                        }
                    });
                }
                _ => {
                    let line = if sunk.contains(&offer) { 0.0 } else { line };
                    if let Some(part) =
                        Self::shared_part(family, line, offer, users, earlier.is_none())
                    {
                        for user in &part.users {
                            let mu = user.mu;
                            costs[user.output as usize].set(offer, |count| mu * f64::from(count));
                        }
                        place[index] = bounder_parts.len() as u32;
                        bounder_parts.push(part);
                    }
                }
            }
        }
        let paid = line * sunk.len() as f64;
        Self { family, paid, parts: bounder_parts, place, costs }
    }

    /// Lemma: at multipliers that together exceed the lowest price that all users can reach by no
    /// more than the line cost, v is not below 0; so what is left of the line cost can be shared
    /// out among the users, and the outputs' minima only rise.
    fn shared_part(
        family: &Family<'_, '_>,
        line: f64,
        offer: OfferId,
        users: Vec<User>,
        fresh: bool,
    ) -> Option<Part> {
        let steps: Vec<Step> = if family.terms.priced {
            steps(family.market.tariff(offer)).collect()
        } else {
            vec![Step { minimum: 0, each: 0, most: None }]
        };
        let demand: f64 = users.iter().map(|u| f64::from(u.most) * u.quantity).sum();
        // A step that starts beyond all demand is paid for up to its start.
        let reach = |s: &Step| s.each as f64 * (s.minimum as f64 / demand).max(1.0);
        let best = steps.iter().map(reach).min_by(f64::total_cmp)?;
        let mut part = Part { offer, line, steps, best, users };
        for user in &mut part.users {
            if fresh {
                user.mu = best * user.quantity;
            }
        }
        let left = line - part.surplus();
        if left > 0.0 {
            let shares: f64 = part.users.iter().map(|u| f64::from(u.most)).sum();
            for user in &mut part.users {
                user.mu += left / shares;
            }
        }
        for user in &mut part.users {
            user.start = user.mu;
        }
        Some(part)
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
        let (mut record, mut usage) = self.evaluate(designs, None)?;
        let mut direction = Moves::new();
        let mut rates = Moves::new();
        let (mut size, mut idle) = (1.0, 0);
        for _ in 0..effort.steps {
            let gap = ceiling as f64 - record.value;
            if gap < 0.5 || size < 0.01 || stop() {
                break;
            }
            let norm = self.turn(&mut direction, &usage);
            if norm <= 0.0 {
                break;
            }
            self.advance(&direction, size * gap / norm);
            let reached;
            (reached, usage) = self.evaluate(designs, Some(&record.picks))?;
            self.count_uses(&mut rates, &reached.picks);
            if reached.value > record.value + gap * 1e-5 {
                record = reached;
                idle = 0;
            } else {
                idle += 1;
                if idle >= effort.patience {
                    size *= 0.5;
                    idle = 0;
                    self.restore(&record);
                    (_, usage) = self.evaluate(designs, Some(&record.picks))?;
                    direction.clear();
                }
            }
        }
        self.restore(&record);
        record.rates = self.use_rates(&rates);
        Some(record)
    }

    /// Late uses count more: the weight of one falls by a twentieth a step.
    fn count_uses(&self, rates: &mut Moves, picks: &[(f64, Pick)]) {
        const FADE: f64 = 0.05;
        rates.values_mut().for_each(|rate| *rate *= 1.0 - FADE);
        for (output, (_, pick)) in picks.iter().enumerate() {
            for (offer, _) in self.family.uses(output, pick) {
                if let Some(key) = self.key(offer, output as u32) {
                    *rates.entry(key).or_default() += FADE;
                }
            }
        }
    }

    fn use_rates(&self, rates: &Moves) -> Vec<UseRate> {
        let mut all: Vec<UseRate> = Vec::new();
        for (&(part, user), &rate) in rates {
            let of = &self.parts[part as usize];
            let user = &of.users[user as usize];
            if all.last().is_none_or(|last| last.offer != of.offer) {
                let (offer, stake) = (of.offer, of.line);
                all.push(UseRate { offer, any: 0.0, by_output: Vec::new(), stake });
            }
            if let Some(last) = all.last_mut() {
                last.any = last.any.max(rate);
                last.by_output.push((user.output, rate));
                last.stake += rate * of.best * user.quantity;
            }
        }
        all
    }

    /// The costs of an output at the present multipliers.
    #[must_use]
    pub fn costs(&self, output: usize) -> &Costs<f64> {
        &self.costs[output]
    }

    fn set(&mut self, part: u32, user: u32, mu: f64) {
        let part = &mut self.parts[part as usize];
        let user = &mut part.users[user as usize];
        user.mu = mu;
        user.moved = true;
        self.costs[user.output as usize].set(part.offer, |count| mu * f64::from(count));
    }

    fn restore(&mut self, bound: &Bound) {
        for part in 0..self.parts.len() as u32 {
            for user in 0..self.parts[part as usize].users.len() as u32 {
                let of = self.parts[part as usize].users[user as usize];
                if of.moved {
                    self.set(part, user, of.start);
                    self.parts[part as usize].users[user as usize].moved = false;
                }
            }
        }
        for &(part, user, mu) in &bound.moved {
            self.set(part, user, mu);
        }
    }

    /// The bound at the present multipliers, and how far each output's use of a part exceeds what
    /// the purchase side takes. Designs that were good before give each output a first ceiling.
    fn evaluate(
        &self,
        designs: &[Designs<'s, 'a>],
        before: Option<&[(f64, Pick)]>,
    ) -> Option<(Bound, Moves)> {
        let picks: Vec<(f64, Pick)> = designs
            .par_iter()
            .enumerate()
            .map(|(output, of)| {
                let costs = &self.costs[output];
                let known = before.map(|b| (self.cost_at(output, &b[output].1), b[output].1));
                let below = known.map_or(f64::HUGE, |k| k.0);
                of.cheapest(costs, below).or(known)
            })
            .collect::<Option<_>>()?;
        let mut usage = Moves::new();
        for (output, (_, pick)) in picks.iter().enumerate() {
            for (offer, count) in self.family.uses(output, pick) {
                if let Some(key) = self.key(offer, output as u32) {
                    *usage.entry(key).or_default() += f64::from(count);
                }
            }
        }
        let mut value: f64 = self.paid + picks.iter().map(|p| p.0).sum::<f64>();
        let mut moved = Vec::new();
        for (index, part) in self.parts.iter().enumerate() {
            for (user, of) in part.users.iter().enumerate().filter(|(_, u)| u.moved) {
                moved.push((index as u32, user as u32, of.mu));
            }
            let (cost, taken) = self.purchase_side(part);
            value += cost;
            for (user, count) in taken {
                *usage.entry((index as u32, user)).or_default() -= count;
            }
        }
        Some((Bound { value, picks, rates: Vec::new(), moved }, usage))
    }

    /// The cost of a design at the present multipliers.
    fn cost_at(&self, output: usize, pick: &Pick) -> f64 {
        let costs = &self.costs[output];
        self.family.besides_parts(output, pick) as f64
            + self.family.uses(output, pick).iter().map(|&(o, n)| costs.of(o, n)).sum::<f64>()
    }

    fn key(&self, offer: OfferId, output: u32) -> Option<(u32, u32)> {
        let place = self.place[offer.index()];
        let part = self.parts.get(place as usize)?;
        let user = part.users.iter().position(|u| u.output == output)?;
        Some((place, user as u32))
    }

    /// min(0, v) of a part, and how much of it each user takes at that minimum.
    fn purchase_side(&self, part: &Part) -> (f64, Vec<(u32, f64)>) {
        // Nothing below zero unless the users' surplus over the lowest price pays the line.
        if part.surplus() <= part.line {
            return (0.0, Vec::new());
        }
        let mut users: Vec<(f64, u32)> =
            part.users.iter().enumerate().map(|(i, u)| (u.mu / u.quantity, i as u32)).collect();
        users.sort_by(|a, b| b.0.total_cmp(&a.0).then(a.1.cmp(&b.1)));
        let mut best = (0.0, Vec::new());
        for step in &part.steps {
            let (each, minimum) = (step.each as f64, step.minimum as f64);
            let mut most = step.most.map_or(f64::INFINITY, |m| m as f64);
            let mut taken = Vec::new();
            let (mut bought, mut worth) = (0.0, 0.0);
            for &(density, index) in &users {
                let user = &part.users[index as usize];
                let whole = f64::from(user.most) * user.quantity;
                // Up to the step's minimum a further user costs nothing more.
                let room = if density > each { whole } else { (minimum - bought).max(0.0) };
                let units = whole.min(room).min(most);
                if units <= 0.0 {
                    break;
                }
                most -= units;
                bought += units;
                worth += units * density;
                taken.push((index, units / user.quantity));
            }
            let value = part.line + each * bought.max(minimum) - worth;
            if value < best.0 {
                best = (value, taken);
            }
        }
        best
    }

    /// Turns the direction towards the present usage; gives its scaled square length.
    fn turn(&self, direction: &mut Moves, usage: &Moves) -> f64 {
        for value in direction.values_mut() {
            *value *= 0.9;
        }
        for (&key, &value) in usage {
            *direction.entry(key).or_default() += 0.1 * value;
        }
        direction.retain(|_, value| value.abs() > 1e-6);
        direction.iter().map(|(&key, value)| self.scale(key) * value * value).sum()
    }

    /// Parts of a like cost should move alike: the square of the scale of a multiplier.
    fn scale(&self, (part, user): (u32, u32)) -> f64 {
        let part = &self.parts[part as usize];
        part.best * part.users[user as usize].quantity + part.line + 1.0
    }

    fn advance(&mut self, direction: &Moves, step: f64) {
        for (&key, &value) in direction {
            let user = &self.parts[key.0 as usize].users[key.1 as usize];
            // A multiplier may well fall below the lowest price: a user who is better off with
            // another part then leaves room to those who need this one.
            let mu = (user.mu + step * self.scale(key) * value).max(0.0);
            self.set(key.0, key.1, mu);
        }
    }
}
