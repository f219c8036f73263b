//! Among designs of equal cost, the one that the rule names: lower total (compared at 1e-9
//! relative), then the smaller list of order codes, series before parallel, fewer diodes.

use std::cmp::Ordering;
use std::collections::BTreeMap;

use crate::circuit::Connection;

use super::combos::Combo;
use super::costs::Costs;
use super::networks::{NetChoice, NetVisitor, Walk};
use super::oracle::{Pick, PickedNetwork};
use super::space::{FrameSpace, NetSpace, OutputSpace, PartIn};

/// Totals closer than this, relative, are equal.
const EQUAL: f64 = 1e-9;

/// A reference and an amplifier with the sum of their errors and of their static errors.
type FittingPair = (f64, f64, u32, u32);

impl OutputSpace<'_> {
    /// Of all designs that cost exactly `cost`, as this one does, and are admitted, the one that
    /// the rule names.
    #[must_use]
    pub fn best_at(
        &self,
        costs: &Costs<i64>,
        cost: i64,
        known: Pick,
        admit: &dyn Fn(&Pick) -> bool,
    ) -> Pick {
        let mut ties = Ties { least: self.total_of(&known), found: Vec::new() };
        let least = self.least_costs(costs);
        for net in &self.nets {
            let mut search = TieSearch::new(self, net, costs, cost, &mut ties, admit);
            for count in 1..=self.market.request.network_elements {
                let least = &least[usize::from(net.adjusted)];
                self.walk(net, count, costs, least, Walk::All, &mut search);
            }
        }
        let bound = ties.least * (1.0 + EQUAL);
        ties.found.retain(|(total, _)| *total <= bound);
        let mut named: Vec<(Vec<String>, Pick)> =
            ties.found.iter().map(|(_, pick)| (self.tie_codes(pick), *pick)).collect();
        named.sort_by(|a, b| a.0.cmp(&b.0).then_with(|| self.by_build(&a.1, &b.1)));
        named.first().map_or(known, |(_, pick)| *pick)
    }

    /// The order codes in the order of the rule: reference, amplifier, elements sorted, lift,
    /// adjustment; an absent one is an empty text and so sorts first.
    fn tie_codes(&self, pick: &Pick) -> Vec<String> {
        let market = self.market;
        let frame = &self.frames[pick.frame as usize];
        let mut elements: Vec<String> =
            pick.network.offers().iter().map(|&o| market.order_code(o)).collect();
        elements.sort();
        let mut codes = vec![
            market.order_code(market.reference_offer(pick.reference)),
            market.order_code(market.amplifier_offer(pick.amplifier)),
        ];
        codes.append(&mut elements);
        // Three places for elements, so that the lift's place is the same in every list.
        codes.resize(5, String::new());
        codes.push(
            frame
                .lift
                .map_or_else(String::new, |(lift, _)| market.order_code(market.lift_offer(lift))),
        );
        codes.push(
            frame
                .adjustment
                .map_or_else(String::new, |a| market.adjustments[a as usize].0.order_code.clone()),
        );
        codes
    }

    /// Series before parallel, then fewer diodes.
    fn by_build(&self, a: &Pick, b: &Pick) -> Ordering {
        let build = |pick: &Pick| {
            let diodes = self.frames[pick.frame as usize].lift.map_or(0, |(_, count)| count);
            (pick.network.connection == Connection::Parallel, diodes)
        };
        build(a).cmp(&build(b))
    }
}

#[derive(Debug)]
struct Ties {
    least: f64,
    found: Vec<(f64, Pick)>,
}

impl Ties {
    fn offer(&mut self, total: f64, pick: Pick) {
        if total <= self.least * (1.0 + EQUAL) {
            if total < self.least {
                self.least = total;
                let bound = total * (1.0 + EQUAL);
                self.found.retain(|(other, _)| *other <= bound);
            }
            self.found.push((total, pick));
        }
    }
}

struct TieFrame<'s, 'a> {
    index: u32,
    frame: &'s FrameSpace<'a>,
    cost: i64,
    least: i64,
    /// No pair of the frame has a smaller error.
    least_error: f64,
    amplifiers_by_cost: BTreeMap<i64, Vec<(f64, f64, u32)>>,
    references: Vec<(i64, f64, f64, u32)>,
    /// Pairs of exactly a cost, by error; worked out when first asked for.
    pairs: BTreeMap<i64, Vec<FittingPair>>,
}

