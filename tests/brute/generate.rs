//! Random small catalogues and requests.

use std::path::PathBuf;
use std::sync::Arc;

use ampthrift::catalog::{
    Adjustment, Ageing, Amplifier, Catalog, DropPoint, GrowthLaw, Lifecycle, Lift, ListedValue,
    Place, PriceBreak, PriceList, Reference, ResistorType, Supply, TempcoMethod, Values,
};
use ampthrift::quantity::{
    Amperes, AmperesPerKelvin, Celsius, Decibels, Decimal, Exact, Farads, Kelvins, KelvinsPerWatt,
    Money, Ppm, PpmPerAmpere, PpmPerKelvin, PpmPerVolt, Range, Seconds, Volts, VoltsPerKelvin,
    Watts,
};
use num_rational::BigRational;

use super::dice::Dice;
use super::made::{around, letter_code};

/// One random case to be: the dice, how often a figure is absent, and the currents and voltages
/// that it turns on.
pub struct Maker {
    pub dice: Dice,
    /// Optional figures absent, of a hundred.
    pub absent: usize,
    pub currents: Vec<Decimal>,
    pub voltages: Vec<Decimal>,
    /// Whether stock is stated for most parts.
    pub stocked: bool,
    /// Whether some resistors are made to order; the listed ones then seldom do alone.
    to_order: bool,
    codes: usize,
}

pub fn celsius(low: f64, high: f64) -> Range<Celsius> {
    Range::new(Celsius::new(low), Celsius::new(high)).unwrap()
}

pub fn volts(low: f64, high: f64) -> Range<Volts> {
    Range::new(Volts::new(low), Volts::new(high)).unwrap()
}

/// Purchasing figures with nothing special about them.
pub fn plain_supply(part: &str, price: Vec<PriceBreak>) -> Supply {
    Supply {
        part: part.to_owned(),
        grade: None,
        maker: None,
        source: None,
        updated: None,
        package: None,
        temperature: celsius(-40.0, 85.0),
        lifecycle: Lifecycle::Active,
        lead_time: None,
        stock: None,
        currency: None,
        order_minimum: 1,
        order_multiple: 1,
        price: PriceList::new(price).unwrap(),
        place: Place { file: Arc::new(PathBuf::from("made.yaml")), line: 1, column: 1 },
    }
}

impl Maker {
    pub fn new(seed: u64, family: bool) -> Self {
        let mut dice = Dice::new(seed);
        let absent = dice.of(&[0, 0, 5, 20]);
        let outputs = if family { dice.whole(2, 3) } else { 1 };
        let scale = dice.of(&[-5, -4, -3]);
        let mut currents = Vec::new();
        while currents.len() < outputs {
            let current = Decimal::new(dice.of(&[10, 15, 20, 30, 50, 70]), scale - 1);
            if !currents.contains(&current) || dice.chance(20) {
                currents.push(current);
            }
        }
        let mut voltages = Vec::new();
        for _ in 0..dice.whole(1, 3) {
            voltages.push(dice.of(&[
                Decimal::new(125, -2),
                Decimal::new(2048, -3),
                Decimal::new(25, -1),
                Decimal::new(3, 0),
                Decimal::new(4096, -3),
            ]));
        }
        let stocked = dice.chance(25);
        let to_order = dice.chance(50);
        Self { dice, absent, currents, voltages, stocked, to_order, codes: 0 }
    }

    /// An order code whose place in the alphabet tells nothing.
    fn code(&mut self, word: &str) -> String {
        self.codes += 1;
        let letter = self.dice.of(&['A', 'C', 'F', 'K', 'Q', 'X']);
        format!("{word}{letter}{}", self.codes)
    }

    fn price(&mut self, low: f64, high: f64) -> PriceList {
        // A coarse grid, so that equal costs occur.
        let mut each = (self.dice.spread(low, high) * 20.0).ceil() as i128 * 50_000;
        let mut breaks = vec![PriceBreak { from: 1, each: Money::from_micros(each) }];
        for from in [10, 50, 100, 250] {
            if self.dice.chance(25) {
                each = each * self.dice.of(&[60, 80, 90, 90, 95, 105]) / 100;
                breaks.push(PriceBreak { from, each: Money::from_micros(each) });
            }
        }
        PriceList::new(breaks).unwrap()
    }

