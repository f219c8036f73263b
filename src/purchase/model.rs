//! The integer program over what the bound has left: the exact choice of a pair and a network for
//! each output, and of a step of each price list.
//!
//! An output picks one frame's pair y and network z. That the pair's error fits the network's room
//! is said by a chain: going down the thresholds, networks picked so far less pairs picked so far
//! is never negative. Purchases: a part has one step at most, is used only with a step, and is
//! bought for at least its users and its step's minimum. Coefficients are 0, ±1 and quantities in
//! units of the part's largest demand.

use std::collections::{BTreeMap, BTreeSet};

use good_lp::{Constraint, Expression, IntoAffineExpression, ProblemVariables, Variable, variable};

use crate::search::{ListedFrame, Listing, OfferId, Pick};

use super::family::Family;
use super::price::{Step, steps};
use super::solver::{Program, Values};

/// Money in the program is counted in whole units of the currency.
const MICROS: f64 = 1e6;

struct FrameColumns {
    pairs: Vec<Variable>,
    networks: Vec<Variable>,
}

/// What the program minimises.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Aim {
    /// The total cost.
    Cost,
    /// Units that stock lacks, whatever the cost.
    Shortage,
}

/// The program with handles to read its answer by.
pub struct ChainModel<'m, 's, 'a> {
    family: &'m Family<'s, 'a>,
    listings: &'m [&'m Listing<'s, 'a>],
    sunk: &'m BTreeSet<OfferId>,
    aim: Aim,
    variables: ProblemVariables,
    objective: Expression,
    constraints: Vec<Constraint>,
    columns: Vec<Vec<FrameColumns>>,
    /// Use of each part by each output, as what a unit takes.
    shared: BTreeMap<OfferId, BTreeMap<usize, PartUse>>,
    /// Order lines of parts that one output alone can use.
    lines: Expression,
}

#[derive(Default)]
struct PartUse {
    expression: Expression,
    most: u32,
}

