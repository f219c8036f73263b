//! What a checked catalogue holds. Nothing here can be half-built: the loader makes these from
//! records in which every fault has been looked for.

use std::collections::BTreeMap;
use std::fmt;
use std::path::PathBuf;
use std::sync::Arc;

use crate::quantity::{
    Amperes, AmperesPerKelvin, Celsius, Decibels, Decimal, Exact, Farads, KelvinsPerWatt, Money,
    Ohms, Ppm, PpmPerAmpere, PpmPerKelvin, PpmPerVolt, Range, Seconds, Volts, VoltsPerKelvin,
    Watts,
};

/// The five kinds of record.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Kind {
    /// A series voltage reference.
    Reference,
    /// An operational amplifier.
    Amplifier,
    /// A fixed resistor of one process, in many values.
    Resistor,
    /// Small-signal diodes in series with the load.
    Lift,
    /// A step at test that removes the initial errors.
    Adjustment,
}

impl Kind {
    /// All kinds, in the order in which a design lists them.
    pub const ALL: [Self; 5] =
        [Self::Reference, Self::Amplifier, Self::Resistor, Self::Lift, Self::Adjustment];

    /// The word in a record's `kind` field.
    #[must_use]
    pub const fn word(self) -> &'static str {
        match self {
            Self::Reference => "reference",
            Self::Amplifier => "amplifier",
            Self::Resistor => "resistor",
            Self::Lift => "lift",
            Self::Adjustment => "adjustment",
        }
    }
}

/// Where in the catalogue's files something was written.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Place {
    /// The file, as reached from the catalogue folder given.
    pub file: Arc<PathBuf>,
    /// Line, from 1.
    pub line: usize,
    /// Column in characters, from 1.
    pub column: usize,
}

impl fmt::Display for Place {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}:{}:{}", self.file.display(), self.line, self.column)
    }
}

/// How far a part is from the end of its sale.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Lifecycle {
    /// In normal production.
    Active,
    /// Announced, not in full production.
    Preview,
    /// Orders are still taken, for a last time.
    LastBuy,
    /// No longer made.
    Obsolete,
}

impl Lifecycle {
    /// All states.
    pub const ALL: [Self; 4] = [Self::Active, Self::Preview, Self::LastBuy, Self::Obsolete];

    /// The word in a file.
    #[must_use]
    pub const fn word(self) -> &'static str {
        match self {
            Self::Active => "active",
            Self::Preview => "preview",
            Self::LastBuy => "last-buy",
            Self::Obsolete => "obsolete",
        }
    }
}

/// One step of a price list: the unit price from this quantity on.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct PriceBreak {
    /// The smallest quantity at this price.
    pub from: u64,
    /// The price of one, for the whole quantity bought.
    pub each: Money,
}

/// A price list: `from` rises, the first is 1, never empty.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct PriceList(Vec<PriceBreak>);

impl PriceList {
    /// A price list; `None` when it is empty, does not start at 1 or `from` does not rise.
    #[must_use]
    pub fn new(breaks: Vec<PriceBreak>) -> Option<Self> {
        let starts = breaks.first().is_some_and(|first| first.from == 1);
        let rises = breaks.windows(2).all(|pair| pair[0].from < pair[1].from);
        (starts && rises).then_some(Self(breaks))
    }

    /// The steps, `from` rising.
    #[must_use]
    pub fn breaks(&self) -> &[PriceBreak] {
        &self.0
    }
}

/// What purchasing knows of one type.
#[derive(Clone, Debug, PartialEq)]
pub struct Supply {
    /// The `part` field as written.
    pub part: String,
    /// The grade, where the record has grades.
    pub grade: Option<String>,
    /// Who makes it.
    pub maker: Option<String>,
    /// Where the figures come from.
    pub source: Option<String>,
    /// When the record was last checked.
    pub updated: Option<jiff::civil::Date>,
    /// Case style.
    pub package: Option<String>,
    /// Operating temperature range.
    pub temperature: Range<Celsius>,
    /// Sale state.
    pub lifecycle: Lifecycle,
    /// Lead time.
    pub lead_time: Option<Seconds>,
    /// Units in stock (per value, for resistors).
    pub stock: Option<u64>,
    /// Currency of the price list, when not the request's.
    pub currency: Option<String>,
    /// Fewest units an order takes.
    pub order_minimum: u64,
    /// Orders are multiples of this.
    pub order_multiple: u64,
    /// Unit prices by quantity.
    pub price: PriceList,
    /// Where the record (or its grade) stands.
    pub place: Place,
}

