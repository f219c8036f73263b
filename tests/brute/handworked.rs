//! The exhaustive search against cases worked by hand, so that it is not wrong together with the
//! program. Every figure here was worked with pencil and paper from round numbers.

use ampthrift::catalog::{
    Adjustment, Ageing, Amplifier, Catalog, GrowthLaw, Kind, Lift, ListedValue, PriceBreak,
    Reference, ResistorType, TempcoMethod, Values,
};
use ampthrift::quantity::{
    Amperes, AmperesPerKelvin, Celsius, Decibels, Decimal, Exact, Kelvins, KelvinsPerWatt, Money,
    Ohms, Ppm, PpmPerAmpere, PpmPerKelvin, PpmPerVolt, Range, Seconds, Volts, VoltsPerKelvin,
    Watts,
};
use ampthrift::request::{Budget, Load, Output, Request};
use num_bigint::BigInt;
use num_rational::BigRational;

use super::ask::plain_request;
use super::designs::Shelf;
use super::family::{Optimum, best_alone, improvement, optimum, tie_key};
use super::generate::{celsius, plain_supply, volts};
use super::made::{around, left_over, letter_code};
use super::money::{Book, buy};
use super::physics::{Built, Joined, Piece, evaluate};
use super::rules::{Sieve, fits};

fn each(micros: i128) -> Vec<PriceBreak> {
    vec![PriceBreak { from: 1, each: Money::from_micros(micros) }]
}

fn steps(all: &[(u64, i128)]) -> Vec<PriceBreak> {
    all.iter().map(|&(from, each)| PriceBreak { from, each: Money::from_micros(each) }).collect()
}

fn fraction(top: i64, bottom: i64) -> BigRational {
    BigRational::new(BigInt::from(top), BigInt::from(bottom))
}

fn ageing(ppm: f64) -> Ageing {
    Ageing { error: Some(Ppm::new(ppm)), over: Seconds::new(3_600_000.0), law: GrowthLaw::Sqrt }
}

fn reference(code: &str) -> Reference {
    Reference {
        order_code: code.to_owned(),
        supply: plain_supply(code, each(2_000_000)),
        output: Exact::from_decimal(Decimal::new(25, -1)),
        accuracy: Ppm::new(200.0),
        tempco: PpmPerKelvin::new(10.0),
        tempco_method: TempcoMethod::Slope,
        tempco_over: celsius(-40.0, 85.0),
        dropout: Volts::new(1.0),
        supply_max: Volts::new(18.0),
        source_max: Amperes::new(0.01),
        quiescent: Amperes::new(0.0005),
        load_regulation: Some(PpmPerAmpere::new(8000.0)),
        load_tested_at: Amperes::ZERO,
        line_regulation: Some(PpmPerVolt::new(10.0)),
        line_tested_at: Some(Volts::new(15.0)),
        drift: ageing(40.0),
        hysteresis: Some(Ppm::new(25.0)),
        assembly_shift: Some(Ppm::new(30.0)),
        thermal: Some(KelvinsPerWatt::new(100.0)),
        noise: Some(Volts::new(10e-6)),
        bypass: None,
    }
}

fn amplifier(code: &str) -> Amplifier {
    Amplifier {
        order_code: code.to_owned(),
        supply: plain_supply(code, each(1_000_000)),
        offset: Volts::new(50e-6),
        bias: Amperes::new(1e-9),
        swing_low: Volts::new(0.2),
        swing_high: Volts::new(1.5),
        input_low: Volts::new(-0.1),
        input_high: Volts::new(1.0),
        total_supply: volts(4.0, 36.0),
        sink_max: Amperes::new(0.005),
        offset_drift: Some(VoltsPerKelvin::new(0.5e-6)),
        bias_doubling: Some(Kelvins::new(10.0)),
        bias_drift: None,
        bias_over_range: None,
        cmrr: Some(Decibels::new(100.0)),
        psrr: Some(Decibels::new(100.0)),
        open_loop_gain: Some(Decibels::new(120.0)),
        tested_supply: Some(Volts::new(15.0)),
        tested_common_mode: Some(Volts::new(2.5)),
        noise: Some(Volts::new(2.5e-6)),
        current_noise: Some(Amperes::new(2e-12)),
        quiescent: None,
        capacitive_load: None,
    }
}

