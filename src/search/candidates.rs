//! Values worth ordering of made-to-order resistor types: for every output current, reference
//! voltage and network shape, the two representable values around what the other elements leave
//! of R* = Vref/I, or the one that can be made exactly.

use std::collections::HashSet;

use num_bigint::BigInt;
use num_rational::BigRational;
use num_traits::{One, Signed, ToPrimitive, Zero};
use rayon::prelude::*;

use crate::catalog::{ResistorType, Values};
use crate::quantity::{Decimal, Exact, Range, Volts};
use crate::request::Request;

/// Every candidate, by index of its type, each once, in no particular order.
pub(super) fn made_to_order(
    request: &Request,
    types: &[&ResistorType],
    voltages: &[Exact<Volts>],
    listed: &[(Decimal, u32, bool)],
) -> Vec<(u32, Decimal)> {
    let open: Vec<(u32, Range<Decimal>, u32)> = types
        .iter()
        .enumerate()
        .filter_map(|(index, of)| match of.values {
            Values::MadeToOrder { range, digits } => Some((index as u32, range, digits)),
            Values::Listed(_) => None,
        })
        .collect();
    if open.is_empty() {
        return Vec::new();
    }
    let mut others: Vec<Decimal> = listed.iter().map(|entry| entry.0).collect();
    others.sort_unstable();
    others.dedup();
    let rests = rests(&others, request.network_elements);

    let mut currents: Vec<Decimal> = request.outputs.iter().map(|o| o.current.decimal()).collect();
    currents.sort_unstable();
    currents.dedup();

    let pairs: Vec<(Exact<Volts>, Decimal)> =
        voltages.iter().flat_map(|&v| currents.iter().map(move |&c| (v, c))).collect();
    let found: HashSet<(u32, Decimal)> = pairs
        .par_iter()
        .flat_map_iter(|&(voltage, current)| {
            let target = Target {
                exact: voltage.decimal().to_rational() / current.to_rational(),
                near: voltage.value().value() / current.to_f64(),
            };
            let mut found = Vec::new();
            for rest in &rests {
                for &(index, range, digits) in &open {
                    let around = target.around(rest, digits).into_iter().flatten();
                    found.extend(around.filter(|&o| holds(range, o)).map(|o| (index, o)));
                }
            }
            found
        })
        .collect();
    found.into_iter().collect()
}

/// Whether a range holds a value; compared in binary first, exactly where that cannot tell.
fn holds(range: Range<Decimal>, ohms: Decimal) -> bool {
    let not_above = |a: Decimal, b: Decimal| {
        let (x, y) = (a.to_f64(), b.to_f64());
        if x == y { a <= b } else { x < y }
    };
    not_above(range.low(), ohms) && not_above(ohms, range.high())
}

/// One network shape from the made-to-order element's point of view.
struct Rest {
    parallel: bool,
    /// How often the made-to-order value is used.
    times: u32,
    /// The other elements.
    others: Vec<Decimal>,
    /// Sum of the others' resistances (series) or conductances (parallel).
    near: f64,
}

fn rests(others: &[Decimal], elements: u32) -> Vec<Rest> {
    let mut rests = Vec::new();
    for count in 1..=elements {
        for times in 1..=count {
            for chosen in multisets(others, (count - times) as usize) {
                for parallel in [false, true] {
                    if count == 1 && parallel {
                        continue;
                    }
                    let near = chosen
                        .iter()
                        .map(|ohms| if parallel { 1.0 / ohms.to_f64() } else { ohms.to_f64() })
                        .sum();
                    rests.push(Rest { parallel, times, others: chosen.clone(), near });
                }
            }
        }
    }
    rests
}

fn multisets(of: &[Decimal], count: usize) -> Vec<Vec<Decimal>> {
    if count == 0 {
        return vec![Vec::new()];
    }
    let mut all = Vec::new();
    for (index, &first) in of.iter().enumerate() {
        for mut rest in multisets(&of[index..], count - 1) {
            rest.insert(0, first);
            all.push(rest);
        }
    }
    all
}

struct Target {
    exact: BigRational,
    near: f64,
}

