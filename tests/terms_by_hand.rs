//! Every term of the error budget against a value worked out by hand in a comment.
//!
//! The bench: I = 1 mA, Vref = 2.5 V, R* = 2500 ohm, V+ 14 V to 16 V, V− −5 V to −4 V, load 0 V to
//! 1 V, ambient −5 °C to 65 °C (dT = 40 K from 25 °C), 4000 h in service.

mod by_hand;

use ampthrift::catalog::{GrowthLaw, TempcoMethod};
use ampthrift::circuit::{Connection, Evaluation, Nature, Owner, TERMS, TermDef, TermId};
use ampthrift::quantity::{
    Amperes, AmperesPerKelvin, Celsius, Kelvins, KelvinsPerWatt, Ohms, Ppm, PpmPerKelvin, Range,
    Seconds, Volts,
};
use ampthrift::request::{BoxReading, Budget, Load};
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

// ---- reference ----

#[test]
fn tempco_by_slope_butterfly_and_box() {
    let mut bench = Bench::new();
    bench.adjusted = true;
    bench.request.conditions.calibrated_at = Celsius::new(45.0);
    bench.reference.tempco_method = TempcoMethod::Butterfly;
    // farther end from 25 °C is 65 °C: 40 K, and back over 45 °C: 20 K
    assert_term(&bench, TermId::ReferenceTempco, 600.0);
    bench.adjusted = false;
    assert_term(&bench, TermId::ReferenceTempco, 400.0);
    assert_eq!(note(&bench, TermId::ReferenceTempco), None);

    bench.reference.tempco_method = TempcoMethod::Box;
    assert_term(&bench, TermId::ReferenceTempco, 400.0);
    assert_eq!(
        note(&bench, TermId::ReferenceTempco).as_deref(),
        Some("box method, read as a slope")
    );
    bench.request.conditions.box_reading = BoxReading::Guaranteed;
    // −40 °C to 85 °C: 125 K
    assert_term(&bench, TermId::ReferenceTempco, 1250.0);
    assert!(note(&bench, TermId::ReferenceTempco).expect("noted").contains("guarantees"));
    // The ambient's own ends are covered by a range that just reaches them.
    bench.reference.tempco_over = range(Celsius::new(-5.0), Celsius::new(65.0));
    assert_term(&bench, TermId::ReferenceTempco, 700.0);
    for (low, high) in [(-4.0, 65.0), (-5.0, 64.0)] {
        bench.reference.tempco_over = range(Celsius::new(low), Celsius::new(high));
        assert_term(&bench, TermId::ReferenceTempco, 400.0);
        assert!(note(&bench, TermId::ReferenceTempco).expect("noted").contains("tempco_over"));
    }
}

#[test]
fn the_colder_end_counts_where_it_is_farther() {
    let mut bench = Bench::new();
    bench.request.conditions.ambient = range(Celsius::new(-35.0), Celsius::new(40.0));
    // 60 K below 25 °C, by slope and by butterfly
    assert_term(&bench, TermId::ReferenceTempco, 600.0);
    bench.reference.tempco_method = TempcoMethod::Butterfly;
    assert_term(&bench, TermId::ReferenceTempco, 600.0);
}

#[test]
fn load_regulation_counts_from_the_tested_load() {
    let mut bench = Bench::new();
    bench.reference.load_tested_at = Amperes::new(5e-3);
    // 4 mA below the tested load
    assert_term(&bench, TermId::ReferenceLoadRegulation, 80.0);
    bench.reference.load_regulation = None;
    assert_wanted(&bench, TermId::ReferenceLoadRegulation, "REF", "load_regulation");
    // At the tested load it would be zero anyway.
    bench.reference.load_tested_at = Amperes::new(1e-3);
    assert_absent(&bench, TermId::ReferenceLoadRegulation);
}

#[test]
fn line_regulation_without_a_test_point_counts_from_the_middle() {
    let mut bench = Bench::new();
    bench.reference.line_tested_at = None;
    // 15 V − 0.5 V = 14.5 V, 1.5 V from 13 V and 16 V
    assert_term(&bench, TermId::ReferenceLineRegulation, 7.5);
    assert!(
        note(&bench, TermId::ReferenceLineRegulation)
            .expect("noted")
            .starts_with("line_tested_at is not stated")
    );
    bench.reference.line_regulation = None;
    assert_wanted(&bench, TermId::ReferenceLineRegulation, "REF", "line_regulation");
    bench.request.conditions.supply = Range::point(Volts::new(15.0));
    bench.request.outputs[0].load = Load::Voltage(Range::point(Volts::new(1.0)));
    assert_absent(&bench, TermId::ReferenceLineRegulation);
}

