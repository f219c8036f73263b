//! The error budget: every term once, with id, doc line, nature, formula and function.

use crate::catalog::{Adjustment, Amplifier, Reference};

use super::figure::{Figure, Size};
use super::frame::Frame;
use super::wired::{Wired, WiredElement};
use super::{amplifier_terms, board_terms, network_terms, reference_terms};

/// How a term combines with others in the statistical methods.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Nature {
    /// Known in size and direction by the choice of parts: rss and gum add it as it is.
    Systematic,
    /// Anywhere within ± the term: u = a/√3 (rectangular, JCGM 100:2008, 4.3.7).
    Bounded,
    /// Half a peak-to-peak figure of 6.6 σ (common practice): u = a/3.3.
    Noise,
}

/// What a term belongs to.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Owner {
    /// The voltage reference.
    Reference,
    /// The amplifier.
    Amplifier,
    /// The network as a whole.
    Network,
    /// Each element of the network; the term is combined over them.
    Element,
    /// The board.
    Board,
    /// The adjustment.
    Adjustment,
}

/// The function of a term, by what it needs to know beside the frame.
#[derive(Clone, Copy, Debug)]
pub(super) enum TermFn {
    Reference(fn(&Frame<'_>, &Reference) -> Figure<Size>),
    Amplifier(fn(&Frame<'_>, &Amplifier) -> Figure<Size>),
    Network(fn(&Frame<'_>, &Wired<'_>) -> Figure<Size>),
    Element(fn(&Frame<'_>, &WiredElement<'_>) -> Figure<Size>),
    Board(fn(&Frame<'_>) -> Figure<Size>),
    Adjustment(fn(&Frame<'_>, &Adjustment) -> Figure<Size>),
}

/// One entry of the term table. Every term is in ppm of the output current.
#[derive(Debug)]
pub struct TermDef {
    /// Which.
    pub id: TermId,
    /// Its name in JSON.
    pub name: &'static str,
    /// What it is, in one line.
    pub doc: &'static str,
    /// The formula, as text.
    pub formula: &'static str,
    /// Whether an adjustment removes it.
    pub is_static: bool,
    /// How it combines in rss and gum.
    pub nature: Nature,
    pub(super) figure: TermFn,
}

impl TermDef {
    /// The unit of every term.
    pub const UNIT: &'static str = "ppm";

    /// What the term belongs to.
    #[must_use]
    pub const fn owner(&self) -> Owner {
        match self.figure {
            TermFn::Reference(_) => Owner::Reference,
            TermFn::Amplifier(_) => Owner::Amplifier,
            TermFn::Network(_) => Owner::Network,
            TermFn::Element(_) => Owner::Element,
            TermFn::Board(_) => Owner::Board,
            TermFn::Adjustment(_) => Owner::Adjustment,
        }
    }
}

impl TermId {
    /// Its entry in the table.
    #[must_use]
    pub const fn def(self) -> &'static TermDef {
        // The macro below writes the table in the order of the enum.
        &TERMS[self as usize]
    }
}

/// Writes the enum and the table from one list, so that they cannot differ.
macro_rules! terms {
    ($($id:ident $name:literal $lasting:ident $nature:ident $owner:ident($figure:path)
        $doc:literal $formula:literal;)+) => {
        /// The terms of the error budget.
        #[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
        pub enum TermId { $(#[doc = $doc] $id,)+ }

        /// The term table, in order of report.
        pub const TERMS: &[TermDef] = &[$(TermDef {
            id: TermId::$id,
            name: $name,
            doc: $doc,
            formula: $formula,
            is_static: is_static!($lasting),
            nature: Nature::$nature,
            figure: TermFn::$owner($figure),
        },)+];
    };
}

macro_rules! is_static {
    (removable) => {
        true
    };
    (lasting) => {
        false
    };
}

terms! {
    ReferenceAccuracy "reference_accuracy" removable Bounded
        Reference(reference_terms::accuracy)
        "Initial accuracy of the reference."
        "accuracy";
    ReferenceAssemblyShift "reference_assembly_shift" removable Bounded
        Reference(reference_terms::assembly_shift)
        "Shift of the reference at soldering."
        "assembly_shift";
    ReferenceTempco "reference_tempco" lasting Bounded
        Reference(reference_terms::tempco)
        "Change of the reference with ambient temperature."
        "slope: tempco·dT; butterfly: tempco·(max|T − 25| + |T0 − 25|); box: as slope, or tempco·span of tempco_over";
    ReferenceSelfHeating "reference_self_heating" lasting Bounded
        Reference(reference_terms::self_heating)
        "Change of the reference by its own heat."
        "tempco·thermal·P, P = (V+ − Vx)·(quiescent + I) − Vref·I; adjusted: the change of P since";
    ReferenceLoadRegulation "reference_load_regulation" removable Bounded
        Reference(reference_terms::load_regulation)
        "Change of the reference with the current drawn from it."
        "load_regulation·|I − load_tested_at|";
    ReferenceLineRegulation "reference_line_regulation" lasting Bounded
        Reference(reference_terms::line_regulation)
        "Change of the reference with its supply."
        "line_regulation·distance of V+ − Vx from line_tested_at";
    ReferenceDrift "reference_drift" lasting Bounded
        Reference(reference_terms::drift)
        "Long-term drift of the reference."
        "drift·(service/drift_hours)^½ by the sqrt law, ^1 by the linear law";
    ReferenceHysteresis "reference_hysteresis" lasting Bounded
        Reference(reference_terms::hysteresis)
        "Shift of the reference after a temperature cycle."
        "hysteresis, where dT > 0";
    ReferenceNoise "reference_noise" lasting Noise
        Reference(reference_terms::noise)
        "Noise of the reference, 0.1 Hz to 10 Hz."
        "(noise/2)/Vref";
    AmplifierOffset "amplifier_offset" removable Bounded
        Amplifier(amplifier_terms::offset)
        "Offset voltage of the amplifier at 25 °C."
        "offset/Vref";
    AmplifierOffsetDrift "amplifier_offset_drift" lasting Bounded
        Amplifier(amplifier_terms::offset_drift)
        "Change of the offset voltage with temperature."
        "offset_drift·dT/Vref";
    AmplifierBias "amplifier_bias" removable Bounded
        Amplifier(amplifier_terms::bias)
        "Bias current of the amplifier at 25 °C."
        "bias/I";
    AmplifierBiasDrift "amplifier_bias_drift" lasting Bounded
        Amplifier(amplifier_terms::bias_drift)
        "Change of the bias current with temperature."
        "max|bias(T) − bias(T0)|/I over the ambient ends, and 25 °C where it lies between";
    AmplifierCmrr "amplifier_cmrr" lasting Bounded
        Amplifier(amplifier_terms::cmrr)
        "Change of the offset voltage with the common mode."
        "distance of Vx from tested_common_mode·10^(−cmrr/20)/Vref";
    AmplifierPsrr "amplifier_psrr" lasting Bounded
        Amplifier(amplifier_terms::psrr)
        "Change of the offset voltage with the supply."
        "distance of the total supply from tested_supply·10^(−psrr/20)/Vref";
    AmplifierGain "amplifier_gain" lasting Bounded
        Amplifier(amplifier_terms::gain)
        "Input error of the amplifier by its finite gain."
        "distance of Vx from the middle between V− and V+·10^(−open_loop_gain/20)/Vref";
    AmplifierNoise "amplifier_noise" lasting Noise
        Amplifier(amplifier_terms::noise)
        "Voltage noise of the amplifier, 0.1 Hz to 10 Hz."
        "(noise/2)/Vref";
    AmplifierCurrentNoise "amplifier_current_noise" lasting Noise
        Amplifier(amplifier_terms::current_noise)
        "Current noise of the amplifier, 0.1 Hz to 10 Hz."
        "(current_noise/2)/I";
    ResistorMismatch "resistor_mismatch" removable Systematic
        Network(network_terms::mismatch)
        "Distance of the network's nominal value from the ideal one."
        "|R*/R − 1|, R* = Vref/I";
    ResistorTolerance "resistor_tolerance" removable Bounded
        Element(network_terms::tolerance)
        "Tolerance of the resistors."
        "w·tolerance";
    ResistorAssemblyShift "resistor_assembly_shift" removable Bounded
        Element(network_terms::assembly_shift)
        "Shift of the resistors at soldering."
        "w·assembly_shift";
    ResistorTempco "resistor_tempco" lasting Bounded
        Element(network_terms::tempco)
        "Change of the resistors with ambient temperature."
        "w·tempco·dT";
    ResistorSelfHeating "resistor_self_heating" removable Bounded
        Element(network_terms::self_heating)
        "Change of the resistors by their own heat."
        "w·tempco·thermal·P";
    ResistorStability "resistor_stability" lasting Bounded
        Element(network_terms::stability)
        "Drift of the resistors in service."
        "w·stability·(service/stability_hours)^½ by the sqrt law, ^1 by the linear law";
    ResistorVoltageCoefficient "resistor_voltage_coefficient" removable Bounded
        Element(network_terms::voltage_coefficient)
        "Change of the resistors with the voltage across them."
        "w·voltage_coefficient·V";
    BoardLeakAcross "board_leak_across" lasting Systematic
        Board(board_terms::leak_across)
        "Leak of the board across the set resistor."
        "R*/insulation; 0 when guarded";
    BoardLeakGround "board_leak_ground" lasting Systematic
        Board(board_terms::leak_ground)
        "Leak of the board from X to the worst rail."
        "max|Vx − rail|/insulation/I over 0 V, V− and V+; 0 when guarded";
    BoardThermalEmf "board_thermal_emf" lasting Bounded
        Board(board_terms::thermal_emf)
        "Thermal EMF of the joints around the set resistor."
        "thermal_emf/Vref";
    BoardWiring "board_wiring" removable Systematic
        Board(board_terms::wiring)
        "Joints and tracks in series with the set resistor."
        "wiring/R*";
    AdjustmentResidual "adjustment_residual" lasting Bounded
        Adjustment(board_terms::residual)
        "What the adjustment leaves."
        "residual";
    AdjustmentTempco "adjustment_tempco" lasting Bounded
        Adjustment(board_terms::adjustment_tempco)
        "Change of the adjustment with ambient temperature."
        "tempco·dT";
}