    fn supply(&mut self, code: &str, low: f64, high: f64) -> Supply {
        let price = self.price(low, high);
        let dice = &mut self.dice;
        let mut supply = plain_supply(code, price.breaks().to_vec());
        supply.maker = dice.of(&[None, Some("Alderbank"), Some("Birchwell")]).map(str::to_owned);
        supply.package = dice.of(&[None, Some("P8"), Some("P8"), Some("P3")]).map(str::to_owned);
        supply.temperature =
            dice.of(&[celsius(-40.0, 85.0), celsius(-40.0, 85.0), celsius(0.0, 70.0)]);
        supply.lifecycle = dice.of(&[
            Lifecycle::Active,
            Lifecycle::Active,
            Lifecycle::Active,
            Lifecycle::Active,
            Lifecycle::LastBuy,
            Lifecycle::Preview,
        ]);
        supply.lead_time = dice
            .of(&[None, Some(4.0), Some(12.0), Some(30.0)])
            .map(|w| Seconds::new(w * 604_800.0));
        let stock = dice.of(&[0, 10, 100, 150, 300, 1000]);
        supply.stock = dice.chance(if self.stocked { 90 } else { 30 }).then_some(stock);
        supply.currency = dice.chance(8).then(|| "USD".to_owned());
        supply.order_minimum = dice.of(&[1, 1, 1, 10, 25, 100]);
        supply.order_multiple = dice.of(&[1, 1, 1, 5, 10, 100]);
        supply
    }

    fn ageing(&mut self, low: f64, high: f64) -> Ageing {
        Ageing {
            error: self.dice.maybe(self.absent, low, high).map(Ppm::new),
            over: Seconds::new(self.dice.of(&[1000.0, 2000.0, 8760.0]) * 3600.0),
            law: self.dice.of(&[GrowthLaw::Sqrt, GrowthLaw::Linear]),
        }
    }

    fn reference(&mut self) -> Reference {
        let order_code = self.code("REF");
        let supply = self.supply(&order_code, 0.5, 8.0);
        let drift = self.ageing(5.0, 100.0);
        let absent = self.absent;
        let dice = &mut self.dice;
        Reference {
            order_code,
            output: Exact::from_decimal(dice.of(&self.voltages)),
            accuracy: Ppm::new(dice.spread(100.0, 2000.0)),
            tempco: PpmPerKelvin::new(dice.spread(2.0, 50.0)),
            tempco_method: dice.of(&[
                TempcoMethod::Slope,
                TempcoMethod::Box,
                TempcoMethod::Butterfly,
            ]),
            tempco_over: dice.of(&[supply.temperature, celsius(0.0, 70.0), celsius(-20.0, 50.0)]),
            dropout: Volts::new(dice.spread(0.1, 2.0)),
            supply_max: Volts::new(dice.of(&[12.0, 15.0, 18.0, 36.0])),
            source_max: Amperes::new(dice.of(&[0.001, 0.005, 0.01, 0.01])),
            quiescent: Amperes::new(dice.spread(5e-5, 1.5e-3)),
            load_regulation: dice.maybe(absent, 1e3, 4e4).map(PpmPerAmpere::new),
            load_tested_at: Amperes::new(dice.of(&[0.0, 0.0, 0.001])),
            line_regulation: dice.maybe(absent, 1.0, 50.0).map(PpmPerVolt::new),
            line_tested_at: dice.of(&[None, Some(5.0), Some(15.0)]).map(Volts::new),
            drift,
            hysteresis: dice.maybe(absent, 5.0, 100.0).map(Ppm::new),
            assembly_shift: dice.maybe(absent, 10.0, 300.0).map(Ppm::new),
            thermal: dice.maybe(absent, 80.0, 300.0).map(KelvinsPerWatt::new),
            noise: dice.maybe(absent, 1e-6, 5e-5).map(Volts::new),
            bypass: dice.of(&[None, Some(1e-7), Some(1e-6)]).map(Farads::new),
            supply,
        }
    }

