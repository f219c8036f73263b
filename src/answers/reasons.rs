//! Why an output has no design: what removed the offers, and the most accurate design that fits
//! the operating window.

use std::collections::{BTreeMap, BTreeSet};

use crate::catalog::Kind;
use crate::circuit::{Frame, LiftStack, LimitId};
use crate::quantity::{Ppm, Volts};
use crate::request::Output;
use crate::search::{Common, Market, OutputSpace};

use super::choice::{Cause, Reasons, Relaxation, Removed};
use super::design::{chosen, design_of};

/// Beyond this no total is worth looking for.
const HOPELESS_PPM: f64 = 1e7;

/// Works out why an output has no design.
#[must_use]
pub(super) fn reasons(market: &Market<'_>, common: &Common, output: &Output) -> Reasons {
    let mut removed: Vec<Removed> = market
        .removed
        .iter()
        .map(|(&(kind, rule), &offers)| Removed { kind, cause: Cause::Rule(rule), offers })
        .collect();
    removed.extend(by_limits(market, output));
    removed.sort_by(|a, b| a.kind.cmp(&b.kind).then_with(|| a.cause.cmp(&b.cause)));
    let best = most_accurate(market, common, output);
    let relaxations = best
        .iter()
        .map(|(ppm, _)| Relaxation {
            figure: format!("outputs[{}].accuracy", output.name),
            from: output.accuracy.value(),
            to: ppm.value(),
        })
        .collect();
    Reasons { removed, best, relaxations }
}

/// The most accurate design within the window. The search is widened until the best total lies
/// inside what was searched: a network farther off R* than that cannot be better.
fn most_accurate(
    market: &Market<'_>,
    common: &Common,
    output: &Output,
) -> Option<(Ppm, super::choice::ChosenDesign)> {
    let mut most = output.accuracy.value().max(1.0);
    while most < HOPELESS_PPM {
        most *= 4.0;
        let space = OutputSpace::new(market, common, output, most);
        if let Some((total, pick)) = space.most_accurate()
            && total <= most
        {
            let design = design_of(&space, &pick);
            let exact = crate::circuit::evaluate(market.request, output, &design).ok()?;
            return Some((exact.total, chosen(&design)));
        }
    }
    None
}

/// Counts the offers of each kind that no partner leaves passing, by the limit that stops them:
/// one that fails with every partner, or, where none does, the first that fails beside the most
/// favourable partner.
fn by_limits(market: &Market<'_>, output: &Output) -> Vec<Removed> {
    let mut counts: BTreeMap<(Kind, LimitId), u64> = BTreeMap::new();
    let mut note = |kind: Kind, failures: Option<LimitId>| {
        if let Some(limit) = failures {
            *counts.entry((kind, limit)).or_default() += 1;
        }
    };
    let stacks = stacks(market);
    let voltages: BTreeSet<u64> =
        market.references.iter().map(|r| r.output.value().value().to_bits()).collect();
    let frame =
        |volts: f64, stack| Frame::new(market.request, output, Volts::new(volts), stack, None);
    let frames_at = |volts: f64| -> Vec<Frame<'_>> {
        stacks
            .iter()
            .filter_map(|&stack| frame(volts, stack).ok())
            .filter(|frame| frame.own_failures().is_empty())
            .collect()
    };
    let frames: BTreeMap<u64, Vec<Frame<'_>>> =
        voltages.iter().map(|&bits| (bits, frames_at(f64::from_bits(bits)))).collect();
    for reference in &market.references {
        let at = &frames[&reference.output.value().value().to_bits()];
        let alone = stopped(at.iter().map(|f| f.reference_failures(reference)));
        let paired = || {
            let any = at.first()?;
            stopped(market.amplifiers.iter().map(|a| any.pair_failures(reference, a)))
        };
        note(Kind::Reference, alone.or_else(paired));
    }
    for amplifier in &market.amplifiers {
        let all = frames.values().flatten();
        let alone = stopped(all.map(|f| f.amplifier_failures(amplifier)));
        let paired = || {
            let any = frames.values().flatten().next()?;
            stopped(market.references.iter().map(|r| any.pair_failures(r, amplifier)))
        };
        note(Kind::Amplifier, alone.or_else(paired));
    }
    for lift in &market.lifts {
        let counts = 1..=lift.in_series_max;
        note(
            Kind::Lift,
            stopped(counts.map(|count| match frame(1.0, Some(LiftStack { of: lift, count })) {
                Ok(frame) => frame.own_failures(),
                Err(limit) => vec![limit],
            })),
        );
    }
    resistors(market, output, &voltages, &mut note);
    counts
        .into_iter()
        .map(|((kind, limit), offers)| Removed { kind, cause: Cause::Limit(limit), offers })
        .collect()
}

fn stacks<'a>(market: &Market<'a>) -> Vec<Option<LiftStack<'a>>> {
    let mut stacks = vec![None];
    for lift in &market.lifts {
        stacks.extend((1..=lift.in_series_max).map(|count| Some(LiftStack { of: lift, count })));
    }
    stacks
}

/// The limit that stops an offer, given what fails beside each partner; `None` when some partner
/// lets it pass or there is none.
fn stopped(beside: impl Iterator<Item = Vec<LimitId>>) -> Option<LimitId> {
    let mut common: Option<BTreeSet<LimitId>> = None;
    let mut fewest: Option<Vec<LimitId>> = None;
    for failures in beside {
        if failures.is_empty() {
            return None;
        }
        let set: BTreeSet<LimitId> = failures.iter().copied().collect();
        common = Some(match common {
            Some(common) => &common & &set,
            None => set,
        });
        if fewest.as_ref().is_none_or(|f| failures.len() < f.len()) {
            fewest = Some(failures);
        }
    }
    common.and_then(|c| c.first().copied()).or_else(|| fewest?.first().copied())
}

/// Resistor offers by what they carry in a network of about R*: alone, in series below R*, in
/// parallel above it.
fn resistors(
    market: &Market<'_>,
    output: &Output,
    voltages: &BTreeSet<u64>,
    note: &mut impl FnMut(Kind, Option<LimitId>),
) {
    let current = output.current.value().value();
    let frames: Vec<(f64, Frame<'_>)> = voltages
        .iter()
        .map(|&bits| f64::from_bits(bits))
        .filter_map(|volts| {
            let frame = Frame::new(market.request, output, Volts::new(volts), None, None).ok()?;
            Some((volts, frame))
        })
        .collect();
    for (value, ohms) in market.values.iter().enumerate() {
        let ohms = ohms.value().value();
        for stocked in market.stocked(value as u32) {
            let of = market.types[stocked.of as usize];
            note(
                Kind::Resistor,
                stopped(frames.iter().map(|(volts, frame)| {
                    let across = volts.min(current * ohms);
                    let bounds = frame.element_bounds(of);
                    let mut failures = Vec::new();
                    if across * across / ohms > bounds.watts.value() {
                        failures.push(LimitId::ResistorPower);
                    }
                    if bounds.volts.is_some_and(|most| across > most.value()) {
                        failures.push(LimitId::ResistorVoltage);
                    }
                    if !bounds.temperature_holds {
                        failures.push(LimitId::Temperature);
                    }
                    failures
                })),
            );
        }
    }
}