impl TieFrame<'_, '_> {
    fn pairs_at(&mut self, space: &OutputSpace<'_>, cost: i64) -> &[FittingPair] {
        let (references, amplifiers) = (&self.references, &self.amplifiers_by_cost);
        self.pairs.entry(cost).or_insert_with(|| {
            let mut pairs = Vec::new();
            for &(reference_cost, error, statics, reference) in references {
                let fitting = amplifiers.get(&(cost - reference_cost)).into_iter().flatten();
                for &(amplifier_error, amplifier_statics, amplifier) in fitting {
                    if space.pairing.suit(reference, amplifier) {
                        pairs.push((
                            error + amplifier_error,
                            statics + amplifier_statics,
                            reference,
                            amplifier,
                        ));
                    }
                }
            }
            pairs.sort_by(|a, b| a.0.total_cmp(&b.0).then((a.2, a.3).cmp(&(b.2, b.3))));
            pairs
        })
    }
}

struct TieSearch<'s, 'a, 't> {
    space: &'s OutputSpace<'a>,
    component: i64,
    cost: i64,
    adjusted: bool,
    frames: Vec<TieFrame<'s, 'a>>,
    ties: &'t mut Ties,
    admit: &'t dyn Fn(&Pick) -> bool,
}

impl<'s, 'a, 't> TieSearch<'s, 'a, 't> {
    fn new(
        space: &'s OutputSpace<'a>,
        net: &NetSpace,
        costs: &Costs<i64>,
        cost: i64,
        ties: &'t mut Ties,
        admit: &'t dyn Fn(&Pick) -> bool,
    ) -> Self {
        let market = space.market;
        let frames = net
            .frames
            .iter()
            .map(|&index| {
                let frame = &space.frames[index];
                let mut amplifiers_by_cost: BTreeMap<i64, Vec<(f64, f64, u32)>> = BTreeMap::new();
                for a in &frame.amplifiers {
                    let price = costs.of(market.amplifier_offer(a.index), 1);
                    amplifiers_by_cost
                        .entry(price)
                        .or_default()
                        .push((a.error, a.statics, a.index));
                }
                let references: Vec<_> = frame
                    .references
                    .iter()
                    .map(|r| {
                        let price = costs.of(market.reference_offer(r.index), 1);
                        (price, r.error, r.statics, r.index)
                    })
                    .collect();
                let own = space.frame_cost(frame, costs);
                let cheapest_reference = references.iter().map(|r| r.0).min().unwrap_or(0);
                let cheapest_amplifier = amplifiers_by_cost.keys().next().copied().unwrap_or(0);
                let least_error = |parts: &[PartIn]| parts.first().map_or(0.0, |p| p.error);
                TieFrame {
                    least_error: least_error(&frame.references) + least_error(&frame.amplifiers),
                    index: index as u32,
                    frame,
                    cost: own,
                    least: own + cheapest_reference + cheapest_amplifier,
                    amplifiers_by_cost,
                    references,
                    pairs: BTreeMap::new(),
                }
            })
            .collect();
        Self {
            space,
            component: costs.component,
            cost,
            adjusted: net.adjusted,
            frames,
            ties,
            admit,
        }
    }
}

impl NetVisitor<i64> for TieSearch<'_, '_, '_> {
    fn ceiling(&self, count: u32) -> Option<i64> {
        let least = self.frames.iter().map(|f| f.least).min()?;
        let left = self.cost - least - self.component * i64::from(count);
        (left >= 0).then_some(left)
    }

    fn most_total(&self) -> f64 {
        self.ties.least * (1.0 + 2.0 * EQUAL)
    }

    fn take(&mut self, combo: &Combo, choice: &NetChoice<i64>) {
        let space = self.space;
        let network = choice.cost + self.component * i64::from(combo.count);
        let systematic = if self.adjusted { 0.0 } else { combo.mismatch };
        for tie in &mut self.frames {
            if network + tie.least > self.cost {
                continue;
            }
            let frame = tie.frame;
            let Some(room) = space.room(&frame.own, systematic) else { continue };
            let hopeful = space.total(frame, tie.least_error + choice.error, systematic);
            if hopeful > self.ties.least * (1.0 + EQUAL) {
                continue;
            }
            let (index, wanted) = (tie.index, self.cost - network - tie.cost);
            for &(error, statics, reference, amplifier) in tie.pairs_at(space, wanted) {
                if error > room - choice.error {
                    break;
                }
                let total = space.total(frame, error + choice.error, systematic);
                if total > self.ties.least * (1.0 + EQUAL) {
                    break;
                }
                if statics <= frame.statics_room - choice.statics {
                    let network = PickedNetwork::new(combo, choice.offers);
                    let pick = Pick { frame: index, reference, amplifier, network };
                    if (self.admit)(&pick) {
                        self.ties.offer(total, pick);
                    }
                }
            }
        }
    }
}
