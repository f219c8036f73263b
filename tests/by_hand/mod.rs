//! One design with round figures, to be bent by each test before it is worked out.

use std::collections::BTreeMap;
use std::path::PathBuf;
use std::sync::Arc;

use ampthrift::catalog::{
    Adjustment, Ageing, Amplifier, DropPoint, GrowthLaw, Lifecycle, Lift, Place, PriceBreak,
    PriceList, Reference, ResistorType, Supply, TempcoMethod, Values,
};
use ampthrift::circuit::{
    Connection, Design, Element, Evaluation, LiftStack, LimitId, Network, evaluate,
};
use ampthrift::quantity::{
    Amperes, AmperesPerKelvin, Celsius, Decibels, Decimal, Exact, Farads, Kelvins, KelvinsPerWatt,
    Money, Ohms, Ppm, PpmPerAmpere, PpmPerKelvin, PpmPerVolt, Range, Seconds, Volts,
    VoltsPerKelvin, Watts,
};
use ampthrift::request::{
    BoxReading, Budget, Conditions, Load, Output, PurchaseRules, Request, Rules, Unstated,
};

/// Everything that a design and its request are made of.
#[derive(Clone, Debug)]
pub struct Bench {
    pub request: Request,
    pub reference: Reference,
    pub amplifier: Amplifier,
    /// Two resistor types.
    pub types: [ResistorType; 2],
    pub connection: Connection,
    /// Each element: which type, and how many ohms.
    pub elements: Vec<(usize, i32)>,
    pub diode: Lift,
    /// How many diodes; 0 for no lift.
    pub diodes: u32,
    pub adjustment: Adjustment,
    pub adjusted: bool,
}

impl Bench {
    /// 1 mA from 2.5 V through one resistor of 2.5 kohm; no lift, no adjustment; worst case.
    pub fn new() -> Self {
        Self {
            request: request(),
            reference: reference(),
            amplifier: amplifier(),
            types: [resistor("RA"), resistor("RB")],
            connection: Connection::Single,
            elements: vec![(0, 2500)],
            diode: diode(),
            diodes: 0,
            adjustment: adjustment(),
            adjusted: false,
        }
    }

    /// The design, with `code-ohms` as the order code of an element.
    pub fn design(&self) -> Design<'_> {
        let elements = self
            .elements
            .iter()
            .map(|&(of, ohms)| Element {
                of: &self.types[of],
                ohms: exact_ohms(ohms),
                order_code: format!("{}-{ohms}", self.types[of].code_pattern),
            })
            .collect();
        Design {
            reference: &self.reference,
            amplifier: &self.amplifier,
            network: Network { connection: self.connection, elements },
            lift: (self.diodes > 0).then_some(LiftStack { of: &self.diode, count: self.diodes }),
            adjustment: self.adjusted.then_some(&self.adjustment),
        }
    }

    /// Works the design out.
    pub fn work_out(&self) -> Result<Evaluation, LimitId> {
        evaluate(&self.request, &self.request.outputs[0], &self.design())
    }
}

/// Fails unless two figures agree but for rounding.
#[track_caller]
pub fn assert_close(found: f64, by_hand: f64) {
    let off = (found - by_hand).abs();
    assert!(off <= 1e-11 * by_hand.abs().max(1e-3), "found {found}, by hand {by_hand}");
}

/// A range that a test wrote in order.
pub fn range<Q: Copy + PartialOrd>(low: Q, high: Q) -> Range<Q> {
    Range::new(low, high).expect("ends in order")
}

fn exact_ohms(ohms: i32) -> Exact<Ohms> {
    Exact::<Ohms>::from_decimal(Decimal::new(i128::from(ohms), 0))
}

fn request() -> Request {
    Request {
        title: None,
        currency: "EUR".to_owned(),
        exchange: BTreeMap::new(),
        budget: Budget::WorstCase,
        conditions: Conditions {
            supply: range(Volts::new(14.0), Volts::new(16.0)),
            negative_rail: range(Volts::new(-5.0), Volts::new(-4.0)),
            ambient: range(Celsius::new(-5.0), Celsius::new(65.0)),
            calibrated_at: Celsius::new(25.0),
            calibrated_supply: Some(Volts::new(15.0)),
            calibrated_load: Some(Load::Voltage(Range::point(Volts::new(0.25)))),
            service: Seconds::new(4000.0 * 3600.0),
            insulation: Some(Ohms::new(1e10)),
            guarded: false,
            thermal_emf: Volts::new(5e-6),
            wiring: Ohms::new(0.05),
            margin: Volts::new(0.05),
            power_derating: 0.5,
            box_reading: BoxReading::Slope,
            quiescent_max: Some(Amperes::new(2e-3)),
        },
        rules: Rules {
            lifecycle: vec![Lifecycle::Active],
            lead_time_max: None,
            in_stock: false,
            makers: None,
            packages: None,
            forbid: Vec::new(),
            require: Vec::new(),
            unstated: Unstated::Note,
        },
        network_elements: 3,
        adjustments: true,
        purchase: PurchaseRules {
            line_cost: Money::ZERO,
            placement_cost: Money::ZERO,
            lines_max: None,
        },
        outputs: vec![Output {
            name: "probe".to_owned(),
            current: Exact::<Amperes>::from_decimal(Decimal::new(1, -3)),
            accuracy: Ppm::new(3000.0),
            load: Load::Voltage(range(Volts::new(0.0), Volts::new(1.0))),
            quantity: 10,
        }],
    }
}

