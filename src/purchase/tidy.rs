//! Ties in a family: no change of a single output's design that leaves the cost equal improves
//! that output by the rule for one output.

use crate::search::{Amount, Pick};

use super::family::Family;

/// Gives every output the design that the rule names among those that leave the total as it is,
/// until no output gains.
#[must_use]
pub fn tidy(family: &Family<'_, '_>, mut picks: Vec<Pick>) -> Vec<Pick> {
    // An output's own order is strict, so it gains only finitely often; the rounds are bounded
    // all the same, because outputs can move each other.
    for _ in 0..16 {
        let mut changed = false;
        for output in 0..picks.len() {
            let some: Vec<Option<Pick>> = picks.iter().copied().map(Some).collect();
            let others = family.demand(&some, Some(output));
            let costs = family.marginal_costs(output, &others);
            let cost = family
                .uses(output, &picks[output])
                .into_iter()
                .map(|(offer, count)| costs.of(offer, count))
                .sum::<i64>()
                + family.besides_parts(output, &picks[output]);
            if cost >= i64::HUGE {
                continue;
            }
            let lines_left = family.terms.lines_max.map(|m| m.saturating_sub(others.len() as u64));
            let admit = |pick: &Pick| {
                lines_left.is_none_or(|left| {
                    let new = family.uses(output, pick);
                    new.iter().filter(|(o, _)| !others.contains_key(o)).count() as u64 <= left
                })
            };
            let better = family.spaces[output].best_at(&costs, cost, picks[output], &admit);
            if better != picks[output] {
                picks[output] = better;
                changed = true;
            }
        }
        if !changed {
            break;
        }
    }
    picks
}
