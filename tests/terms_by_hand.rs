//! Every term of the error budget against a value worked out by hand in a comment.
//!
//! The bench: I = 1 mA, Vref = 2.5 V, R* = 2500 ohm, V+ 14 V to 16 V, V− −5 V to −4 V, load 0 V to
//! 1 V, ambient −5 °C to 65 °C (dT = 40 K from 25 °C), 4000 h in service.

#[path = "by_hand/amplifier_terms.rs"]
mod amplifier_terms;
mod by_hand;
#[path = "by_hand/reference_terms.rs"]
mod reference_terms;
#[path = "by_hand/resistor_terms.rs"]
mod resistor_terms;

use ampthrift::circuit::{Evaluation, Nature, Owner, TERMS, TermDef, TermId};
use ampthrift::quantity::{Celsius, Ohms, Range, Volts};
use ampthrift::request::{Budget, Load};
use by_hand::{Bench, assert_close, range};

fn work_out(bench: &Bench) -> Evaluation {
    bench.work_out().expect("the lift's curve reaches the current")
}

fn term(bench: &Bench, id: TermId) -> Option<f64> {
    work_out(bench).terms.iter().find(|line| line.term == id).map(|line| line.ppm.value())
}

fn note(bench: &Bench, id: TermId) -> Option<String> {
    work_out(bench).terms.into_iter().find(|line| line.term == id).and_then(|line| line.note)
}

#[track_caller]
fn assert_term(bench: &Bench, id: TermId, by_hand: f64) {
    assert_close(term(bench, id).expect("the term is listed"), by_hand);
}

/// Whether a field is reported as not stated and its term not listed.
#[track_caller]
fn assert_wanted(bench: &Bench, id: TermId, order_code: &str, field: &str) {
    let found = work_out(bench);
    assert!(found.terms.iter().all(|line| line.term != id), "{id:?} is listed");
    let missing: Vec<_> =
        found.not_stated.iter().map(|each| (each.order_code.as_str(), each.field)).collect();
    assert_eq!(missing, [(order_code, field)]);
}

/// Whether a term whose figure is not stated is neither listed nor missed.
#[track_caller]
fn assert_absent(bench: &Bench, id: TermId) {
    let found = work_out(bench);
    assert!(found.terms.iter().all(|line| line.term != id), "{id:?} is listed");
    assert_eq!(found.not_stated, []);
}

fn at_room(bench: &mut Bench) {
    bench.request.conditions.ambient = Range::point(Celsius::new(25.0));
}

// ---- the table ----

#[test]
fn the_table_has_every_term_once_with_all_that_describes_it() {
    let names = [
        "reference_accuracy",
        "reference_assembly_shift",
        "reference_tempco",
        "reference_self_heating",
        "reference_load_regulation",
        "reference_line_regulation",
        "reference_drift",
        "reference_hysteresis",
        "reference_noise",
        "amplifier_offset",
        "amplifier_offset_drift",
        "amplifier_bias",
        "amplifier_bias_drift",
        "amplifier_cmrr",
        "amplifier_psrr",
        "amplifier_gain",
        "amplifier_noise",
        "amplifier_current_noise",
        "resistor_mismatch",
        "resistor_tolerance",
        "resistor_assembly_shift",
        "resistor_tempco",
        "resistor_self_heating",
        "resistor_stability",
        "resistor_voltage_coefficient",
        "board_leak_across",
        "board_leak_ground",
        "board_thermal_emf",
        "board_wiring",
        "adjustment_residual",
        "adjustment_tempco",
    ];
    assert_eq!(TERMS.iter().map(|def| def.name).collect::<Vec<_>>(), names);
    for def in TERMS {
        assert_eq!(def.id.def().name, def.name);
        assert_eq!(TermDef::UNIT, "ppm");
        assert!(def.doc.ends_with('.') && !def.formula.is_empty(), "{}", def.name);
        let owner = match def.name.split('_').next() {
            Some("reference") => Owner::Reference,
            Some("amplifier") => Owner::Amplifier,
            Some("board") => Owner::Board,
            Some("adjustment") => Owner::Adjustment,
            _ if def.name == "resistor_mismatch" => Owner::Network,
            _ => Owner::Element,
        };
        assert_eq!(def.owner(), owner, "{}", def.name);
    }
    let named = |chosen: fn(&TermDef) -> bool| -> Vec<_> {
        TERMS.iter().filter(|def| chosen(def)).map(|def| def.name).collect()
    };
    assert_eq!(
        named(|def| def.is_static),
        [
            "reference_accuracy",
            "reference_assembly_shift",
            "reference_load_regulation",
            "amplifier_offset",
            "amplifier_bias",
            "resistor_mismatch",
            "resistor_tolerance",
            "resistor_assembly_shift",
            "resistor_self_heating",
            "resistor_voltage_coefficient",
            "board_wiring",
        ]
    );
    assert_eq!(
        named(|def| def.nature == Nature::Systematic),
        ["resistor_mismatch", "board_leak_across", "board_leak_ground", "board_wiring"]
    );
    assert_eq!(
        named(|def| def.nature == Nature::Noise),
        ["reference_noise", "amplifier_noise", "amplifier_current_noise"]
    );
}

