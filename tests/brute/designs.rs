//! Every design of every output.

use std::collections::{BTreeMap, BTreeSet};

use ampthrift::catalog::{
    Adjustment, Amplifier, Catalog, Kind, Lift, Reference, ResistorType, Supply, Values,
};
use ampthrift::quantity::{Decimal, Range};
use ampthrift::request::{Output, Request, Unstated};
use num_rational::BigRational;

use super::made::{around, left_over, letter_code};
use super::physics::{Built, Joined, Piece, Worked, evaluate, join};
use super::rules::Sieve;

/// One value of one resistor type that can be bought.
pub struct Value<'a> {
    pub of: &'a ResistorType,
    pub exact: Decimal,
    pub ohms: f64,
    pub code: String,
}

/// A network of values, by their places on the shelf.
pub struct Net {
    pub joined: Joined,
    pub values: Vec<usize>,
    pub ohms: f64,
}

/// All that the rules leave, and all networks that can be made of it.
pub struct Shelf<'a> {
    pub request: &'a Request,
    pub references: Vec<&'a Reference>,
    pub amplifiers: Vec<&'a Amplifier>,
    pub values: Vec<Value<'a>>,
    pub lifts: Vec<&'a Lift>,
    pub adjustments: Vec<&'a Adjustment>,
    pub networks: Vec<Net>,
}

/// A design, by places on the shelf.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Pick {
    pub reference: usize,
    pub amplifier: usize,
    pub network: usize,
    pub lift: Option<(usize, u32)>,
    pub adjustment: Option<usize>,
}

/// A design that passes, and its total in ppm.
#[derive(Clone, Copy, Debug)]
pub struct Passing {
    pub pick: Pick,
    pub total: f64,
}

/// All multisets of `size` numbers below `count`, each in rising order.
fn multisets(count: usize, size: usize) -> Vec<Vec<usize>> {
    let mut all = vec![Vec::new()];
    for _ in 0..size {
        let mut longer = Vec::new();
        for set in &all {
            for next in set.last().copied().unwrap_or(0)..count {
                let mut set = set.clone();
                set.push(next);
                longer.push(set);
            }
        }
        all = longer;
    }
    all
}

fn shapes(elements: usize) -> &'static [Joined] {
    if elements == 1 { &[Joined::Single] } else { &[Joined::Series, Joined::Parallel] }
}

impl<'a> Shelf<'a> {
    pub fn new(catalog: &'a Catalog, request: &'a Request) -> Self {
        let sieve = Sieve::new(catalog, request);
        let leaves = |kind, supply: &Supply, code: &str| {
            sieve.leaves_type(kind, supply) && sieve.leaves_code(kind, code)
        };
        let references: Vec<_> = catalog
            .references
            .iter()
            .filter(|r| leaves(Kind::Reference, &r.supply, &r.order_code))
            .collect();
        let amplifiers = catalog
            .amplifiers
            .iter()
            .filter(|a| leaves(Kind::Amplifier, &a.supply, &a.order_code))
            .collect();
        let lifts =
            catalog.lifts.iter().filter(|l| leaves(Kind::Lift, &l.supply, &l.order_code)).collect();
        let adjustments = catalog
            .adjustments
            .iter()
            .filter(|_| request.adjustments)
            .filter(|a| leaves(Kind::Adjustment, &a.supply, &a.order_code))
            .collect();

        let mut values = Vec::new();
        let mut exact = Vec::new();
        for of in &catalog.resistors {
            let Values::Listed(listed) = &of.values else { continue };
            for value in listed {
                if leaves(Kind::Resistor, &of.supply, &value.order_code) {
                    let code = value.order_code.clone();
                    let decimal = value.ohms.decimal();
                    values.push(Value { of, exact: decimal, ohms: decimal.to_f64(), code });
                    exact.push(decimal.to_rational());
                }
            }
        }
        let most = request.network_elements as usize;
        let listed = values.len();
        let mut sets: Vec<Vec<usize>> = (1..=most).flat_map(|n| multisets(listed, n)).collect();
        for of in &catalog.resistors {
            let Values::MadeToOrder { range, digits } = of.values else { continue };
            if !sieve.leaves_type(Kind::Resistor, &of.supply) {
                continue;
            }
            for ohms in candidates(request, &references, &exact, range, digits) {
                let code = of.code_pattern.replace("{value}", &letter_code(ohms));
                if !sieve.leaves_code(Kind::Resistor, &code) {
                    continue;
                }
                let made = values.len();
                values.push(Value { of, exact: ohms, ohms: ohms.to_f64(), code });
                for copies in 1..=most {
                    for others in 0..=most - copies {
                        for mut set in multisets(listed, others) {
                            set.resize(others + copies, made);
                            sets.push(set);
                        }
                    }
                }
            }
        }
        let mut networks = Vec::new();
        for mut set in sets {
            set.sort_by(|&a, &b| values[a].code.cmp(&values[b].code));
            for &joined in shapes(set.len()) {
                let ohms = join(joined, set.iter().map(|&value| values[value].ohms));
                networks.push(Net { joined, values: set.clone(), ohms });
            }
        }
        Self { request, references, amplifiers, values, lifts, adjustments, networks }
    }

