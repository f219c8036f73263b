//! Good sets quickly: best responses and moves, in exact money. Moves are counted, not timed, so
//! that the result repeats.

use crate::search::{Amount, Costs, OfferId, Pick};

use super::bound::Designs;
use super::family::{Demand, Family};

/// A set with its exact total.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Incumbent {
    /// Total in millionths.
    pub total: i64,
    /// One design an output.
    pub picks: Vec<Pick>,
}

/// Local search over the designs of a family.
#[derive(Debug)]
pub struct LocalSearch<'f, 's, 'a> {
    family: &'f Family<'s, 'a>,
    designs: &'f [Designs<'s, 'a>],
    /// Costs of each output when nothing else is bought.
    alone: Vec<Costs<i64>>,
    /// What a further line costs beyond its price, when lines are scarce.
    extra_line: i64,
}

impl<'f, 's, 'a> LocalSearch<'f, 's, 'a> {
    /// Prepares the search.
    #[must_use]
    pub fn new(
        family: &'f Family<'s, 'a>,
        designs: &'f [Designs<'s, 'a>],
        extra_line: i64,
    ) -> Self {
        let mut search = Self { family, designs, alone: Vec::new(), extra_line };
        search.alone = (0..designs.len()).map(|o| search.costs_alone(o)).collect();
        search
    }

    fn costs_alone(&self, output: usize) -> Costs<i64> {
        let family = self.family;
        let quantity = family.quantities[output];
        Costs::by_count(
            family.market,
            family.most_count(),
            family.component_cost(output),
            family.adjustment_costs(output),
            |offer, count| self.cost(offer, quantity * u64::from(count)),
        )
    }

    fn cost(&self, offer: OfferId, needed: u64) -> i64 {
        match self.family.cost(offer, needed) {
            cost if cost >= i64::HUGE => i64::HUGE,
            cost if needed > 0 => cost + self.extra_line,
            cost => cost,
        }
    }

    /// Sets the costs of the offers that others buy to what the total grows by.
    fn enter(&mut self, output: usize, others: &Demand) {
        let quantity = self.family.quantities[output];
        let mut costs = std::mem::replace(&mut self.alone[output], empty(self.family));
        for (&offer, &held) in others {
            let before = self.cost(offer, held);
            costs.set(offer, |count| {
                let after = self.cost(offer, held + quantity * u64::from(count));
                if after >= i64::HUGE { i64::HUGE } else { after - before }
            });
        }
        self.alone[output] = costs;
    }

    fn leave(&mut self, output: usize, others: &Demand) {
        let quantity = self.family.quantities[output];
        let mut costs = std::mem::replace(&mut self.alone[output], empty(self.family));
        for &offer in others.keys() {
            costs.set(offer, |count| self.cost(offer, quantity * u64::from(count)));
        }
        self.alone[output] = costs;
    }

    /// The cheapest design of an output beside the others' demand, when it costs less than
    /// `below`.
    fn respond(&mut self, output: usize, others: &Demand, below: i64) -> Option<(i64, Pick)> {
        self.enter(output, others);
        let found = self.designs[output].cheapest(&self.alone[output], below);
        self.leave(output, others);
        found
    }

    /// What the total grows by with this design beside the others' demand.
    fn growth(&self, output: usize, pick: &Pick, others: &Demand) -> i64 {
        let family = self.family;
        let mut sum = family.besides_parts(output, pick);
        for (offer, count) in family.uses(output, pick) {
            let held = others.get(&offer).copied().unwrap_or(0);
            let after = self.cost(offer, held + family.quantities[output] * u64::from(count));
            if after >= i64::HUGE {
                return i64::HUGE;
            }
            sum += after - self.cost(offer, held);
        }
        sum
    }

    /// The cheapest design of each output by itself.
    pub fn each_alone(&mut self) -> Vec<Option<(i64, Pick)>> {
        let nothing = Demand::new();
        (0..self.designs.len()).map(|o| self.respond(o, &nothing, i64::HUGE)).collect()
    }

    /// Fills the outputs that have no design yet, in the order given, then lets every output
    /// respond to the others until none gains. `None` when one cannot be filled.
    fn settle(&mut self, mut picks: Vec<Option<Pick>>, order: &[usize]) -> Option<Vec<Pick>> {
        for &output in order {
            if picks[output].is_none() {
                let others = self.family.demand(&picks, Some(output));
                picks[output] = Some(self.respond(output, &others, i64::HUGE)?.1);
            }
        }
        let mut quiet = 0;
        let mut output = 0;
        // Each change lowers the total, which is a whole number: this ends.
        while quiet < picks.len() {
            let others = self.family.demand(&picks, Some(output));
            let now = picks[output].map(|pick| self.growth(output, &pick, &others))?;
            match self.respond(output, &others, now) {
                Some((_, better)) => {
                    picks[output] = Some(better);
                    quiet = 1;
                }
                None => quiet += 1,
            }
            output = (output + 1) % picks.len();
        }
        picks.into_iter().collect()
    }