fn resistor(code: &str, values: &[i128]) -> ResistorType {
    let listed = |&ohms: &i128| ListedValue {
        ohms: Exact::<Ohms>::from_decimal(Decimal::new(ohms, 0)),
        order_code: format!("{code}-{}", letter_code(Decimal::new(ohms, 0))),
    };
    ResistorType {
        code_pattern: format!("{code}-{{value}}"),
        supply: plain_supply(code, each(100_000)),
        tolerance: Ppm::new(100.0),
        tempco: PpmPerKelvin::new(5.0),
        power: Watts::new(0.125),
        values: Values::Listed(values.iter().map(listed).collect()),
        thermal: Some(KelvinsPerWatt::new(200.0)),
        stability: ageing(50.0),
        voltage_coefficient: Some(PpmPerVolt::new(0.1)),
        voltage_max: Some(Volts::new(50.0)),
        assembly_shift: Some(Ppm::new(5.0)),
    }
}

fn output(name: &str, quantity: u64) -> Output {
    Output {
        name: name.to_owned(),
        current: Exact::from_decimal(Decimal::new(1, -3)),
        accuracy: Ppm::new(2000.0),
        load: Load::Voltage(volts(0.5, 1.0)),
        quantity,
    }
}

fn request(outputs: Vec<Output>) -> Request {
    let mut all = plain_request(outputs);
    all.conditions.ambient = celsius(15.0, 45.0);
    all.conditions.service = Seconds::new(4000.0 * 3600.0);
    all.conditions.insulation = Some(Ohms::new(1e10));
    all.conditions.thermal_emf = Volts::new(2.5e-6);
    all.conditions.wiring = Ohms::new(0.25);
    all
}

fn near(found: f64, wanted: f64) -> bool {
    (found - wanted).abs() <= 1e-7
}

fn check_terms(found: &[(&'static str, f64)], wanted: &[(&'static str, f64)]) {
    for &(name, ppm) in wanted {
        let found = found.iter().find(|(other, _)| *other == name).map(|(_, ppm)| *ppm);
        assert!(found.is_some_and(|found| near(found, ppm)), "{name}: {found:?}, by hand {ppm}");
    }
}

#[test]
fn worst_case_of_one_resistor() {
    let (reference, amplifier) = (reference("R"), amplifier("A"));
    let of = resistor("S", &[2500]);
    let request = request(vec![output("one", 1)]);
    let built = Built {
        reference: &reference,
        amplifier: &amplifier,
        joined: Joined::Single,
        pieces: vec![Piece { of: &of, ohms: 2500.0, code: "S-2K5" }],
        lift: None,
        adjustment: None,
    };
    let worked = evaluate(&request, &request.outputs[0], &built).unwrap();
    let by_hand = [
        ("reference_accuracy", 200.0),
        ("reference_assembly_shift", 30.0),
        ("reference_tempco", 200.0),
        // (16 - 0.5) V x 1.5 mA - 2.5 mW = 20.75 mW; 2.075 K.
        ("reference_self_heating", 20.75),
        ("reference_load_regulation", 8.0),
        // 13 V to 15.5 V, from 15 V.
        ("reference_line_regulation", 20.0),
        ("reference_drift", 80.0),
        ("reference_hysteresis", 25.0),
        ("reference_noise", 2.0),
        ("amplifier_offset", 20.0),
        ("amplifier_offset_drift", 4.0),
        ("amplifier_bias", 1.0),
        // 1 nA at 25 °C and below, 4 nA at 45 °C.
        ("amplifier_bias_drift", 3.0),
        ("amplifier_cmrr", 8.0),
        ("amplifier_psrr", 4.0),
        // 7.5 V to 0.5 V.
        ("amplifier_gain", 2.8),
        ("amplifier_noise", 0.5),
        ("amplifier_current_noise", 0.001),
        ("resistor_mismatch", 0.0),
        ("resistor_tolerance", 100.0),
        ("resistor_assembly_shift", 5.0),
        ("resistor_tempco", 100.0),
        ("resistor_self_heating", 2.5),
        ("resistor_stability", 100.0),
        ("resistor_voltage_coefficient", 0.25),
        ("board_leak_across", 0.25),
        ("board_leak_ground", 1.55),
        ("board_thermal_emf", 1.0),
        ("board_wiring", 100.0),
    ];
    check_terms(&worked.terms, &by_hand);
    assert_eq!(worked.terms.len(), by_hand.len());
    assert!(near(worked.total, 1039.601), "{}", worked.total);
    assert!(worked.window && worked.accurate && worked.missing.is_empty());
    // Lowest: 0.2 V + 50 mV; highest: 14 V - 2.5 V - 1 V.
    assert!(near(worked.load_min, 0.25) && near(worked.load_max, 10.5));
    // 1 mA x ((10 + 1) uV / 2.5 V + 10 ppm) + 0.1 nS = 14.5 nS.
    assert!((worked.output_ohms.unwrap() * 14.5e-9 - 1.0).abs() < 1e-12);
    let margin = |name| worked.limits.iter().find(|line| line.name == name).unwrap().margin;
    assert!(near(margin("swing_low"), 0.25));
    assert!(near(margin("reference_headroom"), 9.5));
    assert!(near(margin("reference_input_max"), 2.5));
    assert!(near(margin("resistor_power"), 0.06));
    assert!(near(margin("temperature"), 40.0));
}

