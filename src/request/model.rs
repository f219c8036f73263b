//! A checked request.

use crate::catalog::{ExchangeRates, Lifecycle};
use crate::quantity::{Amperes, Celsius, Exact, Kelvins, Money, Ohms, Ppm, Range, Seconds, Volts};

/// How terms are combined into a total.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Budget {
    /// Every term at its limit, all in one direction.
    WorstCase,
    /// Systematic terms added, the others root-sum-squared.
    Rss,
    /// JCGM 100 standard uncertainties, expanded.
    Gum {
        /// Coverage factor k.
        coverage: f64,
    },
}

impl Budget {
    /// The word in a file.
    #[must_use]
    pub const fn word(self) -> &'static str {
        match self {
            Self::WorstCase => "worst-case",
            Self::Rss => "rss",
            Self::Gum { .. } => "gum",
        }
    }
}

/// A load, as voltage at the source's terminal.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Load {
    /// A voltage range.
    Voltage(Range<Volts>),
    /// A resistance range; the voltage follows from the nominal current.
    Resistance(Range<Ohms>),
}

impl Load {
    /// The voltage range at a current.
    #[must_use]
    pub fn voltage(self, current: Amperes) -> Range<Volts> {
        match self {
            Self::Voltage(volts) => volts,
            // Products of a non-negative current with an ordered range stay ordered.
            Self::Resistance(ohms) => Range::new(ohms.low() * current, ohms.high() * current)
                .unwrap_or_else(|| Range::point(ohms.low() * current)),
        }
    }
}

/// How a reference stated by the box method is read.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum BoxReading {
    /// As though it were a slope.
    Slope,
    /// Only what the box guarantees.
    Guaranteed,
}

/// What is done with parts that lack a figure which the budget needs.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Unstated {
    /// List the figure.
    Note,
    /// Refuse the design.
    Reject,
}

/// Conditions common to all outputs.
#[derive(Clone, Debug, PartialEq)]
pub struct Conditions {
    /// Positive rail V+.
    pub supply: Range<Volts>,
    /// Negative rail V−.
    pub negative_rail: Range<Volts>,
    /// Ambient temperature.
    pub ambient: Range<Celsius>,
    /// Temperature at adjustment.
    pub calibrated_at: Celsius,
    /// Supply at adjustment, where stated (else the middle).
    pub calibrated_supply: Option<Volts>,
    /// Load at adjustment, where stated (a range of one point; else the middle).
    pub calibrated_load: Option<Load>,
    /// Time in service.
    pub service: Seconds,
    /// Board insulation, where counted.
    pub insulation: Option<Ohms>,
    /// A driven ring takes the leaks.
    pub guarded: bool,
    /// Thermal EMF in the loop.
    pub thermal_emf: Volts,
    /// Joints and tracks in series with R.
    pub wiring: Ohms,
    /// Added to `swing_low` and `swing_high`.
    pub margin: Volts,
    /// Share of the rated power that may be used.
    pub power_derating: f64,
    /// Reading of box tempcos.
    pub box_reading: BoxReading,
    /// Largest reference + amplifier quiescent current per output.
    pub quiescent_max: Option<Amperes>,
}

impl Conditions {
    /// The ambient span.
    #[must_use]
    pub fn ambient_span(&self) -> Kelvins {
        self.ambient.high() - self.ambient.low()
    }
}

/// Which parts may be used.
#[derive(Clone, Debug, PartialEq)]
pub struct Rules {
    /// Allowed sale states.
    pub lifecycle: Vec<Lifecycle>,
    /// Longest lead time.
    pub lead_time_max: Option<Seconds>,
    /// The bought quantity must be in stock.
    pub in_stock: bool,
    /// Only these makers.
    pub makers: Option<Vec<String>>,
    /// Only these packages.
    pub packages: Option<Vec<String>>,
    /// Order codes not to use; `*` stands for any text.
    pub forbid: Vec<String>,
    /// Of each kind named, only these.
    pub require: Vec<String>,
    /// What to do about figures not stated.
    pub unstated: Unstated,
}

/// How the purchase is counted.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct PurchaseRules {
    /// Per distinct order code bought.
    pub line_cost: Money,
    /// Per component placed.
    pub placement_cost: Money,
    /// Most order lines.
    pub lines_max: Option<u64>,
}

/// One current source asked for.
#[derive(Clone, Debug, PartialEq)]
pub struct Output {
    /// Its name, unique in the request.
    pub name: String,
    /// Nominal current.
    pub current: Exact<Amperes>,
    /// Largest total error.
    pub accuracy: Ppm,
    /// Load.
    pub load: Load,
    /// How many are built.
    pub quantity: u64,
}

/// A checked request.
#[derive(Clone, Debug, PartialEq)]
pub struct Request {
    /// Title, where given.
    pub title: Option<String>,
    /// Currency of all totals.
    pub currency: String,
    /// Rates into that currency.
    pub exchange: ExchangeRates,
    /// Budget method.
    pub budget: Budget,
    /// Conditions.
    pub conditions: Conditions,
    /// Rules on parts.
    pub rules: Rules,
    /// Most elements in a network, 1 to 3.
    pub network_elements: u32,
    /// Whether adjustments may be used.
    pub adjustments: bool,
    /// Purchase rules.
    pub purchase: PurchaseRules,
    /// The outputs, at least one, names unique.
    pub outputs: Vec<Output>,
}
