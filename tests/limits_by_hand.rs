//! Every limit of the operating window against sides worked out by hand in a comment.
//!
//! The bench: I = 1 mA, Vref = 2.5 V, R = 2500 ohm, V+ 14 V to 16 V, V− −5 V to −4 V, load 0 V to
//! 1 V, ambient −5 °C to 65 °C.

mod by_hand;

use ampthrift::circuit::{Connection, Evaluation, LIMITS, LimitId, LimitLine, LoadEnd, cautions};
use ampthrift::quantity::{
    Amperes, Celsius, Decibels, Farads, Ohms, Ppm, PpmPerVolt, Range, Volts, Watts,
};
use ampthrift::request::Load;
use by_hand::{Bench, assert_close, range};

type Change = fn(&mut Bench);

fn work_out(bench: &Bench) -> Evaluation {
    bench.work_out().expect("the lift's curve reaches the current")
}

fn limit(bench: &Bench, id: LimitId) -> Option<LimitLine> {
    work_out(bench).limits.into_iter().find(|line| line.limit == id)
}

#[track_caller]
fn assert_limit(bench: &Bench, id: LimitId, value: f64, bound: f64, margin: f64) {
    let line = limit(bench, id).expect("the limit is listed");
    assert_close(line.value, value);
    assert_close(line.bound, bound);
    assert_close(line.margin, margin);
}

#[track_caller]
fn assert_holds(bench: &Bench, holds: bool) {
    assert_eq!(work_out(bench).window_holds, holds);
}

// ---- the table ----

#[test]
fn the_table_has_every_limit_once_with_all_that_describes_it() {
    let listed: Vec<_> = LIMITS.iter().map(|def| (def.name, def.unit)).collect();
    assert_eq!(
        listed,
        [
            ("swing_low", "V"),
            ("swing_high", "V"),
            ("input_low", "V"),
            ("input_high", "V"),
            ("reference_headroom", "V"),
            ("reference_input_max", "V"),
            ("amplifier_supply_min", "V"),
            ("amplifier_supply_max", "V"),
            ("reference_source", "A"),
            ("amplifier_sink", "A"),
            ("lift_current", "A"),
            ("resistor_power", "W"),
            ("resistor_voltage", "V"),
            ("temperature", "degC"),
            ("capacitive_load", "F"),
            ("quiescent", "A"),
            ("adjustment_range", "ppm"),
        ]
    );
    for def in LIMITS {
        assert_eq!(def.id.def().name, def.name);
        assert!(def.doc.ends_with('.') && !def.formula.is_empty(), "{}", def.name);
    }
}

// ---- the whole window ----

#[test]
fn the_bench_has_these_limits() {
    let mut bench = Bench::new();
    bench.adjusted = true;
    let found = work_out(&bench);
    let by_hand = [
        // −4 V + 0.5 V + 0.05 V
        (LimitId::SwingLow, 0.0, -3.45, 3.45),
        // 14 V − 1.2 V − 0.05 V
        (LimitId::SwingHigh, 1.0, 12.75, 11.75),
        // −4 V + 0.3 V
        (LimitId::InputLow, -3.7, 0.0, 3.7),
        // 14 V − 1.5 V
        (LimitId::InputHigh, 1.0, 12.5, 11.5),
        // 14 V − 1 V; 2.5 V + 0.5 V
        (LimitId::ReferenceHeadroom, 13.0, 3.0, 10.0),
        // 16 V − 0 V
        (LimitId::ReferenceInputMax, 16.0, 40.0, 24.0),
        // 14 V + 4 V
        (LimitId::AmplifierSupplyMin, 2.7, 18.0, 15.3),
        // 16 V + 5 V
        (LimitId::AmplifierSupplyMax, 21.0, 36.0, 15.0),
        (LimitId::ReferenceSource, 1e-3, 5e-3, 4e-3),
        (LimitId::AmplifierSink, 0.5e-3, 5e-3, 4.5e-3),
        // 2.5² / 2500; 0.125 W · 0.5
        (LimitId::ResistorPower, 2.5e-3, 62.5e-3, 60e-3),
        (LimitId::ResistorVoltage, 2.5, 50.0, 47.5),
        // 20 K at the hot end, 35 K at the cold one
        (LimitId::Temperature, 65.0, 85.0, 20.0),
        (LimitId::CapacitiveLoad, 100e-9, 200e-9, 100e-9),
        // 0.5 mA + 1 mA
        (LimitId::Quiescent, 1.5e-3, 2e-3, 0.5e-3),
        // reference 400 + 100 + 20, amplifier 10 + 1, resistor 500 + 40 + 11.25 + 5, wiring 20
        (LimitId::AdjustmentRange, 1107.25, 5000.0, 3892.75),
    ];
    assert_eq!(found.limits.len(), by_hand.len());
    for (line, (id, value, bound, margin)) in found.limits.iter().zip(by_hand) {
        assert_eq!(line.limit, id);
        assert_close(line.value, value);
        assert_close(line.bound, bound);
        assert_close(line.margin, margin);
    }
    assert!(found.window_holds);
}