// ---- the whole budget ----

#[test]
fn the_bench_has_these_terms() {
    let found = work_out(&Bench::new());
    let by_hand = [
        (TermId::ReferenceAccuracy, 400.0),
        (TermId::ReferenceAssemblyShift, 100.0),
        // 10 ppm/K · 40 K
        (TermId::ReferenceTempco, 400.0),
        // (16 V − 0 V)·1.5 mA − 2.5 V·1 mA = 21.5 mW; ·200 K/W = 4.3 K; ·10 ppm/K
        (TermId::ReferenceSelfHeating, 43.0),
        // 20 ppm/mA · 1 mA
        (TermId::ReferenceLoadRegulation, 20.0),
        // V+ − Vx from 13 V to 16 V, 6 V from 10 V; · 5 ppm/V
        (TermId::ReferenceLineRegulation, 30.0),
        // 50 ppm · √4
        (TermId::ReferenceDrift, 100.0),
        (TermId::ReferenceHysteresis, 30.0),
        // 5 µV / 2.5 V
        (TermId::ReferenceNoise, 2.0),
        // 25 µV / 2.5 V
        (TermId::AmplifierOffset, 10.0),
        // 0.25 µV/K · 40 K / 2.5 V
        (TermId::AmplifierOffsetDrift, 4.0),
        // 1 nA / 1 mA
        (TermId::AmplifierBias, 1.0),
        // 1 nA · 2^(40/10) = 16 nA at 65 °C, 15 nA more than at 25 °C
        (TermId::AmplifierBiasDrift, 15.0),
        // tested at −4.5 V + 4.5 V = 0 V; 1 V from there · 1e-6 / 2.5 V
        (TermId::AmplifierCmrr, 0.4),
        // 18 V to 21 V, 2 V from 20 V · 1e-5 / 2.5 V
        (TermId::AmplifierPsrr, 8.0),
        // middle of −4.5 V and 15 V is 5.25 V, 5.25 V from 0 V · 1e-6 / 2.5 V
        (TermId::AmplifierGain, 2.1),
        // 2.5 µV / 2.5 V
        (TermId::AmplifierNoise, 1.0),
        // 5 pA / 1 mA
        (TermId::AmplifierCurrentNoise, 0.005),
        (TermId::ResistorMismatch, 0.0),
        (TermId::ResistorTolerance, 500.0),
        (TermId::ResistorAssemblyShift, 40.0),
        // 15 ppm/K · 40 K
        (TermId::ResistorTempco, 600.0),
        // 2.5² / 2500 = 2.5 mW; ·300 K/W = 0.75 K; ·15 ppm/K
        (TermId::ResistorSelfHeating, 11.25),
        // 200 ppm · √4
        (TermId::ResistorStability, 400.0),
        // 2 ppm/V · 2.5 V
        (TermId::ResistorVoltageCoefficient, 5.0),
        // 2500 / 1e10
        (TermId::BoardLeakAcross, 0.25),
        // |0 V − 16 V| / 1e10 ohm = 1.6 nA
        (TermId::BoardLeakGround, 1.6),
        // 5 µV / 2.5 V
        (TermId::BoardThermalEmf, 2.0),
        // 0.05 / 2500
        (TermId::BoardWiring, 20.0),
    ];
    assert_eq!(found.terms.len(), by_hand.len());
    for (line, (id, ppm)) in found.terms.iter().zip(by_hand) {
        assert_eq!(line.term, id);
        assert_close(line.ppm.value(), ppm);
    }
    assert_eq!(found.not_stated, []);
    let noted: Vec<_> =
        found.terms.iter().filter(|line| line.note.is_some()).map(|line| line.term).collect();
    // The gain has no test point in any record.
    assert_eq!(noted, [TermId::AmplifierGain]);
}

