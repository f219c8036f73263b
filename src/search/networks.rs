//! Walks over the networks of an output: which values, joined how, with which types.
//!
//! Combinations of values are not listed beforehand: with made-to-order values there are too many.
//! They are found as they are walked over, and whole branches are left out where their least cost
//! is of no interest.

use crate::circuit::Connection;
use crate::request::Budget;

use super::combos::{Combo, Slot};
use super::costs::{Amount, Costs};
use super::errors::{TypeErrors, network_errors};
use super::market::OfferId;
use super::space::{NetSpace, OutputSpace};

/// One network: a combination with a type in each slot.
#[derive(Clone, Copy, Debug)]
pub struct NetChoice<C> {
    /// Offers of its slots; only the first `count` of the combination mean anything.
    pub offers: [OfferId; 3],
    /// Budget share of the elements (mismatch apart).
    pub error: f64,
    /// Static sum with the mismatch, ppm; 0 without an adjustment.
    pub statics: f64,
    /// Cost of the elements.
    pub cost: C,
}

/// Something that looks at networks.
pub trait NetVisitor<C> {
    /// The largest cost of so many elements that is of interest now; `None` when no network is.
    fn ceiling(&self, count: u32) -> Option<C>;
    /// The largest total of interest, in ppm, where it is below the output's own.
    fn most_total(&self) -> f64 {
        f64::INFINITY
    }
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

/// The values that networks are made of.
#[derive(Debug)]
pub struct ValueTable {
    /// All values in ohms, ascending.
    pub ohms: Vec<f64>,
    /// Indices of values that some listed type has.
    pub listed: Vec<u32>,
    /// Indices of values that only made-to-order types have.
    pub made_only: Vec<u32>,
}

impl ValueTable {
    fn between<'t>(&self, among: &'t [u32], (low, high): (f64, f64)) -> (usize, &'t [u32]) {
        let start = among.partition_point(|&v| self.ohms[v as usize] < low);
        let end = among.partition_point(|&v| self.ohms[v as usize] <= high);
        (start, &among[start..end.max(start)])
    }
}

/// Least costs of one element by value.
#[derive(Debug)]
pub struct LeastCosts<C> {
    by_value: Vec<C>,
    listed: C,
    made_only: C,
}

impl<C: Amount> LeastCosts<C> {
    /// Looks them up for an output, with or without adjustment.
    #[must_use]
    pub fn new(space: &OutputSpace<'_>, adjusted: bool, costs: &Costs<C>) -> Self {
        let errors = &space.errors[usize::from(adjusted)];
        let market = space.market;
        let by_value: Vec<C> = (0..market.values.len() as u32)
            .map(|value| {
                market
                    .stocked(value)
                    .iter()
                    // Without adjustments there are no errors of adjusted elements.
                    .filter(|s| errors.get(s.of as usize).is_some_and(|errors| errors.usable))
                    .map(|s| costs.of(s.offer, 1))
                    .fold(C::HUGE, smaller)
            })
            .collect();
        let least =
            |among: &[u32]| among.iter().map(|&v| by_value[v as usize]).fold(C::HUGE, smaller);
        Self {
            listed: least(&space.values.listed),
            made_only: least(&space.values.made_only),
            by_value,
        }
    }
}

