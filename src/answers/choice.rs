//! The answer to `choose`: plain owned data, ready to be shown in any format.

use crate::catalog::Kind;
use crate::circuit::{Connection, Evaluation, LimitId};
use crate::purchase::Bill;
use crate::quantity::{Amperes, Money, Ohms, Ppm};

/// How far the search got.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Status {
    /// Proved: nothing cheaper passes.
    Optimal,
    /// Stopped early; the lower bound tells how far off it can be.
    Gap,
    /// Some output has no design, or no common set keeps the rules on the purchase.
    Infeasible,
}

impl Status {
    /// The word in the JSON output.
    #[must_use]
    pub const fn word(self) -> &'static str {
        match self {
            Self::Optimal => "optimal",
            Self::Gap => "gap",
            Self::Infeasible => "infeasible",
        }
    }
}

/// One element of a chosen network.
#[derive(Clone, Debug, PartialEq)]
pub struct ChosenElement {
    /// Order code.
    pub order_code: String,
    /// Nominal value.
    pub ohms: Ohms,
}

/// A design by its order codes.
#[derive(Clone, Debug, PartialEq)]
pub struct ChosenDesign {
    /// Reference.
    pub reference: String,
    /// Amplifier.
    pub amplifier: String,
    /// How the network is joined.
    pub connection: Connection,
    /// Its nominal value.
    pub ohms: Ohms,
    /// Its elements, by order code.
    pub elements: Vec<ChosenElement>,
    /// Lift diode and count.
    pub lift: Option<(String, u32)>,
    /// Adjustment.
    pub adjustment: Option<String>,
}

/// Why offers fell out.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Cause {
    /// A limit of the operating window that no partner leaves passing.
    Limit(LimitId),
    /// A rule of the request, by its field (`lifecycle`, `makers`, `unstated` …).
    Rule(&'static str),
}

/// How many offers of one kind fell out for one cause.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Removed {
    /// Kind of part.
    pub kind: Kind,
    /// The cause.
    pub cause: Cause,
    /// How many offers.
    pub offers: u64,
}

/// A change of one figure of the request that would make an output feasible.
#[derive(Clone, Debug, PartialEq)]
pub struct Relaxation {
    /// Path of the figure in the request, such as `outputs[0].accuracy`.
    pub figure: String,
    /// What it is, in SI units (ppm for ratios).
    pub from: f64,
    /// What would do.
    pub to: f64,
}

/// Why an output has no design.
#[derive(Clone, Debug, PartialEq)]
pub struct Reasons {
    /// Offers removed, by kind and cause.
    pub removed: Vec<Removed>,
    /// The smallest total that any design reaches within the window.
    pub best: Option<(Ppm, ChosenDesign)>,
    /// Changes of one figure that would help.
    pub relaxations: Vec<Relaxation>,
}

/// A rule on the whole purchase that no common set keeps.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct JointReason {
    /// The rule (`purchase.lines_max`, or `rules.in_stock`).
    pub rule: &'static str,
    /// The order code, for stock.
    pub order_code: Option<String>,
    /// What the request or the record allows.
    pub allowed: u64,
    /// The smallest value that works.
    pub needed: u64,
}

/// What was found for one output.
#[derive(Clone, Debug, PartialEq)]
pub enum Verdict {
    /// A design.
    Chosen(Box<ChosenDesign>, Box<Evaluation>),
    /// It has designs, but there is no common set.
    NoCommonSet,
    /// No design passes.
    Infeasible(Reasons),
}

/// One output's answer.
#[derive(Clone, Debug, PartialEq)]
pub struct OutputAnswer {
    /// Name.
    pub name: String,
    /// Nominal current.
    pub current: Amperes,
    /// Accuracy asked for.
    pub target: Ppm,
    /// How many are built.
    pub quantity: u64,
    /// Budget method word.
    pub method: &'static str,
    /// What was found.
    pub verdict: Verdict,
}

/// The answer to `choose`.
#[derive(Clone, Debug, PartialEq)]
pub struct Choice {
    /// Title of the request.
    pub title: Option<String>,
    /// How far the search got.
    pub status: Status,
    /// Currency of all amounts.
    pub currency: String,
    /// Total and lower bound; `None` when there is no common set.
    pub totals: Option<(Money, Money)>,
    /// One answer an output, in the request's order.
    pub outputs: Vec<OutputAnswer>,
    /// The purchase; `None` when there is no common set.
    pub purchase: Option<Bill>,
    /// Rules on the purchase that no common set keeps.
    pub joint_reasons: Vec<JointReason>,
    /// Remarks, cautions included.
    pub notes: Vec<String>,
}
