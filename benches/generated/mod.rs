//! Invented catalogues and families of a stated size, the same for the same seed.

use std::collections::BTreeMap;
use std::path::PathBuf;
use std::sync::Arc;

use ampthrift::catalog::{
    Ageing, Amplifier, Catalog, GrowthLaw, Lifecycle, ListedValue, Place, PriceBreak, PriceList,
    Reference, ResistorType, Supply, TempcoMethod, Values,
};
use ampthrift::quantity::{
    Amperes, Celsius, Decibels, Decimal, Exact, Money, Ohms, Ppm, PpmPerAmpere, PpmPerKelvin,
    PpmPerVolt, Range, Seconds, Series, Volts, Watts,
};
use ampthrift::request::{
    BoxReading, Budget, Conditions, Load, Output, PurchaseRules, Request, Rules, Unstated,
};

/// How much there is to choose from.
#[derive(Clone, Copy, Debug)]
pub struct Size {
    /// S, M or L.
    pub name: &'static str,
    references: u32,
    amplifiers: u32,
    resistor_types: u32,
    series: &'static str,
}

/// 24 references, 40 amplifiers, 4 types × 480 values = 1,920 resistors.
pub const S: Size =
    Size { name: "S", references: 24, amplifiers: 40, resistor_types: 4, series: "E96" };
/// 200 references, 500 amplifiers, 36 types × 480 values = 17,280 resistors.
pub const M: Size =
    Size { name: "M", references: 200, amplifiers: 500, resistor_types: 36, series: "E96" };
/// 1,000 references, 5,000 amplifiers, 140 types × 960 values = 134,400 resistors.
pub const L: Size =
    Size { name: "L", references: 1000, amplifiers: 5000, resistor_types: 140, series: "E192" };

/// A fixed sequence of numbers (splitmix64).
struct Dice(u64);

impl Dice {
    fn next(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        z ^ (z >> 31)
    }

    /// Evenly between 0 and 1.
    fn even(&mut self) -> f64 {
        (self.next() >> 11) as f64 / (1u64 << 53) as f64
    }

    /// Evenly on a logarithmic scale.
    fn log(&mut self, low: f64, high: f64) -> f64 {
        low * (high / low).powf(self.even())
    }
}

fn place() -> Place {
    Place { file: Arc::new(PathBuf::from("generated")), line: 1, column: 1 }
}

fn supply(part: String, each: f64) -> Supply {
    let cents = |factor: f64| Money::from_micros(((each * factor * 1e4).round() as i128) * 100);
    let breaks = [(1, 1.0), (100, 0.8), (1000, 0.62)]
        .map(|(from, factor)| PriceBreak { from, each: cents(factor) });
    Supply {
        part,
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
        price: PriceList::new(breaks.to_vec()).expect("breaks rise from 1"),
        place: place(),
    }
}

fn range<Q: Copy + PartialOrd>(low: Q, high: Q) -> Range<Q> {
    Range::new(low, high).expect("low end first")
}

fn ageing(error: f64) -> Ageing {
    Ageing { error: Some(Ppm::new(error)), over: Seconds::new(3.6e6), law: GrowthLaw::Sqrt }
}