    fn amplifier(&mut self) -> Amplifier {
        let order_code = self.code("AMP");
        let supply = self.supply(&order_code, 0.3, 6.0);
        let absent = self.absent;
        let dice = &mut self.dice;
        let bias = dice.spread(1e-11, 1e-8);
        let law = if dice.chance(absent) { 0 } else { dice.whole(1, 7) };
        Amplifier {
            order_code,
            supply,
            offset: Volts::new(dice.spread(5e-6, 1e-3)),
            bias: Amperes::new(bias),
            swing_low: Volts::new(dice.spread(0.02, 1.2)),
            swing_high: Volts::new(dice.spread(0.05, 1.5)),
            input_low: Volts::new(dice.of(&[-0.1, 0.0, 0.3])),
            input_high: Volts::new(dice.of(&[-0.1, 0.5, 1.5])),
            total_supply: volts(dice.of(&[2.7, 4.5, 8.0]), dice.of(&[13.0, 18.0, 36.0, 40.0])),
            sink_max: Amperes::new(dice.of(&[0.0005, 0.005, 0.02])),
            offset_drift: dice.maybe(absent, 1e-8, 1e-5).map(VoltsPerKelvin::new),
            bias_doubling: (law & 1 == 1).then(|| Kelvins::new(dice.of(&[8.0, 10.0]))),
            bias_drift: (law & 2 == 2)
                .then(|| AmperesPerKelvin::new(bias * dice.spread(0.001, 0.03))),
            bias_over_range: (law & 4 == 4)
                .then(|| Amperes::new(bias * dice.of(&[1.0, 2.0, 20.0]))),
            cmrr: dice.maybe(absent, 80.0, 130.0).map(Decibels::new),
            psrr: dice.maybe(absent, 80.0, 130.0).map(Decibels::new),
            open_loop_gain: dice.maybe(absent, 90.0, 130.0).map(Decibels::new),
            tested_supply: dice.of(&[None, Some(5.0), Some(30.0)]).map(Volts::new),
            tested_common_mode: dice.of(&[None, Some(0.0), Some(2.5)]).map(Volts::new),
            noise: dice.maybe(absent, 1e-7, 5e-6).map(Volts::new),
            current_noise: dice.maybe(absent, 1e-13, 1e-11).map(Amperes::new),
            quiescent: dice.maybe(absent, 2e-5, 2e-3).map(Amperes::new),
            capacitive_load: dice.of(&[None, Some(1e-7), Some(1e-6), Some(1e-5)]).map(Farads::new),
        }
    }

    /// A value that some output may want: near what it needs alone, or as part of a network.
    fn useful(&mut self) -> Decimal {
        const PARTS: [(i32, i32); 6] = [(1, 2), (2, 1), (9, 10), (1, 10), (1, 3), (3, 1)];
        const ALONE: [(i32, i32); 3] = [(1, 1), (1, 1), (1001, 1000)];
        let dice = &mut self.dice;
        let current = dice.of(&self.currents);
        let wanted = dice.of(&self.voltages).to_rational() / current.to_rational();
        let alone = if self.to_order { 5 } else { 40 };
        let (top, bottom) = if dice.chance(alone) { dice.of(&ALONE) } else { dice.of(&PARTS) };
        let target = wanted * BigRational::new(top.into(), bottom.into());
        let digits = dice.of(&[3, 4, 4, 5]);
        let near = around(&target, digits);
        Decimal::from_rational(&near[dice.below(near.len())]).unwrap()
    }

    fn resistor(&mut self, values: Option<usize>) -> ResistorType {
        let code = self.code("RES");
        let dearest = if values.is_some() { 4.0 } else { 0.5 };
        let supply = self.supply(&code, 0.05, dearest);
        let stability = self.ageing(10.0, 500.0);
        let code_pattern = format!("{code}-{{value}}");
        let values = match values {
            Some(count) => {
                let mut all: Vec<Decimal> = (0..count).map(|_| self.useful()).collect();
                all.sort();
                all.dedup();
                let listed = |ohms: Decimal| ListedValue {
                    ohms: Exact::from_decimal(ohms),
                    order_code: format!("{code}-{}", letter_code(ohms)),
                };
                Values::Listed(all.into_iter().map(listed).collect())
            }
            None => {
                // Some ranges end below what an output needs, so that listed values must help.
                let current = self.dice.of(&self.currents).to_rational();
                let top = self.dice.of(&self.voltages).to_rational() / current;
                let (by, below) = self.dice.of(&[(1, 2), (4, 5), (4, 5), (3, 1), (20, 1)]);
                let top = top * BigRational::new(by.into(), below.into());
                let high = Decimal::from_rational(&around(&top, 2)[0]).unwrap();
                let low = Decimal::new(high.mantissa(), high.exponent() - 2);
                let range = Range::new(low, high).unwrap();
                Values::MadeToOrder { range, digits: self.dice.of(&[1, 2, 3, 4, 6]) }
            }
        };
        let absent = self.absent;
        let dice = &mut self.dice;
        ResistorType {
            code_pattern,
            supply,
            tolerance: Ppm::new(dice.of(&[50.0, 100.0, 500.0, 1000.0, 5000.0])),
            tempco: PpmPerKelvin::new(dice.of(&[0.0, 2.0, 5.0, 15.0, 50.0])),
            power: Watts::new(dice.of(&[0.01, 0.0625, 0.125, 0.25])),
            values,
            thermal: dice.maybe(absent, 100.0, 400.0).map(KelvinsPerWatt::new),
            stability,
            voltage_coefficient: dice.maybe(absent, 0.01, 1.0).map(PpmPerVolt::new),
            voltage_max: dice.of(&[None, Some(2.2), Some(50.0), Some(50.0)]).map(Volts::new),
            assembly_shift: dice.maybe(absent, 5.0, 200.0).map(Ppm::new),
        }
    }