fn supply(part: &str) -> Supply {
    Supply {
        part: part.to_owned(),
        grade: None,
        maker: None,
        source: None,
        updated: None,
        package: None,
        temperature: range(Celsius::new(-40.0), Celsius::new(85.0)),
        lifecycle: Lifecycle::Active,
        lead_time: None,
        stock: None,
        currency: None,
        order_minimum: 1,
        order_multiple: 1,
        price: PriceList::new(vec![PriceBreak { from: 1, each: Money::from_micros(1_000_000) }])
            .expect("starts at 1"),
        place: Place { file: Arc::new(PathBuf::from("by-hand.yaml")), line: 1, column: 1 },
    }
}

fn reference() -> Reference {
    Reference {
        order_code: "REF".to_owned(),
        supply: supply("REF"),
        output: Exact::<Volts>::from_decimal(Decimal::new(25, -1)),
        accuracy: Ppm::new(400.0),
        tempco: PpmPerKelvin::new(10.0),
        tempco_method: TempcoMethod::Slope,
        tempco_over: range(Celsius::new(-40.0), Celsius::new(85.0)),
        dropout: Volts::new(0.5),
        supply_max: Volts::new(40.0),
        source_max: Amperes::new(5e-3),
        quiescent: Amperes::new(0.5e-3),
        load_regulation: Some(PpmPerAmpere::new(20e3)),
        load_tested_at: Amperes::ZERO,
        line_regulation: Some(PpmPerVolt::new(5.0)),
        line_tested_at: Some(Volts::new(10.0)),
        drift: Ageing {
            error: Some(Ppm::new(50.0)),
            over: Seconds::new(1000.0 * 3600.0),
            law: GrowthLaw::Sqrt,
        },
        hysteresis: Some(Ppm::new(30.0)),
        assembly_shift: Some(Ppm::new(100.0)),
        thermal: Some(KelvinsPerWatt::new(200.0)),
        noise: Some(Volts::new(10e-6)),
        bypass: Some(Farads::new(100e-9)),
    }
}

fn amplifier() -> Amplifier {
    Amplifier {
        order_code: "AMP".to_owned(),
        supply: supply("AMP"),
        offset: Volts::new(25e-6),
        bias: Amperes::new(1e-9),
        swing_low: Volts::new(0.5),
        swing_high: Volts::new(1.2),
        input_low: Volts::new(0.3),
        input_high: Volts::new(1.5),
        total_supply: range(Volts::new(2.7), Volts::new(36.0)),
        sink_max: Amperes::new(5e-3),
        offset_drift: Some(VoltsPerKelvin::new(0.25e-6)),
        bias_doubling: Some(Kelvins::new(10.0)),
        bias_drift: None::<AmperesPerKelvin>,
        bias_over_range: None,
        cmrr: Some(Decibels::new(120.0)),
        psrr: Some(Decibels::new(100.0)),
        open_loop_gain: Some(Decibels::new(120.0)),
        tested_supply: Some(Volts::new(20.0)),
        tested_common_mode: Some(Volts::new(4.5)),
        noise: Some(Volts::new(5e-6)),
        current_noise: Some(Amperes::new(10e-12)),
        quiescent: Some(Amperes::new(1e-3)),
        capacitive_load: Some(Farads::new(200e-9)),
    }
}

fn resistor(code: &str) -> ResistorType {
    ResistorType {
        code_pattern: code.to_owned(),
        supply: supply(code),
        tolerance: Ppm::new(500.0),
        tempco: PpmPerKelvin::new(15.0),
        power: Watts::new(0.125),
        values: Values::Listed(Vec::new()),
        thermal: Some(KelvinsPerWatt::new(300.0)),
        stability: Ageing {
            error: Some(Ppm::new(200.0)),
            over: Seconds::new(1000.0 * 3600.0),
            law: GrowthLaw::Sqrt,
        },
        voltage_coefficient: Some(PpmPerVolt::new(2.0)),
        voltage_max: Some(Volts::new(50.0)),
        assembly_shift: Some(Ppm::new(40.0)),
    }
}

fn diode() -> Lift {
    let point =
        |current, drop| DropPoint { current: Amperes::new(current), drop: Volts::new(drop) };
    Lift {
        order_code: "LIFT".to_owned(),
        supply: supply("LIFT"),
        drop: vec![point(0.1e-3, 0.5), point(10e-3, 0.7)],
        current_max: Amperes::new(20e-3),
        drop_spread: Volts::new(0.02),
        drop_tempco: VoltsPerKelvin::new(-2e-3),
        in_series_max: 4,
    }
}

fn adjustment() -> Adjustment {
    Adjustment {
        order_code: "TRIM".to_owned(),
        supply: supply("TRIM"),
        residual: Ppm::new(20.0),
        range: Ppm::new(5000.0),
        tempco: PpmPerKelvin::new(0.5),
    }
}