impl<'m, 's, 'a> ChainModel<'m, 's, 'a> {
    /// States the program for these listings; the order lines of `sunk` parts are paid whether
    /// they are used or not.
    #[must_use]
    pub fn new(
        family: &'m Family<'s, 'a>,
        listings: &'m [&'m Listing<'s, 'a>],
        sunk: &'m BTreeSet<OfferId>,
        aim: Aim,
    ) -> Self {
        let mut model = Self {
            family,
            listings,
            sunk,
            aim,
            variables: ProblemVariables::new(),
            objective: Expression::default(),
            constraints: Vec::new(),
            columns: Vec::new(),
            shared: shared_parts(family, listings, aim),
            lines: Expression::default(),
        };
        model.objective += (family.terms.line as f64 / MICROS) * sunk.len() as f64;
        for output in 0..listings.len() {
            model.add_output(output);
        }
        model.add_purchases();
        model
    }

    /// The program.
    #[must_use]
    pub fn program(&self) -> Program {
        Program {
            variables: self.variables.clone(),
            objective: self.objective.clone(),
            constraints: self.constraints.clone(),
        }
    }

    /// The designs that an answer picks; `None` when it isn't a whole set.
    #[must_use]
    pub fn picks(&self, values: &Values) -> Option<Vec<Pick>> {
        self.columns
            .iter()
            .zip(self.listings)
            .map(|(frames, listing)| {
                frames.iter().zip(&listing.frames).find_map(|(columns, listed)| {
                    let pair = columns.pairs.iter().position(|&y| values.is_set(y))?;
                    let network = columns.networks.iter().position(|&z| values.is_set(z))?;
                    let (pair, network) = (&listed.pairs[pair], &listed.networks[network]);
                    Some(Pick {
                        frame: listed.frame,
                        reference: pair.reference,
                        amplifier: pair.amplifier,
                        network: network.network,
                    })
                })
            })
            .collect()
    }

    /// A column that uses parts: parts of this output alone are priced at once, the others' use is
    /// noted. Gives the cost and the number of lines of its own parts.
    fn own_cost(&mut self, output: usize, column: Variable, uses: &[(OfferId, u32)]) -> i64 {
        let quantity = self.family.quantities[output];
        let mut cost = 0;
        for &(offer, count) in uses {
            if let Some(users) = self.shared.get_mut(&offer) {
                let entry = users.entry(output).or_default();
                entry.expression += f64::from(count) * column;
                entry.most = entry.most.max(count);
            } else {
                let line = if self.sunk.contains(&offer) { self.family.terms.line } else { 0 };
                cost += self.family.cost(offer, quantity * u64::from(count)) - line;
                self.lines += column;
            }
        }
        cost
    }

    fn add_output(&mut self, output: usize) {
        let listing = self.listings[output];
        let space = listing.space;
        let market = self.family.market;
        let component = self.family.component_cost(output);
        let steps = self.family.adjustment_costs(output);
        let mut all_pairs = Vec::new();
        let mut all_networks = Vec::new();
        let mut frames = Vec::new();
        for listed in &listing.frames {
            let frame = &space.frames[listed.frame as usize];
            let lift = frame.lift.map(|(lift, count)| (market.lift_offer(lift), count));
            let diodes = lift.map_or(0, |(_, count)| i64::from(count));
            let besides =
                component * (2 + diodes) + frame.adjustment.map_or(0, |a| steps[a as usize]);
            let mut pairs = Vec::with_capacity(listed.pairs.len());
            for pair in &listed.pairs {
                let column = self.variables.add(variable().binary());
                let mut uses = vec![
                    (market.reference_offer(pair.reference), 1),
                    (market.amplifier_offer(pair.amplifier), 1),
                ];
                uses.extend(lift);
                let cost = besides + self.own_cost(output, column, &uses);
                all_pairs.push((column, cost));
                pairs.push(column);
            }
            let mut networks = Vec::with_capacity(listed.networks.len());
            for network in &listed.networks {
                let column = self.variables.add(variable().binary());
                let uses: Vec<_> = network.network.uses().collect();
                let cost = component * network.network.offers().len() as i64
                    + self.own_cost(output, column, &uses);
                all_networks.push((column, cost));
                networks.push(column);
            }
            self.chain(listed, &pairs, &networks, |p| p.error, |n| n.room);
            if binds(listed) {
                self.chain(listed, &pairs, &networks, |p| p.statics, |n| n.statics_room);
            }
            frames.push(FrameColumns { pairs, networks });
        }
        let one: Expression = all_pairs.iter().map(|&(column, _)| column).sum();
        self.constraints.push(one.eq(1.0));
        if self.aim == Aim::Cost {
            for columns in [all_pairs, all_networks] {
                // One of each is picked: their least cost can stand outside.
                let least = columns.iter().map(|c| c.1).min().unwrap_or(0);
                self.objective += least as f64 / MICROS;
                for (column, cost) in columns {
                    self.objective += (cost - least) as f64 / MICROS * column;
                }
            }
        }
        self.columns.push(frames);
    }

    /// One pair and one network of a frame, or neither, and the pair's figure is within the
    /// network's.
    fn chain(
        &mut self,
        listed: &ListedFrame,
        pairs: &[Variable],
        networks: &[Variable],
        figure: impl Fn(&crate::search::ListedPair) -> f64,
        room: impl Fn(&crate::search::ListedNetwork) -> f64,
    ) {
        // At equal thresholds the network comes first: a figure may just fill the room.
        let mut events: Vec<(f64, bool, Variable)> = listed
            .networks
            .iter()
            .zip(networks)
            .map(|(n, &column)| (room(n), true, column))
            .chain(listed.pairs.iter().zip(pairs).map(|(p, &c)| (figure(p), false, c)))
            .collect();
        events.sort_by(|a, b| b.0.total_cmp(&a.0).then(b.1.cmp(&a.1)));
        let mut level = Expression::default();
        let mut was_network = true;
        for (_, is_network, column) in events {
            if is_network && !was_network {
                // A level between two runs, kept as a variable so that rows stay short.
                let kept = self.variables.add(variable().min(0.0).max(1.0));
                self.constraints.push((level - kept).eq(0.0));
                level = kept.into();
            }
            level += if is_network { 1.0 } else { -1.0 } * column;
            was_network = is_network;
        }
        self.constraints.push(level.eq(0.0));
    }

    fn add_purchases(&mut self) {
        let shared = std::mem::take(&mut self.shared);
        let mut lines = std::mem::take(&mut self.lines);
        for (offer, users) in &shared {
            self.add_part(*offer, users, &mut lines);
        }
        if let Some(most) = self.family.terms.lines_max {
            self.constraints.push(lines.leq(most as f64));
        }
        self.shared = shared;
    }

    fn add_part(
        &mut self,
        offer: OfferId,
        users: &BTreeMap<usize, PartUse>,
        lines: &mut Expression,
    ) {
        let family = self.family;
        let tariff = family.market.tariff(offer);
        let demand: u64 =
            users.iter().map(|(&o, u)| family.quantities[o] * u64::from(u.most)).sum();
        let whole = demand as f64;
        let mut open = Expression::default();
        let mut takes: BTreeMap<usize, Expression> = BTreeMap::new();
        for step in self.useful_steps(offer, demand) {
            let chosen = self.variables.add(variable().binary());
            open += chosen;
            *lines += chosen;
            let most = step.most.unwrap_or(u64::MAX).min(
                demand.max(step.minimum).div_ceil(tariff.multiple).saturating_mul(tariff.multiple),
            ) as f64;
            let bought: Expression = if tariff.multiple == 1 {
                (1.0 * self.variables.add(variable().min(0.0).max(most / whole))).into_expression()
            } else {
                let orders = (most / tariff.multiple as f64).floor();
                let count = self.variables.add(variable().integer().min(0.0).max(orders));
                tariff.multiple as f64 / whole * count
            };
            if self.aim == Aim::Cost && family.terms.priced {
                self.objective += bought.clone() * (step.each as f64 * whole / MICROS);
            }
            if self.aim == Aim::Cost && !self.sunk.contains(&offer) {
                self.objective += family.terms.line as f64 / MICROS * chosen;
            }
            let mut needed = Expression::default();
            for (&output, part) in users {
                let share = f64::from(part.most);
                let take = self.variables.add(variable().min(0.0).max(share));
                self.constraints.push(Expression::from(take).leq(share * chosen));
                needed += family.quantities[output] as f64 / whole * take;
                *takes.entry(output).or_default() += take;
            }
            if let (Aim::Shortage, Some(stock)) = (self.aim, tariff.most) {
                let short = self.variables.add(variable().min(0.0).max(most / whole));
                self.objective += whole * short;
                self.constraints.push((bought.clone() - short).leq(stock as f64 / whole));
            }
            self.constraints.push((needed - bought.clone()).leq(0.0));
            // Nothing is bought of a step that isn't chosen, and its minimum of one that is.
            self.constraints.push((bought.clone() - most / whole * chosen).leq(0.0));
            self.constraints.push((step.minimum as f64 / whole * chosen - bought).leq(0.0));
        }
        self.constraints.push(open.leq(1.0));
        for (output, part) in users {
            let take = takes.remove(output).unwrap_or_default();
            self.constraints.push((part.expression.clone() - take).eq(0.0));
        }
    }

    /// The steps of a part that can pay: one that starts beyond all demand must not cost more than
    /// the demand itself. Where a shortage is counted any number can be bought, at no price.
    fn useful_steps(&self, offer: OfferId, demand: u64) -> Vec<Step> {
        if self.aim == Aim::Shortage {
            let minimum = self.family.market.tariff(offer).minimum;
            return vec![Step { minimum, each: 0, most: None }];
        }
        if !self.family.terms.priced {
            let tariff = self.family.market.tariff(offer);
            return vec![Step { minimum: tariff.minimum, each: 0, most: tariff.most }];
        }
        let all = self.family.buy(offer, demand).map(|b| b.cost);
        steps(self.family.market.tariff(offer))
            .filter(|step| {
                step.minimum <= demand
                    || all
                        .is_none_or(|cost| (step.minimum as i64).saturating_mul(step.each) <= cost)
            })
            .collect()
    }
}

