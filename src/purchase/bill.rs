//! The purchase list in exact money.

use crate::quantity::Money;
use crate::search::Pick;

use super::family::Family;

/// One order line.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct BillLine {
    /// What is ordered.
    pub order_code: String,
    /// Units that the outputs need.
    pub needed: u64,
    /// Units bought (a larger quantity can cost less).
    pub bought: u64,
    /// Unit price at the bought quantity, in the request's currency.
    pub each: Money,
    /// bought × each.
    pub cost: Money,
}

/// The purchase list.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Bill {
    /// Order lines: references, amplifiers, resistors, lifts; by order code within a kind.
    pub lines: Vec<BillLine>,
    /// Sum of the lines.
    pub parts_cost: Money,
    /// `line_cost` × lines.
    pub lines_cost: Money,
    /// `placement_cost` × components placed.
    pub placement_cost: Money,
    /// Adjustment steps.
    pub adjustment_cost: Money,
}

impl Bill {
    /// The total.
    #[must_use]
    pub fn total(&self) -> Money {
        self.parts_cost + self.lines_cost + self.placement_cost + self.adjustment_cost
    }
}

/// The purchase list of a set; `None` when a part cannot be had.
#[must_use]
pub fn bill(family: &Family<'_, '_>, picks: &[Pick]) -> Option<Bill> {
    let market = family.market;
    let mut lines = Vec::new();
    for (offer, needed) in family.demand_of(picks) {
        let buy = family.buy(offer, needed)?;
        lines.push((
            market.kind(offer),
            BillLine {
                order_code: market.order_code(offer),
                needed,
                bought: buy.units,
                each: Money::from_micros(i128::from(buy.each)),
                cost: Money::from_micros(i128::from(buy.cost)),
            },
        ));
    }
    lines.sort_by(|a, b| a.0.cmp(&b.0).then_with(|| a.1.order_code.cmp(&b.1.order_code)));
    let lines: Vec<BillLine> = lines.into_iter().map(|(_, line)| line).collect();
    let purchase = &market.request.purchase;
    let mut placement_cost = Money::ZERO;
    let mut adjustment_cost = Money::ZERO;
    for (output, pick) in picks.iter().enumerate() {
        let (space, quantity) = (family.spaces[output], family.quantities[output]);
        let frame = &space.frames[pick.frame as usize];
        let diodes = frame.lift.map_or(0, |(_, count)| u64::from(count));
        let components = 2 + pick.network.offers().len() as u64 + diodes;
        placement_cost = placement_cost + purchase.placement_cost * (components * quantity);
        if let Some(step) = frame.adjustment {
            let each = Money::from_micros(i128::from(market.adjustments[step as usize].1));
            adjustment_cost = adjustment_cost + each * quantity;
        }
    }
    Some(Bill {
        parts_cost: lines.iter().map(|line| line.cost).sum(),
        lines_cost: purchase.line_cost * lines.len() as u64,
        placement_cost,
        adjustment_cost,
        lines,
    })
}