/// How a tempco figure was defined by its maker.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum TempcoMethod {
    /// Largest slope.
    Slope,
    /// Box: full swing over the range divided by the range.
    Box,
    /// Butterfly: slope of the cone through the 25 °C point.
    Butterfly,
}

impl TempcoMethod {
    /// All methods.
    pub const ALL: [Self; 3] = [Self::Slope, Self::Box, Self::Butterfly];

    /// The word in a file.
    #[must_use]
    pub const fn word(self) -> &'static str {
        match self {
            Self::Slope => "slope",
            Self::Box => "box",
            Self::Butterfly => "butterfly",
        }
    }
}

/// How an error grows with time.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum GrowthLaw {
    /// With the square root of time.
    Sqrt,
    /// In proportion to time.
    Linear,
}

impl GrowthLaw {
    /// All laws.
    pub const ALL: [Self; 2] = [Self::Sqrt, Self::Linear];

    /// The word in a file.
    #[must_use]
    pub const fn word(self) -> &'static str {
        match self {
            Self::Sqrt => "sqrt",
            Self::Linear => "linear",
        }
    }
}

/// An error stated for a time, and how it grows.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Ageing {
    /// The error after `over`; `None` when not stated.
    pub error: Option<Ppm>,
    /// The time for which it is stated.
    pub over: Seconds,
    /// Growth law.
    pub law: GrowthLaw,
}

/// One grade of a voltage reference.
#[derive(Clone, Debug, PartialEq)]
pub struct Reference {
    /// The code to order it by.
    pub order_code: String,
    /// Purchasing figures.
    pub supply: Supply,
    /// Nominal output voltage.
    pub output: Exact<Volts>,
    /// Initial accuracy, ± about nominal.
    pub accuracy: Ppm,
    /// Temperature coefficient.
    pub tempco: PpmPerKelvin,
    /// How `tempco` is defined.
    pub tempco_method: TempcoMethod,
    /// The range over which `tempco` holds (defaults to the operating range).
    pub tempco_over: Range<Celsius>,
    /// Supply needed above the output.
    pub dropout: Volts,
    /// Largest supply pin to ground pin voltage.
    pub supply_max: Volts,
    /// Largest output current.
    pub source_max: Amperes,
    /// Largest quiescent current.
    pub quiescent: Amperes,
    /// Load regulation.
    pub load_regulation: Option<PpmPerAmpere>,
    /// Load current at which `accuracy` is tested.
    pub load_tested_at: Amperes,
    /// Line regulation.
    pub line_regulation: Option<PpmPerVolt>,
    /// Supply at which `accuracy` is tested.
    pub line_tested_at: Option<Volts>,
    /// Long-term drift.
    pub drift: Ageing,
    /// Thermal hysteresis.
    pub hysteresis: Option<Ppm>,
    /// Shift at soldering.
    pub assembly_shift: Option<Ppm>,
    /// Junction to ambient thermal resistance.
    pub thermal: Option<KelvinsPerWatt>,
    /// Noise, peak to peak, 0.1 Hz to 10 Hz.
    pub noise: Option<Volts>,
    /// Capacitor that it needs to its ground pin.
    pub bypass: Option<Farads>,
}

/// One grade of an amplifier.
#[derive(Clone, Debug, PartialEq)]
pub struct Amplifier {
    /// The code to order it by.
    pub order_code: String,
    /// Purchasing figures.
    pub supply: Supply,
    /// Largest offset voltage at 25 °C.
    pub offset: Volts,
    /// Largest bias current at 25 °C.
    pub bias: Amperes,
    /// Lowest output above V− while sinking a reference's quiescent current.
    pub swing_low: Volts,
    /// Highest output, below V+.
    pub swing_high: Volts,
    /// Lowest common-mode input above V− (may be negative).
    pub input_low: Volts,
    /// Highest common-mode input, below V+ (may be negative).
    pub input_high: Volts,
    /// Total supply range.
    pub total_supply: Range<Volts>,
    /// Largest current that the output sinks.
    pub sink_max: Amperes,
    /// Offset drift.
    pub offset_drift: Option<VoltsPerKelvin>,
    /// Temperature step that doubles the bias current.
    pub bias_doubling: Option<crate::quantity::Kelvins>,
    /// Linear drift of the bias current.
    pub bias_drift: Option<AmperesPerKelvin>,
    /// Largest bias current over the operating range.
    pub bias_over_range: Option<Amperes>,
    /// Common-mode rejection.
    pub cmrr: Option<Decibels>,
    /// Supply rejection.
    pub psrr: Option<Decibels>,
    /// Open-loop gain.
    pub open_loop_gain: Option<Decibels>,
    /// Total supply at which the offset is tested.
    pub tested_supply: Option<Volts>,
    /// Common mode, above V−, at which the offset is tested.
    pub tested_common_mode: Option<Volts>,
    /// Voltage noise, peak to peak, 0.1 Hz to 10 Hz.
    pub noise: Option<Volts>,
    /// Current noise, peak to peak, 0.1 Hz to 10 Hz.
    pub current_noise: Option<Amperes>,
    /// Quiescent current.
    pub quiescent: Option<Amperes>,
    /// Largest capacitive load on its output.
    pub capacitive_load: Option<Farads>,
}

