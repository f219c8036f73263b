//! The pricing oracle: given a cost for every part, the cheapest design of an output that passes.

use super::combos::Combo;
use crate::circuit::Connection;

use super::costs::{Amount, Costs};
use super::market::OfferId;
use super::networks::{LeastCosts, NetChoice, NetVisitor, Walk};
use super::space::{FrameSpace, NetSpace, OutputSpace, PartIn};

/// A design by its indices in an [`OutputSpace`].
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub struct Pick {
    /// Frame.
    pub frame: u32,
    /// Reference, as an index in the market.
    pub reference: u32,
    /// Amplifier, as an index in the market.
    pub amplifier: u32,
    /// Its network.
    pub network: PickedNetwork,
}

/// A network by its offers.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub struct PickedNetwork {
    /// How the elements are joined.
    pub connection: Connection,
    count: u8,
    offers: [OfferId; 3],
}

impl PickedNetwork {
    /// A network of a combination's slots.
    #[must_use]
    pub fn new(combo: &Combo, offers: [OfferId; 3]) -> Self {
        Self { connection: combo.connection, count: combo.count, offers }
    }

    /// The offers of its elements; equal ones stand side by side.
    #[must_use]
    pub fn offers(&self) -> &[OfferId] {
        &self.offers[..self.count as usize]
    }

    /// Distinct offers with their counts.
    pub fn uses(&self) -> impl Iterator<Item = (OfferId, u32)> + '_ {
        self.offers().chunk_by(|a, b| a == b).map(|run| (run[0], run.len() as u32))
    }
}

/// A reference and an amplifier together.
#[derive(Clone, Copy, Debug)]
pub struct Pair<C> {
    /// Sum of their errors.
    pub error: f64,
    /// Sum of their static errors.
    pub statics: f64,
    /// Sum of their costs.
    pub cost: C,
    /// Reference.
    pub reference: u32,
    /// Amplifier.
    pub amplifier: u32,
}

/// The pairs of a frame among which a cheapest design can be found.
pub(super) struct PairFront<C> {
    /// Error rising, cost falling: the last that fits is the cheapest.
    staircase: Vec<Pair<C>>,
    /// Cost rising, for networks beside which the static sum has to be looked at.
    by_cost: Vec<Pair<C>>,
    /// No pair has more than this in the static sum.
    most_statics: f64,
}

impl<C: Amount> PairFront<C> {
    /// The cheapest pair within an error and a static error.
    pub(super) fn within(&self, error: f64, statics: f64) -> Option<&Pair<C>> {
        if statics >= self.most_statics {
            let fitting = self.staircase.partition_point(|p| p.error <= error);
            fitting.checked_sub(1).map(|last| &self.staircase[last])
        } else {
            self.by_cost.iter().find(|p| p.error <= error && p.statics <= statics)
        }
    }

    /// The least cost of any pair.
    pub(super) fn least(&self) -> Option<C> {
        self.staircase.last().map(|pair| pair.cost)
    }

    /// Sorts pairs and drops those that another beats in every way.
    pub(super) fn of(pairs: Vec<Pair<C>>, adjusted: bool) -> Self {
        let by_cost = |a: &Pair<C>, b: &Pair<C>| {
            a.cost.partial_cmp(&b.cost).unwrap_or(std::cmp::Ordering::Equal)
        };
        let by_index =
            |a: &Pair<C>, b: &Pair<C>| (a.reference, a.amplifier).cmp(&(b.reference, b.amplifier));
        let mut front = Self { staircase: pairs, by_cost: Vec::new(), most_statics: 0.0 };
        if adjusted {
            front.most_statics = front.staircase.iter().map(|p| p.statics).fold(0.0, f64::max);
            let mut all = front.staircase.clone();
            all.sort_by(|a, b| {
                by_cost(a, b).then(a.error.total_cmp(&b.error)).then_with(|| by_index(a, b))
            });
            for pair in all {
                let beaten = |by: &Pair<C>| by.error <= pair.error && by.statics <= pair.statics;
                if !front.by_cost.iter().any(beaten) {
                    front.by_cost.push(pair);
                }
            }
        }
        front.staircase.sort_by(|a, b| {
            a.error.total_cmp(&b.error).then(by_cost(a, b)).then_with(|| by_index(a, b))
        });
        let mut least: Option<C> = None;
        front.staircase.retain(|pair| {
            let keep = least.is_none_or(|l| pair.cost < l);
            if keep {
                least = Some(pair.cost);
            }
            keep
        });
        front
    }
}

