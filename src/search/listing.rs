//! What is left of an output's designs once most are proved useless: explicit lists of pairs and
//! networks a frame, small enough to be gone through again and again.

use crate::catalog::Kind;

use super::combos::Combo;
use super::costs::{Amount, Costs};
use super::market::OfferId;
use super::networks::{NetChoice, NetVisitor, Walk};
use super::oracle::{Pair, PairFront, Pick, PickedNetwork};
use super::space::{NetSpace, OutputSpace};

/// A reference and an amplifier.
#[derive(Clone, Copy, Debug)]
pub struct ListedPair {
    /// Reference.
    pub reference: u32,
    /// Amplifier.
    pub amplifier: u32,
    /// Sum of their errors.
    pub error: f64,
    /// Sum of their static errors.
    pub statics: f64,
}

/// A network within a frame.
#[derive(Clone, Copy, Debug)]
pub struct ListedNetwork {
    /// Its connection and offers.
    pub network: PickedNetwork,
    /// The largest error of a pair beside it.
    pub room: f64,
    /// The largest static error of a pair beside it.
    pub statics_room: f64,
}

/// The lists of one frame.
#[derive(Clone, Debug)]
pub struct ListedFrame {
    /// The frame, as an index in the space.
    pub frame: u32,
    /// Pairs left.
    pub pairs: Vec<ListedPair>,
    /// Networks left.
    pub networks: Vec<ListedNetwork>,
}

/// The designs of one output that are left, as pairs and networks a frame.
#[derive(Clone, Debug)]
pub struct Listing<'s, 'a> {
    /// Where they come from.
    pub space: &'s OutputSpace<'a>,
    /// The frames that have any.
    pub frames: Vec<ListedFrame>,
}

impl<'a> OutputSpace<'a> {
    /// Lists every design that costs at most `ceiling` (and parts of dearer ones). `None` when
    /// more than `most_rows` pairs and networks would be listed.
    #[must_use]
    pub fn listing<C: Amount>(
        &self,
        costs: &Costs<C>,
        ceiling: C,
        most_rows: usize,
    ) -> Option<Listing<'_, 'a>> {
        let mut frames: Vec<ListedFrame> = Vec::new();
        let mut rows = 0;
        let least = self.least_costs(costs);
        for net in &self.nets {
            let mut collector = Collector::new(self, net, costs, ceiling, most_rows - rows);
            for count in 1..=self.market.request.network_elements {
                let least = &least[usize::from(net.adjusted)];
                self.walk(net, count, costs, least, Walk::All, &mut collector);
            }
            if collector.too_many {
                return None;
            }
            let networks = collector.networks;
            for (front, networks) in collector.frames.into_iter().zip(networks) {
                let Some(least_network) =
                    networks.iter().map(|n| network_cost(costs, n)).reduce(smaller)
                else {
                    continue;
                };
                let pairs =
                    self.pairs_below(front.index, costs, ceiling, front.cost + least_network);
                rows += networks.len() + pairs.len();
                if rows > most_rows {
                    return None;
                }
                frames.push(ListedFrame { frame: front.index as u32, pairs, networks });
            }
        }
        Some(Listing { space: self, frames }.reduced(costs, ceiling))
    }

    /// Pairs of a frame that cost at most `ceiling` on top of `besides`.
    fn pairs_below<C: Amount>(
        &self,
        index: usize,
        costs: &Costs<C>,
        ceiling: C,
        besides: C,
    ) -> Vec<ListedPair> {
        let frame = &self.frames[index];
        let amplifiers: Vec<_> = frame
            .amplifiers
            .iter()
            .map(|a| (a, costs.of(self.market.amplifier_offer(a.index), 1)))
            .collect();
        let mut pairs = Vec::new();
        for r in &frame.references {
            let before = besides + costs.of(self.market.reference_offer(r.index), 1);
            if before > ceiling {
                continue;
            }
            for &(a, cost) in &amplifiers {
                if before + cost <= ceiling && self.pairing.suit(r.index, a.index) {
                    pairs.push(ListedPair {
                        reference: r.index,
                        amplifier: a.index,
                        error: r.error + a.error,
                        statics: r.statics + a.statics,
                    });
                }
            }
        }
        pairs
    }
}

fn smaller<C: Amount>(a: C, b: C) -> C {
    if b < a { b } else { a }
}

fn network_cost<C: Amount>(costs: &Costs<C>, network: &ListedNetwork) -> C {
    let components = costs.component.times(network.network.offers().len() as u32);
    network.network.uses().fold(components, |sum, (offer, count)| sum + costs.of(offer, count))
}

struct CollectedFrame<C> {
    index: usize,
    cost: C,
    pairs: PairFront<C>,
    least: C,
}

struct Collector<'s, 'a, C> {
    space: &'s OutputSpace<'a>,
    component: C,
    ceiling: C,
    adjusted: bool,
    frames: Vec<CollectedFrame<C>>,
    networks: Vec<Vec<ListedNetwork>>,
    left: usize,
    too_many: bool,
}

