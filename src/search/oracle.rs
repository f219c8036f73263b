//! The pricing oracle: given a cost for every part, the cheapest design of an output that passes.

use super::combos::Combo;
use super::costs::{Amount, Costs};
use super::market::OfferId;
use super::networks::{NetChoice, NetVisitor, Walk};
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
    /// Combination, as an index in the frame's networks.
    pub combo: u32,
    /// Offers of the network's slots.
    pub offers: [OfferId; 3],
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
pub(super) enum PairFront<C> {
    /// Error rising, cost falling: the last that fits is the cheapest.
    Staircase(Vec<Pair<C>>),
    /// Cost rising; a second budget has to be looked at.
    ByCost(Vec<Pair<C>>),
}

impl<C: Amount> PairFront<C> {
    /// The cheapest pair within an error and a static error.
    pub(super) fn within(&self, error: f64, statics: f64) -> Option<&Pair<C>> {
        match self {
            Self::Staircase(pairs) => {
                let fitting = pairs.partition_point(|p| p.error <= error);
                fitting.checked_sub(1).map(|last| &pairs[last])
            }
            Self::ByCost(pairs) => pairs.iter().find(|p| p.error <= error && p.statics <= statics),
        }
    }

    /// The least cost of any pair.
    pub(super) fn least(&self) -> Option<C> {
        match self {
            Self::Staircase(pairs) => pairs.last(),
            Self::ByCost(pairs) => pairs.first(),
        }
        .map(|pair| pair.cost)
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
        let plain = self.pairing.all && !frame.tight;
        for &part in parts {
            let price = cost(part.index);
            if price >= C::HUGE {
                continue;
            }
            let dominates = |(by, by_cost): &(PartIn, C)| {
                *by_cost <= price
                    && (!frame.tight || by.statics <= part.statics)
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
        front_of(pairs, frame.tight)
    }

    /// The cheapest design that passes, when it costs less than `below`.
    #[must_use]
    pub fn cheapest<C: Amount>(&self, costs: &Costs<C>, below: C) -> Option<(C, Pick)> {
        let mut best = None;
        let mut ceiling = below;
        for net in &self.nets {
            let mut search = Cheapest::new(self, net, costs, ceiling);
            if search.frames.is_empty() {
                continue;
            }
            self.walk(net, costs, Walk::Fronts, &mut search);
            if let Some(found) = search.best {
                ceiling = found.0;
                best = Some(found);
            }
        }
        best
    }
}

/// Sorts pairs and drops those that another beats in every way.
pub(super) fn front_of<C: Amount>(mut pairs: Vec<Pair<C>>, tight: bool) -> PairFront<C> {
    let by_cost =
        |a: &Pair<C>, b: &Pair<C>| a.cost.partial_cmp(&b.cost).unwrap_or(std::cmp::Ordering::Equal);
    let by_index =
        |a: &Pair<C>, b: &Pair<C>| (a.reference, a.amplifier).cmp(&(b.reference, b.amplifier));
    if tight {
        pairs.sort_by(|a, b| {
            by_cost(a, b).then(a.error.total_cmp(&b.error)).then_with(|| by_index(a, b))
        });
        let mut kept: Vec<Pair<C>> = Vec::new();
        for pair in pairs {
            if !kept.iter().any(|by| by.error <= pair.error && by.statics <= pair.statics) {
                kept.push(pair);
            }
        }
        return PairFront::ByCost(kept);
    }
    pairs.sort_by(|a, b| {
        a.error.total_cmp(&b.error).then(by_cost(a, b)).then_with(|| by_index(a, b))
    });
    let mut kept: Vec<Pair<C>> = Vec::new();
    for pair in pairs {
        if kept.last().is_none_or(|last| pair.cost < last.cost) {
            kept.push(pair);
        }
    }
    PairFront::Staircase(kept)
}

struct FrameFront<'s, 'a, C> {
    index: u32,
    frame: &'s FrameSpace<'a>,
    cost: C,
    least: C,
    pairs: PairFront<C>,
}

struct Cheapest<'s, 'a, C> {
    space: &'s OutputSpace<'a>,
    component: C,
    /// By least cost.
    frames: Vec<FrameFront<'s, 'a, C>>,
    ceiling: C,
    best: Option<(C, Pick)>,
    adjusted: bool,
}

impl<'s, 'a, C: Amount> Cheapest<'s, 'a, C> {
    fn new(space: &'s OutputSpace<'a>, net: &NetSpace, costs: &Costs<C>, ceiling: C) -> Self {
        let mut frames: Vec<FrameFront<'s, 'a, C>> = net
            .frames
            .iter()
            .filter_map(|&index| {
                let frame = &space.frames[index];
                let cost = space.frame_cost(frame, costs);
                let pairs = space.pair_front(frame, costs);
                let least = cost + pairs.least()?;
                (least < ceiling).then_some(FrameFront {
                    index: index as u32,
                    frame,
                    cost,
                    least,
                    pairs,
                })
            })
            .collect();
        frames.sort_by(|a, b| {
            a.least
                .partial_cmp(&b.least)
                .unwrap_or(std::cmp::Ordering::Equal)
                .then(a.index.cmp(&b.index))
        });
        Self {
            space,
            component: costs.component,
            frames,
            ceiling,
            best: None,
            adjusted: net.adjusted,
        }
    }
}

impl<C: Amount> NetVisitor<C> for Cheapest<'_, '_, C> {
    fn ceiling(&self, combo: &Combo) -> Option<C> {
        let least = self.frames.first()?.least + self.component.times(u32::from(combo.count));
        (least < self.ceiling).then(|| self.ceiling - least)
    }

    fn take(&mut self, combo: &Combo, choice: &NetChoice<C>) {
        let network = choice.cost + self.component.times(u32::from(combo.count));
        let systematic = if self.adjusted { 0.0 } else { combo.mismatch };
        for front in &self.frames {
            if network + front.least >= self.ceiling {
                break;
            }
            let Some(room) = self.space.room(&front.frame.own, systematic) else { continue };
            let fits =
                front.pairs.within(room - choice.error, front.frame.statics_room - choice.statics);
            if let Some(pair) = fits {
                let cost = network + front.cost + pair.cost;
                if cost < self.ceiling {
                    self.ceiling = cost;
                    let pick = Pick {
                        frame: front.index,
                        reference: pair.reference,
                        amplifier: pair.amplifier,
                        combo: choice.combo,
                        offers: choice.offers,
                    };
                    self.best = Some((cost, pick));
                }
            }
        }
    }
}