#[test]
fn two_types_in_parallel_by_rss_with_an_adjustment() {
    let (reference, amplifier) = (reference("R"), amplifier("A"));
    let (fine, coarse) = (resistor("S", &[4000]), {
        let mut of = resistor("T", &[4000]);
        of.tolerance = Ppm::new(1000.0);
        of.tempco = PpmPerKelvin::new(20.0);
        of
    });
    let adjustment = Adjustment {
        order_code: "J".to_owned(),
        supply: plain_supply("J", each(500_000)),
        residual: Ppm::new(20.0),
        range: Ppm::new(300_000.0),
        tempco: PpmPerKelvin::new(0.5),
    };
    let mut request = request(vec![output("one", 1)]);
    request.budget = Budget::Rss;
    request.conditions.calibrated_at = Celsius::new(35.0);
    let mut built = Built {
        reference: &reference,
        amplifier: &amplifier,
        joined: Joined::Parallel,
        pieces: vec![
            Piece { of: &fine, ohms: 4000.0, code: "S-4K0" },
            Piece { of: &coarse, ohms: 4000.0, code: "T-4K0" },
        ],
        lift: None,
        adjustment: None,
    };
    let bare = evaluate(&request, &request.outputs[0], &built).unwrap();
    check_terms(
        &bare.terms,
        &[
            // 2500 against 2000 ohms.
            ("resistor_mismatch", 250_000.0),
            ("resistor_tolerance", (50.0f64.powi(2) + 500.0f64.powi(2)).sqrt()),
            ("resistor_tempco", (50.0f64.powi(2) + 200.0f64.powi(2)).sqrt()),
        ],
    );
    built.adjustment = Some(&adjustment);
    let worked = evaluate(&request, &request.outputs[0], &built).unwrap();
    check_terms(
        &worked.terms,
        &[
            ("reference_accuracy", 0.0),
            ("resistor_mismatch", 0.0),
            ("resistor_tolerance", 0.0),
            ("board_wiring", 0.0),
            // From 35 °C the farther end is 15 °C.
            ("reference_tempco", 200.0),
            ("resistor_tempco", (50.0f64.powi(2) + 200.0f64.powi(2)).sqrt()),
            // Supply 15 V, load 0.75 V: Vx moves 0.25 V, V+ - Vx 1.25 V.
            ("amplifier_cmrr", 1.0),
            ("amplifier_gain", 0.1),
            ("reference_line_regulation", 12.5),
            // 20.75 mW against (15 - 0.75) x 1.5 - 2.5 = 18.875 mW and 17 mW.
            ("reference_self_heating", 1.875),
            // 4 nA at 45 °C, 2 nA at 35 °C.
            ("amplifier_bias_drift", 2.0),
            ("adjustment_residual", 20.0),
            ("adjustment_tempco", 10.0),
        ],
    );
    // 200 + 30 + 8 (reference), 20 + 1 (amplifier), 250000, 550 + 5 + 0.25 (resistors), their
    // heating 1.5625 mW x 200 K/W x (2.5 + 10) ppm/K, 100 (wiring).
    let range = worked.limits.iter().find(|line| line.name == "adjustment_range").unwrap();
    assert!(near(range.value, 250_914.25 + 3.906_25), "{}", range.value);
}

