//! Random requests for a random catalogue.

use ampthrift::catalog::{Catalog, Lifecycle, Values};
use ampthrift::quantity::{
    Amperes, Celsius, Decimal, Exact, ExchangeRate, Money, Ohms, Ppm, Range, Seconds, Volts,
};
use ampthrift::request::{
    BoxReading, Budget, Conditions, Load, Output, PurchaseRules, Request, Rules, Unstated,
};

use super::designs::Shelf;
use super::generate::{Maker, celsius, volts};

/// Conditions with nothing special about them.
pub fn plain_conditions() -> Conditions {
    Conditions {
        supply: volts(14.0, 16.0),
        negative_rail: volts(0.0, 0.0),
        ambient: celsius(25.0, 25.0),
        calibrated_at: Celsius::new(25.0),
        calibrated_supply: None,
        calibrated_load: None,
        service: Seconds::ZERO,
        insulation: None,
        guarded: false,
        thermal_emf: Volts::ZERO,
        wiring: Ohms::ZERO,
        margin: Volts::new(0.05),
        power_derating: 0.5,
        box_reading: BoxReading::Slope,
        quiescent_max: None,
    }
}

/// A request with nothing special about it, for these outputs.
pub fn plain_request(outputs: Vec<Output>) -> Request {
    Request {
        title: None,
        currency: "EUR".to_owned(),
        exchange: [("USD".to_owned(), ExchangeRate(Decimal::new(923_457, -6)))].into(),
        budget: Budget::WorstCase,
        conditions: plain_conditions(),
        rules: Rules {
            lifecycle: vec![Lifecycle::Active, Lifecycle::LastBuy],
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
            line_cost: Money::ZERO,
            placement_cost: Money::ZERO,
            lines_max: None,
        },
        outputs,
    }
}

/// A random catalogue and request, the same for the same seed; a family where the seed is odd.
/// Most cases in which some output fits no window are thrown again.
pub fn case(seed: u64) -> (Catalog, Request) {
    let mut throw = 0;
    loop {
        let mut maker = Maker::new(seed * 1000 + throw, seed % 2 == 1);
        let catalog = maker.catalog();
        let mut request = request(&mut maker, &catalog);
        let fits = set_targets(&mut maker, &catalog, &mut request);
        if fits || maker.dice.chance(2) {
            return (catalog, request);
        }
        throw += 1;
    }
}

fn outputs(maker: &mut Maker) -> Vec<Output> {
    let mut all = Vec::new();
    for (at, current) in maker.currents.clone().into_iter().enumerate() {
        let dice = &mut maker.dice;
        let low = dice.of(&[0.0, 0.0, 0.0, 0.2, 0.5, 1.0]);
        let high = low + dice.of(&[0.0, 0.5, 1.0, 4.0]);
        let load = if dice.chance(30) {
            let ohms = |volts: f64| {
                let ohms = volts / current.to_f64();
                Ohms::new(format!("{ohms:.2e}").parse().unwrap())
            };
            Load::Resistance(Range::new(ohms(low), ohms(high)).unwrap())
        } else {
            Load::Voltage(volts(low, high))
        };
        all.push(Output {
            name: format!("output-{at}"),
            current: Exact::from_decimal(current),
            accuracy: Ppm::new(1000.0),
            load,
            quantity: dice.of(&[1, 7, 20, 95, 100, 250]),
        });
    }
    all
}

fn conditions(maker: &mut Maker, outputs: &[Output]) -> Conditions {
    let dice = &mut maker.dice;
    let mut all = plain_conditions();
    let low = dice.of(&[9.0, 12.0, 14.5, 15.0]);
    let high = low + dice.of(&[0.0, 1.0, 2.0]);
    all.supply = volts(low, high);
    all.negative_rail = dice.of(&[
        volts(0.0, 0.0),
        volts(0.0, 0.0),
        volts(0.0, 0.0),
        volts(-5.0, -5.0),
        volts(-5.5, -4.5),
    ]);
    all.ambient = dice.of(&[
        celsius(25.0, 25.0),
        celsius(0.0, 40.0),
        celsius(-20.0, 50.0),
        celsius(30.0, 60.0),
    ]);
    let (cold, hot) = (all.ambient.low().value(), all.ambient.high().value());
    all.calibrated_at = Celsius::new(match dice.below(3) {
        0 if cold <= 25.0 && 25.0 <= hot => 25.0,
        1 => cold,
        _ => (cold + hot) / 2.0,
    });
    all.calibrated_supply =
        dice.of(&[None, None, Some(low), Some((low + high) / 2.0)]).map(Volts::new);
    all.calibrated_load = match outputs {
        // Inside every output's range.
        [one] if dice.chance(40) => Some(match one.load {
            Load::Voltage(range) => Load::Voltage(Range::point(range.high())),
            Load::Resistance(range) => Load::Resistance(Range::point(range.low())),
        }),
        _ => None,
    };
    all.service = Seconds::new(dice.of(&[0.0, 1000.0, 8760.0]) * 3600.0);
    all.insulation = dice.maybe(50, 1e9, 1e12).map(Ohms::new);
    all.guarded = dice.chance(25);
    all.thermal_emf = Volts::new(dice.of(&[0.0, 2e-6]));
    all.wiring = Ohms::new(dice.of(&[0.0, 0.05]));
    all.margin = Volts::new(dice.of(&[0.0, 0.05, 0.2]));
    all.power_derating = dice.of(&[0.5, 1.0]);
    all.box_reading = dice.of(&[BoxReading::Slope, BoxReading::Guaranteed]);
    all.quiescent_max = dice.maybe(75, 3e-4, 3e-3).map(Amperes::new);
    all
}