    /// A design with its parts at hand.
    pub fn built(&self, pick: Pick) -> Built<'_> {
        let net = &self.networks[pick.network];
        let piece = |&value: &usize| {
            let value = &self.values[value];
            Piece { of: value.of, ohms: value.ohms, code: value.code.as_str() }
        };
        Built {
            reference: self.references[pick.reference],
            amplifier: self.amplifiers[pick.amplifier],
            joined: net.joined,
            pieces: net.values.iter().map(piece).collect(),
            lift: pick.lift.map(|(lift, count)| (self.lifts[lift], count)),
            adjustment: pick.adjustment.map(|adjustment| self.adjustments[adjustment]),
        }
    }

    /// Networks by their mismatch in ppm at a reference voltage, the best first.
    fn by_mismatch(&self, vref: f64, current: f64) -> Vec<(f64, usize)> {
        let mismatch = |net: &Net| (vref / current / net.ohms - 1.0).abs() * 1e6;
        let mut all: Vec<_> =
            self.networks.iter().enumerate().map(|(at, net)| (mismatch(net), at)).collect();
        all.sort_by(|a, b| a.0.total_cmp(&b.0));
        all
    }

    /// Calls `visit` with every design of an output whose mismatch is at most what `enough` says
    /// for its adjustment. Designs whose other parts alone break the window are left out.
    fn each(
        &self,
        output: &Output,
        enough: impl Fn(Option<&Adjustment>) -> f64,
        mut visit: impl FnMut(Pick, &Worked<'_>),
    ) {
        let current = output.current.value().value();
        let mut lifts = vec![None];
        for (at, lift) in self.lifts.iter().enumerate() {
            lifts.extend((1..=lift.in_series_max).map(|count| Some((at, count))));
        }
        let mut nets: BTreeMap<u64, Vec<(f64, usize)>> = BTreeMap::new();
        for (reference, part) in self.references.iter().enumerate() {
            let vref = part.output.value().value();
            let nets =
                nets.entry(vref.to_bits()).or_insert_with(|| self.by_mismatch(vref, current));
            for &lift in &lifts {
                for adjustment in std::iter::once(None).chain((0..self.adjustments.len()).map(Some))
                {
                    let most = enough(adjustment.map(|at| self.adjustments[at]));
                    for amplifier in 0..self.amplifiers.len() {
                        for &(mismatch, network) in &*nets {
                            if mismatch > most {
                                break;
                            }
                            let pick = Pick { reference, amplifier, network, lift, adjustment };
                            let built = self.built(pick);
                            let Some(worked) = evaluate(self.request, output, &built) else {
                                break;
                            };
                            if fails_without_network(&worked) {
                                break;
                            }
                            visit(pick, &worked);
                        }
                    }
                }
            }
        }
    }

    fn refused(&self, worked: &Worked<'_>) -> bool {
        self.request.rules.unstated == Unstated::Reject && !worked.missing.is_empty()
    }

    /// Every design of an output that passes window, accuracy and rules. The total is never below
    /// the mismatch, nor is the sum that an adjustment has to take up.
    pub fn passing(&self, output: &Output) -> Vec<Passing> {
        let mut all = Vec::new();
        let enough = |adjustment: Option<&Adjustment>| {
            let most = match adjustment {
                Some(adjustment) => adjustment.range.value(),
                None => output.accuracy.value(),
            };
            most * (1.0 + 1e-8)
        };
        self.each(output, enough, |pick, worked| {
            if worked.window && worked.accurate && !self.refused(worked) {
                all.push(Passing { pick, total: worked.total });
            }
        });
        all
    }

    /// The totals of all designs within the window, rising; of those without an adjustment only the
    /// ones whose mismatch is at most so many ppm.
    pub fn totals_in_window(&self, output: &Output, mismatch: f64) -> Vec<f64> {
        let mut all = Vec::new();
        let enough = |adjustment: Option<&Adjustment>| {
            adjustment.map_or(mismatch, |adjustment| adjustment.range.value() * (1.0 + 1e-8))
        };
        self.each(output, enough, |_, worked| {
            if worked.window && !self.refused(worked) {
                all.push(worked.total);
            }
        });
        all.sort_by(f64::total_cmp);
        all
    }

    /// The smallest total of any design within the window.
    pub fn best_total(&self, output: &Output) -> Option<f64> {
        let mut most = 100.0;
        while most < 1e12 {
            // Designs left out have a total above `most`.
            match self.totals_in_window(output, most).first() {
                Some(&best) if best <= most => return Some(best),
                _ => most *= 10.0,
            }
        }
        self.totals_in_window(output, f64::INFINITY).first().copied()
    }
}

/// Whether a limit fails on which the network has no say.
fn fails_without_network(worked: &Worked<'_>) -> bool {
    worked.limits.iter().any(|line| {
        let network = line.name.starts_with("resistor_");
        !line.holds && !network && line.name != "temperature" && line.name != "adjustment_range"
    })
}

/// The values of one made-to-order type that every output may use.
fn candidates(
    request: &Request,
    references: &[&Reference],
    listed: &[BigRational],
    range: Range<Decimal>,
    digits: u32,
) -> Vec<Decimal> {
    let most = request.network_elements as usize;
    let (low, high) = (range.low().to_rational(), range.high().to_rational());
    let mut found = BTreeSet::new();
    for output in &request.outputs {
        for reference in references {
            let wanted =
                reference.output.decimal().to_rational() / output.current.decimal().to_rational();
            for copies in 1..=most {
                for others in 0..=most - copies {
                    for set in multisets(listed.len(), others) {
                        let others: Vec<_> = set.iter().map(|&at| listed[at].clone()).collect();
                        for parallel in [false, true] {
                            let Some(target) = left_over(&wanted, &others, copies, parallel) else {
                                continue;
                            };
                            found.extend(
                                around(&target, digits)
                                    .into_iter()
                                    .filter(|value| low <= *value && *value <= high),
                            );
                        }
                    }
                }
            }
        }
    }
    found.iter().map(|value| Decimal::from_rational(value).unwrap()).collect()
}
