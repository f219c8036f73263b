//! The full figures of one design: every term with its note, every limit with its margin. The
//! plain path: it works from the design alone and sums the listed terms, not the parts' shares.

use std::collections::BTreeSet;

use crate::catalog::Supply;
use crate::quantity::{Ppm, ppm_text};
use crate::request::{Budget, Output, Request};

use super::check::Check;
use super::compliance::compliance;
use super::contribution::{Contribution, total_of};
use super::design::Design;
use super::evaluation::{Evaluation, LimitLine, NotStated, TermLine};
use super::figure::{Figure, Note, Size};
use super::frame::Frame;
use super::limits::{LIMITS, LimitDef, LimitFn, LimitId};
use super::terms::{TERMS, TermDef, TermFn};
use super::wired::{ElementChoice, Wired};

/// How the note on a term ends that an adjustment removed; what it was stands before.
pub const REMOVED_BY_ADJUSTMENT: &str = "removed by the adjustment";

/// Works out the budget, the operating window and the compliance of a design.
///
/// # Errors
/// `LimitId::LiftCurrent` when the lift's curve does not reach the output's current, so that
/// there are no figures to give.
pub fn evaluate(
    request: &Request,
    output: &Output,
    design: &Design<'_>,
) -> Result<Evaluation, LimitId> {
    let vref = design.reference.output.value();
    let frame = Frame::new(request, output, vref, design.lift, design.adjustment)?;
    let choices: Vec<ElementChoice<'_>> = design
        .network
        .elements
        .iter()
        .map(|element| ElementChoice { of: element.of, ohms: element.ohms.value() })
        .collect();
    let wired = Wired::new(&frame, design.network.connection, &choices);
    let mut work = Work { frame: &frame, design, wired: &wired, missing: BTreeSet::new() };

    let (terms, statics) = work.terms();
    let (limits, window_holds) = work.limits(statics);
    let mut sum = Contribution::default();
    for line in &terms {
        sum.add(request.budget, line.term.def(), line.ppm.value());
    }
    let total = total_of(request.budget, sum.random, sum.systematic);
    Ok(Evaluation {
        total,
        compliance: compliance(&frame, design, &limits),
        not_stated: work.missing.into_iter().collect(),
        terms,
        limits,
        window_holds,
        accuracy_holds: frame.accuracy_holds(total),
    })
}

struct Work<'w> {
    frame: &'w Frame<'w>,
    design: &'w Design<'w>,
    wired: &'w Wired<'w>,
    missing: BTreeSet<NotStated>,
}

impl<'w> Work<'w> {
    fn missing(&mut self, order_code: &str, field: &'static str) {
        self.missing.insert(NotStated { order_code: order_code.to_owned(), field });
    }

    /// All terms that apply, and the worst-case sum of those that an adjustment takes up.
    fn terms(&mut self) -> (Vec<TermLine>, Ppm) {
        let (frame, design) = (self.frame, self.design);
        let mut lines = Vec::new();
        let mut statics = Ppm::ZERO;
        for term in TERMS {
            let (figure, order_code) = match (term.figure, frame.adjustment) {
                (TermFn::Element(_), _) => {
                    if let Some((combined, sum)) = self.over_elements(term) {
                        lines.push(self.line(term, combined, sum, None, &mut statics));
                    }
                    continue;
                }
                (TermFn::Reference(figure), _) => {
                    (figure(frame, design.reference), design.reference.order_code.as_str())
                }
                (TermFn::Amplifier(figure), _) => {
                    (figure(frame, design.amplifier), design.amplifier.order_code.as_str())
                }
                (TermFn::Adjustment(figure), Some(adjustment)) => {
                    (figure(frame, adjustment), adjustment.order_code.as_str())
                }
                (TermFn::Adjustment(_), None) => continue,
                (TermFn::Network(figure), _) => (figure(frame, self.wired), ""),
                (TermFn::Board(figure), _) => (figure(frame), ""),
            };
            match figure {
                Figure::Known(Size { ppm, note }) => {
                    let note = note.map(Note::text);
                    lines.push(self.line(term, ppm, ppm, note, &mut statics));
                }
                Figure::NotStated(field) => self.missing(order_code, field),
                Figure::Absent => {}
            }
        }
        (lines, statics)
    }

