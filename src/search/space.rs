//! All designs of one output, as flat arrays of error figures.
//!
//! The frames (reference voltage, lift, adjustment) stand outside; within a frame a design passes
//! when the errors of reference, amplifier and network fit one budget (and, with an adjustment,
//! their static errors fit its range), and reference and amplifier suit each other.

use rayon::prelude::*;

use crate::circuit::{Connection, Contribution, Frame, LiftStack};
use crate::quantity::{Exact, Volts};
use crate::request::{Budget, Output, Unstated};

use super::combos::{Combo, Goal};
use super::errors::{TypeErrors, type_errors};
use super::market::{Market, OfferId, distinct_voltages};
use super::networks::ValueTable;
use super::pairing::Pairing;

/// A reference or amplifier within a frame.
#[derive(Clone, Copy, Debug)]
pub struct PartIn {
    /// Index in the market's list of its kind.
    pub index: u32,
    /// What it adds to the budget (ppm, or ppm² for rss and gum).
    pub error: f64,
    /// What it adds to the static sum, ppm.
    pub statics: f64,
}

/// One frame of an output.
#[derive(Debug)]
pub struct FrameSpace<'a> {
    /// The circuit's view of it.
    pub frame: Frame<'a>,
    /// Lift (index in the market) and count.
    pub lift: Option<(u32, u32)>,
    /// Adjustment (index in the market).
    pub adjustment: Option<u32>,
    /// Index of its networks in [`OutputSpace::nets`].
    pub net: usize,
    /// What the frame itself adds.
    pub own: Contribution,
    /// Static ppm that the parts may have together; infinite without an adjustment.
    pub statics_room: f64,
    /// The most that a reference and an amplifier of the frame have together.
    pub pair_statics: f64,
    /// References that stand in this frame, by error.
    pub references: Vec<PartIn>,
    /// Amplifiers that stand in this frame, by error.
    pub amplifiers: Vec<PartIn>,
}

/// The networks of all frames with one reference voltage, with or without adjustment.
#[derive(Debug)]
pub struct NetSpace {
    /// Whether the frames have an adjustment.
    pub adjusted: bool,
    /// How near to R* a network must come.
    pub goal: Goal,
    /// Frames that use these networks.
    pub frames: Vec<usize>,
    /// Least systematic error of a frame, in ppm.
    own_systematic: f64,
    /// Least error of a frame with its best parts, in ppm or ppm².
    besides: f64,
}

/// All designs of one output.
#[derive(Debug)]
pub struct OutputSpace<'a> {
    /// The market.
    pub market: &'a Market<'a>,
    /// Which reference suits which amplifier.
    pub pairing: &'a Pairing,
    /// Element errors by type, without and with an adjustment.
    pub errors: &'a [Vec<TypeErrors>; 2],
    /// The values that networks are made of.
    pub values: &'a ValueTable,
    /// The output.
    pub output: &'a Output,
    /// Budget method.
    pub method: Budget,
    /// Largest total, the contract's tolerance included.
    pub most_ppm: f64,
    /// Frames in which some reference and some amplifier stand.
    pub frames: Vec<FrameSpace<'a>>,
    /// Their networks.
    pub nets: Vec<NetSpace>,
}

/// What all outputs of a request have in common.
#[derive(Debug)]
pub struct Common {
    /// Which reference suits which amplifier.
    pub pairing: Pairing,
    /// Element errors by type, without and with an adjustment.
    pub errors: [Vec<TypeErrors>; 2],
    /// The values that networks are made of.
    pub values: ValueTable,
    voltages: Vec<Exact<Volts>>,
}

impl Common {
    /// Works out what does not depend on the output.
    #[must_use]
    pub fn new(market: &Market<'_>) -> Self {
        // Pairs and element errors are asked for in any frame, with and without an adjustment.
        let request = market.request;
        let frame = |adjustment| {
            request
                .outputs
                .first()
                .and_then(|o| Frame::new(request, o, Volts::new(1.0), None, adjustment).ok())
        };
        let plain = frame(None);
        let adjusted = market.adjustments.first().and_then(|a| frame(Some(a.0)));
        // Without adjustments nothing asks for the adjusted errors; they are then the plain ones.
        let errors = [plain.as_ref(), adjusted.as_ref().or(plain.as_ref())]
            .map(|frame| frame.map_or_else(Vec::new, |f| type_errors(market, f)));
        let (listed, made_only) = (0..market.values.len() as u32)
            .partition(|&v| market.stocked(v).iter().any(|s| !s.made_to_order));
        Self {
            pairing: plain.as_ref().map_or_else(Pairing::default, |f| Pairing::new(market, f)),
            errors,
            values: ValueTable {
                ohms: market.values.iter().map(|v| v.value().value()).collect(),
                listed,
                made_only,
            },
            voltages: distinct_voltages(&market.references),
        }
    }
}

