//! Walks over the networks of an output: which types fill the slots of each combination.

use super::combos::{Combo, Slot};
use super::costs::{Amount, Costs};
use super::errors::{TypeErrors, network_errors};
use super::market::OfferId;
use super::space::{NetSpace, OutputSpace};
use crate::request::Budget;

/// One network: a combination with a type in each slot.
#[derive(Clone, Copy, Debug)]
pub struct NetChoice<C> {
    /// Index of its combination.
    pub combo: u32,
    /// Offers of its slots; only the first `count` of the combination mean anything.
    pub offers: [OfferId; 3],
    /// Budget share of the elements (mismatch apart).
    pub error: f64,
    /// Static sum with the mismatch, ppm; meaningful with an adjustment.
    pub statics: f64,
    /// Cost of the elements.
    pub cost: C,
}

/// Something that looks at networks.
pub trait NetVisitor<C> {
    /// The largest cost of the elements that is of interest for this combination now;
    /// `None` when the combination is of no interest at any cost.
    fn ceiling(&self, combo: &Combo) -> Option<C>;
    /// Looks at one network.
    fn take(&mut self, combo: &Combo, choice: &NetChoice<C>);
}

/// Which networks are walked over.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Walk {
    /// Enough that no cheaper passing network is missed.
    Fronts,
    /// All of them.
    All,
}

/// One type in one slot.
#[derive(Clone, Copy)]
struct Entry<C> {
    of: u32,
    offer: OfferId,
    made_to_order: bool,
    error: f64,
    statics: f64,
    cost: C,
}

impl OutputSpace<'_> {
    /// Shows a visitor the networks of one reference voltage.
    pub fn walk<C: Amount>(
        &self,
        net: &NetSpace,
        costs: &Costs<C>,
        walk: Walk,
        visitor: &mut impl NetVisitor<C>,
    ) {
        let tight = net.frames.iter().any(|&f| self.frames[f].tight);
        let mut walker = Walker {
            space: self,
            errors: &self.errors[usize::from(net.adjusted)],
            costs,
            walk,
            tight,
            least: vec![None; self.market.values.len()],
            lists: [Vec::new(), Vec::new(), Vec::new()],
        };
        for (index, combo) in net.combos.iter().enumerate() {
            walker.combination(net, index as u32, combo, visitor);
        }
    }
}

struct Walker<'s, 'a, C> {
    space: &'s OutputSpace<'a>,
    errors: &'s [TypeErrors],
    costs: &'s Costs<C>,
    walk: Walk,
    tight: bool,
    /// Least cost of one element by value, once looked up.
    least: Vec<Option<C>>,
    lists: [Vec<Entry<C>>; 3],
}

impl<C: Amount> Walker<'_, '_, C> {
    fn combination(
        &mut self,
        net: &NetSpace,
        index: u32,
        combo: &Combo,
        visitor: &mut impl NetVisitor<C>,
    ) {
        let Some(ceiling) = visitor.ceiling(combo) else { return };
        let slots = combo.slots();
        let mut least = [C::ZERO; 3];
        let mut sum = C::ZERO;
        for (position, slot) in slots.iter().enumerate() {
            // A value repeated may be one offer bought once for all its slots: counting it once
            // is a bound whatever the price list, because no cost falls with the count.
            if position > 0 && slots[position - 1].value == slot.value {
                least[position] = least[position - 1];
            } else {
                least[position] = self.least_cost(slot.value);
                sum = sum + least[position];
            }
        }
        if sum > ceiling {
            return;
        }
        for (position, slot) in slots.iter().enumerate() {
            let most = ceiling - (sum - least[position]);
            if !self.fill(position, slot, combo, most) {
                return;
            }
        }
        self.choose(net, index, combo, ceiling, visitor);
    }

    fn least_cost(&mut self, value: u32) -> C {
        let market = self.space.market;
        *self.least[value as usize].get_or_insert_with(|| {
            market
                .stocked(value)
                .iter()
                .filter(|s| self.errors[s.of as usize].usable)
                .map(|s| self.costs.of(s.offer, 1))
                .fold(C::HUGE, |a, b| if b < a { b } else { a })
        })
    }