fn rules(maker: &mut Maker, catalog: &Catalog) -> Rules {
    let mut patterns = Vec::new();
    patterns.extend(catalog.references.iter().map(|r| r.order_code.clone()));
    patterns.extend(catalog.amplifiers.iter().map(|a| a.order_code.clone()));
    patterns.extend(catalog.lifts.iter().map(|l| l.order_code.clone()));
    patterns.extend(catalog.adjustments.iter().map(|a| a.order_code.clone()));
    for of in &catalog.resistors {
        patterns.push(of.code_pattern.replace("{value}", "*"));
        if let Values::Listed(values) = &of.values {
            patterns.push(values[0].order_code.clone());
        }
    }
    let dice = &mut maker.dice;
    let mut pattern = |percent: usize| {
        let at = dice.below(patterns.len());
        if dice.chance(percent) { vec![patterns[at].clone()] } else { Vec::new() }
    };
    let (forbid, require) = (pattern(15), pattern(12));
    let words = |word: &str| Some(vec![word.to_owned()]);
    Rules {
        lifecycle: dice
            .of(&[
                &[Lifecycle::Active, Lifecycle::LastBuy][..],
                &[Lifecycle::Active, Lifecycle::LastBuy],
                &[Lifecycle::Active],
                &[Lifecycle::Active, Lifecycle::LastBuy, Lifecycle::Preview],
            ])
            .to_vec(),
        lead_time_max: dice.chance(6).then(|| Seconds::new(14.0 * 604_800.0)),
        in_stock: maker.stocked && dice.chance(70),
        makers: if dice.chance(4) { words("Alderbank") } else { None },
        packages: if dice.chance(4) { words("P8") } else { None },
        forbid,
        require,
        unstated: if dice.chance(10) { Unstated::Reject } else { Unstated::Note },
    }
}

fn request(maker: &mut Maker, catalog: &Catalog) -> Request {
    let mut all = plain_request(outputs(maker));
    all.conditions = conditions(maker, &all.outputs);
    all.rules = rules(maker, catalog);
    let dice = &mut maker.dice;
    all.budget = match dice.below(3) {
        0 => Budget::WorstCase,
        1 => Budget::Rss,
        _ => Budget::Gum { coverage: dice.of(&[1.0, 2.0, 3.0]) },
    };
    let listed: usize = catalog
        .resistors
        .iter()
        .map(|of| match &of.values {
            Values::Listed(values) => values.len(),
            Values::MadeToOrder { .. } => 100,
        })
        .sum();
    all.network_elements = match listed {
        ..=6 => dice.of(&[1, 2, 3]),
        7..=12 => dice.of(&[1, 2, 2, 3]),
        13..=103 => dice.of(&[1, 2, 2, 2, 3]),
        _ => dice.of(&[1, 2, 2]),
    };
    all.adjustments = !dice.chance(20);
    all.purchase = PurchaseRules {
        line_cost: Money::from_micros(dice.of(&[0, 0, 5_000_000, 15_000_000])),
        placement_cost: Money::from_micros(dice.of(&[0, 40_000])),
        lines_max: dice.chance(12).then(|| 3 + dice.below(4) as u64),
    };
    all
}

/// Sets each output's accuracy so that most can be met, but not by many designs. False when some
/// output has no design within the window.
fn set_targets(maker: &mut Maker, catalog: &Catalog, request: &mut Request) -> bool {
    let mut fits = true;
    let shelf = Shelf::new(catalog, request);
    let mut targets = Vec::new();
    for output in &request.outputs {
        let totals = shelf.totals_in_window(output, 20_000.0);
        let dice = &mut maker.dice;
        let Some(&least) = totals.first() else {
            targets.push(1000.0);
            fits = false;
            continue;
        };
        let at = dice.below(totals.len().min(1500));
        targets.push(match dice.below(10) {
            0 => 0.9 * least,
            // Met exactly.
            1 | 2 => totals[at],
            _ => (1.02 * totals[at]).ceil(),
        });
    }
    for (output, target) in request.outputs.iter_mut().zip(targets) {
        output.accuracy = Ppm::new(target);
    }
    fits
}
