//! The figures that the search adds up, part by part, against the full evaluation of the design.

mod by_hand;

use ampthrift::circuit::{Connection, Contribution, ElementChoice, Frame, LimitId, total_of};
use ampthrift::quantity::{Amperes, Celsius, KelvinsPerWatt, Ppm, Volts, Watts};
use ampthrift::request::{BoxReading, Budget, Load};
use by_hand::{Bench, assert_close, range};
use proptest::prelude::*;

/// Forgets or changes figures of the bench, one for each bit, and sizes some of them.
fn bend(bench: &mut Bench, bits: u32, sizes: [f64; 6]) {
    let changes: [fn(&mut Bench); 24] = [
        |bench| bench.reference.assembly_shift = None,
        |bench| bench.reference.thermal = None,
        |bench| bench.reference.line_tested_at = None,
        |bench| bench.reference.line_regulation = None,
        |bench| bench.reference.drift.error = None,
        |bench| bench.reference.noise = None,
        |bench| bench.reference.bypass = None,
        |bench| bench.amplifier.bias_doubling = None,
        |bench| bench.amplifier.bias_over_range = Some(Amperes::new(5e-9)),
        |bench| bench.amplifier.cmrr = None,
        |bench| bench.amplifier.tested_common_mode = None,
        |bench| bench.amplifier.capacitive_load = None,
        |bench| bench.amplifier.quiescent = None,
        |bench| bench.types[0].thermal = None,
        |bench| bench.types[1].thermal = Some(KelvinsPerWatt::new(90.0)),
        |bench| bench.types[1].voltage_max = None,
        |bench| bench.types[1].stability.error = None,
        |bench| bench.request.conditions.insulation = None,
        |bench| bench.request.conditions.guarded = true,
        |bench| bench.request.conditions.quiescent_max = None,
        |bench| bench.request.conditions.box_reading = BoxReading::Guaranteed,
        |bench| bench.request.conditions.calibrated_load = None,
        |bench| bench.request.conditions.calibrated_at = Celsius::new(40.0),
        |bench| bench.adjusted = true,
    ];
    for (bit, change) in changes.into_iter().enumerate() {
        if bits & (1 << bit) != 0 {
            change(bench);
        }
    }
    let [load, tolerance, power, swing, dropout, range_ppm] = sizes;
    bench.request.outputs[0].load = Load::Voltage(range(Volts::ZERO, Volts::new(load * 13.0)));
    bench.types[1].tolerance = Ppm::new(tolerance * 2000.0);
    bench.types[1].power = Watts::new(power * 0.02);
    bench.types[0].supply.temperature =
        range(Celsius::new(-40.0), Celsius::new(60.0 + power * 20.0));
    bench.amplifier.swing_low = Volts::new(swing * 5.0);
    bench.reference.dropout = Volts::new(dropout * 5.0);
    bench.adjustment.range = Ppm::new(range_ppm * 10_000.0);
    bench.request.outputs[0].accuracy = Ppm::new(tolerance * 10_000.0);
}

fn add(sum: Contribution, other: Contribution) -> Contribution {
    Contribution {
        random: sum.random + other.random,
        systematic: sum.systematic + other.systematic,
        statics: sum.statics + other.statics,
        unstated: sum.unstated | other.unstated,
    }
}

proptest! {
    #[test]
    fn the_parts_add_up_to_the_whole(
        bits in any::<u32>(),
        method in 0..3,
        sizes in prop::array::uniform6(0.0..1.0f64),
        elements in prop::collection::vec((0..2usize, 500..20_000i32), 1..=3),
        parallel in any::<bool>(),
        diodes in 0..3u32,
    ) {
        let mut bench = Bench::new();
        bend(&mut bench, bits, sizes);
        bench.diodes = diodes;
        bench.request.budget = match method {
            0 => Budget::WorstCase,
            1 => Budget::Rss,
            _ => Budget::Gum { coverage: 2.0 },
        };
        bench.connection = match (elements.len(), parallel) {
            (1, _) => Connection::Single,
            (_, false) => Connection::Series,
            (_, true) => Connection::Parallel,
        };
        bench.elements = elements;

        let whole = bench.work_out().expect("1 mA is on the curve");
        let design = bench.design();
        let (reference, amplifier) = (design.reference, design.amplifier);
        let vref = reference.output.value();
        let output = &bench.request.outputs[0];
        let frame =
            Frame::new(&bench.request, output, vref, design.lift, design.adjustment)
                .expect("1 mA is on the curve");
        let choices: Vec<_> = design
            .network
            .elements
            .iter()
            .map(|element| ElementChoice { of: element.of, ohms: element.ohms.value() })
            .collect();
        let connection = design.network.connection;

        let sum = [
            frame.own_contribution(),
            frame.reference_contribution(reference),
            frame.amplifier_contribution(amplifier),
            frame.network_contribution(connection, &choices),
        ]
        .into_iter()
        .fold(Contribution::default(), add);
        let total = total_of(bench.request.budget, sum.random, sum.systematic);
        assert_close(total.value(), whole.total.value());
        prop_assert_eq!(frame.accuracy_holds(total), whole.accuracy_holds);

        let unstated = sum.unstated || frame.pair_unstated(reference, amplifier);
        prop_assert_eq!(unstated, !whole.not_stated.is_empty());

        let range_line = whole.limits.iter().find(|line| line.limit == LimitId::AdjustmentRange);
        prop_assert_eq!(range_line.is_some(), bench.adjusted);
        let statics = range_line.map_or(0.0, |line| line.value);
        assert_close(sum.statics, statics);

        let mut failing = [
            frame.own_failures(),
            frame.reference_failures(reference),
            frame.amplifier_failures(amplifier),
            frame.pair_failures(reference, amplifier),
            frame.network_failures(connection, &choices),
        ]
        .concat();
        if !frame.statics_fit(sum.statics) {
            failing.push(LimitId::AdjustmentRange);
        }
        failing.sort_unstable();
        failing.dedup();
        // No size here falls within the tolerance, so what fails is what has a negative margin.
        let negative: Vec<_> = whole
            .limits
            .iter()
            .filter(|line| line.margin < 0.0)
            .map(|line| line.limit)
            .collect();
        prop_assert_eq!(&failing, &negative);
        prop_assert_eq!(whole.window_holds, failing.is_empty());
    }
}
