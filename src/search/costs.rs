//! What the parts cost in one question put to the pricing oracle.

use std::fmt::Debug;
use std::ops::{Add, Sub};

use super::market::{Market, OfferId};

/// An amount that the oracle can add and compare: exact millionths, or multipliers of a bound.
pub trait Amount:
    Copy + Debug + PartialOrd + Add<Output = Self> + Sub<Output = Self> + Send + Sync + 'static
{
    /// Nothing.
    const ZERO: Self;
    /// More than any design costs; sums of a dozen of these don't overflow.
    const HUGE: Self;
    /// So many times.
    #[must_use]
    fn times(self, count: u32) -> Self;
}

impl Amount for i64 {
    const ZERO: Self = 0;
    const HUGE: Self = Self::MAX / 16;
    fn times(self, count: u32) -> Self {
        self.saturating_mul(Self::from(count)).min(Self::HUGE)
    }
}

impl Amount for f64 {
    const ZERO: Self = 0.0;
    const HUGE: Self = 1e300;
    fn times(self, count: u32) -> Self {
        self * Self::from(count)
    }
}

/// Costs of every part for one output, for all the units of that output.
#[derive(Clone, Debug)]
pub struct Costs<C> {
    /// By offer: one in each unit.
    pub one: Vec<C>,
    /// By offer, where more than one goes into a unit and the cost is not in proportion:
    /// `(offer, count) → cost`. Counts start at 2. Sorted.
    more: Vec<Vec<C>>,
    first_more: u32,
    /// One placed component in each unit.
    pub component: C,
    /// By adjustment: one step in each unit.
    pub adjustment: Vec<C>,
}

impl<C: Amount> Costs<C> {
    /// Costs in proportion to the count.
    #[must_use]
    pub fn proportional(
        market: &Market<'_>,
        one: Vec<C>,
        component: C,
        adjustment: Vec<C>,
    ) -> Self {
        Self { one, more: Vec::new(), first_more: market.lift_offer(0).0, component, adjustment }
    }

    /// Costs from a function of offer and count; lifts and resistors are asked for counts above 1.
    #[must_use]
    pub fn by_count(
        market: &Market<'_>,
        most: u32,
        component: C,
        adjustment: Vec<C>,
        cost: impl Fn(OfferId, u32) -> C,
    ) -> Self {
        let first_more = market.lift_offer(0).0;
        let offers = market.offers() as u32;
        let one = (0..offers).map(|offer| cost(OfferId(offer), 1)).collect();
        let more = (2..=most)
            .map(|count| (first_more..offers).map(|offer| cost(OfferId(offer), count)).collect())
            .collect();
        Self { one, more, first_more, component, adjustment }
    }

    /// Sets the costs of one offer anew.
    pub fn set(&mut self, offer: OfferId, cost: impl Fn(u32) -> C) {
        self.one[offer.index()] = cost(1);
        if offer.0 >= self.first_more {
            for (step, list) in self.more.iter_mut().enumerate() {
                list[(offer.0 - self.first_more) as usize] = cost(step as u32 + 2);
            }
        }
    }

    /// The cost of `count` of an offer in each unit.
    #[must_use]
    pub fn of(&self, offer: OfferId, count: u32) -> C {
        match count {
            0 => C::ZERO,
            1 => self.one[offer.index()],
            _ => match self.more.get(count as usize - 2) {
                Some(list) => list[(offer.0 - self.first_more) as usize],
                None => self.one[offer.index()].times(count),
            },
        }
    }
}
