//! Branching, where the bound alone does not meet the best set: depth first over "part p is
//! bought" and "output o uses p", with the bound, the reduction and the local search again at
//! every node, and the integer program once little is left.

use std::collections::BTreeSet;

use rayon::prelude::*;

use crate::search::{Listing, OfferId};

use super::bound::{Bound, Bounder, Designs, Effort};
use super::local::Incumbent;
use super::model::{Aim, ChainModel};
use super::solve::Search;
use super::solver::{Ending, solve as solve_program};

/// Rows of all outputs up to which a node is put to the integer program.
const MOST_SOLVED: usize = 900;
/// Rounds of bound and reduction at a node.
const MOST_ROUNDS: u32 = 12;
/// Decisions that are tried before one is taken.
const TRIED: usize = 6;

/// A part of the search that is still open.
pub(super) struct Node<'f, 's, 'a> {
    /// The designs left to each output.
    pub designs: Vec<Designs<'s, 'a>>,
    /// Parts that are bought in every set of this node: their order lines are paid.
    pub sunk: BTreeSet<OfferId>,
    /// Multipliers to go on from.
    pub earlier: Option<Bounder<'f, 's, 'a>>,
    /// No set of this node costs less.
    pub bound: i64,
}

/// What a node is divided by.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Decision {
    /// Whether a part is bought at all.
    Bought(OfferId),
    /// Whether an output uses a part.
    Uses(usize, OfferId),
}

/// The search below one node after another, with the best set so far.
pub(super) struct Explorer<'e, 'f, 's, 'a> {
    pub search: &'e Search<'f, 's, 'a>,
    pub best: Incumbent,
}