#[test]
fn each_limit_fails_when_its_figure_is_short() {
    let worse: [(LimitId, Change); 17] = [
        (LimitId::SwingLow, |bench| bench.amplifier.swing_low = Volts::new(4.0)),
        (LimitId::SwingHigh, |bench| bench.amplifier.swing_high = Volts::new(13.0)),
        (LimitId::InputLow, |bench| bench.amplifier.input_low = Volts::new(4.1)),
        (LimitId::InputHigh, |bench| bench.amplifier.input_high = Volts::new(13.1)),
        (LimitId::ReferenceHeadroom, |bench| bench.reference.dropout = Volts::new(10.6)),
        (LimitId::ReferenceInputMax, |bench| bench.reference.supply_max = Volts::new(15.9)),
        (LimitId::AmplifierSupplyMin, |bench| {
            bench.amplifier.total_supply = range(Volts::new(18.1), Volts::new(36.0));
        }),
        (LimitId::AmplifierSupplyMax, |bench| {
            bench.amplifier.total_supply = range(Volts::new(2.7), Volts::new(20.9));
        }),
        (LimitId::ReferenceSource, |bench| bench.reference.source_max = Amperes::new(0.9e-3)),
        (LimitId::AmplifierSink, |bench| bench.amplifier.sink_max = Amperes::new(0.4e-3)),
        (LimitId::LiftCurrent, |bench| {
            bench.diodes = 1;
            bench.diode.current_max = Amperes::new(0.9e-3);
        }),
        (LimitId::ResistorPower, |bench| bench.types[0].power = Watts::new(4.9e-3)),
        (LimitId::ResistorVoltage, |bench| bench.types[0].voltage_max = Some(Volts::new(2.4))),
        (LimitId::Temperature, |bench| {
            bench.types[0].supply.temperature = range(Celsius::new(0.0), Celsius::new(85.0));
        }),
        (LimitId::CapacitiveLoad, |bench| {
            bench.amplifier.capacitive_load = Some(Farads::new(99e-9));
        }),
        (LimitId::Quiescent, |bench| {
            bench.request.conditions.quiescent_max = Some(Amperes::new(1.4e-3));
        }),
        (LimitId::AdjustmentRange, |bench| {
            bench.adjusted = true;
            bench.adjustment.range = Ppm::new(1100.0);
        }),
    ];
    for ((id, spoil), def) in worse.into_iter().zip(LIMITS) {
        assert_eq!(id, def.id);
        let mut bench = Bench::new();
        spoil(&mut bench);
        let failing: Vec<_> = work_out(&bench)
            .limits
            .into_iter()
            .filter(|line| line.margin < 0.0)
            .map(|line| line.limit)
            .collect();
        assert_eq!(failing, [id]);
        assert_holds(&bench, false);
    }
}

#[test]
fn limits_that_do_not_apply_are_not_listed() {
    let mut bench = Bench::new();
    bench.reference.bypass = None;
    bench.request.conditions.quiescent_max = None;
    bench.amplifier.capacitive_load = None;
    bench.amplifier.quiescent = None;
    for id in [
        LimitId::LiftCurrent,
        LimitId::CapacitiveLoad,
        LimitId::Quiescent,
        LimitId::AdjustmentRange,
    ] {
        assert_eq!(limit(&bench, id), None);
    }
    assert_eq!(work_out(&bench).not_stated, []);
}