    /// Lists the types that can fill a slot; false when there is none.
    fn fill(&mut self, position: usize, slot: &Slot, combo: &Combo, most: C) -> bool {
        let repeats = combo.slots().iter().filter(|s| s.value == slot.value).count() as u32;
        let layers = if combo.count == 1 || (repeats == 1 && self.space.method == Budget::WorstCase)
        {
            1
        } else {
            usize::from(combo.count)
        };
        let mut list = std::mem::take(&mut self.lists[position]);
        list.clear();
        for stocked in self.space.market.stocked(slot.value) {
            let of = &self.errors[stocked.of as usize];
            let cost = self.costs.of(stocked.offer, 1);
            if cost <= most && cost < C::HUGE && of.stands(slot) {
                list.push(Entry {
                    of: stocked.of,
                    offer: stocked.offer,
                    made_to_order: stocked.made_to_order,
                    error: of.random_of(slot, self.space.method),
                    statics: of.statics_of(slot),
                    cost,
                });
            }
        }
        if self.walk == Walk::Fronts && list.len() > layers {
            self.keep_front(&mut list, layers, repeats);
        }
        let any = !list.is_empty();
        self.lists[position] = list;
        any
    }

    /// Lemma: of the types that can fill a slot, one that `layers` others dominate (no larger
    /// error, no larger static error where that counts, no dearer at any count the combination can
    /// use, made to order or not alike) is not needed for a cheapest design. A dominator that is
    /// not yet in the network can take its place: the budget and the static sum don't grow, since
    /// types are correlated only with themselves, and the cost doesn't grow, since the dominator's
    /// offer is not in the network either. With `layers` (the number of slots) dominators at least
    /// one is not yet in the network. One dominator is enough where the budget adds up by slots
    /// and no other slot can hold the same offer.
    fn keep_front(&self, list: &mut Vec<Entry<C>>, layers: usize, repeats: u32) {
        list.sort_by(|a, b| {
            let by_cost = a.cost.partial_cmp(&b.cost).unwrap_or(std::cmp::Ordering::Equal);
            a.error.total_cmp(&b.error).then(by_cost).then(a.of.cmp(&b.of))
        });
        let mut kept: Vec<Entry<C>> = Vec::with_capacity(list.len().min(32));
        for entry in list.iter() {
            let dominators = kept
                .iter()
                .filter(|by| {
                    by.cost <= entry.cost
                        && by.made_to_order == entry.made_to_order
                        && (!self.tight || by.statics <= entry.statics)
                        && (2..=repeats).all(|count| {
                            self.costs.of(by.offer, count) <= self.costs.of(entry.offer, count)
                        })
                })
                .take(layers)
                .count();
            if dominators < layers {
                kept.push(*entry);
            }
        }
        *list = kept;
    }

    /// Tries every combination of the listed types.
    fn choose(
        &self,
        net: &NetSpace,
        index: u32,
        combo: &Combo,
        ceiling: C,
        visitor: &mut impl NetVisitor<C>,
    ) {
        let slots = combo.slots();
        let count = slots.len();
        let lengths = [0, 1, 2].map(|p| if p < count { self.lists[p].len() } else { 1 });
        let same = |p: usize| p < count && slots[p].value == slots[p - 1].value;
        for first in 0..lengths[0] {
            // Slots of one value are filled in order of the list, so that none is tried twice.
            // (Their lists are equal, because volts, watts and share are.)
            let second_from = if same(1) { first } else { 0 };
            for second in second_from..lengths[1] {
                let third_from = if same(2) { second } else { 0 };
                for third in third_from..lengths[2] {
                    let picked = [first, second, third];
                    self.network(net, index, combo, &picked[..count], ceiling, visitor);
                }
            }
        }
    }

    fn network(
        &self,
        net: &NetSpace,
        index: u32,
        combo: &Combo,
        picked: &[usize],
        ceiling: C,
        visitor: &mut impl NetVisitor<C>,
    ) {
        let mut types = [u32::MAX; 3];
        let mut offers = [OfferId(u32::MAX); 3];
        let mut cost = C::ZERO;
        let mut counted = 0;
        let mut made: Option<OfferId> = None;
        for (position, &at) in picked.iter().enumerate() {
            let entry = &self.lists[position][at];
            types[position] = entry.of;
            offers[position] = entry.offer;
            if entry.made_to_order && *made.get_or_insert(entry.offer) != entry.offer {
                return;
            }
        }
        let count = picked.len();
        while counted < count {
            let offer = offers[counted];
            let run = offers[counted..count].iter().take_while(|&&o| o == offer).count();
            cost = cost + self.costs.of(offer, run as u32);
            counted += run;
        }
        if cost > ceiling || cost >= C::HUGE {
            return;
        }
        let (error, statics) = if count == 1 {
            let entry = &self.lists[0][picked[0]];
            (entry.error, entry.statics)
        } else {
            network_errors(self.errors, self.space.method, combo, &types[..count])
        };
        let statics = if net.adjusted { statics + combo.mismatch } else { 0.0 };
        visitor.take(combo, &NetChoice { combo: index, offers, error, statics, cost });
    }
}