fn smaller<C: Amount>(a: C, b: C) -> C {
    if b < a { b } else { a }
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
    /// Values that some network can hold, with the most of it in one network; none that can is
    /// missing, though one that cannot may be there.
    #[must_use]
    pub fn usable_values(&self) -> Vec<(u32, u32)> {
        let elements = self.market.request.network_elements;
        let ohms = &self.values.ohms;
        let any_in = |(low, high): (f64, f64)| {
            let from = ohms.partition_point(|&r| r < low);
            ohms.get(from).is_some_and(|&r| r <= high)
        };
        let most = |value: u32| -> u32 {
            let r = ohms[value as usize];
            let mut most = 0;
            for goal in self.nets.iter().map(|n| n.goal).filter(|g| g.most_ppm >= 0.0) {
                let holds = |connection, times: u32| {
                    goal.range(connection, 0.0, times).is_some_and(|(l, h)| l <= r && r <= h)
                };
                if holds(Connection::Single, 1) {
                    most = most.max(1);
                }
                for connection in [Connection::Series, Connection::Parallel] {
                    let taken = if connection == Connection::Parallel { 1.0 / r } else { r };
                    if elements >= 2 && goal.range(connection, taken, 1).is_some_and(any_in) {
                        most = most.max(1);
                    }
                    if elements >= 2 && holds(connection, 2) {
                        most = most.max(2);
                    }
                    // Three elements reach nearly everything on the right side of R*.
                    if elements >= 3 && goal.range(connection, taken, 2).is_some() {
                        most = 3;
                    }
                }
            }
            most
        };
        (0..ohms.len() as u32).map(|v| (v, most(v))).filter(|&(_, most)| most > 0).collect()
    }

    /// Shows a visitor the networks of so many elements at one reference voltage.
    pub fn walk<C: Amount>(
        &self,
        net: &NetSpace,
        count: u32,
        costs: &Costs<C>,
        least: &LeastCosts<C>,
        walk: Walk,
        visitor: &mut impl NetVisitor<C>,
    ) {
        if net.goal.most_ppm < 0.0 {
            return;
        }
        let connections: &[Connection] = if count == 1 {
            &[Connection::Single]
        } else {
            &[Connection::Series, Connection::Parallel]
        };
        for &connection in connections {
            let mut walker = Walker {
                space: self,
                net,
                connection,
                count,
                errors: &self.errors[usize::from(net.adjusted)],
                costs,
                least,
                walk,
                lists: [Vec::new(), Vec::new(), Vec::new()],
            };
            // Any listed values; or one made-to-order value (repeated if need be) with listed
            // ones, since a network holds one such value.
            for times in 0..=count {
                walker.extend(Prefix::new(), count - times, times, 0, visitor);
            }
        }
    }
}

/// The listed values chosen so far, ascending.
#[derive(Clone, Copy)]
struct Prefix<C> {
    values: [u32; 3],
    count: usize,
    cost: C,
    /// Sum of resistances, or of conductances in parallel.
    taken: f64,
}

impl<C: Amount> Prefix<C> {
    const fn new() -> Self {
        Self { values: [u32::MAX; 3], count: 0, cost: C::ZERO, taken: 0.0 }
    }
}

struct Walker<'s, 'a, C> {
    space: &'s OutputSpace<'a>,
    net: &'s NetSpace,
    connection: Connection,
    count: u32,
    errors: &'s [TypeErrors],
    costs: &'s Costs<C>,
    least: &'s LeastCosts<C>,
    walk: Walk,
    lists: [Vec<Entry<C>>; 3],
}

impl<C: Amount> Walker<'_, '_, C> {
    /// Extends a prefix by `listed` more listed values and then a made-to-order value `times` over.
    fn extend(
        &mut self,
        prefix: Prefix<C>,
        listed: u32,
        times: u32,
        from: usize,
        visitor: &mut impl NetVisitor<C>,
    ) {
        let Some(ceiling) = visitor.ceiling(self.count) else { return };
        if prefix.cost > ceiling {
            return;
        }
        let values = &self.space.values;
        if times > 0 {
            if prefix.cost + self.least.made_only > ceiling {
                return;
            }
            if listed == 0 {
                let Some(range) = self.net.goal.range(self.connection, prefix.taken, times) else {
                    return;
                };
                for &made in values.between(&values.made_only, range).1 {
                    self.complete(&prefix, made, times, visitor);
                }
                return;
            }
        } else if listed == 1 {
            let Some(range) = self.net.goal.range(self.connection, prefix.taken, 1) else { return };
            // Where a further value costs too much, the last one repeated can still do.
            let room = prefix.cost + self.least.listed <= ceiling;
            let among = if room { values.listed.len() } else { values.listed.len().min(from + 1) };
            if !room && prefix.count == 0 {
                return;
            }
            let (start, found) = values.between(&values.listed[..among], range);
            for &last in &found[from.saturating_sub(start).min(found.len())..] {
                self.complete(&prefix, last, 1, visitor);
            }
            return;
        }
        let besides = if times > 0 { self.least.made_only } else { C::ZERO };
        let series_most = match self.connection {
            Connection::Parallel => f64::INFINITY,
            Connection::Single | Connection::Series => self.net.goal.most_ohms(),
        };
        for index in from..values.listed.len() {
            let value = values.listed[index];
            let ohms = values.ohms[value as usize];
            if prefix.taken + ohms > series_most {
                break;
            }
            let mut longer = prefix;
            let repeats = prefix.count > 0 && prefix.values[prefix.count - 1] == value;
            if !repeats {
                longer.cost = longer.cost + self.least.by_value[value as usize];
            }
            longer.taken += if self.connection == Connection::Parallel { 1.0 / ohms } else { ohms };
            longer.values[longer.count] = value;
            longer.count += 1;
            if longer.cost + besides <= ceiling {
                self.extend(longer, listed - 1, times, index, visitor);
            }
        }
    }