#[test]
fn drift_and_stability_grow_by_their_laws() {
    let mut bench = Bench::new();
    bench.reference.drift.law = GrowthLaw::Linear;
    bench.types[0].stability.law = GrowthLaw::Linear;
    // 4000 h / 1000 h
    assert_term(&bench, TermId::ReferenceDrift, 200.0);
    assert_term(&bench, TermId::ResistorStability, 800.0);
    bench.request.conditions.service = Seconds::ZERO;
    assert_term(&bench, TermId::ReferenceDrift, 0.0);
    assert_term(&bench, TermId::ResistorStability, 0.0);
    bench.reference.drift.error = None;
    bench.types[0].stability.error = None;
    assert_absent(&bench, TermId::ReferenceDrift);
    assert_absent(&bench, TermId::ResistorStability);
    bench.request.conditions.service = Seconds::new(3600.0);
    bench.types[0].stability.error = Some(Ppm::ZERO);
    assert_wanted(&bench, TermId::ReferenceDrift, "REF", "drift");
}

#[test]
fn hysteresis_counts_only_where_the_temperature_changes() {
    let mut bench = Bench::new();
    at_room(&mut bench);
    assert_term(&bench, TermId::ReferenceHysteresis, 0.0);
    bench.reference.hysteresis = None;
    assert_absent(&bench, TermId::ReferenceHysteresis);
    bench.request.conditions.ambient = range(Celsius::new(25.0), Celsius::new(26.0));
    assert_wanted(&bench, TermId::ReferenceHysteresis, "REF", "hysteresis");
}

#[test]
fn self_heating_wants_the_thermal_resistance_unless_it_is_zero_anyway() {
    let mut bench = Bench::new();
    bench.reference.thermal = None;
    assert_wanted(&bench, TermId::ReferenceSelfHeating, "REF", "thermal");
    bench.reference.tempco = PpmPerKelvin::ZERO;
    assert_absent(&bench, TermId::ReferenceSelfHeating);
    // Adjusted under the only supply and load there are, nothing changes since.
    let mut bench = Bench::new();
    bench.adjusted = true;
    bench.request.conditions.supply = Range::point(Volts::new(15.0));
    bench.request.outputs[0].load = Load::Voltage(Range::point(Volts::new(0.25)));
    assert_term(&bench, TermId::ReferenceSelfHeating, 0.0);
    bench.reference.thermal = None;
    assert_absent(&bench, TermId::ReferenceSelfHeating);
}

#[test]
fn figures_always_wanted_of_a_reference() {
    for (id, field, forget) in [
        (
            TermId::ReferenceAssemblyShift,
            "assembly_shift",
            (|bench| bench.reference.assembly_shift = None) as fn(&mut Bench),
        ),
        (TermId::ReferenceNoise, "noise", |bench| bench.reference.noise = None),
    ] {
        let mut bench = Bench::new();
        forget(&mut bench);
        assert_wanted(&bench, id, "REF", field);
        // With an adjustment the static sum still wants it.
        bench.adjusted = true;
        assert_wanted(&bench, id, "REF", field);
    }
}

// ---- amplifier ----

/// Bias terms of the bench with the three laws as given: doubling step in K, drift in nA/K,
/// largest over the range in nA.
fn bias_laws(doubling: Option<f64>, drift: Option<f64>, over: Option<f64>) -> Bench {
    let mut bench = Bench::new();
    bench.amplifier.bias_doubling = doubling.map(Kelvins::new);
    bench.amplifier.bias_drift = drift.map(|each| AmperesPerKelvin::new(each * 1e-9));
    bench.amplifier.bias_over_range = over.map(|most| Amperes::new(most * 1e-9));
    bench
}