impl<'f, 's, 'a> Explorer<'_, 'f, 's, 'a> {
    /// A bound below which no set of the node costs; the best set's total once nothing in it can
    /// be better.
    pub fn explore(&mut self, node: Node<'f, 's, 'a>) -> i64 {
        let listed_before = node.designs.iter().all(|d| matches!(d, Designs::Listed(_)));
        let settled = self.settle(node, MOST_ROUNDS, 150, !listed_before);
        let Some((node, bound)) = settled else { return self.best.total };
        if self.search.watch.stop() {
            return node.bound;
        }
        let rows = rows(&node.designs);
        if rows <= MOST_SOLVED
            && let Some(bound) = self.solve(&node)
        {
            return bound;
        }
        let Some(mut children) = self.divided(&node, &bound) else {
            return self.solve(&node).unwrap_or(node.bound);
        };
        children.sort_by_key(|child| child.bound);
        let mut least = self.best.total;
        for child in children {
            let floor = child.bound;
            if floor > self.best.total - self.search.unit {
                continue;
            }
            let reached =
                if self.search.watch.stop() { floor } else { self.explore(child).max(floor) };
            least = least.min(reached);
        }
        least.min(self.best.total)
    }

    /// Raises the bound and drops designs in turn, until neither gets further. `None` when nothing
    /// in the node beats the best set.
    fn settle(
        &mut self,
        mut node: Node<'f, 's, 'a>,
        rounds: u32,
        steps: u32,
        first: bool,
    ) -> Option<(Node<'f, 's, 'a>, Bound)> {
        let search = self.search;
        let stop = || search.watch.stop();
        let lines = search.lines_allowance();
        let mut round = 0;
        loop {
            let mut bounder = Bounder::new(
                search.family,
                &node.designs,
                search.extra_line,
                &node.sunk,
                node.earlier.as_ref(),
            );
            let unlisted = node.designs.iter().any(|d| matches!(d, Designs::All(_)));
            // On unlisted designs a step is slow: better to shorten it early.
            let effort = if unlisted {
                Effort { steps: 40, patience: 6 }
            } else {
                Effort { steps, patience: 12 }
            };
            let ceiling = self.best.total.saturating_add(lines);
            let bound = bounder.raise(&node.designs, ceiling, effort, &stop)?;
            node.bound = node.bound.max(bound.floor().saturating_sub(lines));
            if first {
                search.watch.note("bound", Some(self.best.total), Some(node.bound));
            }
            if node.bound > self.best.total - search.unit {
                return None;
            }
            if stop() {
                node.earlier = Some(bounder);
                return Some((node, bound));
            }
            if let Some(better) = search.improved(&self.best, &node.designs, &bound, first) {
                self.best = better;
            }
            let before = rows(&node.designs);
            let Some(listings) =
                search.reduce(&node.designs, &bounder, &bound, self.best.total, lines)
            else {
                node.earlier = Some(bounder);
                round += 1;
                if round < rounds {
                    // Too many to list as yet: a better bound leaves fewer.
                    continue;
                }
                return Some((node, bound));
            };
            if listings.iter().any(|l| l.frames.is_empty()) {
                return None;
            }
            node.designs = listings.into_iter().map(Designs::Listed).collect();
            node.earlier = Some(bounder);
            round += 1;
            let now = rows(&node.designs);
            if round >= rounds || now <= 200 || (!unlisted && now as f64 > 0.9 * before as f64) {
                return Some((node, bound));
            }
        }
    }

    /// The integer program over a node; `None` when it settles nothing.
    fn solve(&mut self, node: &Node<'f, 's, 'a>) -> Option<i64> {
        let family = self.search.family;
        let listings: Vec<&Listing<'s, 'a>> =
            node.designs.iter().filter_map(Designs::listing).collect();
        if listings.len() < node.designs.len() {
            return None;
        }
        let model = ChainModel::new(family, &listings, &node.sunk, Aim::Cost);
        let mut take = |values| {
            // The solver's own figures are not trusted: the set it names is counted exactly.
            let picks = model.picks(&values)?;
            let total = family.total(&picks)?;
            if total < self.best.total {
                self.best = Incumbent { total, picks };
            }
            Some(())
        };
        match solve_program(&model.program(), &|| self.search.watch.stop()) {
            Ending::Optimal(values) => {
                take(values)?;
                Some(self.best.total)
            }
            Ending::Infeasible => Some(self.best.total),
            Ending::Stopped { values, bound } => {
                if let Some(values) = values {
                    take(values);
                }
                let micros = bound? * 1e6;
                let floor = (micros - micros.abs() * 1e-7).floor() as i64;
                Some(node.bound.max(floor).min(self.best.total))
            }
            Ending::Trouble(why) => {
                self.search.watch.note(&format!("solver: {why}"), None, None);
                None
            }
        }
    }

    /// The children by the decision that raises both bounds most, among the most divided ones.
    fn divided(&self, node: &Node<'f, 's, 'a>, bound: &Bound) -> Option<Vec<Node<'f, 's, 'a>>> {
        // A child that is gone counts as raised all the way.
        let whole = (self.best.total - node.bound) as f64 + 1.0;
        let gain = |child: &Node<'f, 's, 'a>| {
            (child.bound.min(self.best.total) - node.bound).max(0) as f64 + 1.0
        };
        let mut candidates = self.candidates(node, bound);
        candidates.truncate(TRIED);
        let tried: Vec<(f64, Vec<Node<'f, 's, 'a>>)> = candidates
            .into_par_iter()
            .map(|decision| {
                let children = self.divide(node, decision);
                let score = match children.as_slice() {
                    [] => whole * whole,
                    [one] => whole * gain(one),
                    many => many.iter().map(gain).product(),
                };
                (score, children)
            })
            .collect();
        // The last of equal scores, whatever the order of threads.
        tried.into_iter().max_by(|a, b| a.0.total_cmp(&b.0)).map(|(_, children)| children)
    }

    /// Decisions that divide a node, those first on which the bound's designs disagree most,
    /// weighed by what is at stake.
    fn candidates(&self, node: &Node<'f, 's, 'a>, bound: &Bound) -> Vec<Decision> {
        let mut weighed: Vec<(f64, Decision)> = Vec::new();
        for use_rate in &bound.rates {
            let split = use_rate.any.min(1.0 - use_rate.any);
            let stake = use_rate.stake;
            if split > 0.02 && !node.sunk.contains(&use_rate.offer) {
                weighed.push((split * stake, Decision::Bought(use_rate.offer)));
            }
            for &(output, rate) in &use_rate.by_output {
                let split = rate.min(1.0 - rate);
                if split > 0.02 {
                    let decision = Decision::Uses(output as usize, use_rate.offer);
                    weighed.push((0.5 * split * stake, decision));
                }
            }
        }
        weighed.sort_by(|a, b| b.0.total_cmp(&a.0));
        let mut candidates: Vec<Decision> = weighed.into_iter().map(|(_, d)| d).collect();
        // Where the bound's designs agree in everything, any part that some designs use will do.
        for (output, (_, pick)) in bound.picks.iter().enumerate() {
            let uses = self.search.family.uses(output, pick);
            candidates.extend(uses.into_iter().map(|(offer, _)| Decision::Uses(output, offer)));
        }
        candidates.retain(|decision| match *decision {
            Decision::Bought(offer) => {
                node.designs.iter().filter_map(Designs::listing).any(|l| l.divides(offer))
            }
            Decision::Uses(output, offer) => {
                node.designs[output].listing().is_some_and(|l| l.divides(offer))
            }
        });
        candidates
    }

    /// The children of a node that can still hold a better set, with a first bound.
    fn divide(&self, node: &Node<'f, 's, 'a>, decision: Decision) -> Vec<Node<'f, 's, 'a>> {
        let listings = || node.designs.iter().filter_map(Designs::listing);
        let (yes, no): (Vec<Listing<'s, 'a>>, Vec<Listing<'s, 'a>>) = match decision {
            Decision::Bought(offer) => {
                (listings().cloned().collect(), listings().map(|l| l.without(offer)).collect())
            }
            Decision::Uses(output, offer) => {
                let change = |with: bool| {
                    listings()
                        .enumerate()
                        .map(|(o, l)| match (o == output, with) {
                            (false, _) => l.clone(),
                            (true, true) => l.with(offer),
                            (true, false) => l.without(offer),
                        })
                        .collect()
                };
                (change(true), change(false))
            }
        };
        let mut sunk = node.sunk.clone();
        let (Decision::Bought(offer) | Decision::Uses(_, offer)) = decision;
        sunk.insert(offer);
        [(yes, sunk), (no, node.sunk.clone())]
            .into_iter()
            .filter(|(listings, _)| listings.iter().all(|l| !l.frames.is_empty()))
            .filter_map(|(listings, sunk)| {
                let designs = listings.into_iter().map(Designs::Listed).collect();
                let child = Node { designs, sunk, earlier: None, bound: node.bound };
                self.first_bound(child, node.earlier.as_ref())
            })
            .collect()
    }

    /// A quick bound for a child.
    fn first_bound(
        &self,
        mut child: Node<'f, 's, 'a>,
        earlier: Option<&Bounder<'f, 's, 'a>>,
    ) -> Option<Node<'f, 's, 'a>> {
        let search = self.search;
        let lines = search.lines_allowance();
        let mut bounder =
            Bounder::new(search.family, &child.designs, search.extra_line, &child.sunk, earlier);
        let ceiling = self.best.total.saturating_add(lines);
        let effort = Effort { steps: 40, patience: 10 };
        let bound = bounder.raise(&child.designs, ceiling, effort, &|| search.watch.stop())?;
        child.bound = child.bound.max(bound.floor().saturating_sub(lines));
        if child.bound > self.best.total - search.unit {
            return None;
        }
        child.earlier = Some(bounder);
        Some(child)
    }
}

fn rows(designs: &[Designs<'_, '_>]) -> usize {
    designs.iter().map(|d| d.listing().map_or(usize::MAX / 1000, Listing::rows)).sum()
}
