//! The most accurate design of an output, whatever it costs.

use crate::circuit::total_of;
use crate::request::Budget;

use super::combos::Combo;
use super::costs::Costs;
use super::errors::network_errors;
use super::networks::{NetChoice, NetVisitor, Walk};
use super::oracle::{Pair, Pick, PickedNetwork};
use super::space::{FrameSpace, NetSpace, OutputSpace, PartIn};

impl OutputSpace<'_> {
    /// The design with the smallest total, and that total in ppm.
    #[must_use]
    pub fn most_accurate(&self) -> Option<(f64, Pick)> {
        let market = self.market;
        let free = Costs::proportional(
            market,
            vec![0i64; market.offers()],
            0,
            vec![0; market.adjustments.len()],
        );
        let mut best = None;
        let least = self.least_costs(&free);
        for count in 1..=market.request.network_elements {
            for net in &self.nets {
                let mut search = MostAccurate::new(self, net, best);
                let least = &least[usize::from(net.adjusted)];
                self.walk(net, count, &free, least, Walk::Fronts, &mut search);
                best = search.best;
            }
        }
        best
    }

    /// The total of a design, from the figures that the search works with.
    #[must_use]
    pub fn total_of(&self, pick: &Pick) -> f64 {
        let frame = &self.frames[pick.frame as usize];
        let net = &self.nets[frame.net];
        let offers = pick.network.offers();
        let combo = self.combo_of(net, pick.network.connection, offers);
        let types: Vec<u32> = offers.iter().map(|&offer| self.market.resistor(offer).1).collect();
        let errors = &self.errors[usize::from(net.adjusted)];
        let (network, _) = network_errors(errors, self.method, &combo, &types);
        let error = |parts: &[PartIn], index: u32| {
            parts.iter().find(|p| p.index == index).map_or(f64::NAN, |p| p.error)
        };
        let parts =
            error(&frame.references, pick.reference) + error(&frame.amplifiers, pick.amplifier);
        let systematic = if net.adjusted { 0.0 } else { combo.mismatch };
        self.total(frame, parts + network, systematic)
    }

    /// The total of a design from the sums that the search works with.
    #[must_use]
    pub fn total(&self, frame: &FrameSpace<'_>, random: f64, systematic: f64) -> f64 {
        match self.method {
            Budget::WorstCase => frame.own.random + random + systematic,
            method => {
                total_of(method, frame.own.random + random, frame.own.systematic + systematic)
                    .value()
            }
        }
    }
}

struct MostAccurate<'s, 'a> {
    space: &'s OutputSpace<'a>,
    adjusted: bool,
    /// Frames with their pairs, error rising.
    frames: Vec<(u32, &'s FrameSpace<'a>, Vec<Pair<i64>>)>,
    best: Option<(f64, Pick)>,
}

impl<'s, 'a> MostAccurate<'s, 'a> {
    fn new(space: &'s OutputSpace<'a>, net: &NetSpace, best: Option<(f64, Pick)>) -> Self {
        let frames = net
            .frames
            .iter()
            .map(|&index| {
                let frame = &space.frames[index];
                let front = |parts, covers: &dyn Fn(u32, u32) -> bool| {
                    space.part_front(frame, parts, |_| 0i64, covers)
                };
                let references =
                    front(&frame.references, &|a, b| space.pairing.reference_covers(a, b));
                let amplifiers =
                    front(&frame.amplifiers, &|a, b| space.pairing.amplifier_covers(a, b));
                let mut pairs = Vec::new();
                for (r, _) in &references {
                    for (a, _) in &amplifiers {
                        if space.pairing.suit(r.index, a.index) {
                            pairs.push(Pair {
                                error: r.error + a.error,
                                statics: r.statics + a.statics,
                                cost: 0,
                                reference: r.index,
                                amplifier: a.index,
                            });
                        }
                    }
                }
                pairs.sort_by(|a, b| a.error.total_cmp(&b.error));
                (index as u32, frame, pairs)
            })
            .collect();
        Self { space, adjusted: net.adjusted, frames, best }
    }
}

impl NetVisitor<i64> for MostAccurate<'_, '_> {
    fn ceiling(&self, _count: u32) -> Option<i64> {
        Some(0)
    }

    fn most_total(&self) -> f64 {
        self.best.map_or(f64::INFINITY, |(best, _)| best)
    }

    fn take(&mut self, combo: &Combo, choice: &NetChoice<i64>) {
        let systematic = if self.adjusted { 0.0 } else { combo.mismatch };
        for (index, frame, pairs) in &self.frames {
            let room = frame.statics_room - choice.statics;
            let Some(pair) = pairs.iter().find(|p| p.statics <= room) else { continue };
            let total = self.space.total(frame, pair.error + choice.error, systematic);
            if self.best.is_none_or(|(best, _)| total < best) {
                let pick = Pick {
                    frame: *index,
                    reference: pair.reference,
                    amplifier: pair.amplifier,
                    network: PickedNetwork::new(combo, choice.offers),
                };
                self.best = Some((total, pick));
            }
        }
    }
}
