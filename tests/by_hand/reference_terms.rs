//! The terms of the reference.

use ampthrift::catalog::{GrowthLaw, TempcoMethod};
use ampthrift::circuit::TermId;
use ampthrift::quantity::{Amperes, Celsius, Ppm, PpmPerKelvin, Range, Seconds, Volts};
use ampthrift::request::{BoxReading, Load};

use super::by_hand::{Bench, range};
use super::{assert_absent, assert_term, assert_wanted, at_room, note};

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