impl<'s, 'a, C: Amount> Collector<'s, 'a, C> {
    fn new(
        space: &'s OutputSpace<'a>,
        net: &NetSpace,
        costs: &Costs<C>,
        ceiling: C,
        left: usize,
    ) -> Self {
        let frames: Vec<_> = net
            .frames
            .iter()
            .filter_map(|&index| {
                let frame = &space.frames[index];
                let cost = space.frame_cost(frame, costs);
                let pairs = space.pair_front(frame, costs);
                let least = cost + pairs.least()?;
                (least <= ceiling).then_some(CollectedFrame { index, cost, pairs, least })
            })
            .collect();
        Self {
            space,
            component: costs.component,
            ceiling,
            adjusted: net.adjusted,
            networks: vec![Vec::new(); frames.len()],
            frames,
            left,
            too_many: false,
        }
    }
}

impl<C: Amount> NetVisitor<C> for Collector<'_, '_, C> {
    fn ceiling(&self, count: u32) -> Option<C> {
        if self.too_many {
            return None;
        }
        let least = self.frames.iter().map(|f| f.least).reduce(smaller)?;
        let least = least + self.component.times(count);
        (least <= self.ceiling).then(|| self.ceiling - least)
    }

    fn take(&mut self, combo: &Combo, choice: &NetChoice<C>) {
        let network = choice.cost + self.component.times(u32::from(combo.count));
        let systematic = if self.adjusted { 0.0 } else { combo.mismatch };
        for (front, list) in self.frames.iter().zip(&mut self.networks) {
            if network + front.least > self.ceiling {
                continue;
            }
            let frame = &self.space.frames[front.index];
            let Some(room) = self.space.room(&frame.own, systematic) else { continue };
            let (room, statics_room) = (room - choice.error, frame.statics_room - choice.statics);
            let fits = front
                .pairs
                .within(room, statics_room)
                .is_some_and(|pair| network + front.cost + pair.cost <= self.ceiling);
            if fits {
                if self.left == 0 {
                    self.too_many = true;
                    return;
                }
                self.left -= 1;
                let network = PickedNetwork::new(combo, choice.offers);
                list.push(ListedNetwork { network, room, statics_room });
            }
        }
    }
}

/// One listed frame with its rows priced.
struct Priced<C> {
    cost: C,
    pairs: Vec<C>,
    networks: Vec<C>,
}

impl Listing<'_, '_> {
    /// How many pairs and networks are listed.
    #[must_use]
    pub fn rows(&self) -> usize {
        self.frames.iter().map(|f| f.pairs.len() + f.networks.len()).sum()
    }

    /// The listing without the designs that use an offer.
    #[must_use]
    pub fn without(&self, offer: OfferId) -> Self {
        self.filtered(offer, false)
    }

    /// The listing with only the designs that use an offer.
    #[must_use]
    pub fn with(&self, offer: OfferId) -> Self {
        self.filtered(offer, true)
    }

    /// Whether some listed designs use an offer and others do not.
    #[must_use]
    pub fn divides(&self, offer: OfferId) -> bool {
        let [with, without] = [self.with(offer), self.without(offer)];
        !with.frames.is_empty() && !without.frames.is_empty()
    }

    fn filtered(&self, offer: OfferId, used: bool) -> Self {
        let market = self.space.market;
        let kind = market.kind(offer);
        let frames = self.frames.iter().filter_map(|listed| {
            let lift = self.space.frames[listed.frame as usize].lift;
            let keeps_frame = kind != Kind::Lift
                || lift.is_some_and(|(lift, _)| market.lift_offer(lift) == offer) == used;
            if !keeps_frame {
                return None;
            }
            let mut kept = listed.clone();
            match kind {
                Kind::Reference => {
                    kept.pairs.retain(|p| (market.reference_offer(p.reference) == offer) == used)
                }
                Kind::Amplifier => {
                    kept.pairs.retain(|p| (market.amplifier_offer(p.amplifier) == offer) == used)
                }
                Kind::Resistor => {
                    kept.networks.retain(|n| n.network.offers().contains(&offer) == used)
                }
                Kind::Lift | Kind::Adjustment => {}
            }
            let any = !kept.pairs.is_empty() && !kept.networks.is_empty();
            any.then_some(kept)
        });
        Self { space: self.space, frames: frames.collect() }
    }

    fn price<C: Amount>(&self, listed: &ListedFrame, costs: &Costs<C>) -> Priced<C> {
        let frame = &self.space.frames[listed.frame as usize];
        Priced {
            cost: self.space.frame_cost(frame, costs),
            pairs: listed
                .pairs
                .iter()
                .map(|p| self.space.pair_cost(costs, p.reference, p.amplifier))
                .collect(),
            networks: listed.networks.iter().map(|n| network_cost(costs, n)).collect(),
        }
    }

    fn is_adjusted(&self, listed: &ListedFrame) -> bool {
        self.space.frames[listed.frame as usize].adjustment.is_some()
    }