#[test]
fn worst_case_adds_all() {
    let found = work_out(&Bench::new());
    // reference 1125, amplifier 41.505, resistor 1556.25, board 23.85
    assert_close(found.total.value(), 2746.605);
    assert!(found.accuracy_holds);
}

/// Systematic: 0 + 0.25 + 1.6 + 20.
const SYSTEMATIC: f64 = 21.85;
/// Squares of the others: reference 344 049, amplifier 410.57, resistor 771 751.5625, EMF 4.
const BOUNDED_SQUARES: f64 = 344_049.0 + 410.57 + 771_751.562_5 + 4.0;
/// Squares of the noise terms: 2², 1², 0.005².
const NOISE_SQUARES: f64 = 5.000_025;

#[test]
fn rss_adds_the_systematic_and_squares_the_rest() {
    let mut bench = Bench::new();
    bench.request.budget = Budget::Rss;
    let by_hand = SYSTEMATIC + (BOUNDED_SQUARES + NOISE_SQUARES).sqrt();
    assert_close(work_out(&bench).total.value(), by_hand);
    assert!((by_hand - 1078.363).abs() < 1e-3);
}

#[test]
fn gum_takes_rectangular_bounds_and_noise_of_3_3_sigma() {
    let mut bench = Bench::new();
    for coverage in [1.0, 2.0, 3.0] {
        bench.request.budget = Budget::Gum { coverage };
        let variance = BOUNDED_SQUARES / 3.0 + NOISE_SQUARES / (3.3 * 3.3);
        assert_close(work_out(&bench).total.value(), SYSTEMATIC + coverage * variance.sqrt());
    }
}

// ---- adjustment ----

#[test]
fn an_adjustment_removes_the_static_terms_and_moves_the_points() {
    let mut bench = Bench::new();
    bench.adjusted = true;
    let found = work_out(&bench);
    for def in TERMS.iter().filter(|def| def.is_static) {
        assert_close(term(&bench, def.id).expect("listed"), 0.0);
        assert!(note(&bench, def.id).expect("noted").ends_with("removed by the adjustment"));
    }
    assert!(note(&bench, TermId::ReferenceAccuracy).expect("noted").starts_with("400"));
    // Adjusted at V+ 15 V, Vx 0.25 V: V+ − Vx 14.75 V, 1.75 V from 13 V; · 5 ppm/V
    assert_term(&bench, TermId::ReferenceLineRegulation, 8.75);
    // 1.75 V · 1.5 mA = 2.625 mW either way; ·200 K/W·10 ppm/K
    assert_term(&bench, TermId::ReferenceSelfHeating, 5.25);
    // Vx 0 V to 1 V, 0.75 V from 0.25 V
    assert_term(&bench, TermId::AmplifierCmrr, 0.3);
    assert_term(&bench, TermId::AmplifierGain, 0.3);
    // 15 V + 4.5 V = 19.5 V, 1.5 V from 18 V and 21 V
    assert_term(&bench, TermId::AmplifierPsrr, 6.0);
    assert_term(&bench, TermId::AdjustmentResidual, 20.0);
    // 0.5 ppm/K · 40 K
    assert_term(&bench, TermId::AdjustmentTempco, 20.0);
    // reference 400 + 5.25 + 8.75 + 100 + 30 + 2, amplifier 4 + 15 + 0.3 + 6 + 0.3 + 1 + 0.005,
    // resistor 600 + 400, board 0.25 + 1.6 + 2, adjustment 40
    assert_close(found.total.value(), 1616.455);
}