impl OutputSpace<'_> {
    /// What a frame costs before reference, amplifier and network are chosen.
    pub fn frame_cost<C: Amount>(&self, frame: &FrameSpace<'_>, costs: &Costs<C>) -> C {
        let lift = frame.lift.map_or(C::ZERO, |(lift, count)| {
            costs.of(self.market.lift_offer(lift), count) + costs.component.times(count)
        });
        let step = frame.adjustment.map_or(C::ZERO, |a| costs.adjustment[a as usize]);
        lift + step + costs.component.times(2)
    }

    /// The cost of a reference and an amplifier.
    pub fn pair_cost<C: Amount>(&self, costs: &Costs<C>, reference: u32, amplifier: u32) -> C {
        costs.of(self.market.reference_offer(reference), 1)
            + costs.of(self.market.amplifier_offer(amplifier), 1)
    }

    /// Lemma: a part of a frame is not needed for a cheapest design when another has no larger
    /// error (nor static error, where the range can bind), is no dearer and suits every partner.
    pub(super) fn part_front<C: Amount>(
        &self,
        frame: &FrameSpace<'_>,
        parts: &[PartIn],
        cost: impl Fn(u32) -> C,
        covers: impl Fn(u32, u32) -> bool,
    ) -> Vec<(PartIn, C)> {
        let mut kept: Vec<(PartIn, C)> = Vec::new();
        let plain = self.pairing.all && frame.adjustment.is_none();
        for &part in parts {
            let price = cost(part.index);
            if price >= C::HUGE {
                continue;
            }
            let dominates = |(by, by_cost): &(PartIn, C)| {
                *by_cost <= price
                    && (frame.adjustment.is_none() || by.statics <= part.statics)
                    && covers(by.index, part.index)
            };
            let dominated =
                if plain { kept.last().is_some_and(dominates) } else { kept.iter().any(dominates) };
            if !dominated {
                kept.push((part, price));
            }
        }
        kept
    }

    /// The pairs of a frame among which a cheapest design can be found.
    pub(super) fn pair_front<C: Amount>(
        &self,
        frame: &FrameSpace<'_>,
        costs: &Costs<C>,
    ) -> PairFront<C> {
        let references = self.part_front(
            frame,
            &frame.references,
            |r| costs.of(self.market.reference_offer(r), 1),
            |a, b| self.pairing.reference_covers(a, b),
        );
        let amplifiers = self.part_front(
            frame,
            &frame.amplifiers,
            |a| costs.of(self.market.amplifier_offer(a), 1),
            |a, b| self.pairing.amplifier_covers(a, b),
        );
        let mut pairs = Vec::with_capacity(references.len() * amplifiers.len());
        for &(reference, reference_cost) in &references {
            for &(amplifier, amplifier_cost) in &amplifiers {
                if self.pairing.suit(reference.index, amplifier.index) {
                    pairs.push(Pair {
                        error: reference.error + amplifier.error,
                        statics: reference.statics + amplifier.statics,
                        cost: reference_cost + amplifier_cost,
                        reference: reference.index,
                        amplifier: amplifier.index,
                    });
                }
            }
        }
        PairFront::of(pairs, frame.adjustment.is_some())
    }

    /// The cheapest design that passes, when it costs less than `below`.
    #[must_use]
    pub fn cheapest<C: Amount>(&self, costs: &Costs<C>, below: C) -> Option<(C, Pick)> {
        let least = self.least_costs(costs);
        let mut search = Cheapest { ceiling: below, best: None };
        let fronts: Vec<Vec<FrameFront<'_, '_, C>>> =
            self.nets.iter().map(|net| self.frame_fronts(net, costs, below)).collect();
        // Few elements first: their designs lower the ceiling for the many others.
        for count in 1..=self.market.request.network_elements {
            for (net, fronts) in self.nets.iter().zip(&fronts) {
                let least = &least[usize::from(net.adjusted)];
                let mut visitor =
                    CheapestIn { space: self, net, component: costs.component, fronts, search };
                self.walk(net, count, costs, least, Walk::Fronts, &mut visitor);
                search = visitor.search;
            }
        }
        search.best
    }

    /// Least element costs, without and with an adjustment.
    pub(super) fn least_costs<C: Amount>(&self, costs: &Costs<C>) -> [LeastCosts<C>; 2] {
        [false, true].map(|adjusted| LeastCosts::new(self, adjusted, costs))
    }

    /// The frames of a reference voltage that cost less than `below`, the cheapest first.
    fn frame_fronts<C: Amount>(
        &self,
        net: &NetSpace,
        costs: &Costs<C>,
        below: C,
    ) -> Vec<FrameFront<'_, '_, C>> {
        let mut fronts: Vec<FrameFront<'_, '_, C>> = net
            .frames
            .iter()
            .filter_map(|&index| {
                let frame = &self.frames[index];
                let cost = self.frame_cost(frame, costs);
                let pairs = self.pair_front(frame, costs);
                let least = cost + pairs.least()?;
                let index = index as u32;
                (least < below).then_some(FrameFront { index, frame, cost, least, pairs })
            })
            .collect();
        fronts.sort_by(|a, b| {
            let by_cost = a.least.partial_cmp(&b.least).unwrap_or(std::cmp::Ordering::Equal);
            by_cost.then(a.index.cmp(&b.index))
        });
        fronts
    }
}