#[test]
fn gum_weights_noise_and_half_widths() {
    let terms =
        [("reference_noise", 3.3), ("reference_tempco", 3f64.sqrt() * 2.0), ("board_wiring", 4.0)];
    let total = super::physics::total(Budget::Gum { coverage: 2.0 }, &terms);
    assert!(near(total, 4.0 + 2.0 * 5f64.sqrt()));
}

#[test]
fn a_lift_that_warms() {
    let lift = Lift {
        order_code: "D".to_owned(),
        supply: plain_supply("D", each(10_000)),
        drop: [(1e-4, 0.5), (1e-2, 0.7)]
            .map(|(i, v)| ampthrift::catalog::DropPoint {
                current: Amperes::new(i),
                drop: Volts::new(v),
            })
            .to_vec(),
        current_max: Amperes::new(0.1),
        drop_spread: Volts::new(0.05),
        drop_tempco: VoltsPerKelvin::new(-0.002),
        in_series_max: 4,
    };
    let request = request(vec![output("one", 1)]);
    let at = |lift| super::corners::Corners::new(&request, &request.outputs[0], lift, None);
    // 0.6 V at 1 mA; 0.62 V at 15 °C, 0.56 V at 45 °C; ± 50 mV; two of them.
    let corners = at(Some((&lift, 2))).unwrap();
    assert!(near(corners.lift_low, 1.02) && near(corners.lift_high, 1.34));
    assert!(
        near(corners.x_low, 1.52) && near(corners.x_high, 2.34) && near(corners.x_middle, 1.93)
    );
    let mut short = lift.clone();
    short.drop.truncate(1);
    assert!(at(Some((&short, 1))).is_none());
}

#[test]
fn bias_laws() {
    let reference = reference("R");
    let of = resistor("S", &[2500]);
    let request = request(vec![output("one", 1)]);
    let drift = |law: (Option<f64>, Option<f64>, Option<f64>)| {
        let mut amplifier = amplifier("A");
        amplifier.bias_doubling = law.0.map(Kelvins::new);
        amplifier.bias_drift = law.1.map(AmperesPerKelvin::new);
        amplifier.bias_over_range = law.2.map(Amperes::new);
        let built = Built {
            reference: &reference,
            amplifier: &amplifier,
            joined: Joined::Single,
            pieces: vec![Piece { of: &of, ohms: 2500.0, code: "S-2K5" }],
            lift: None,
            adjustment: None,
        };
        let worked = evaluate(&request, &request.outputs[0], &built).unwrap();
        let term = worked.terms.iter().find(|(name, _)| *name == "amplifier_bias_drift");
        (term.map(|(_, ppm)| *ppm), worked.missing.len())
    };
    let close = |law, wanted| {
        let (found, missing) = drift(law);
        assert!(missing == 0 && near(found.unwrap(), wanted), "{law:?}: {found:?}");
    };
    // 20 K up: 2 nA by drift, 3 nA by doubling, 0.5 nA by the cap.
    close((None, Some(1e-10), None), 2.0);
    close((Some(10.0), Some(1e-10), None), 3.0);
    close((Some(10.0), None, Some(1.5e-9)), 0.5);
    close((None, None, Some(2.5e-9)), 1.5);
    assert_eq!(drift((None, None, None)), (None, 1));
}

#[test]
fn values_made_to_order() {
    assert_eq!(around(&fraction(2500, 1), 3), [fraction(2500, 1)]);
    assert_eq!(around(&fraction(2500, 3), 4), [fraction(8333, 10), fraction(8334, 10)]);
    assert_eq!(around(&fraction(99_999, 10_000), 3), [fraction(999, 100), fraction(10, 1)]);
    assert_eq!(around(&fraction(1, 3), 2), [fraction(33, 100), fraction(34, 100)]);
    assert!(around(&fraction(0, 1), 2).is_empty());
    let thousand = fraction(1000, 1);
    let left = |others: &[i64], copies, parallel| {
        let others: Vec<_> = others.iter().map(|&r| fraction(r, 1)).collect();
        left_over(&thousand, &others, copies, parallel)
    };
    assert_eq!(left(&[400], 2, false), Some(fraction(300, 1)));
    assert_eq!(left(&[2000], 2, true), Some(fraction(4000, 1)));
    assert_eq!(left(&[600, 400], 1, false), None);
    assert_eq!(left(&[1000], 1, true), None);
}