#[test]
fn the_larger_corner_of_self_heating_counts_after_an_adjustment() {
    let mut bench = Bench::new();
    bench.adjusted = true;
    // V+ − Vx 13 V to 16 V, adjusted at 15.5 V − 0 V: 2.5 V down, 0.5 V up; ·1.5 mA·200·10
    bench.request.conditions.calibrated_supply = Some(Volts::new(15.5));
    bench.request.conditions.calibrated_load = Some(Load::Voltage(Range::point(Volts::ZERO)));
    assert_term(&bench, TermId::ReferenceSelfHeating, 7.5);
    // at 14 V − 1 V: 3 V up
    bench.request.conditions.calibrated_supply = Some(Volts::new(14.0));
    bench.request.conditions.calibrated_load = Some(Load::Voltage(Range::point(Volts::new(1.0))));
    assert_term(&bench, TermId::ReferenceSelfHeating, 9.0);
}

#[test]
fn the_temperature_of_adjustment_is_t0() {
    let mut bench = Bench::new();
    bench.adjusted = true;
    bench.request.conditions.calibrated_at = Celsius::new(35.0);
    // dT = max(30, 40) K from 35 °C; at 45 °C max(20, 50) K
    assert_term(&bench, TermId::ReferenceTempco, 400.0);
    bench.request.conditions.calibrated_at = Celsius::new(45.0);
    assert_term(&bench, TermId::ReferenceTempco, 500.0);
    assert_term(&bench, TermId::ResistorTempco, 750.0);
    assert_term(&bench, TermId::AdjustmentTempco, 25.0);
    assert_term(&bench, TermId::AmplifierOffsetDrift, 5.0);
    // Without the adjustment it does not count.
    bench.adjusted = false;
    assert_term(&bench, TermId::ReferenceTempco, 400.0);
}

#[test]
fn calibrated_conditions_default_to_the_middle_with_a_note() {
    let mut bench = Bench::new();
    bench.adjusted = true;
    bench.request.conditions.calibrated_supply = None;
    bench.request.conditions.calibrated_load = None;
    // Vx at 0.5 V
    assert_term(&bench, TermId::AmplifierCmrr, 0.2);
    // V+ − Vx at 15 V − 0.5 V, 1.5 V either way
    assert_term(&bench, TermId::ReferenceLineRegulation, 7.5);
    for (id, said) in [
        (TermId::AmplifierCmrr, "calibrated_load is not stated"),
        (TermId::AmplifierGain, "calibrated_load is not stated"),
        (TermId::AmplifierPsrr, "calibrated_supply is not stated"),
        (TermId::ReferenceLineRegulation, "calibrated_supply and calibrated_load are not stated"),
        (TermId::ReferenceSelfHeating, "calibrated_supply and calibrated_load are not stated"),
    ] {
        assert!(note(&bench, id).expect("noted").starts_with(said), "{id:?}");
    }
    bench.adjusted = false;
    assert_eq!(note(&bench, TermId::AmplifierCmrr), None);
}