#[test]
fn a_limit_whose_figure_is_not_stated_is_missed_and_does_not_fail() {
    let mut bench = Bench::new();
    bench.amplifier.capacitive_load = None;
    bench.amplifier.quiescent = None;
    bench.types[0].voltage_max = None;
    let found = work_out(&bench);
    let missing: Vec<_> =
        found.not_stated.iter().map(|each| (each.order_code.as_str(), each.field)).collect();
    assert_eq!(
        missing,
        [("AMP", "capacitive_load"), ("AMP", "quiescent"), ("RA-2500", "voltage_max")]
    );
    assert!(found.window_holds);
    for id in [LimitId::CapacitiveLoad, LimitId::Quiescent, LimitId::ResistorVoltage] {
        assert_eq!(limit(&bench, id), None);
    }
}

// ---- one entry a limit ----

#[test]
fn the_element_with_the_smallest_margin_is_shown() {
    let mut bench = Bench::new();
    bench.connection = Connection::Series;
    bench.elements = vec![(0, 2000), (1, 500)];
    bench.types[1].power = Watts::new(5e-3);
    // 2 mW of 62.5 mW; 0.5 mW of 2.5 mW
    assert_limit(&bench, LimitId::ResistorPower, 0.5e-3, 2.5e-3, 2e-3);
    // 2 V and 0.5 V of 50 V
    assert_limit(&bench, LimitId::ResistorVoltage, 2.0, 50.0, 48.0);
    bench.connection = Connection::Parallel;
    bench.elements = vec![(0, 3000), (1, 15000)];
    // 6.25/3000 W of 62.5 mW; 6.25/15000 W of 2.5 mW
    assert_limit(&bench, LimitId::ResistorPower, 6.25 / 15e3, 2.5e-3, 2.5e-3 - 6.25 / 15e3);
    assert_limit(&bench, LimitId::ResistorVoltage, 2.5, 50.0, 47.5);
}

#[test]
fn the_part_and_end_with_the_smallest_margin_is_shown_for_temperature() {
    let mut bench = Bench::new();
    bench.amplifier.supply.temperature = range(Celsius::new(-10.0), Celsius::new(125.0));
    assert_limit(&bench, LimitId::Temperature, -5.0, -10.0, 5.0);
    bench.diode.supply.temperature = range(Celsius::new(-40.0), Celsius::new(66.0));
    assert_limit(&bench, LimitId::Temperature, -5.0, -10.0, 5.0);
    bench.diodes = 1;
    assert_limit(&bench, LimitId::Temperature, 65.0, 66.0, 1.0);
    // An adjustment is a step, not a part.
    bench.adjusted = true;
    bench.adjustment.supply.temperature = range(Celsius::new(0.0), Celsius::new(50.0));
    assert_limit(&bench, LimitId::Temperature, 65.0, 66.0, 1.0);
}

// ---- lift ----

#[test]
fn a_lift_moves_the_window_by_its_least_and_greatest_drop() {
    let mut bench = Bench::new();
    bench.diodes = 2;
    // 2·(0.6 V − 0.08 V − 0.02 V) = 1.0 V at 65 °C; 2·(0.6 V + 0.06 V + 0.02 V) at −5 °C
    assert_limit(&bench, LimitId::SwingLow, 1.0, -3.45, 4.45);
    assert_limit(&bench, LimitId::SwingHigh, 2.36, 12.75, 10.39);
    assert_limit(&bench, LimitId::ReferenceInputMax, 15.0, 40.0, 25.0);
    assert_limit(&bench, LimitId::ReferenceHeadroom, 11.64, 3.0, 8.64);
    assert_limit(&bench, LimitId::LiftCurrent, 1e-3, 20e-3, 19e-3);
}

#[test]
fn a_drop_does_not_go_below_zero() {
    let mut bench = Bench::new();
    bench.diodes = 1;
    bench.diode.drop_spread = Volts::new(0.7);
    assert_limit(&bench, LimitId::SwingLow, 0.0, -3.45, 3.45);
    // 0.66 V + 0.7 V
    assert_limit(&bench, LimitId::SwingHigh, 2.36, 12.75, 10.39);
}