#[test]
fn letter_codes() {
    for (mantissa, exponent, code) in [
        (1, -1, "R10"),
        (5, -2, "R050"),
        (1, 0, "1R0"),
        (1, 1, "10R"),
        (1, 2, "100R"),
        (1, 3, "1K0"),
        (1, 4, "10K"),
        (499, 1, "4K99"),
        (8333, -1, "833R3"),
        (123_456, 0, "123K456"),
        (1, 6, "1M0"),
    ] {
        assert_eq!(letter_code(Decimal::new(mantissa, exponent)), code);
    }
}

#[test]
fn buying_more_can_cost_less() {
    let mut request = plain_request(vec![output("one", 1)]);
    let mut supply = plain_supply("P", steps(&[(1, 1_000_000), (100, 800_000)]));
    let bought = |request: &Request, supply: &_, needed| {
        buy(request, supply, needed).map(|buy| (buy.bought, buy.cost))
    };
    assert_eq!(bought(&request, &supply, 90), Some((100, 80_000_000)));
    assert_eq!(bought(&request, &supply, 80), Some((80, 80_000_000)));
    supply.order_multiple = 30;
    assert_eq!(bought(&request, &supply, 85), Some((90, 90_000_000)));
    supply.order_minimum = 70;
    assert_eq!(bought(&request, &supply, 1), Some((90, 90_000_000)));
    request.rules.in_stock = true;
    supply.stock = Some(89);
    assert_eq!(bought(&request, &supply, 1), None);
    // 1.5 millionths round up to 2.
    supply = plain_supply("P", each(1));
    supply.currency = Some("USD".to_owned());
    request.exchange.get_mut("USD").unwrap().0 = Decimal::new(15, -1);
    assert_eq!(bought(&request, &supply, 3), Some((3, 6)));
}

#[test]
fn patterns_and_required_kinds() {
    assert!(fits("AB*", "AB") && fits("*C", "ABC") && fits("A*B*C", "AxBBxC") && fits("*", ""));
    assert!(!fits("AB*", "xAB") && !fits("A*B", "ABC") && !fits("AB", "ABC"));
    let catalog = small_catalog();
    let mut request = request(vec![output("one", 1)]);
    request.rules.require = vec!["AMP-*".to_owned()];
    request.rules.forbid = vec!["AMP-B".to_owned()];
    let sieve = Sieve::new(&catalog, &request);
    assert!(sieve.leaves_code(Kind::Amplifier, "AMP-A"));
    assert!(!sieve.leaves_code(Kind::Amplifier, "AMP-B"));
    assert!(!sieve.leaves_code(Kind::Amplifier, "other"));
    assert!(sieve.leaves_code(Kind::Reference, "REF-A"));
}

/// Two references (one dear alone but cheap from 20), two equal amplifiers, one resistor type.
fn small_catalog() -> Catalog {
    let mut dear = reference("REF-A");
    dear.supply = plain_supply("REF-A", steps(&[(1, 3_000_000), (20, 1_200_000)]));
    Catalog {
        references: vec![dear, reference("REF-B")],
        amplifiers: vec![amplifier("AMP-B"), amplifier("AMP-A")],
        resistors: vec![resistor("RES", &[1000, 1500, 2500, 5000])],
        ..Catalog::default()
    }
}

#[test]
fn networks_are_unordered() {
    let catalog = small_catalog();
    let mut request = request(vec![output("one", 1)]);
    let count = |request: &Request| Shelf::new(&catalog, request).networks.len();
    request.network_elements = 1;
    assert_eq!(count(&request), 4);
    request.network_elements = 2;
    assert_eq!(count(&request), 4 + 2 * 10);
    request.network_elements = 3;
    assert_eq!(count(&request), 4 + 2 * 10 + 2 * 20);
}

#[test]
fn made_to_order_joins_the_shelf_once() {
    let mut catalog = small_catalog();
    catalog.resistors = vec![resistor("RES", &[1000])];
    let mut foil = resistor("FOIL", &[]);
    foil.values = Values::MadeToOrder {
        range: Range::new(Decimal::new(100, 0), Decimal::new(4, 3)).unwrap(),
        digits: 4,
    };
    catalog.resistors.push(foil);
    let mut request = request(vec![output("one", 1)]);
    let made = |request: &Request| -> Vec<String> {
        let shelf = Shelf::new(&catalog, request);
        shelf.values.into_iter().map(|value| value.code).filter(|c| c.starts_with('F')).collect()
    };
    // 2500 alone; 1250 twice in series (5000 twice in parallel is out of range); 1500 beside
    // 1000 in series; nothing beside 1000 in parallel.
    assert_eq!(made(&request), ["FOIL-1K25", "FOIL-1K5", "FOIL-2K5"]);
    request.network_elements = 1;
    assert_eq!(made(&request), ["FOIL-2K5"]);
    request.outputs[0].current = Exact::from_decimal(Decimal::new(3, -3));
    assert_eq!(made(&request), ["FOIL-833R3", "FOIL-833R4"]);
    request.rules.forbid = vec!["FOIL-833R3".to_owned()];
    assert_eq!(made(&request), ["FOIL-833R4"]);
}