struct FrameFront<'s, 'a, C> {
    index: u32,
    frame: &'s FrameSpace<'a>,
    cost: C,
    least: C,
    pairs: PairFront<C>,
}

/// The best design so far.
#[derive(Clone, Copy)]
struct Cheapest<C> {
    ceiling: C,
    best: Option<(C, Pick)>,
}

struct CheapestIn<'s, 'a, C> {
    space: &'s OutputSpace<'a>,
    net: &'s NetSpace,
    component: C,
    fronts: &'s [FrameFront<'s, 'a, C>],
    search: Cheapest<C>,
}

impl<C: Amount> NetVisitor<C> for CheapestIn<'_, '_, C> {
    fn ceiling(&self, count: u32) -> Option<C> {
        let least = self.fronts.first()?.least + self.component.times(count);
        (least < self.search.ceiling).then(|| self.search.ceiling - least)
    }

    fn take(&mut self, combo: &Combo, choice: &NetChoice<C>) {
        let network = choice.cost + self.component.times(u32::from(combo.count));
        let systematic = if self.net.adjusted { 0.0 } else { combo.mismatch };
        for front in self.fronts {
            if network + front.least >= self.search.ceiling {
                break;
            }
            let Some(room) = self.space.room(&front.frame.own, systematic) else { continue };
            let fits =
                front.pairs.within(room - choice.error, front.frame.statics_room - choice.statics);
            if let Some(pair) = fits {
                let cost = network + front.cost + pair.cost;
                if cost < self.search.ceiling {
                    let pick = Pick {
                        frame: front.index,
                        reference: pair.reference,
                        amplifier: pair.amplifier,
                        network: PickedNetwork::new(combo, choice.offers),
                    };
                    self.search = Cheapest { ceiling: cost, best: Some((cost, pick)) };
                }
            }
        }
    }
}
