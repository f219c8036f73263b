//! The cheapest set for a family, with its proof.

use std::collections::BTreeSet;

use rayon::prelude::*;

use crate::search::{Amount, Costs, Listing, OfferId, Pick};

use super::bound::{Bound, Bounder, Designs};
use super::branch::{Explorer, Node};
use super::family::{Demand, Family, Terms};
use super::local::{Incumbent, LocalSearch, Weighed};
use super::model::{Aim, ChainModel};
use super::solver::{Ending, solve as solve_program};

/// What may end a search early.
pub trait Watch: Sync {
    /// Whether to stop now.
    fn stop(&self) -> bool;
    /// Told what the search is doing.
    fn note(&self, phase: &str, best: Option<i64>, bound: Option<i64>);
}

/// How the search for a family ended.
#[derive(Clone, Debug, PartialEq)]
pub enum Outcome {
    /// A set, with a lower bound on every set's total; proved optimal when they meet.
    Found {
        /// The set.
        best: Incumbent,
        /// Lower bound in millionths.
        bound: i64,
    },
    /// Proved: no set keeps `lines_max`; the fewest lines that any set has.
    TooManyLines(u64),
    /// Proved: no set can be bought from stock. Of the set that is short by the fewest units: what
    /// is short, with the fewest units that would do; and the fewest lines that any set has, where
    /// no set keeps `lines_max` whatever is in stock.
    OutOfStock {
        /// Offers of which there is too little, with the stock that would do.
        short: Vec<(OfferId, u64)>,
        /// The fewest lines.
        lines: Option<u64>,
    },
    /// Stopped before any set was found.
    Open,
}

/// Rows up to which an output's designs are listed one by one.
const MOST_LISTED: usize = 400_000;
/// Rows of an output up to which the integer program on stock is put to the solver.
const MOST_SOLVED: usize = 40_000;

/// Finds the cheapest set.
#[must_use]
pub fn solve<'s, 'a>(family: &Family<'s, 'a>, watch: &dyn Watch) -> Outcome {
    let designs: Vec<Designs<'s, 'a>> =
        family.spaces.iter().map(|space| Designs::All(space)).collect();
    let mut search = Search { family, watch, unit: granularity(family), extra_line: 0 };
    if let [only] = designs.as_slice()
        && let Some(best) = search.alone(only)
    {
        // One output alone: the oracle has priced every design with its exact cost.
        return Outcome::Found { bound: best.total, best };
    }
    let Some(first) = search.first_set(&designs) else {
        return if watch.stop() { Outcome::Open } else { search.why_none(designs) };
    };
    search.prove(first, designs)
}

pub(super) struct Search<'f, 's, 'a> {
    pub(super) family: &'f Family<'s, 'a>,
    pub(super) watch: &'f dyn Watch,
    /// Every total is a multiple of this.
    pub(super) unit: i64,
    /// A price on lines beyond theirs, where `lines_max` binds.
    pub(super) extra_line: i64,
}