/// A catalogue: errors from 5 to 10,000 ppm, the better the dearer, with much noise.
pub fn catalog(size: Size, seed: u64) -> Catalog {
    let mut dice = Dice(seed);
    let mut catalog = Catalog::default();
    for index in 0..size.references {
        let (mantissa, exponent) = [(25, -1), (4096, -3), (5, 0), (10, 0)][index as usize % 4];
        let output: Exact<Volts> = Exact::from_decimal(Decimal::new(mantissa, exponent));
        let error = dice.log(20.0, 5000.0);
        let price = 12.0 * (100.0 / error).powf(0.45) * dice.log(0.6, 1.7);
        catalog.references.push(Reference {
            order_code: format!("R{index}"),
            supply: supply(format!("R{index}"), price),
            output,
            accuracy: Ppm::new(error),
            tempco: PpmPerKelvin::new(error * 0.01 * dice.log(0.5, 2.0)),
            tempco_method: TempcoMethod::Slope,
            tempco_over: range(Celsius::new(-40.0), Celsius::new(85.0)),
            dropout: Volts::new(dice.log(0.1, 1.5)),
            supply_max: Volts::new(40.0),
            source_max: Amperes::new(20e-3),
            quiescent: Amperes::new(dice.log(20e-6, 1.5e-3)),
            load_regulation: Some(PpmPerAmpere::new(dice.log(200.0, 20_000.0))),
            load_tested_at: Amperes::ZERO,
            line_regulation: Some(PpmPerVolt::new(dice.log(0.2, 20.0))),
            line_tested_at: Some(Volts::new(15.0)),
            drift: ageing(error * 0.03),
            hysteresis: Some(Ppm::new(error * 0.02)),
            assembly_shift: Some(Ppm::new(error * 0.03)),
            thermal: None,
            noise: Some(Volts::new(dice.log(1e-6, 50e-6))),
            bypass: None,
        });
    }
    for index in 0..size.amplifiers {
        let offset = dice.log(2e-6, 3e-3);
        let bias = dice.log(1e-13, 100e-9);
        let price =
            0.9 * (1e-3 / offset).powf(0.25) * (10e-9 / bias).powf(0.06) * dice.log(0.6, 1.7);
        catalog.amplifiers.push(Amplifier {
            order_code: format!("A{index}"),
            supply: supply(format!("A{index}"), price),
            offset: Volts::new(offset),
            bias: Amperes::new(bias),
            swing_low: Volts::new(dice.log(5e-3, 0.2)),
            swing_high: Volts::new(1.0),
            input_low: Volts::new(-0.1),
            input_high: Volts::new(1.5),
            total_supply: range(Volts::new(4.5), Volts::new(36.0)),
            sink_max: Amperes::new(5e-3),
            offset_drift: Some(offset_drift(offset)),
            bias_doubling: None,
            bias_drift: None,
            bias_over_range: Some(Amperes::new(bias * 4.0)),
            cmrr: Some(Decibels::new(80.0 + 50.0 * dice.even())),
            psrr: Some(Decibels::new(80.0 + 50.0 * dice.even())),
            open_loop_gain: Some(Decibels::new(95.0 + 40.0 * dice.even())),
            tested_supply: Some(Volts::new(15.0)),
            tested_common_mode: Some(Volts::new(0.0)),
            noise: Some(Volts::new(dice.log(0.2e-6, 5e-6))),
            current_noise: Some(Amperes::new(bias * 1e-3)),
            quiescent: Some(Amperes::new(1e-3)),
            capacitive_load: None,
        });
    }
    let values = decade_values(size.series);
    for index in 0..size.resistor_types {
        let error = 5.0 * 2000f64.powf(dice.even() * 0.5 + 0.5 * f64::from(index % 4) / 4.0);
        let price = 0.03 * (10_000.0 / error).powf(0.75) * dice.log(0.6, 1.7);
        let code = format!("Q{index}-{{value}}");
        let mut of = ResistorType {
            code_pattern: code,
            supply: supply(format!("Q{index}"), price),
            tolerance: Ppm::new(error),
            tempco: PpmPerKelvin::new(error * 0.02 * dice.log(0.5, 2.0)),
            power: Watts::new(0.25),
            values: Values::Listed(Vec::new()),
            thermal: None,
            stability: ageing(error * 0.1),
            voltage_coefficient: Some(PpmPerVolt::new(0.1)),
            voltage_max: Some(Volts::new(100.0)),
            assembly_shift: Some(Ppm::new(error * 0.05)),
        };
        of.values = Values::Listed(
            values
                .iter()
                .map(|&ohms| ListedValue {
                    ohms: Exact::<Ohms>::from_decimal(ohms),
                    order_code: of.order_code(ohms),
                })
                .collect(),
        );
        catalog.resistors.push(of);
    }
    catalog
}

fn offset_drift(offset: f64) -> ampthrift::quantity::VoltsPerKelvin {
    ampthrift::quantity::VoltsPerKelvin::new(offset * 5e-3)
}

/// Five decades from 100 Ω, the upper end left out.
fn decade_values(series: &str) -> Vec<Decimal> {
    let series = Series::parse(series).expect("a series of the standard");
    let mut values = series.values(Decimal::new(100, 0), Decimal::new(1, 7)).expect("five decades");
    values.pop();
    values
}

/// A family of outputs from 1 µA to 10 mA.
pub fn request(outputs: usize, budget: Budget, seed: u64) -> Request {
    let mut dice = Dice(seed ^ 0x00ff_00ff);
    let mantissas = [1, 12, 15, 2, 25, 3, 4, 5, 6, 8];
    let outputs = (0..outputs)
        .map(|index| {
            let mantissa = mantissas[(dice.next() % 10) as usize];
            let digits = if mantissa >= 10 { 1 } else { 0 };
            let decade = (dice.next() % 4) as i32 - 6;
            let current: Exact<Amperes> =
                Exact::from_decimal(Decimal::new(mantissa, decade - digits));
            let low = if current.value().value() < 5e-6 { 3000.0 } else { 500.0 };
            Output {
                name: format!("o{index}"),
                current,
                accuracy: Ppm::new(dice.log(low, 20_000.0).round()),
                load: Load::Voltage(range(Volts::new(0.3), Volts::new(1.0))),
                quantity: [100, 200, 500, 1000, 2000, 5000][(dice.next() % 6) as usize],
            }
        })
        .collect();
    Request {
        title: None,
        currency: "EUR".to_owned(),
        exchange: BTreeMap::new(),
        budget,
        conditions: Conditions {
            supply: range(Volts::new(14.5), Volts::new(15.5)),
            negative_rail: Range::point(Volts::ZERO),
            ambient: range(Celsius::new(0.0), Celsius::new(50.0)),
            calibrated_at: Celsius::new(25.0),
            calibrated_supply: None,
            calibrated_load: None,
            service: Seconds::new(8760.0 * 3600.0),
            insulation: None,
            guarded: false,
            thermal_emf: Volts::ZERO,
            wiring: Ohms::ZERO,
            margin: Volts::new(0.05),
            power_derating: 0.5,
            box_reading: BoxReading::Slope,
            quiescent_max: None,
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
        network_elements: 2,
        adjustments: true,
        purchase: PurchaseRules {
            line_cost: Money::from_micros(15_000_000),
            placement_cost: Money::from_micros(20_000),
            lines_max: None,
        },
        outputs,
    }
}