    fn lift(&mut self) -> Lift {
        let order_code = self.code("DIO");
        let supply = self.supply(&order_code, 0.02, 0.3);
        let dice = &mut self.dice;
        let base = dice.of(&[0.2, 0.3, 0.55]);
        let first = dice.of(&[1e-6, 1e-5, 1e-4]);
        let mut drop = Vec::new();
        for step in 0..dice.whole(2, 5) {
            let current = first * 10f64.powi(i32::try_from(step).unwrap());
            let drop_volts = base + 0.07 * step as f64;
            drop.push(DropPoint { current: Amperes::new(current), drop: Volts::new(drop_volts) });
        }
        Lift {
            order_code,
            supply,
            drop,
            current_max: Amperes::new(dice.of(&[0.002, 0.1])),
            drop_spread: Volts::new(dice.of(&[0.0, 0.05])),
            drop_tempco: VoltsPerKelvin::new(dice.of(&[-0.002, -0.002, 0.0])),
            in_series_max: dice.of(&[1, 2, 4]),
        }
    }

    fn adjustment(&mut self) -> Adjustment {
        let order_code = self.code("ADJ");
        let each = Money::from_micros(self.dice.of(&[200_000, 500_000, 1_500_000, 3_000_000]));
        let mut supply = plain_supply(&order_code, vec![PriceBreak { from: 1, each }]);
        supply.lifecycle =
            self.dice.of(&[Lifecycle::Active, Lifecycle::Active, Lifecycle::Preview]);
        supply.currency = self.dice.chance(10).then(|| "USD".to_owned());
        Adjustment {
            order_code,
            supply,
            residual: Ppm::new(self.dice.spread(5.0, 100.0)),
            range: Ppm::new(self.dice.spread(1000.0, 10_000.0)),
            tempco: PpmPerKelvin::new(self.dice.of(&[0.0, 0.5, 2.0])),
        }
    }

    /// A catalogue in which the currents and voltages of this case can be met.
    pub fn catalog(&mut self) -> Catalog {
        let mut catalog = Catalog::default();
        for _ in 0..self.dice.whole(2, 6) {
            let made = self.reference();
            if self.dice.chance(20) {
                // The same grade under another code, so that designs tie.
                let mut twin = made.clone();
                twin.order_code = self.code("REF");
                catalog.references.push(twin);
            }
            catalog.references.push(made);
        }
        for _ in 0..self.dice.whole(2, 5) {
            let made = self.amplifier();
            if self.dice.chance(20) {
                let mut twin = made.clone();
                twin.order_code = self.code("AMP");
                catalog.amplifiers.push(twin);
            }
            catalog.amplifiers.push(made);
        }
        for _ in 0..self.dice.whole(1, if self.to_order { 2 } else { 3 }) {
            let count = self.dice.whole(2, if self.to_order { 4 } else { 7 });
            let made = self.resistor(Some(count));
            catalog.resistors.push(made);
        }
        if self.to_order {
            for _ in 0..self.dice.of(&[1, 1, 1, 2]) {
                let made = self.resistor(None);
                catalog.resistors.push(made);
            }
        }
        for _ in 0..self.dice.of(&[0, 1, 1, 2]) {
            let made = self.lift();
            catalog.lifts.push(made);
        }
        for _ in 0..self.dice.whole(0, 2) {
            let made = self.adjustment();
            catalog.adjustments.push(made);
        }
        catalog
    }
}