/// The relative tolerance with which a bound holds.
const TOLERANCE: f64 = 1e-9;

impl<'a> OutputSpace<'a> {
    /// Evaluates every offer once in every frame of an output. `most_ppm` is the largest total of
    /// interest: the output's accuracy, or more to find how far off an impossible one is.
    #[must_use]
    pub fn new(
        market: &'a Market<'a>,
        common: &'a Common,
        output: &'a Output,
        most_ppm: f64,
    ) -> Self {
        let mut space = Self {
            market,
            pairing: &common.pairing,
            errors: &common.errors,
            values: &common.values,
            output,
            method: market.request.budget,
            most_ppm: most_ppm / (1.0 - TOLERANCE),
            frames: Vec::new(),
            nets: Vec::new(),
        };
        let mut outlines = Vec::new();
        for &voltage in &common.voltages {
            for lift in lift_choices(market) {
                for adjustment in
                    std::iter::once(None).chain((0..market.adjustments.len() as u32).map(Some))
                {
                    outlines.push((voltage.value(), lift, adjustment));
                }
            }
        }
        let frames: Vec<FrameSpace<'a>> = outlines
            .into_par_iter()
            .filter_map(|(voltage, lift, adjustment)| space.frame(voltage, lift, adjustment))
            .collect();
        space.attach_networks(frames);
        space
    }

