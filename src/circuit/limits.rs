//! The operating window: every limit once, with id, name, unit, doc line, formula and function.

use crate::catalog::{Adjustment, Amplifier, Reference, Supply};
use crate::quantity::Ppm;

use super::check::Check;
use super::design::LiftStack;
use super::figure::Figure;
use super::frame::Frame;
use super::window;
use super::wired::{Wired, WiredElement};

/// The function of a limit, by what it needs to know beside the frame.
#[derive(Clone, Copy, Debug)]
pub(super) enum LimitFn {
    Reference(fn(&Frame<'_>, &Reference) -> Figure<Check>),
    Amplifier(fn(&Frame<'_>, &Amplifier) -> Figure<Check>),
    /// A figure that is not stated is the amplifier's.
    Pair(fn(&Frame<'_>, &Reference, &Amplifier) -> Figure<Check>),
    Lift(fn(&Frame<'_>, &LiftStack<'_>) -> Figure<Check>),
    Element(fn(&Frame<'_>, &WiredElement<'_>) -> Figure<Check>),
    /// For every part that is placed on the board.
    Placed(fn(&Frame<'_>, &Supply) -> Figure<Check>),
    /// With the sum of the static terms.
    Adjustment(fn(&Frame<'_>, &Adjustment, Ppm) -> Figure<Check>),
}

/// At which end of the load voltage a limit gets tight, volt by volt.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum LoadEnd {
    /// Its margin falls as the lowest load voltage falls.
    Low,
    /// Its margin falls as the highest load voltage rises.
    High,
    /// It does not depend on the load voltage.
    Neither,
}

/// One entry of the limit table.
#[derive(Debug)]
pub struct LimitDef {
    /// Which.
    pub id: LimitId,
    /// Its name in files and JSON.
    pub name: &'static str,
    /// Unit of its value and bound, as in the JSON: V, A, W, F, degC or ppm.
    pub unit: &'static str,
    /// What it means, in one line.
    pub doc: &'static str,
    /// The inequality, as text.
    pub formula: &'static str,
    /// Where the load voltage makes it tight.
    pub load_end: LoadEnd,
    pub(super) check: LimitFn,
}

impl LimitId {
    /// Its entry in the table.
    #[must_use]
    pub const fn def(self) -> &'static LimitDef {
        // The macro below writes the table in the order of the enum.
        &LIMITS[self as usize]
    }
}

/// Writes the enum and the table from one list, so that they cannot differ.
macro_rules! limits {
    ($($id:ident $name:literal $unit:literal $end:ident $owner:ident($check:path)
        $doc:literal $formula:literal;)+) => {
        /// The limits of the operating window.
        #[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
        pub enum LimitId { $(#[doc = $doc] $id,)+ }

        /// The limit table, in order of report.
        pub const LIMITS: &[LimitDef] = &[$(LimitDef {
            id: LimitId::$id,
            name: $name,
            unit: $unit,
            doc: $doc,
            formula: $formula,
            load_end: LoadEnd::$end,
            check: LimitFn::$owner($check),
        },)+];
    };
}

limits! {
    SwingLow "swing_low" "V" Low Amplifier(window::swing_low)
        "The amplifier's output reaches down to X."
        "Vx_min ≥ V−max + swing_low + margin";
    SwingHigh "swing_high" "V" High Amplifier(window::swing_high)
        "The amplifier's output reaches up to X."
        "Vx_max ≤ V+min − swing_high − margin";
    InputLow "input_low" "V" Low Amplifier(window::input_low)
        "The amplifier's input works down to X."
        "V−max + input_low ≤ Vx_min";
    InputHigh "input_high" "V" High Amplifier(window::input_high)
        "The amplifier's input works up to X."
        "Vx_max ≤ V+min − input_high";
    ReferenceHeadroom "reference_headroom" "V" High Reference(window::reference_headroom)
        "The supply leaves the reference its output and dropout."
        "V+min − Vx_max ≥ Vref + dropout";
    ReferenceInputMax "reference_input_max" "V" Low Reference(window::reference_input_max)
        "The reference's supply stays below its maximum."
        "V+max − Vx_min ≤ supply_max";
    AmplifierSupplyMin "amplifier_supply_min" "V" Neither Amplifier(window::amplifier_supply_min)
        "The total supply is enough for the amplifier."
        "supply min ≤ V+min − V−max";
    AmplifierSupplyMax "amplifier_supply_max" "V" Neither Amplifier(window::amplifier_supply_max)
        "The total supply is not too much for the amplifier."
        "V+max − V−min ≤ supply max";
    ReferenceSource "reference_source" "A" Neither Reference(window::reference_source)
        "The reference can source the output current."
        "I ≤ source_max";
    AmplifierSink "amplifier_sink" "A" Neither Pair(window::amplifier_sink)
        "The amplifier can sink the reference's quiescent current."
        "reference quiescent ≤ sink_max";
    LiftCurrent "lift_current" "A" Neither Lift(window::lift_current)
        "The lift diodes carry the output current, within their stated curve."
        "I ≤ current_max";
    ResistorPower "resistor_power" "W" Neither Element(window::resistor_power)
        "Each resistor stays within its derated power."
        "P ≤ power·power_derating";
    ResistorVoltage "resistor_voltage" "V" Neither Element(window::resistor_voltage)
        "Each resistor stays within its voltage."
        "V ≤ voltage_max";
    Temperature "temperature" "degC" Neither Placed(window::temperature)
        "The ambient lies within every part's operating range."
        "ambient within every part's temperature";
    CapacitiveLoad "capacitive_load" "F" Neither Pair(window::capacitive_load)
        "The amplifier is stable with the reference's bypass capacitor."
        "reference bypass ≤ amplifier capacitive_load";
    Quiescent "quiescent" "A" Neither Pair(window::quiescent)
        "Reference and amplifier together draw no more than asked."
        "reference quiescent + amplifier quiescent ≤ quiescent_max";
    AdjustmentRange "adjustment_range" "ppm" Neither Adjustment(window::adjustment_range)
        "The adjustment can take up all static errors."
        "sum of the static terms ≤ range";
}

/// Whether an element limit is left unchecked for want of a figure.
pub(super) fn element_limit_unstated(frame: &Frame<'_>, wired: &Wired<'_>) -> bool {
    LIMITS.iter().any(|limit| match limit.check {
        LimitFn::Element(check) => wired
            .elements()
            .iter()
            .any(|choice| matches!(check(frame, &wired.element(choice)), Figure::NotStated(_))),
        _ => false,
    })
}
