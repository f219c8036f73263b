//! One design worked out: terms, limits, total.

use ampthrift::catalog::{Adjustment, Amplifier, Lift, Reference, ResistorType};
use ampthrift::request::{Budget, Output, Request};

use super::corners::Corners;
use super::{terms, window};

/// How a network is joined, in the order of the tie rule.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Joined {
    Single,
    Series,
    Parallel,
}

/// One resistor of a network.
#[derive(Clone, Copy, Debug)]
pub struct Piece<'a> {
    pub of: &'a ResistorType,
    pub ohms: f64,
    pub code: &'a str,
}

/// One design.
#[derive(Clone, Debug)]
pub struct Built<'a> {
    pub reference: &'a Reference,
    pub amplifier: &'a Amplifier,
    pub joined: Joined,
    pub pieces: Vec<Piece<'a>>,
    pub lift: Option<(&'a Lift, u32)>,
    pub adjustment: Option<&'a Adjustment>,
}

impl Built<'_> {
    /// The network's nominal resistance.
    pub fn ohms(&self) -> f64 {
        join(self.joined, self.pieces.iter().map(|piece| piece.ohms))
    }
}

/// The resistance of some elements joined.
pub fn join(joined: Joined, ohms: impl Iterator<Item = f64>) -> f64 {
    match joined {
        Joined::Single | Joined::Series => ohms.sum(),
        Joined::Parallel => 1.0 / ohms.map(|r| 1.0 / r).sum::<f64>(),
    }
}

/// One limit: left side, right side, and how far on the passing side.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Line {
    pub name: &'static str,
    pub value: f64,
    pub bound: f64,
    pub margin: f64,
    pub unit: &'static str,
    pub holds: bool,
    /// Another element, part or end has the same margin.
    pub tied: bool,
}

/// A design's figures.
#[derive(Clone, Debug)]
pub struct Worked<'a> {
    pub total: f64,
    pub terms: Vec<(&'static str, f64)>,
    pub limits: Vec<Line>,
    pub missing: Vec<(&'a str, &'static str)>,
    pub load_min: f64,
    pub load_max: f64,
    pub output_ohms: Option<f64>,
    /// Every limit holds.
    pub window: bool,
    /// The total meets the accuracy asked for.
    pub accurate: bool,
}

/// Whether `small <= large` up to the tolerance: 1e-9 of the larger side, or `absolute`.
pub fn at_most(small: f64, large: f64, absolute: f64) -> bool {
    let tolerance = (1e-9 * small.abs().max(large.abs())).max(absolute);
    small - large <= tolerance
}

/// Terms that rss and gum add linearly.
const SYSTEMATIC: [&str; 4] =
    ["resistor_mismatch", "board_leak_across", "board_leak_ground", "board_wiring"];

/// Terms that are half of a peak-to-peak figure.
const NOISE: [&str; 3] = ["reference_noise", "amplifier_noise", "amplifier_current_noise"];

/// The total of listed terms.
pub fn total(budget: Budget, terms: &[(&'static str, f64)]) -> f64 {
    let mut linear = 0.0;
    let mut squares = 0.0;
    for &(name, ppm) in terms {
        if budget == Budget::WorstCase || SYSTEMATIC.contains(&name) {
            linear += ppm;
            continue;
        }
        let share = match budget {
            Budget::Gum { .. } if NOISE.contains(&name) => ppm / 3.3,
            Budget::Gum { .. } => ppm / 3f64.sqrt(),
            _ => ppm,
        };
        squares += share * share;
    }
    match budget {
        Budget::WorstCase => linear,
        Budget::Rss => linear + squares.sqrt(),
        Budget::Gum { coverage } => linear + coverage * squares.sqrt(),
    }
}

/// Works a design out; `None` when the lift's curve does not reach the current.
pub fn evaluate<'a>(request: &Request, output: &Output, built: &Built<'a>) -> Option<Worked<'a>> {
    let corners = Corners::new(request, output, built.lift, built.adjustment)?;
    let sums = terms::all(request, built, &corners);
    let mut missing = sums.missing;
    let limits = window::limits(request, built, &corners, sums.statics, &mut missing);
    missing.sort_unstable();
    missing.dedup();
    let (load_min, load_max) = window::compliance(request, built, &corners);
    let total = total(request.budget, &sums.terms);
    Some(Worked {
        total,
        accurate: at_most(total, output.accuracy.value(), 0.0),
        window: limits.iter().all(|line| line.holds),
        terms: sums.terms,
        limits,
        missing,
        load_min,
        load_max,
        output_ohms: window::output_ohms(request, built, &corners),
    })
}