impl Target {
    /// The representable values around what the rest leaves: two, one if exact, or none.
    fn around(&self, rest: &Rest, digits: u32) -> [Option<Decimal>; 2] {
        let times = f64::from(rest.times);
        // What one made-to-order element must be, and how far rounding can have moved it.
        let (near, error) = if rest.parallel {
            let goal = 1.0 / self.near;
            let left = (goal - rest.near) / times;
            (1.0 / left, (goal + rest.near) * 4e-16 / (left * left).abs())
        } else {
            ((self.near - rest.near) / times, (self.near + rest.near) * 4e-16)
        };
        // A rest that takes about all of R* leaves nothing that rounding can judge.
        if near.is_finite() && near > 0.0 && error < near * 1e-3 {
            let exponent = near.log10().floor() as i32 - (digits as i32 - 1);
            let scaled = near / 10f64.powi(exponent);
            let doubt = error / 10f64.powi(exponent) + scaled * 4e-16 + 1e-9;
            let inside = scaled > 10f64.powi(digits as i32 - 1) + 1.0
                && scaled < 10f64.powi(digits as i32) - 1.0;
            if inside && (scaled - scaled.round()).abs() > doubt {
                let low = scaled.floor() as i128;
                return [Decimal::new(low, exponent), Decimal::new(low + 1, exponent)].map(Some);
            }
        } else if near < 0.0 && error < -near {
            return [None, None];
        }
        self.exactly_around(rest, digits)
    }

    fn exactly_around(&self, rest: &Rest, digits: u32) -> [Option<Decimal>; 2] {
        let times = BigRational::from_integer(BigInt::from(rest.times));
        let invert = |r: BigRational| if r.is_zero() { None } else { Some(r.recip()) };
        let left = if rest.parallel {
            let taken: BigRational = rest.others.iter().map(|o| o.to_rational().recip()).sum();
            invert((self.exact.recip() - taken) / times)
        } else {
            let taken: BigRational = rest.others.iter().map(|o| o.to_rational()).sum();
            Some((&self.exact - taken) / times)
        };
        match left {
            Some(left) if left.is_positive() => bracket(&left, digits),
            _ => [None, None],
        }
    }
}

/// The two `digits`-digit decimals around a positive fraction, or the one that equals it.
fn bracket(left: &BigRational, digits: u32) -> [Option<Decimal>; 2] {
    let ten = BigInt::from(10);
    let (least, most) =
        (num_traits::pow(ten.clone(), digits as usize - 1), num_traits::pow(ten, digits as usize));
    let mut exponent =
        left.to_f64().map_or(0, |near| near.log10().floor() as i32) - (digits as i32 - 1);
    loop {
        let scaled = left / Decimal::new(1, exponent).to_rational();
        let floor = scaled.floor().to_integer();
        if floor < least {
            exponent -= 1;
        } else if floor >= most {
            exponent += 1;
        } else {
            let Ok(low) = i128::try_from(floor) else { return [None, None] };
            let exact = scaled.denom().is_one();
            return [
                Some(Decimal::new(low, exponent)),
                (!exact).then(|| Decimal::new(low + 1, exponent)),
            ];
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn around(volts: (i128, i32), amps: (i128, i32), rest: &Rest, digits: u32) -> Vec<f64> {
        let (v, i) = (Decimal::new(volts.0, volts.1), Decimal::new(amps.0, amps.1));
        let target =
            Target { exact: v.to_rational() / i.to_rational(), near: v.to_f64() / i.to_f64() };
        target.around(rest, digits).into_iter().flatten().map(Decimal::to_f64).collect()
    }

    fn alone() -> Rest {
        Rest { parallel: false, times: 1, others: Vec::new(), near: 0.0 }
    }

    #[test]
    fn an_exact_value_stands_alone() {
        // 10 V / 1 mA is 10 kΩ to any number of digits.
        assert_eq!(around((10, 0), (1, -3), &alone(), 1), [10_000.0]);
        // 10 V / 3 mA is 3333.33... Ω.
        assert_eq!(around((10, 0), (3, -3), &alone(), 6), [3333.33, 3333.34]);
        // 9.9999 rounds up into the next decade: 9.9999 V / 1 A to 2 digits.
        assert_eq!(around((99_999, -4), (1, 0), &alone(), 2), [9.9, 10.0]);
    }

    #[test]
    fn the_others_take_their_share() {
        let ten_k = Decimal::new(1, 4);
        let series = Rest { parallel: false, times: 1, others: vec![ten_k], near: 1e4 };
        // 10.5 V / 1 mA less 10 kΩ leaves 500 Ω.
        assert_eq!(around((105, -1), (1, -3), &series, 3), [500.0]);
        // Nothing is left of 10 V / 1 mA, and less than nothing of 5 V.
        assert!(around((10, 0), (1, -3), &series, 3).is_empty());
        assert!(around((5, 0), (1, -3), &series, 3).is_empty());
        let parallel = Rest { parallel: true, times: 1, others: vec![ten_k], near: 1e-4 };
        // 5 kΩ out of 10 kΩ needs another 10 kΩ beside it.
        assert_eq!(around((5, 0), (1, -3), &parallel, 4), [10_000.0]);
        let twice = Rest { parallel: true, times: 2, others: Vec::new(), near: 0.0 };
        assert_eq!(around((1, 0), (3, -3), &twice, 4), [666.6, 666.7]);
    }
}