/// Whether some listed pair and network of a frame have more static error than the range.
fn binds(listed: &ListedFrame) -> bool {
    let most = listed.pairs.iter().map(|p| p.statics).fold(0.0, f64::max);
    listed.networks.iter().any(|n| n.statics_room < most)
}

/// The parts that several outputs can use; with [`Aim::Shortage`] every part of limited stock.
fn shared_parts(
    family: &Family<'_, '_>,
    listings: &[&Listing<'_, '_>],
    aim: Aim,
) -> BTreeMap<OfferId, BTreeMap<usize, PartUse>> {
    let market = family.market;
    let mut users: BTreeMap<OfferId, Vec<usize>> = BTreeMap::new();
    for (output, listing) in listings.iter().enumerate() {
        let mut note = |offer: OfferId| {
            let list = users.entry(offer).or_default();
            if list.last() != Some(&output) {
                list.push(output);
            }
        };
        for listed in &listing.frames {
            for pair in &listed.pairs {
                note(market.reference_offer(pair.reference));
                note(market.amplifier_offer(pair.amplifier));
            }
            for (offer, _) in listed.networks.iter().flat_map(|n| n.network.uses()) {
                note(offer);
            }
            if let Some((lift, _)) = listing.space.frames[listed.frame as usize].lift {
                note(market.lift_offer(lift));
            }
        }
    }
    users
        .into_iter()
        .filter(|(offer, list)| match aim {
            Aim::Cost => list.len() > 1,
            Aim::Shortage => market.tariff(*offer).most.is_some(),
        })
        .map(|(offer, _)| (offer, BTreeMap::new()))
        .collect()
}