    /// A set from a start, settled; by the weighed total.
    pub fn settled_from(&mut self, start: Vec<Option<Pick>>, order: &[usize]) -> Option<Weighed> {
        let picks = self.settle(start, order)?;
        let demand = self.family.demand_of(&picks);
        let weighed = self.family.weighed(&picks, &demand, self.extra_line)?;
        Some(Weighed { weighed, picks })
    }

    /// Moves from a settled set: close a part (its users must do without), free groups of outputs
    /// and refill them in another order. Takes every gain; ends after a round without one, or
    /// when told to stop.
    pub fn improve(&mut self, mut best: Weighed, rounds: u32, stop: &dyn Fn() -> bool) -> Weighed {
        let mut random = Sequence(0x9e37_79b9_7f4a_7c15);
        for _ in 0..rounds {
            let before = best.weighed;
            self.close_parts(&mut best, stop);
            self.free_groups(&mut best, &mut random, stop);
            if best.weighed == before || stop() {
                break;
            }
        }
        best
    }

    fn close_parts(&mut self, best: &mut Weighed, stop: &dyn Fn() -> bool) {
        let some = |picks: &[Pick]| picks.iter().copied().map(Some).collect::<Vec<_>>();
        let parts: Vec<OfferId> =
            self.family.demand(&some(&best.picks), None).into_keys().collect();
        for part in parts {
            if stop() {
                return;
            }
            let users: Vec<usize> = (0..best.picks.len())
                .filter(|&o| self.family.uses(o, &best.picks[o]).iter().any(|u| u.0 == part))
                .collect();
            if users.is_empty() {
                continue;
            }
            let mut picks = some(&best.picks);
            users.iter().for_each(|&o| picks[o] = None);
            let closed = self.without(part, picks, &users);
            let settled = closed.and_then(|picks| self.settled_from(picks, &users));
            if let Some(found) = settled.filter(|f| f.weighed < best.weighed) {
                *best = found;
            }
        }
    }

    /// Refills users with one part closed to them.
    fn without(
        &mut self,
        part: OfferId,
        mut picks: Vec<Option<Pick>>,
        users: &[usize],
    ) -> Option<Vec<Option<Pick>>> {
        for &output in users {
            let others = self.family.demand(&picks, Some(output));
            self.enter(output, &others);
            self.alone[output].set(part, |_| i64::HUGE);
            let found = self.designs[output].cheapest(&self.alone[output], i64::HUGE);
            let quantity = self.family.quantities[output];
            self.leave(output, &others);
            let costs = std::mem::replace(&mut self.alone[output], empty(self.family));
            let mut costs = costs;
            costs.set(part, |count| self.cost(part, quantity * u64::from(count)));
            self.alone[output] = costs;
            picks[output] = Some(found?.1);
        }
        Some(picks)
    }

    fn free_groups(&mut self, best: &mut Weighed, random: &mut Sequence, stop: &dyn Fn() -> bool) {
        let outputs = best.picks.len();
        if outputs < 2 {
            return;
        }
        for trial in 0..2 * outputs {
            if stop() {
                return;
            }
            let size = 2 + trial % (outputs.min(6) - 1);
            let mut order: Vec<usize> = (0..outputs).collect();
            random.shuffle(&mut order);
            order.truncate(size);
            let mut picks: Vec<Option<Pick>> = best.picks.iter().copied().map(Some).collect();
            order.iter().for_each(|&o| picks[o] = None);
            if let Some(found) =
                self.settled_from(picks, &order).filter(|found| found.weighed < best.weighed)
            {
                *best = found;
            }
        }
    }
}

/// A set by the total that the search compares by.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Weighed {
    /// Total with the extra line cost.
    pub weighed: i64,
    /// One design an output.
    pub picks: Vec<Pick>,
}

fn empty(family: &Family<'_, '_>) -> Costs<i64> {
    Costs::proportional(family.market, Vec::new(), 0, Vec::new())
}

/// A small fixed sequence of numbers (xorshift), so that a search repeats.
#[derive(Debug)]
struct Sequence(u64);

impl Sequence {
    fn next(&mut self) -> u64 {
        self.0 ^= self.0 << 13;
        self.0 ^= self.0 >> 7;
        self.0 ^= self.0 << 17;
        self.0
    }

    fn shuffle(&mut self, list: &mut [usize]) {
        for last in (1..list.len()).rev() {
            list.swap(last, (self.next() % (last as u64 + 1)) as usize);
        }
    }
}