#[test]
fn bias_drift_by_each_law_and_by_all_together() {
    // bias 1 nA at 25 °C, ambient −5 °C to 65 °C; 1 nA is 1 ppm
    for (doubling, drift, over, by_hand) in [
        // 16 nA at 65 °C
        (Some(10.0), None, None, 15.0),
        // 1 + 0.1·40 = 5 nA at 65 °C, 4 nA at −5 °C
        (None, Some(0.1), None, 4.0),
        // at most 7 nA
        (None, None, Some(7.0), 6.0),
        // the larger of 16 nA and 5 nA
        (Some(10.0), Some(0.1), None, 15.0),
        // the larger of 16 nA and 21 nA
        (Some(10.0), Some(0.5), None, 20.0),
        // 16 nA, never above 7 nA
        (Some(10.0), None, Some(7.0), 6.0),
        // 5 nA stays below 7 nA
        (None, Some(0.1), Some(7.0), 4.0),
        // 21 nA, never above 18 nA
        (Some(10.0), Some(0.5), Some(18.0), 17.0),
    ] {
        let bench = bias_laws(doubling, drift, over);
        assert_term(&bench, TermId::AmplifierBiasDrift, by_hand);
    }
    let none = bias_laws(None, None, None);
    assert_wanted(&none, TermId::AmplifierBiasDrift, "AMP", "bias_doubling");
}

#[test]
fn bias_drift_counts_from_the_temperature_of_adjustment() {
    for (doubling, drift, over, by_hand) in [
        // 4 nA at 45 °C; 16 nA at 65 °C, 1 nA at and below 25 °C
        (Some(10.0), None, None, 12.0),
        // 1 + 0.1·20 = 3 nA at 45 °C; 5 nA at 65 °C, 4 nA at −5 °C, 1 nA at 25 °C: 2 nA
        (None, Some(0.1), None, 2.0),
        // between 0 and 7 nA, then and now
        (None, None, Some(7.0), 7.0),
        // max(4, 3) = 4 nA at 45 °C; max(16, 5) nA at 65 °C
        (Some(10.0), Some(0.1), None, 12.0),
        // max(4, 11) = 11 nA at 45 °C; 21 nA at 65 °C, 16 nA at −5 °C, 1 nA at 25 °C: 10 nA
        (Some(10.0), Some(0.5), None, 10.0),
        // 4 nA at 45 °C; 7 nA at 65 °C, 1 nA at 25 °C
        (Some(10.0), None, Some(7.0), 3.0),
        // as without: 3 nA, 5 nA, 1 nA
        (None, Some(0.1), Some(7.0), 2.0),
        // 11 nA at 45 °C; never above 18 nA: 7 nA up, 10 nA down to 25 °C
        (Some(10.0), Some(0.5), Some(18.0), 10.0),
    ] {
        let mut bench = bias_laws(doubling, drift, over);
        bench.adjusted = true;
        bench.request.conditions.calibrated_at = Celsius::new(45.0);
        assert_term(&bench, TermId::AmplifierBiasDrift, by_hand);
    }
}

#[test]
fn bias_at_25_degrees_counts_only_where_the_ambient_reaches_it() {
    let mut bench = bias_laws(None, Some(0.1), None);
    bench.adjusted = true;
    bench.request.conditions.calibrated_at = Celsius::new(45.0);
    bench.request.conditions.ambient = range(Celsius::new(35.0), Celsius::new(50.0));
    // 3 nA at 45 °C; 2 nA at 35 °C, 3.5 nA at 50 °C
    assert_term(&bench, TermId::AmplifierBiasDrift, 1.0);
    bench.request.conditions.ambient = range(Celsius::new(15.0), Celsius::new(50.0));
    // 2 nA at 15 °C, 1 nA at 25 °C between
    assert_term(&bench, TermId::AmplifierBiasDrift, 2.0);
}

#[test]
fn bias_does_not_drift_where_the_temperature_stays() {
    for (doubling, drift, over) in [
        (Some(10.0), None, None),
        (None, Some(0.1), None),
        (None, None, Some(7.0)),
        (Some(10.0), Some(0.1), Some(7.0)),
    ] {
        let mut bench = bias_laws(doubling, drift, over);
        at_room(&mut bench);
        assert_term(&bench, TermId::AmplifierBiasDrift, 0.0);
        bench.adjusted = true;
        bench.request.conditions.calibrated_at = Celsius::new(45.0);
        bench.request.conditions.ambient = Range::point(Celsius::new(45.0));
        assert_term(&bench, TermId::AmplifierBiasDrift, 0.0);
    }
    let mut none = bias_laws(None, None, None);
    at_room(&mut none);
    assert_absent(&none, TermId::AmplifierBiasDrift);
}