    /// One whole combination: a prefix and one more value, `times` over.
    fn complete(
        &mut self,
        prefix: &Prefix<C>,
        last: u32,
        times: u32,
        visitor: &mut impl NetVisitor<C>,
    ) {
        let Some(ceiling) = visitor.ceiling(self.count) else { return };
        let mut values = prefix.values;
        values[prefix.count..self.count as usize].fill(last);
        let values = &mut values[..self.count as usize];
        debug_assert_eq!(prefix.count + times as usize, values.len());
        values.sort_unstable();
        let mut least = [C::ZERO; 3];
        let mut sum = C::ZERO;
        for (position, &value) in values.iter().enumerate() {
            // A value repeated may be one offer bought once for all its slots: counting it once
            // is a bound whatever the price list, because no cost falls with the count.
            if position > 0 && values[position - 1] == value {
                least[position] = least[position - 1];
            } else {
                least[position] = self.least.by_value[value as usize];
                sum = sum + least[position];
            }
        }
        if sum > ceiling {
            return;
        }
        let combo = self.space.combination(self.net, self.connection, values);
        if combo.mismatch > self.net.goal.most_ppm {
            return;
        }
        let systematic = if self.net.adjusted { 0.0 } else { combo.mismatch };
        let room = self.space.error_room(self.net, systematic, visitor.most_total());
        for (position, slot) in combo.slots().iter().enumerate() {
            let most = ceiling - (sum - least[position]);
            if !self.fill(position, slot, &combo, most, room) {
                return;
            }
        }
        self.choose(&combo, ceiling, visitor);
    }

    /// Lists the types that can fill a slot within a cost and an error; false when there is none.
    /// (No network has a smaller error than one of its elements.)
    fn fill(&mut self, position: usize, slot: &Slot, combo: &Combo, most: C, room: f64) -> bool {
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
            if cost > most || cost >= C::HUGE || !of.stands(slot) {
                continue;
            }
            let error = of.random_of(slot, self.space.method);
            if error <= room {
                list.push(Entry {
                    of: stocked.of,
                    offer: stocked.offer,
                    made_to_order: stocked.made_to_order,
                    error,
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
                        && (!self.net.adjusted || by.statics <= entry.statics)
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
    fn choose(&self, combo: &Combo, ceiling: C, visitor: &mut impl NetVisitor<C>) {
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
                    self.network(combo, &picked[..count], ceiling, visitor);
                }
            }
        }
    }

    fn network(
        &self,
        combo: &Combo,
        picked: &[usize],
        ceiling: C,
        visitor: &mut impl NetVisitor<C>,
    ) {
        let mut types = [u32::MAX; 3];
        let mut offers = [OfferId(u32::MAX); 3];
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
        let cost = offers[..count]
            .chunk_by(|a, b| a == b)
            .fold(C::ZERO, |sum, run| sum + self.costs.of(run[0], run.len() as u32));
        if cost > ceiling || cost >= C::HUGE {
            return;
        }
        let (error, statics) = if count == 1 {
            let entry = &self.lists[0][picked[0]];
            (entry.error, entry.statics)
        } else {
            network_errors(self.errors, self.space.method, combo, &types[..count])
        };
        let statics = if self.net.adjusted { statics + combo.mismatch } else { 0.0 };
        visitor.take(combo, &NetChoice { offers, error, statics, cost });
    }
}
