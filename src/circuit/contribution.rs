//! What one part adds to the budget, as the few numbers that the search adds up.

use crate::catalog::{Amplifier, Reference};
use crate::quantity::Ppm;
use crate::request::Budget;

use super::design::Connection;
use super::figure::{Figure, Size};
use super::frame::Frame;
use super::limits::element_limit_unstated;
use super::terms::{Nature, TERMS, TermDef, TermFn};
use super::wired::{ElementChoice, Wired};

/// Peak-to-peak of noise over its half: a term a is half of 6.6 σ (common practice).
const SIGMAS_IN_HALF_PEAK_TO_PEAK: f64 = 3.3;

/// What one part adds to a design's budget within a frame.
///
/// `random` adds over parts: for the worst-case method in ppm; for rss and gum in ppm², each term
/// already weighted so that the total is `systematic + sqrt(random)`. `systematic` (ppm) is used
/// by rss and gum only; the worst-case method puts everything in `random`.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Contribution {
    /// ppm (worst-case) or ppm² (rss, gum).
    pub random: f64,
    /// Systematic ppm (rss, gum).
    pub systematic: f64,
    /// Static ppm that an adjustment has to take up, worst case; 0 without an adjustment.
    pub statics: f64,
    /// Whether a figure that is needed here is not stated.
    pub unstated: bool,
}

impl Contribution {
    /// Adds one term: `combined` is its size by the budget's method, `worst` the plain sum.
    pub(super) fn add(&mut self, budget: Budget, term: &TermDef, combined: f64) {
        match (budget, term.nature) {
            (Budget::WorstCase, _) => self.random += combined,
            (_, Nature::Systematic) => self.systematic += combined,
            (Budget::Rss, _) => self.random += combined * combined,
            (Budget::Gum { coverage }, nature) => {
                // JCGM 100:2008, 4.3.7 (rectangular), 5.1.2 (sum of squares), 6.2.1 (coverage).
                let divisor = match nature {
                    Nature::Noise => SIGMAS_IN_HALF_PEAK_TO_PEAK,
                    Nature::Bounded | Nature::Systematic => 3f64.sqrt(),
                };
                let expanded = coverage * combined / divisor;
                self.random += expanded * expanded;
            }
        }
    }
}

/// The total of a whole design from its summed contributions.
#[must_use]
pub fn total_of(budget: Budget, random: f64, systematic: f64) -> Ppm {
    Ppm::new(match budget {
        Budget::WorstCase => random,
        Budget::Rss | Budget::Gum { .. } => systematic + random.sqrt(),
    })
}

/// A term over several elements.
#[derive(Clone, Copy, Debug, Default)]
struct OverElements {
    /// The plain sum, in ppm.
    sum: f64,
    /// By the budget's method, in ppm.
    combined: f64,
    /// Whether any element lacks the figure.
    unstated: bool,
}

impl Frame<'_> {
    /// Combines a term over the elements of a network: worst-case their sum; rss and gum the
    /// elements of one type added (fully correlated, JCGM 100:2008, 5.2.2), different types
    /// root-sum-squared.
    fn over_elements(
        &self,
        wired: &Wired<'_>,
        mut figure: impl FnMut(&ElementChoice<'_>) -> Figure<Size>,
    ) -> OverElements {
        let mut all = OverElements::default();
        let mut squares = 0.0;
        for (index, element) in wired.elements().iter().enumerate() {
            let size = match figure(element) {
                Figure::Known(size) => size.ppm.value(),
                Figure::NotStated(_) => {
                    all.unstated = true;
                    continue;
                }
                Figure::Absent => continue,
            };
            all.sum += size;
            // (a + b)² = a² + b·(b + 2a): an element brings the cross products with those of its
            // type before it. There are at most three, so asking again is cheaper than a list.
            let before: f64 = wired
                .elements()
                .iter()
                .take(index)
                .filter(|earlier| earlier.same_type(element))
                .map(|earlier| match figure(earlier) {
                    Figure::Known(earlier) => earlier.ppm.value(),
                    Figure::NotStated(_) | Figure::Absent => 0.0,
                })
                .sum();
            squares += size * (size + 2.0 * before);
        }
        all.combined = match self.request.budget {
            Budget::WorstCase => all.sum,
            // A root of a square is off by rounding; one element needs none.
            Budget::Rss | Budget::Gum { .. } if wired.elements().len() == 1 => all.sum,
            Budget::Rss | Budget::Gum { .. } => squares.sqrt(),
        };
        all
    }

    pub(super) fn gather(&self, into: &mut Contribution, term: &TermDef, figure: Figure<Size>) {
        match figure {
            Figure::Known(size) => self.place(into, term, size.ppm.value(), size.ppm.value()),
            Figure::NotStated(_) => into.unstated = true,
            Figure::Absent => {}
        }
    }

    /// Puts a term where it counts: with an adjustment a static one only in the static sum.
    fn place(&self, into: &mut Contribution, term: &TermDef, combined: f64, sum: f64) {
        if term.is_static && self.adjustment.is_some() {
            into.statics += sum;
        } else {
            into.add(self.request.budget, term, combined);
        }
    }

    /// What the frame itself adds: board leaks, wiring, EMF, adjustment residual and tempco.
    #[must_use]
    pub fn own_contribution(&self) -> Contribution {
        let mut sum = Contribution::default();
        for term in TERMS {
            match (term.figure, self.adjustment) {
                (TermFn::Board(figure), _) => self.gather(&mut sum, term, figure(self)),
                (TermFn::Adjustment(figure), Some(adjustment)) => {
                    self.gather(&mut sum, term, figure(self, adjustment));
                }
                _ => {}
            }
        }
        sum
    }

    /// What a reference adds.
    #[must_use]
    pub fn reference_contribution(&self, reference: &Reference) -> Contribution {
        let mut sum = Contribution::default();
        for term in TERMS {
            if let TermFn::Reference(figure) = term.figure {
                self.gather(&mut sum, term, figure(self, reference));
            }
        }
        sum
    }

    /// What an amplifier adds.
    #[must_use]
    pub fn amplifier_contribution(&self, amplifier: &Amplifier) -> Contribution {
        let mut sum = Contribution::default();
        for term in TERMS {
            if let TermFn::Amplifier(figure) = term.figure {
                self.gather(&mut sum, term, figure(self, amplifier));
            }
        }
        sum
    }

    /// What a network adds (mismatch and all element terms).
    #[must_use]
    pub fn network_contribution(
        &self,
        connection: Connection,
        elements: &[ElementChoice<'_>],
    ) -> Contribution {
        let wired = Wired::new(self, connection, elements);
        let mut sum = Contribution {
            unstated: element_limit_unstated(self, &wired),
            ..Contribution::default()
        };
        for term in TERMS {
            match term.figure {
                TermFn::Network(figure) => self.gather(&mut sum, term, figure(self, &wired)),
                TermFn::Element(figure) => {
                    let all =
                        self.over_elements(&wired, |choice| figure(self, &wired.element(choice)));
                    sum.unstated |= all.unstated;
                    self.place(&mut sum, term, all.combined, all.sum);
                }
                _ => {}
            }
        }
        sum
    }
}