#[test]
fn a_lift_cannot_be_used_outside_its_curve() {
    let mut bench = Bench::new();
    bench.diodes = 1;
    for (low, high, reached) in
        [(1e-3, 10e-3, true), (0.1e-3, 1e-3, true), (1.1e-3, 10e-3, false), (0.1e-3, 0.9e-3, false)]
    {
        bench.diode.drop[0].current = Amperes::new(low);
        bench.diode.drop[1].current = Amperes::new(high);
        assert_eq!(bench.work_out().is_ok(), reached, "{low} {high}");
        assert!(reached || bench.work_out() == Err(LimitId::LiftCurrent));
    }
    // One point is a curve of that current alone.
    bench.diode.drop.truncate(1);
    assert_eq!(bench.work_out(), Err(LimitId::LiftCurrent));
    bench.diode.drop[0].current = Amperes::new(1e-3);
    // 0.5 V + 0.06 V + 0.02 V
    assert_limit(&bench, LimitId::SwingHigh, 1.58, 12.75, 11.17);
}

// ---- tolerance ----

#[test]
fn volts_may_fail_by_a_nanovolt_or_a_billionth() {
    let mut bench = Bench::new();
    bench.request.conditions.negative_rail = Range::point(Volts::ZERO);
    bench.amplifier.input_low = Volts::ZERO;
    bench.amplifier.swing_low = Volts::new(0.05);
    // bound 0 V + 0.05 V + 0.05 V; the absolute tolerance is the wider below 1 V
    for (short, holds) in [(0.9e-9, true), (1.1e-9, false)] {
        bench.request.outputs[0].load = Load::Voltage(Range::point(Volts::new(0.1 - short)));
        assert_holds(&bench, holds);
        assert!(limit(&bench, LimitId::SwingLow).expect("listed").margin < 0.0);
    }
    // 16 V against supply_max: a billionth of the larger side is 16 nV
    let mut bench = Bench::new();
    for (short, holds) in [(15.9e-9, true), (16.1e-9, false)] {
        bench.reference.supply_max = Volts::new(16.0 - short);
        assert_holds(&bench, holds);
    }
}

#[test]
fn kelvins_may_fail_by_a_nanokelvin_or_a_billionth() {
    let mut bench = Bench::new();
    for (short, holds) in [(64.9e-9, true), (65.1e-9, false)] {
        bench.types[0].supply.temperature = range(Celsius::new(-40.0), Celsius::new(65.0 - short));
        assert_holds(&bench, holds);
    }
    bench.request.conditions.ambient = range(Celsius::new(0.0), Celsius::new(20.0));
    for (short, holds) in [(0.9e-9, true), (1.1e-9, false)] {
        bench.types[0].supply.temperature = range(Celsius::new(short), Celsius::new(85.0));
        assert_holds(&bench, holds);
    }
}

#[test]
fn other_quantities_may_fail_by_a_billionth_only() {
    for (short, holds) in [(0.9e-9, true), (1.1e-9, false)] {
        let worse: [fn(&mut Bench, f64); 5] = [
            |bench, rest| bench.reference.source_max = Amperes::new(1e-3 * rest),
            |bench, rest| bench.amplifier.sink_max = Amperes::new(0.5e-3 * rest),
            |bench, rest| bench.types[0].power = Watts::new(5e-3 * rest),
            |bench, rest| bench.amplifier.capacitive_load = Some(Farads::new(100e-9 * rest)),
            |bench, rest| {
                bench.adjusted = true;
                bench.adjustment.range = Ppm::new(1107.25 * rest);
            },
        ];
        for spoil in worse {
            let mut bench = Bench::new();
            spoil(&mut bench, 1.0 - short);
            assert_holds(&bench, holds);
        }
    }
}

#[test]
fn the_total_may_miss_the_accuracy_by_a_billionth_only() {
    let mut bench = Bench::new();
    for (short, holds) in [(-1e-6, true), (0.9e-9, true), (1.1e-9, false)] {
        bench.request.outputs[0].accuracy = Ppm::new(2746.605 * (1.0 - short));
        assert_eq!(work_out(&bench).accuracy_holds, holds);
    }
}

// ---- compliance ----