    fn front<C: Amount>(&self, listed: &ListedFrame, priced: &Priced<C>) -> PairFront<C> {
        let pairs = listed
            .pairs
            .iter()
            .zip(&priced.pairs)
            .filter(|&(_, &cost)| cost < C::HUGE)
            .map(|(p, &cost)| Pair {
                error: p.error,
                statics: p.statics,
                cost,
                reference: p.reference,
                amplifier: p.amplifier,
            })
            .collect();
        PairFront::of(pairs, self.is_adjusted(listed))
    }

    /// The cheapest listed design, when it costs less than `below`.
    #[must_use]
    pub fn cheapest<C: Amount>(&self, costs: &Costs<C>, below: C) -> Option<(C, Pick)> {
        let mut best: Option<(C, Pick)> = None;
        let mut ceiling = below;
        for listed in &self.frames {
            let priced = self.price(listed, costs);
            let front = self.front(listed, &priced);
            let Some(least) = front.least() else { continue };
            for (network, &cost) in listed.networks.iter().zip(&priced.networks) {
                let besides = priced.cost + cost;
                if besides + least >= ceiling {
                    continue;
                }
                if let Some(pair) = front.within(network.room, network.statics_room) {
                    let whole = besides + pair.cost;
                    if whole < ceiling {
                        ceiling = whole;
                        let pick = Pick {
                            frame: listed.frame,
                            reference: pair.reference,
                            amplifier: pair.amplifier,
                            network: network.network,
                        };
                        best = Some((whole, pick));
                    }
                }
            }
        }
        best
    }

    /// The listing without the pairs and networks through which every design costs more than
    /// `ceiling`.
    #[must_use]
    pub fn reduced<C: Amount>(&self, costs: &Costs<C>, ceiling: C) -> Self {
        let frames = self
            .frames
            .iter()
            .filter_map(|listed| {
                let priced = self.price(listed, costs);
                let front = self.front(listed, &priced);
                let networks: Vec<(ListedNetwork, C)> = listed
                    .networks
                    .iter()
                    .zip(&priced.networks)
                    .filter(|(n, cost)| {
                        front
                            .within(n.room, n.statics_room)
                            .is_some_and(|p| priced.cost + **cost + p.cost <= ceiling)
                    })
                    .map(|(n, &cost)| (*n, cost))
                    .collect();
                let beside = NetworkFront::new(&networks, self.is_adjusted(listed));
                let pairs: Vec<ListedPair> = listed
                    .pairs
                    .iter()
                    .zip(&priced.pairs)
                    .filter(|(p, cost)| {
                        beside
                            .beside(p.error, p.statics)
                            .is_some_and(|least| priced.cost + **cost + least <= ceiling)
                    })
                    .map(|(p, _)| *p)
                    .collect();
                let networks = networks.into_iter().map(|(n, _)| n).collect();
                (!pairs.is_empty()).then_some(ListedFrame { frame: listed.frame, pairs, networks })
            })
            .collect();
        Self { space: self.space, frames }
    }
}

/// The cheapest network beside a pair.
struct NetworkFront<C> {
    /// Room falling, the least cost so far.
    staircase: Vec<(f64, C)>,
    /// Cost rising, with both rooms; for pairs whose static error has to be looked at.
    by_cost: Vec<(f64, f64, C)>,
    /// Every network has room for this static error.
    least_room: f64,
}

impl<C: Amount> NetworkFront<C> {
    fn new(networks: &[(ListedNetwork, C)], adjusted: bool) -> Self {
        let order = |a: &C, b: &C| a.partial_cmp(b).unwrap_or(std::cmp::Ordering::Equal);
        let mut by_cost: Vec<_> = if adjusted {
            networks.iter().map(|(n, c)| (n.room, n.statics_room, *c)).collect()
        } else {
            Vec::new()
        };
        by_cost.sort_by(|a, b| order(&a.2, &b.2));
        let mut staircase: Vec<_> = networks.iter().map(|(n, c)| (n.room, *c)).collect();
        staircase.sort_by(|a, b| b.0.total_cmp(&a.0).then(order(&a.1, &b.1)));
        let mut least: Option<C> = None;
        for entry in &mut staircase {
            let so_far = least.map_or(entry.1, |l| smaller(l, entry.1));
            least = Some(so_far);
            entry.1 = so_far;
        }
        let least_room = networks.iter().map(|(n, _)| n.statics_room).fold(f64::INFINITY, f64::min);
        Self { staircase, by_cost, least_room }
    }

    fn beside(&self, error: f64, statics: f64) -> Option<C> {
        if statics <= self.least_room {
            let fitting = self.staircase.partition_point(|&(room, _)| room >= error);
            return fitting.checked_sub(1).map(|last| self.staircase[last].1);
        }
        self.by_cost
            .iter()
            .find(|&&(room, statics_room, _)| room >= error && statics_room >= statics)
            .map(|&(_, _, cost)| cost)
    }
}
