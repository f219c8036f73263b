//! The purchase list in exact money.

use crate::quantity::Money;

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