#[test]
fn a_calibrated_load_in_ohms_is_taken_at_the_nominal_current() {
    let mut bench = Bench::new();
    bench.adjusted = true;
    // 1 mA · 250 ohm = 0.25 V, as the bench has it in volts
    bench.request.conditions.calibrated_load =
        Some(Load::Resistance(Range::point(Ohms::new(250.0))));
    assert_term(&bench, TermId::AmplifierCmrr, 0.3);
}

#[test]
fn rss_leaves_a_removed_systematic_term_out() {
    let mut bench = Bench::new();
    bench.request.budget = Budget::Rss;
    bench.adjusted = true;
    // 0.25 + 1.6 systematic; squares as in the worst-case test
    let squares: f64 = [
        400.0, 5.25, 8.75, 100.0, 30.0, 2.0, 4.0, 15.0, 0.3, 6.0, 0.3, 1.0, 0.005, 600.0, 400.0,
        2.0, 20.0, 20.0,
    ]
    .iter()
    .map(|ppm| ppm * ppm)
    .sum();
    assert_close(work_out(&bench).total.value(), 1.85 + squares.sqrt());
}

// ---- board and lift ----

#[test]
fn leaks_count_with_insulation_and_without_a_guard() {
    let mut bench = Bench::new();
    bench.request.conditions.guarded = true;
    assert_term(&bench, TermId::BoardLeakAcross, 0.0);
    assert_term(&bench, TermId::BoardLeakGround, 0.0);
    assert_eq!(
        note(&bench, TermId::BoardLeakGround).as_deref(),
        Some("the guard ring takes this leak")
    );
    bench.request.conditions.insulation = None;
    assert_absent(&bench, TermId::BoardLeakAcross);
    assert_absent(&bench, TermId::BoardLeakGround);
}

#[test]
fn the_worst_rail_counts_for_the_leak_from_x() {
    let mut bench = Bench::new();
    // Vx 12 V: 17 V from V− at −5 V, 4 V from V+
    bench.request.outputs[0].load = Load::Voltage(Range::point(Volts::new(12.0)));
    assert_term(&bench, TermId::BoardLeakGround, 1.7);
    // V− at 0 V: 12 V from it and from the return
    bench.request.conditions.negative_rail = Range::point(Volts::ZERO);
    assert_term(&bench, TermId::BoardLeakGround, 1.2);
}

#[test]
fn a_lift_raises_x_by_its_drop() {
    let mut bench = Bench::new();
    bench.diodes = 2;
    // 1 mA is half way from 0.1 mA to 10 mA on a log scale: 0.6 V at 25 °C.
    // At 65 °C 0.52 V, at −5 °C 0.66 V, ± 20 mV: 2 diodes 1.0 V to 1.36 V. Vx 1.0 V to 2.36 V.
    // tested at 0 V: 2.36 V · 1e-6 / 2.5 V
    assert_term(&bench, TermId::AmplifierCmrr, 0.944);
    // V+ − Vx 11.64 V to 15 V, 5 V from 10 V
    assert_term(&bench, TermId::ReferenceLineRegulation, 25.0);
    // adjusted at 0.25 V + 1.18 V = 1.43 V: 0.93 V to 2.36 V
    bench.adjusted = true;
    assert_term(&bench, TermId::AmplifierCmrr, 0.372);
    // V+ − Vx adjusted at 13.57 V: 1.93 V to 11.64 V
    assert_term(&bench, TermId::ReferenceLineRegulation, 9.65);
}

#[test]
fn a_load_in_ohms_gives_its_voltage_at_the_nominal_current() {
    let mut bench = Bench::new();
    bench.request.outputs[0].load = Load::Resistance(range(Ohms::new(0.0), Ohms::new(400.0)));
    // Vx 0 V to 0.4 V from 0 V
    assert_term(&bench, TermId::AmplifierCmrr, 0.16);
}
