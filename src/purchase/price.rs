//! The exact cost of a quantity of one offer.

use crate::search::Tariff;

/// What is bought to have a quantity, and what it costs.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Buy {
    /// Units bought.
    pub units: u64,
    /// Unit price in millionths.
    pub each: i64,
    /// `units · each` in millionths.
    pub cost: i64,
}

/// The least cost of having `needed` units: over all allowed buys b ≥ needed, b times the unit
/// price at b; at equal cost the smaller buy. `None` when no allowed buy is in stock.
///
/// Within one step of the price list the unit price is constant, so the smallest allowed buy of
/// each step is enough.
#[must_use]
pub fn cheapest_buy(tariff: &Tariff, needed: u64) -> Option<Buy> {
    let mut best: Option<Buy> = None;
    for (index, &(from, each)) in tariff.breaks.iter().enumerate() {
        let least = needed.max(from).max(tariff.minimum);
        let Some(units) = least.div_ceil(tariff.multiple).checked_mul(tariff.multiple) else {
            continue;
        };
        let ends = tariff.breaks.get(index + 1).map_or(u64::MAX, |next| next.0);
        if units >= ends || tariff.most.is_some_and(|most| units > most) {
            continue;
        }
        let Some(cost) = i64::try_from(units).ok().and_then(|units| units.checked_mul(each)) else {
            continue;
        };
        if best.is_none_or(|b| (cost, units) < (b.cost, b.units)) {
            best = Some(Buy { units, each, cost });
        }
    }
    best
}

/// A step of a price list as a relaxation sees it: any quantity from `minimum` on at this price.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Step {
    /// Fewest units.
    pub minimum: u64,
    /// Unit price in millionths.
    pub each: i64,
    /// Most units, where the price rises again or stock ends.
    pub most: Option<u64>,
}

/// The steps of a tariff, without its multiples: no buy is cheaper than the best of these.
pub fn steps(tariff: &Tariff) -> impl Iterator<Item = Step> + '_ {
    tariff.breaks.iter().enumerate().filter_map(|(index, &(from, each))| {
        let minimum = from.max(tariff.minimum);
        let next = tariff.breaks.get(index + 1);
        // A step that ends before the least order is never bought from. Where the next price is
        // lower, going on at this one is only dearer and need not be forbidden.
        if next.is_some_and(|n| n.0 <= minimum) {
            return None;
        }
        let ends = next.filter(|n| n.1 > each).map(|n| n.0 - 1);
        let most = match (ends, tariff.most) {
            (Some(a), Some(b)) => Some(a.min(b)),
            (a, b) => a.or(b),
        };
        most.is_none_or(|m| m >= minimum).then_some(Step { minimum, each, most })
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn tariff(breaks: &[(u64, i64)], minimum: u64, multiple: u64, most: Option<u64>) -> Tariff {
        Tariff { breaks: breaks.to_vec(), minimum, multiple, most }
    }

    /// Every allowed buy up to far beyond the last step.
    fn plainly(tariff: &Tariff, needed: u64) -> Option<(i64, u64)> {
        let top = needed.max(tariff.breaks.last().map_or(1, |b| b.0)) + tariff.minimum;
        (needed..=top + 2 * tariff.multiple)
            .filter(|b| *b >= tariff.minimum && *b > 0 && b % tariff.multiple == 0)
            .filter(|b| tariff.most.is_none_or(|most| *b <= most))
            .map(|b| {
                let each = tariff.breaks.iter().rev().find(|s| s.0 <= b).map_or(0, |s| s.1);
                (b as i64 * each, b)
            })
            .min()
    }

    #[test]
    fn buying_up_to_a_break_pays() {
        // 90 at 1.00 are 90.00; 100 at 0.80 are 80.00.
        let t = tariff(&[(1, 1_000_000), (100, 800_000)], 1, 1, None);
        assert_eq!(cheapest_buy(&t, 90).map(|b| (b.units, b.cost)), Some((100, 80_000_000)));
        // At 80 both cost 80.00: the smaller buy.
        assert_eq!(cheapest_buy(&t, 80).map(|b| b.units), Some(80));
        // Not when only 95 are in stock.
        let t = Tariff { most: Some(95), ..t };
        assert_eq!(cheapest_buy(&t, 90).map(|b| b.units), Some(90));
        assert_eq!(cheapest_buy(&t, 96), None);
    }

    #[test]
    fn agrees_with_trying_every_buy() {
        let lists: [&[(u64, i64)]; 4] =
            [&[(1, 10)], &[(1, 10), (10, 8), (50, 5)], &[(1, 5), (10, 9)], &[(1, 10), (3, 0)]];
        for breaks in lists {
            for minimum in [1, 7, 12] {
                for multiple in [1, 5, 8] {
                    for most in [None, Some(11), Some(40)] {
                        let t = tariff(breaks, minimum, multiple, most);
                        for needed in 1..60 {
                            let buy = cheapest_buy(&t, needed).map(|b| (b.cost, b.units));
                            assert_eq!(buy, plainly(&t, needed), "{t:?} {needed}");
                        }
                    }
                }
            }
        }
    }
}