/// The values of a resistor type that can be ordered.
#[derive(Clone, Debug, PartialEq)]
pub enum Values {
    /// A fixed list (series are expanded), ascending, each value once.
    Listed(Vec<ListedValue>),
    /// Any value in a range, to so many significant digits.
    MadeToOrder {
        /// The range, ends included.
        range: Range<Decimal>,
        /// Significant digits, 1 to 9.
        digits: u32,
    },
}

/// One listed value with its order code.
#[derive(Clone, Debug, PartialEq)]
pub struct ListedValue {
    /// Nominal resistance.
    pub ohms: Exact<Ohms>,
    /// The code to order this value by.
    pub order_code: String,
}

/// One grade of a resistor process, in all its values.
#[derive(Clone, Debug, PartialEq)]
pub struct ResistorType {
    /// Order code with `{value}` where the value goes (for listed single values it may lack it).
    pub code_pattern: String,
    /// Purchasing figures.
    pub supply: Supply,
    /// Tolerance at 25 °C.
    pub tolerance: Ppm,
    /// Temperature coefficient.
    pub tempco: PpmPerKelvin,
    /// Rated power at the hottest ambient used.
    pub power: Watts,
    /// Orderable values.
    pub values: Values,
    /// Thermal resistance.
    pub thermal: Option<KelvinsPerWatt>,
    /// Load-life stability.
    pub stability: Ageing,
    /// Voltage coefficient.
    pub voltage_coefficient: Option<PpmPerVolt>,
    /// Largest voltage across it.
    pub voltage_max: Option<Volts>,
    /// Shift at soldering.
    pub assembly_shift: Option<Ppm>,
}

impl ResistorType {
    /// The order code of a value: `{value}` filled with its IEC 60062 letter code.
    #[must_use]
    pub fn order_code(&self, ohms: Decimal) -> String {
        self.code_pattern.replace("{value}", &crate::quantity::to_letter_code(ohms))
    }
}

/// One point of a diode curve.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct DropPoint {
    /// Forward current.
    pub current: Amperes,
    /// Typical forward voltage at 25 °C.
    pub drop: Volts,
}

/// One grade of a lift diode.
#[derive(Clone, Debug, PartialEq)]
pub struct Lift {
    /// The code to order it by.
    pub order_code: String,
    /// Purchasing figures.
    pub supply: Supply,
    /// Forward drop against current, both strictly rising, at least one point.
    pub drop: Vec<DropPoint>,
    /// Largest forward current.
    pub current_max: Amperes,
    /// Spread of the drop, ±.
    pub drop_spread: Volts,
    /// Change of the drop with temperature (signed).
    pub drop_tempco: VoltsPerKelvin,
    /// Most diodes in series.
    pub in_series_max: u32,
}

/// One way to remove the initial errors at test.
#[derive(Clone, Debug, PartialEq)]
pub struct Adjustment {
    /// The code it is called by.
    pub order_code: String,
    /// Purchasing figures; the price is per output built.
    pub supply: Supply,
    /// What is left after it.
    pub residual: Ppm,
    /// The largest static error that it can remove.
    pub range: Ppm,
    /// Its own temperature coefficient.
    pub tempco: PpmPerKelvin,
}

/// A checked catalogue. Each list is in order of file, document and grade.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Catalog {
    /// Voltage references, one entry a grade.
    pub references: Vec<Reference>,
    /// Amplifiers.
    pub amplifiers: Vec<Amplifier>,
    /// Resistor types.
    pub resistors: Vec<ResistorType>,
    /// Lift diodes.
    pub lifts: Vec<Lift>,
    /// Adjustments.
    pub adjustments: Vec<Adjustment>,
}

/// Currencies and their rates, for prices that are not in the request's currency.
pub type ExchangeRates = BTreeMap<String, crate::quantity::ExchangeRate>;
