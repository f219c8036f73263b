//! The terms of the amplifier.

use ampthrift::circuit::TermId;
use ampthrift::quantity::{Amperes, AmperesPerKelvin, Celsius, Kelvins, Range, Volts};
use ampthrift::request::Load;

use super::by_hand::{Bench, range};
use super::{assert_absent, assert_term, assert_wanted, at_room, note};

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