#[test]
fn rejection_without_a_test_point_counts_from_the_middle() {
    let mut bench = Bench::new();
    bench.amplifier.tested_common_mode = None;
    bench.amplifier.tested_supply = None;
    // 5.25 V as for the gain
    assert_term(&bench, TermId::AmplifierCmrr, 2.1);
    // 15 V + 4.5 V = 19.5 V, 1.5 V from 18 V and 21 V; 1e-5 / 2.5 V
    assert_term(&bench, TermId::AmplifierPsrr, 6.0);
    for (id, said) in [
        (TermId::AmplifierCmrr, "tested_common_mode is not stated"),
        (TermId::AmplifierPsrr, "tested_supply is not stated"),
        (TermId::AmplifierGain, "counted from the middle between the rails"),
    ] {
        assert!(note(&bench, id).expect("noted").starts_with(said), "{id:?}");
    }
}

#[test]
fn figures_wanted_of_an_amplifier() {
    for (id, field, forget) in [
        (
            TermId::AmplifierOffsetDrift,
            "offset_drift",
            (|bench| bench.amplifier.offset_drift = None) as fn(&mut Bench),
        ),
        (TermId::AmplifierCmrr, "cmrr", |bench| bench.amplifier.cmrr = None),
        (TermId::AmplifierPsrr, "psrr", |bench| bench.amplifier.psrr = None),
        (TermId::AmplifierGain, "open_loop_gain", |bench| bench.amplifier.open_loop_gain = None),
        (TermId::AmplifierNoise, "noise", |bench| bench.amplifier.noise = None),
        (TermId::AmplifierCurrentNoise, "current_noise", |bench| {
            bench.amplifier.current_noise = None;
        }),
    ] {
        let mut bench = Bench::new();
        forget(&mut bench);
        assert_wanted(&bench, id, "AMP", field);
    }
    // Where nothing moves, nothing is wanted.
    let mut bench = Bench::new();
    at_room(&mut bench);
    bench.adjusted = true;
    bench.request.conditions.supply = Range::point(Volts::new(15.0));
    bench.request.conditions.negative_rail = Range::point(Volts::new(-4.5));
    bench.request.outputs[0].load = Load::Voltage(Range::point(Volts::new(0.25)));
    bench.amplifier.offset_drift = None;
    bench.amplifier.cmrr = None;
    bench.amplifier.psrr = None;
    bench.amplifier.open_loop_gain = None;
    assert_absent(&bench, TermId::AmplifierCmrr);
}

// ---- resistors ----

/// 2 kohm of type 0 and 500 ohm of the type given, in series.
fn series(second: usize) -> Bench {
    let mut bench = Bench::new();
    bench.connection = Connection::Series;
    bench.elements = vec![(0, 2000), (second, 500)];
    bench.types[1].tolerance = Ppm::new(1000.0);
    bench
}

#[test]
fn mismatch_is_the_distance_of_the_nominal_value() {
    let mut bench = Bench::new();
    bench.elements = vec![(0, 2490)];
    // 2500/2490 − 1 = 10/2490
    assert_term(&bench, TermId::ResistorMismatch, 1e7 / 2490.0);
    bench.elements = vec![(0, 2510)];
    assert_term(&bench, TermId::ResistorMismatch, 1e7 / 2510.0);
    bench.connection = Connection::Parallel;
    bench.elements = vec![(0, 5000), (1, 10000), (0, 10000)];
    assert_term(&bench, TermId::ResistorMismatch, 0.0);
}

#[test]
fn elements_in_series_count_by_their_share() {
    let bench = series(1);
    // 0.8·500 + 0.2·1000
    assert_term(&bench, TermId::ResistorTolerance, 600.0);
    // 40 and 600, alike in both types
    assert_term(&bench, TermId::ResistorAssemblyShift, 40.0);
    assert_term(&bench, TermId::ResistorTempco, 600.0);
    // 2 V and 0.5 V at 1 mA: 2 mW and 0.5 mW; 15·300·(0.8·2 mW + 0.2·0.5 mW)
    assert_term(&bench, TermId::ResistorSelfHeating, 7.65);
    // 2 ppm/V·(0.8·2 V + 0.2·0.5 V)
    assert_term(&bench, TermId::ResistorVoltageCoefficient, 3.4);
}

