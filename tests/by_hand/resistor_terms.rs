//! The terms of the set resistor.

use ampthrift::circuit::{Connection, TermId};
use ampthrift::quantity::{KelvinsPerWatt, Ppm, PpmPerKelvin};
use ampthrift::request::Budget;

use super::by_hand::Bench;
use super::{assert_absent, assert_term, assert_wanted, note, work_out};

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