#[test]
fn sharing_pays_in_a_family() {
    let catalog = small_catalog();
    let request = request(vec![output("one", 10), output("two", 10)]);
    let shelf = Shelf::new(&catalog, &request);
    let book = Book::new(&shelf);
    let designs: Vec<_> =
        request.outputs.iter().map(|output| (10, shelf.passing(output))).collect();
    // Alone: ten of REF-B, AMP-A (first by name) and RES-2K5.
    let (cost, best) = best_alone(&shelf, &book, 10, &designs[0].1).unwrap();
    assert_eq!(cost, 20_000_000 + 10_000_000 + 1_000_000);
    let key = tie_key(&shelf, best.pick);
    assert_eq!((key.0, key.1, key.2), ("REF-B", "AMP-A", vec!["RES-2K5"]));
    // Together: twenty of REF-A at 1.20.
    let both = optimum(&request, &shelf, &book, &designs);
    assert_eq!(both, Optimum::Least(24_000_000 + 20_000_000 + 2_000_000));
}

#[test]
fn too_few_lines_leave_no_set() {
    let catalog = small_catalog();
    let mut request = request(vec![output("one", 10)]);
    request.purchase.line_cost = Money::from_micros(7_000_000);
    request.purchase.placement_cost = Money::from_micros(10_000);
    let least = |request: &Request| {
        let shelf = Shelf::new(&catalog, request);
        let designs = vec![(10, shelf.passing(&request.outputs[0]))];
        optimum(request, &shelf, &Book::new(&shelf), &designs)
    };
    assert_eq!(least(&request), Optimum::Least(31_000_000 + 21_000_000 + 300_000));
    request.purchase.lines_max = Some(2);
    assert_eq!(least(&request), Optimum::NoSet);
}

#[test]
fn a_better_twin_of_equal_cost_is_found() {
    let catalog = small_catalog();
    let request = request(vec![output("one", 10)]);
    let shelf = Shelf::new(&catalog, &request);
    let book = Book::new(&shelf);
    let designs = vec![(10, shelf.passing(&request.outputs[0]))];
    let best = best_alone(&shelf, &book, 10, &designs[0].1).unwrap().1;
    assert!(improvement(&shelf, &book, &designs, &[best]).is_none());
    // AMP-B stands first in the catalogue; AMP-A is its twin and goes first by name.
    let mut worse = best;
    worse.pick.amplifier = 0;
    let (at, better) = improvement(&shelf, &book, &designs, &[worse]).unwrap();
    assert_eq!((at, better.pick), (0, best.pick));
}

#[test]
fn the_best_total_counts_designs_that_miss_the_target() {
    let catalog = small_catalog();
    let mut request = request(vec![output("one", 1)]);
    request.outputs[0].accuracy = Ppm::new(1.0);
    let best = |request: &Request| {
        let shelf = Shelf::new(&catalog, request);
        assert!(shelf.passing(&request.outputs[0]).is_empty());
        shelf.best_total(&request.outputs[0])
    };
    // 1 kohm and 1.5 kohm in series: the heat of the resistors is 0.4 x 1 ppm + 0.6 x 1.5 ppm in
    // place of 2.5 ppm, the voltage 0.4 x 0.1 ppm + 0.6 x 0.15 ppm in place of 0.25 ppm.
    assert!(near(best(&request).unwrap(), 1039.601 - 1.2 - 0.12));
    // Without 2.5 kohm the nearest alone is 5 kohm, for half the current.
    request.rules.forbid = vec!["RES-2*".to_owned()];
    request.network_elements = 1;
    let half = best(&request).unwrap();
    assert!(500_000.0 < half && half < 502_000.0);
    request.conditions.supply = volts(3.0, 3.0);
    assert!(best(&request).is_none());
}