#[test]
fn elements_in_parallel_count_by_their_share() {
    let mut bench = series(1);
    bench.connection = Connection::Parallel;
    // 3 kohm beside 15 kohm: 2.5 kohm; shares 5/6 and 1/6
    bench.elements = vec![(0, 3000), (1, 15000)];
    // 500·5/6 + 1000/6
    assert_term(&bench, TermId::ResistorTolerance, 3500.0 / 6.0);
    assert_term(&bench, TermId::ResistorMismatch, 0.0);
    // 6.25/3000 W = 2.0833 mW and 6.25/15000 W = 0.41667 mW, by share: 1.80556 mW; ·4500
    assert_term(&bench, TermId::ResistorSelfHeating, 8.125);
    // both carry 2.5 V
    assert_term(&bench, TermId::ResistorVoltageCoefficient, 5.0);
}

#[test]
fn elements_of_one_type_add_and_of_two_types_are_squared() {
    for budget in [Budget::Rss, Budget::Gum { coverage: 2.0 }] {
        let mut two = series(1);
        two.request.budget = budget;
        // √(400² + 200²)
        assert_term(&two, TermId::ResistorTolerance, 200_000f64.sqrt());
        let mut one = series(0);
        one.request.budget = budget;
        // 0.8·500 + 0.2·500
        assert_term(&one, TermId::ResistorTolerance, 500.0);
        // Equal figures of another type are still another type.
        one.elements[1].0 = 1;
        one.types[1] = one.types[0].clone();
        // √(400² + 100²)
        assert_term(&one, TermId::ResistorTolerance, 170_000f64.sqrt());
        let mut three = series(1);
        three.request.budget = budget;
        three.elements = vec![(0, 1500), (1, 500), (0, 500)];
        // type 0: 0.6·500 + 0.2·500 = 400; type 1: 0.2·1000 = 200
        assert_term(&three, TermId::ResistorTolerance, 200_000f64.sqrt());
    }
}

#[test]
fn the_removed_sum_is_worst_case_whatever_the_method() {
    let mut bench = series(1);
    bench.request.budget = Budget::Rss;
    bench.adjusted = true;
    assert_term(&bench, TermId::ResistorTolerance, 0.0);
    assert!(note(&bench, TermId::ResistorTolerance).expect("noted").starts_with("600"));
}

#[test]
fn figures_wanted_of_a_resistor_name_the_element() {
    for (id, field, forget) in [
        (
            TermId::ResistorAssemblyShift,
            "assembly_shift",
            (|bench| bench.types[0].assembly_shift = None) as fn(&mut Bench),
        ),
        (TermId::ResistorSelfHeating, "thermal", |bench| bench.types[0].thermal = None),
        (TermId::ResistorStability, "stability", |bench| bench.types[0].stability.error = None),
        (TermId::ResistorVoltageCoefficient, "voltage_coefficient", |bench| {
            bench.types[0].voltage_coefficient = None;
        }),
    ] {
        let mut bench = Bench::new();
        forget(&mut bench);
        assert_wanted(&bench, id, "RA-2500", field);
    }
    let mut bench = Bench::new();
    bench.types[0].thermal = None;
    bench.types[0].tempco = PpmPerKelvin::ZERO;
    assert_absent(&bench, TermId::ResistorSelfHeating);
}

#[test]
fn what_one_element_states_is_listed_and_what_the_other_lacks_is_missed() {
    let mut bench = series(1);
    bench.types[1].thermal = None;
    let found = work_out(&bench);
    // 15·300·0.8·2 mW
    assert_term(&bench, TermId::ResistorSelfHeating, 7.2);
    assert_eq!(found.not_stated.len(), 1);
    assert_eq!(found.not_stated[0].order_code, "RB-500");
    bench.types[1].thermal = Some(KelvinsPerWatt::ZERO);
    assert_eq!(work_out(&bench).not_stated, []);
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