    /// A term over the elements, by the budget's method and as the plain sum; what an element
    /// does not state is noted. Elements of one type add, types are root-sum-squared in rss and
    /// gum (JCGM 100:2008, 5.2.2). Written apart from the search's way, so that each checks the
    /// other.
    fn over_elements(&mut self, term: &TermDef) -> Option<(Ppm, Ppm)> {
        let TermFn::Element(figure) = term.figure else { return None };
        let mut of_types: Vec<(&ElementChoice<'_>, Ppm)> = Vec::new();
        let (design, wired) = (self.design, self.wired);
        for (element, choice) in design.network.elements.iter().zip(wired.elements()) {
            match figure(self.frame, &wired.element(choice)) {
                Figure::Known(Size { ppm, .. }) => {
                    match of_types.iter_mut().find(|(first, _)| first.same_type(choice)) {
                        Some((_, sum)) => *sum = *sum + ppm,
                        None => of_types.push((choice, ppm)),
                    }
                }
                Figure::NotStated(field) => self.missing(&element.order_code, field),
                Figure::Absent => {}
            }
        }
        let sum: Ppm = of_types.iter().map(|(_, ppm)| *ppm).sum();
        let combined = match (self.frame.request.budget, of_types.as_slice()) {
            (_, []) => return None,
            (Budget::WorstCase, _) | (_, [_]) => sum,
            (Budget::Rss | Budget::Gum { .. }, types) => {
                let squares: f64 = types.iter().map(|(_, ppm)| ppm.value() * ppm.value()).sum();
                Ppm::new(squares.sqrt())
            }
        };
        Some((combined, sum))
    }

    /// The budget line of a term; with an adjustment a static one is listed as removed.
    fn line(
        &self,
        term: &TermDef,
        combined: Ppm,
        sum: Ppm,
        note: Option<String>,
        statics: &mut Ppm,
    ) -> TermLine {
        if !(term.is_static && self.frame.adjustment.is_some()) {
            return TermLine { term: term.id, ppm: combined, note };
        }
        *statics = *statics + sum;
        let removed = format!("{} {REMOVED_BY_ADJUSTMENT}", ppm_text(sum.value()));
        let note = match note {
            Some(first) => format!("{first}; {removed}"),
            None => removed,
        };
        TermLine { term: term.id, ppm: Ppm::ZERO, note: Some(note) }
    }

    /// All limits that apply, each at its smallest margin, and whether every single one holds.
    fn limits(&mut self, statics: Ppm) -> (Vec<LimitLine>, bool) {
        let mut lines = Vec::new();
        let mut all_hold = true;
        for limit in LIMITS {
            let mut tightest: Option<Check> = None;
            for (figure, order_code) in self.checks(limit, statics) {
                match figure {
                    Figure::Known(check) => {
                        all_hold &= check.holds;
                        tightest = Some(tightest.map_or(check, |so_far| so_far.tighter(check)));
                    }
                    Figure::NotStated(field) => self.missing(order_code, field),
                    Figure::Absent => {}
                }
            }
            if let Some(Check { value, bound, margin, .. }) = tightest {
                lines.push(LimitLine { limit: limit.id, value, bound, margin });
            }
        }
        (lines, all_hold)
    }

    /// A limit asked of every part that it concerns, with the order code of the part that lacks
    /// the figure if one does.
    fn checks(&self, limit: &LimitDef, statics: Ppm) -> Vec<(Figure<Check>, &'w str)> {
        let (frame, design) = (self.frame, self.design);
        let (reference, amplifier) = (design.reference, design.amplifier);
        match limit.check {
            LimitFn::Reference(check) => {
                vec![(check(frame, reference), reference.order_code.as_str())]
            }
            LimitFn::Amplifier(check) => {
                vec![(check(frame, amplifier), amplifier.order_code.as_str())]
            }
            LimitFn::Pair(check) => {
                vec![(check(frame, reference, amplifier), amplifier.order_code.as_str())]
            }
            LimitFn::Lift(check) => design
                .lift
                .iter()
                .map(|lift| (check(frame, lift), lift.of.order_code.as_str()))
                .collect(),
            LimitFn::Element(check) => design
                .network
                .elements
                .iter()
                .zip(self.wired.elements())
                .map(|(element, choice)| {
                    (check(frame, &self.wired.element(choice)), element.order_code.as_str())
                })
                .collect(),
            LimitFn::Placed(check) => {
                self.placed().map(|(supply, code)| (check(frame, supply), code)).collect()
            }
            LimitFn::Adjustment(check) => design
                .adjustment
                .iter()
                .map(|adjustment| {
                    (check(frame, adjustment, statics), adjustment.order_code.as_str())
                })
                .collect(),
        }
    }

    /// Every part placed on the board. An adjustment is a step, not a part.
    fn placed(&self) -> impl Iterator<Item = (&'w Supply, &'w str)> + use<'w> {
        let design = self.design;
        [
            (&design.reference.supply, design.reference.order_code.as_str()),
            (&design.amplifier.supply, design.amplifier.order_code.as_str()),
        ]
        .into_iter()
        .chain(design.network.elements.iter().map(|e| (&e.of.supply, e.order_code.as_str())))
        .chain(design.lift.iter().map(|lift| (&lift.of.supply, lift.of.order_code.as_str())))
    }
}