    /// One frame with the parts that stand in it, or none.
    fn frame(
        &self,
        voltage: Volts,
        lift: Option<(u32, u32)>,
        adjustment: Option<u32>,
    ) -> Option<FrameSpace<'a>> {
        let market = self.market;
        let stack = lift.map(|(of, count)| LiftStack { of: market.lifts[of as usize], count });
        let step = adjustment.map(|index| market.adjustments[index as usize].0);
        let frame = Frame::new(market.request, self.output, voltage, stack, step).ok()?;
        if !frame.own_failures().is_empty() {
            return None;
        }
        let refuse = market.request.rules.unstated == Unstated::Reject;
        let own = frame.own_contribution();
        if own.unstated && refuse {
            return None;
        }
        let statics_room =
            step.map_or(f64::INFINITY, |step| step.range.value() / (1.0 - TOLERANCE) - own.statics);
        let room = self.room(&own, 0.0)?;
        let keep = |index: usize, c: Contribution| {
            let fits = c.random <= room && c.statics <= statics_room && !(c.unstated && refuse);
            fits.then_some(PartIn { index: index as u32, error: c.random, statics: c.statics })
        };
        let mut references: Vec<PartIn> = market
            .references
            .iter()
            .enumerate()
            .filter(|(_, r)| r.output.value() == voltage)
            .filter(|(_, r)| frame.reference_failures(r).is_empty())
            .filter_map(|(index, r)| keep(index, frame.reference_contribution(r)))
            .collect();
        if references.is_empty() {
            return None;
        }
        let mut amplifiers: Vec<PartIn> = market
            .amplifiers
            .iter()
            .enumerate()
            .filter(|(_, a)| frame.amplifier_failures(a).is_empty())
            .filter_map(|(index, a)| keep(index, frame.amplifier_contribution(a)))
            .collect();
        if amplifiers.is_empty() {
            return None;
        }
        let by_error =
            |a: &PartIn, b: &PartIn| a.error.total_cmp(&b.error).then(a.index.cmp(&b.index));
        references.sort_by(by_error);
        amplifiers.sort_by(by_error);
        let most = |parts: &[PartIn]| parts.iter().map(|p| p.statics).fold(0.0, f64::max);
        Some(FrameSpace {
            frame,
            lift,
            adjustment,
            net: usize::MAX,
            own,
            statics_room,
            pair_statics: most(&references) + most(&amplifiers),
            references,
            amplifiers,
        })
    }

    /// What is left of the budget beside a frame's own share and a network's systematic error:
    /// ppm, or ppm² for rss and gum. `None` when nothing is.
    #[must_use]
    pub fn room(&self, own: &Contribution, systematic: f64) -> Option<f64> {
        let room = match self.method {
            Budget::WorstCase => self.most_ppm - own.random - systematic,
            Budget::Rss | Budget::Gum { .. } => {
                let linear = self.most_ppm - own.systematic - systematic;
                if linear < 0.0 {
                    return None;
                }
                linear * linear - own.random
            }
        };
        (room >= 0.0).then_some(room)
    }

    /// Says for every reference voltage how far off R* the slackest frame bears a network.
    fn attach_networks(&mut self, mut frames: Vec<FrameSpace<'a>>) {
        for (index, frame) in frames.iter_mut().enumerate() {
            let (vref, adjusted) = (frame.frame.vref().value(), frame.adjustment.is_some());
            let most_ppm = self.mismatch_room(frame);
            let known =
                self.nets.iter().position(|n| n.goal.vref == vref && n.adjusted == adjusted);
            let at = known.unwrap_or_else(|| {
                let target_ohms = vref / self.output.current.value().value();
                let goal = Goal { vref, target_ohms, most_ppm };
                self.nets.push(NetSpace {
                    adjusted,
                    goal,
                    frames: Vec::new(),
                    own_systematic: f64::INFINITY,
                    besides: f64::INFINITY,
                });
                self.nets.len() - 1
            });
            let net = &mut self.nets[at];
            net.goal.most_ppm = net.goal.most_ppm.max(most_ppm);
            net.own_systematic = net.own_systematic.min(frame.own.systematic);
            let parts =
                least(&frame.references, |p| p.error) + least(&frame.amplifiers, |p| p.error);
            net.besides = net.besides.min(frame.own.random + parts);
            net.frames.push(index);
            frame.net = at;
        }
        self.frames = frames;
    }

    /// Values joined to a network: shares, volts, watts and mismatch.
    #[must_use]
    pub fn combination(&self, net: &NetSpace, connection: Connection, values: &[u32]) -> Combo {
        let mut ohms = [(0, 0.0); 3];
        for (place, &value) in ohms.iter_mut().zip(values) {
            *place = (value, self.values.ohms[value as usize]);
        }
        Combo::new(connection, &ohms[..values.len()], net.goal.vref, net.goal.target_ohms)
    }

    /// The value combination of a network.
    #[must_use]
    pub fn combo_of(&self, net: &NetSpace, connection: Connection, offers: &[OfferId]) -> Combo {
        let mut values = [0; 3];
        for (place, &offer) in values.iter_mut().zip(offers) {
            *place = self.market.resistor(offer).0;
        }
        self.combination(net, connection, &values[..offers.len()])
    }

    /// The largest error that a network of this systematic error can have in any frame, beside
    /// the best parts, for a total of at most `most_ppm` or the output's own; below zero when none
    /// can.
    #[must_use]
    pub fn error_room(&self, net: &NetSpace, systematic: f64, most_ppm: f64) -> f64 {
        let most_ppm = self.most_ppm.min(most_ppm);
        let room = match self.method {
            Budget::WorstCase => most_ppm - systematic - net.besides,
            Budget::Rss | Budget::Gum { .. } => {
                let linear = most_ppm - systematic - net.own_systematic;
                if linear < 0.0 { -1.0 } else { linear * linear - net.besides }
            }
        };
        // A hair for rounding: this leaves out only what cannot pass.
        room + 1e-12 * (room.abs() + net.besides)
    }

    /// The largest mismatch that can pass in a frame beside its best parts, in ppm.
    fn mismatch_room(&self, frame: &FrameSpace<'_>) -> f64 {
        let least = |parts: &[PartIn], of: fn(&PartIn) -> f64| {
            parts.iter().map(of).fold(f64::INFINITY, f64::min)
        };
        let parts =
            |of: fn(&PartIn) -> f64| least(&frame.references, of) + least(&frame.amplifiers, of);
        if frame.adjustment.is_some() {
            return frame.statics_room - parts(|p| p.statics);
        }
        let errors = parts(|p| p.error);
        match self.method {
            Budget::WorstCase => self.most_ppm - frame.own.random - errors,
            Budget::Rss | Budget::Gum { .. } => {
                self.most_ppm - frame.own.systematic - (frame.own.random + errors).sqrt()
            }
        }
    }
}

fn least(parts: &[PartIn], of: fn(&PartIn) -> f64) -> f64 {
    parts.iter().map(of).fold(f64::INFINITY, f64::min)
}

fn lift_choices(market: &Market<'_>) -> Vec<Option<(u32, u32)>> {
    let mut choices = vec![None];
    for (index, lift) in market.lifts.iter().enumerate() {
        choices.extend((1..=lift.in_series_max).map(|count| Some((index as u32, count))));
    }
    choices
}