impl<'s, 'a> Search<'_, 's, 'a> {
    /// The cheapest design of a lone output, if it keeps `lines_max`.
    fn alone(&self, designs: &Designs<'s, 'a>) -> Option<Incumbent> {
        let costs = self.family.marginal_costs(0, &Demand::new());
        let (total, pick) = designs.cheapest(&costs, i64::HUGE)?;
        let picks = vec![pick];
        (self.family.total(&picks) == Some(total)).then_some(Incumbent { total, picks })
    }

    /// Good sets from a few starts; where the lines are too many, with a rising price on lines.
    fn first_set(&mut self, designs: &[Designs<'s, 'a>]) -> Option<Incumbent> {
        self.watch.note("first set", None, None);
        let mut extra = 0;
        loop {
            let best = self.local_sets(designs, extra, &[])?;
            if let Some(total) = self.family.total(&best.picks) {
                self.extra_line = extra;
                return Some(Incumbent { total, picks: best.picks });
            }
            let least = self.weightiest_line(&best.picks);
            if self.watch.stop() || extra > least.saturating_mul(64) {
                return None;
            }
            extra = (extra * 2).max(self.family.terms.line).max(least / 64).max(self.unit);
        }
    }

    /// The total of a set as a scale for a price on lines.
    fn weightiest_line(&self, picks: &[Pick]) -> i64 {
        let demand = self.family.demand_of(picks);
        demand.iter().map(|(&offer, &n)| self.family.cost(offer, n)).sum::<i64>().max(1)
    }

    /// The best set that local search reaches from the usual starts and those given.
    fn local_sets(
        &self,
        designs: &[Designs<'s, 'a>],
        extra: i64,
        starts: &[Vec<Pick>],
    ) -> Option<Weighed> {
        let stop = || self.watch.stop();
        let mut local = LocalSearch::new(self.family, designs, extra);
        let alone = local.each_alone();
        let mut order: Vec<usize> = (0..designs.len()).collect();
        order.sort_by_key(|&o| std::cmp::Reverse(alone[o].as_ref().map_or(0, |(cost, _)| *cost)));
        let alone: Vec<Option<Pick>> = alone.into_iter().map(|p| p.map(|(_, p)| p)).collect();
        let nothing = vec![None; designs.len()];
        let reversed: Vec<usize> = order.iter().rev().copied().collect();
        let mut best: Option<Weighed> = None;
        let from = |start: &Vec<Pick>| start.iter().copied().map(Some).collect::<Vec<_>>();
        for (start, order) in [(alone, &order), (nothing.clone(), &order), (nothing, &reversed)]
            .into_iter()
            .chain(starts.iter().map(|start| (from(start), &order)))
        {
            if let Some(found) = local.settled_from(start, order)
                && best.as_ref().is_none_or(|b| found.weighed < b.weighed)
            {
                best = Some(found);
            }
        }
        best.map(|best| local.improve(best, 3, &stop))
    }

    /// Raises the bound, lowers the best set and drops designs until they meet.
    fn prove(&self, best: Incumbent, designs: Vec<Designs<'s, 'a>>) -> Outcome {
        let root = Node { designs, sunk: BTreeSet::new(), earlier: None, bound: 0 };
        let mut explorer = Explorer { search: self, best };
        let bound = explorer.explore(root);
        let best = explorer.best;
        let proved = bound > best.total - self.unit;
        Outcome::Found { bound: if proved { best.total } else { bound }, best }
    }

    /// The bound of a node counts cost plus the price on lines; a set within `lines_max` pays no
    /// more for its lines than that price times the most.
    pub(super) fn lines_allowance(&self) -> i64 {
        self.extra_line * self.family.terms.lines_max.map_or(0, |m| m as i64)
    }

    /// A better set than the best so far, from the designs that a bound picked: by local search
    /// where `thorough`, else only if they are better as they are.
    pub(super) fn improved(
        &self,
        best: &Incumbent,
        designs: &[Designs<'s, 'a>],
        bound: &Bound,
        thorough: bool,
    ) -> Option<Incumbent> {
        let picks: Vec<Pick> = bound.picks.iter().map(|(_, pick)| *pick).collect();
        let picks = if thorough {
            self.local_sets(designs, self.extra_line, &[best.picks.clone(), picks])?.picks
        } else {
            picks
        };
        let total = self.family.total(&picks)?;
        (total < best.total).then_some(Incumbent { total, picks })
    }

    /// Lemma: a set costs at least the bound plus, for each output, what its design costs at the
    /// multipliers beyond the cheapest one. So a design that is dearer than the cheapest by more
    /// than best set less bound is in no better set.
    pub(super) fn reduce(
        &self,
        designs: &[Designs<'s, 'a>],
        bounder: &Bounder<'_, 's, 'a>,
        bound: &Bound,
        best: i64,
        lines: i64,
    ) -> Option<Vec<Listing<'s, 'a>>> {
        let slack = (best - self.unit) as f64 - (bound.value - lines as f64);
        let slack = slack + bound.value.abs() * 1e-11 + 1.0;
        designs
            .par_iter()
            .enumerate()
            .map(|(output, of)| {
                let ceiling = bound.picks[output].0 + slack;
                let costs = bounder.costs(output);
                match of {
                    Designs::All(space) => space.listing(costs, ceiling, MOST_LISTED),
                    Designs::Listed(listing) => Some(listing.reduced(costs, ceiling)),
                }
            })
            .collect()
    }

    /// No set was found: which rule on the whole purchase cannot be kept.
    fn why_none(&self, designs: Vec<Designs<'s, 'a>>) -> Outcome {
        let free = Family {
            market: self.family.market,
            spaces: self.family.spaces.clone(),
            quantities: self.family.quantities.clone(),
            terms: Terms { line: 1, placement: 0, lines_max: None, priced: false },
        };
        let mut search = Search { family: &free, watch: self.watch, unit: 1, extra_line: 0 };
        let first = match search.first_set(&designs) {
            Some(first) => first,
            None => match search.least_short(None) {
                LeastShort::Set(picks, short) if short.is_empty() => match free.total(&picks) {
                    Some(total) => Incumbent { total, picks },
                    None => return Outcome::Open,
                },
                LeastShort::Set(_, short) => return self.out_of_stock(short),
                LeastShort::TooManyLines | LeastShort::Unknown => return Outcome::Open,
            },
        };
        let Outcome::Found { best: fewest, bound } = search.prove(first, designs) else {
            return Outcome::Open;
        };
        let most = self.family.terms.lines_max.map_or(i64::MAX, |m| m as i64);
        if fewest.total <= most {
            // There is a set after all: go on from it.
            return match self.family.total(&fewest.picks) {
                Some(total) => {
                    let best = Incumbent { total, picks: fewest.picks };
                    let all = self.family.spaces.iter().map(|s| Designs::All(s)).collect();
                    let extra_line = self.family.terms.line.max(self.unit);
                    Search { extra_line, ..*self }.prove(best, all)
                }
                None => Outcome::Open,
            };
        }
        if bound > most { Outcome::TooManyLines(bound.max(0) as u64) } else { Outcome::Open }
    }

    /// No set can be bought: `short` is what the least short one lacks, whatever its lines. What
    /// is reported must do together, so with `lines_max` the least short set that keeps it counts,
    /// or where none does, the least short of those with the fewest lines.
    fn out_of_stock(&self, short: Vec<(OfferId, u64)>) -> Outcome {
        let Some(lines_max) = self.family.terms.lines_max else {
            return Outcome::OutOfStock { short, lines: None };
        };
        let mut most = lines_max;
        loop {
            match self.least_short(Some(most)) {
                LeastShort::Set(_, short) => {
                    let lines = (most > lines_max).then_some(most);
                    return Outcome::OutOfStock { short, lines };
                }
                LeastShort::TooManyLines => most += 1,
                LeastShort::Unknown => return Outcome::Open,
            }
        }
    }

    /// The set that stock is short of by the fewest units, by the integer program over every
    /// design.
    fn least_short(&self, lines_max: Option<u64>) -> LeastShort {
        let family = Family {
            market: self.family.market,
            spaces: self.family.spaces.clone(),
            quantities: self.family.quantities.clone(),
            terms: Terms { lines_max, ..self.family.terms },
        };
        let market = family.market;
        let steps = vec![0; market.adjustments.len()];
        let free = Costs::proportional(market, vec![0i64; market.offers()], 0, steps);
        let listings: Option<Vec<_>> =
            family.spaces.iter().map(|s| s.listing(&free, i64::HUGE, MOST_SOLVED)).collect();
        let Some(listings) = listings else { return LeastShort::Unknown };
        let listings: Vec<&Listing<'s, 'a>> = listings.iter().collect();
        let none = BTreeSet::new();
        let model = ChainModel::new(&family, &listings, &none, Aim::Shortage);
        let values = match solve_program(&model.program(), &|| self.watch.stop()) {
            Ending::Optimal(values) => values,
            Ending::Infeasible => return LeastShort::TooManyLines,
            Ending::Stopped { .. } | Ending::Trouble(_) => return LeastShort::Unknown,
        };
        let Some(picks) = model.picks(&values) else { return LeastShort::Unknown };
        let short = family
            .demand_of(&picks)
            .into_iter()
            .filter(|&(offer, needed)| family.buy(offer, needed).is_none())
            .map(|(offer, needed)| (offer, market.tariff(offer).least_order(needed)))
            .collect();
        LeastShort::Set(picks, short)
    }
}

/// What stock lacks at least.
enum LeastShort {
    /// A set, and the offers of which there is too little with the stock that would do.
    Set(Vec<Pick>, Vec<(OfferId, u64)>),
    /// No set has so few lines.
    TooManyLines,
    /// Not found out.
    Unknown,
}

/// The largest amount of which every total is a multiple.
fn granularity(family: &Family<'_, '_>) -> i64 {
    let mut common = 0;
    let mut take = |amount: i64| common = gcd(common, amount.abs());
    take(family.terms.line);
    take(family.terms.placement);
    for offer in 0..family.market.offers() as u32 {
        for &(_, each) in &family.market.tariff(OfferId(offer)).breaks {
            take(each);
        }
    }
    family.market.adjustments.iter().for_each(|a| take(a.1));
    common.max(1)
}

const fn gcd(mut a: i64, mut b: i64) -> i64 {
    while b != 0 {
        (a, b) = (b, a % b);
    }
    a
}