#[test]
fn compliance_is_where_the_first_limit_is_reached() {
    let mut bench = Bench::new();
    let found = work_out(&bench).compliance;
    // swing −3.45 V, input −3.7 V, reference 16 V − 40 V
    assert_close(found.load_min.value(), -3.45);
    // swing 12.75 V, input 12.5 V, headroom 14 V − 3 V
    assert_close(found.load_max.value(), 11.0);
    // With a lift of 1.0 V to 1.36 V the load can go lower, and not as high.
    bench.diodes = 2;
    let lifted = work_out(&bench).compliance;
    assert_close(lifted.load_min.value(), -4.45);
    assert_close(lifted.load_max.value(), 9.64);
    // The reference's own maximum can come first: 16 V − 17 V
    bench.diodes = 0;
    bench.reference.supply_max = Volts::new(17.0);
    assert_close(work_out(&bench).compliance.load_min.value(), -1.0);
    bench.amplifier.swing_high = Volts::new(4.0);
    assert_close(work_out(&bench).compliance.load_max.value(), 9.95);
}

#[test]
fn every_limit_holds_at_the_ends_of_compliance_and_one_fails_beyond() {
    let mut bench = Bench::new();
    bench.diodes = 2;
    let compliance = work_out(&bench).compliance;
    let (low, high) = (compliance.load_min, compliance.load_max);
    let beyond = Volts::new(1e-6);
    for (from, to, holds) in
        [(low, high, true), (low - beyond, high, false), (low, high + beyond, false)]
    {
        bench.request.outputs[0].load = Load::Voltage(range(from, to));
        assert_holds(&bench, holds);
    }
    // The compliance does not depend on the load that was asked for.
    let again = work_out(&bench).compliance;
    assert!((again.load_min - low).abs() < Volts::new(1e-12));
    assert!(LIMITS.iter().any(|def| def.load_end == LoadEnd::Low));
}

#[test]
fn the_output_resistance_follows_from_what_is_stated() {
    let ohms = |bench: &Bench| work_out(bench).compliance.output.map(Ohms::value);
    let mut bench = Bench::new();
    // 1 mA·((1e-6 + 1e-6)/2.5 V + 5e-6/V) + 1e-10 S = 5.9 nS
    assert_close(ohms(&bench).expect("stated"), 1.0 / 5.9e-9);
    bench.request.conditions.guarded = true;
    assert_close(ohms(&bench).expect("stated"), 1.0 / 5.8e-9);
    bench.amplifier.open_loop_gain = Some(Decibels::new(100.0));
    // 1 mA·((1e-6 + 1e-5)/2.5 V + 5e-6/V)
    assert_close(ohms(&bench).expect("stated"), 1.0 / 9.4e-9);
    bench.amplifier.open_loop_gain = None;
    bench.amplifier.cmrr = None;
    assert_close(ohms(&bench).expect("stated"), 1.0 / 5e-9);
    bench.reference.line_regulation = None;
    assert_eq!(ohms(&bench), None);
    bench.reference.line_regulation = Some(PpmPerVolt::ZERO);
    assert_eq!(ohms(&bench), None);
    bench.request.conditions.guarded = false;
    assert_close(ohms(&bench).expect("insulation"), 1e10);
}

// ---- cautions ----

#[test]
fn cautions_are_given_only_where_the_circuit_could_hurt() {
    let mut request = Bench::new().request;
    request.conditions.negative_rail = Range::point(Volts::new(-20.0));
    let mut at = |volts: f64| {
        request.conditions.supply = Range::point(Volts::new(volts - 20.0));
        cautions(&request)
    };
    assert!(at(36.0).is_empty());
    assert!(at(60.0).is_empty());
    assert!(at(60.1)[0].starts_with("Caution"));
    assert!(at(120.0)[0].starts_with("Caution"));
    assert!(at(120.1)[0].starts_with("Danger"));
    // 1 mA is not felt.
    assert!(at(200.0).iter().all(|remark| !remark.contains("2 mA")));
    request.outputs[0].current = ampthrift::quantity::Exact::<Amperes>::from_decimal(
        ampthrift::quantity::Decimal::new(5, -3),
    );
    assert!(
        cautions(&request).iter().any(|remark| remark.contains("2 mA") && remark.contains("probe"))
    );
}
