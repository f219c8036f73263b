//! The exact optimum of one output and of a family, and the tie rule.

use std::cmp::Ordering;
use std::collections::BTreeSet;

use ampthrift::request::Request;

use super::designs::{Passing, Pick, Shelf};
use super::money::{Book, Usage};
use super::physics::Joined;

/// More nodes than this are not searched.
const NODES: u64 = 4_000_000;

/// The order codes of a design and what follows them in the tie rule.
pub type TieKey<'a> =
    (&'a str, &'a str, Vec<&'a str>, Option<&'a str>, Option<&'a str>, Joined, u32);

/// What the tie rule compares once totals are equal.
pub fn tie_key<'s>(shelf: &'s Shelf<'_>, pick: Pick) -> TieKey<'s> {
    let net = &shelf.networks[pick.network];
    let mut elements: Vec<_> =
        net.values.iter().map(|&value| shelf.values[value].code.as_str()).collect();
    elements.sort_unstable();
    (
        &shelf.references[pick.reference].order_code,
        &shelf.amplifiers[pick.amplifier].order_code,
        elements,
        pick.lift.map(|(lift, _)| shelf.lifts[lift].order_code.as_str()),
        pick.adjustment.map(|at| shelf.adjustments[at].order_code.as_str()),
        net.joined,
        pick.lift.map_or(0, |(_, count)| count),
    )
}

/// Whether `a` goes before `b` among designs of equal cost.
pub fn precedes(shelf: &Shelf<'_>, a: &Passing, b: &Passing) -> bool {
    if (a.total - b.total).abs() > 1e-9 * a.total.max(b.total) {
        return a.total < b.total;
    }
    tie_key(shelf, a.pick).cmp(&tie_key(shelf, b.pick)) == Ordering::Less
}

/// The best design of one output bought alone, and its cost.
pub fn best_alone(
    shelf: &Shelf<'_>,
    book: &Book<'_>,
    quantity: u64,
    designs: &[Passing],
) -> Option<(i128, Passing)> {
    let costs: Vec<_> = designs
        .iter()
        .filter_map(|design| {
            Some((book.cost(&[&book.usage(shelf, design.pick, quantity)])?, *design))
        })
        .collect();
    let least = costs.iter().map(|(cost, _)| *cost).min()?;
    let mut equal = costs.iter().filter(|(cost, _)| *cost == least).map(|(_, design)| *design);
    let first = equal.next()?;
    let best =
        equal.fold(first, |best, next| if precedes(shelf, &next, &best) { next } else { best });
    Some((least, best))
}

/// What an exhaustive search of a family found.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Optimum {
    /// The least total.
    Least(i128),
    /// No set keeps stock and `lines_max`.
    NoSet,
    /// Too many sets to go through.
    TooMany,
}

struct Alternative {
    usage: Usage,
    /// Its cost if every unit had its lowest price; never above its share of any total.
    least: i128,
}

struct Walk<'b, 'a> {
    book: &'b Book<'a>,
    line_cost: i128,
    options: &'b [Vec<Alternative>],
    best: Option<i128>,
    nodes: u64,
}

impl Walk<'_, '_> {
    fn descend(&mut self, chosen: &mut Vec<usize>, least: i128) {
        let depth = chosen.len();
        let usages: Vec<&Usage> =
            chosen.iter().zip(self.options).map(|(&at, options)| &options[at].usage).collect();
        if depth > 0 {
            // More designs never make the parts of these cheaper, nor the lines fewer.
            let Some(cost) = self.book.cost(&usages) else { return };
            let fixed: i128 =
                self.options[depth..].iter().map(|options| least_fixed(options)).sum();
            if self.best.is_some_and(|best| cost + fixed >= best) {
                return;
            }
            if depth == self.options.len() {
                self.best = Some(cost);
                return;
            }
        }
        let lines = Book::together(&usages).len() as i128 * self.line_cost;
        let rest: i128 = self.options[depth + 1..].iter().map(|options| options[0].least).sum();
        for at in 0..self.options[depth].len() {
            let with = least + self.options[depth][at].least;
            if self.best.is_some_and(|best| with + rest + lines >= best) {
                // The options rise in `least`.
                return;
            }
            self.nodes += 1;
            if self.nodes > NODES {
                return;
            }
            chosen.push(at);
            self.descend(chosen, with);
            chosen.pop();
        }
    }
}

fn least_fixed(options: &[Alternative]) -> i128 {
    options.iter().map(|option| option.usage.fixed).min().unwrap_or(0)
}

/// The least total of a family: every set of designs, one an output, that keeps the rules on the
/// purchase. Each output has at least one design.
pub fn optimum(
    request: &Request,
    shelf: &Shelf<'_>,
    book: &Book<'_>,
    outputs: &[(u64, Vec<Passing>)],
) -> Optimum {
    let mut options = Vec::new();
    for (quantity, designs) in outputs {
        // Designs that take the same parts cost the same.
        let distinct: BTreeSet<Usage> =
            designs.iter().map(|design| book.usage(shelf, design.pick, *quantity)).collect();
        let mut all: Vec<Alternative> = distinct
            .into_iter()
            .map(|usage| {
                let prices = usage.parts.iter();
                let least: i128 = prices
                    .map(|&(offer, needed)| book.least_price(offer) * i128::from(needed))
                    .sum();
                Alternative { least: least + usage.fixed, usage }
            })
            .collect();
        all.sort_by_key(|option| option.least);
        options.push(all);
    }
    let best = swaps(book, &options);
    let line_cost = request.purchase.line_cost.micros();
    let mut walk = Walk { book, line_cost, options: &options, best, nodes: 0 };
    walk.descend(&mut Vec::new(), 0);
    match (walk.nodes > NODES, walk.best) {
        (true, _) => Optimum::TooMany,
        (false, Some(best)) => Optimum::Least(best),
        (false, None) => Optimum::NoSet,
    }
}

/// A set to start from: from every first choice of a few, one output at a time is changed for the
/// better until nothing helps.
fn swaps(book: &Book<'_>, options: &[Vec<Alternative>]) -> Option<i128> {
    let mut best: Option<i128> = None;
    for start in 0..8 {
        let mut chosen: Vec<usize> =
            options.iter().map(|all| (start * all.len() / 8).min(all.len() - 1)).collect();
        let cost = |chosen: &[usize]| {
            let usages: Vec<_> =
                chosen.iter().zip(options).map(|(&at, all)| &all[at].usage).collect();
            book.cost(&usages)
        };
        let mut now = cost(&chosen);
        loop {
            let before = now;
            for output in 0..options.len() {
                let mut trial = chosen.clone();
                for at in 0..options[output].len() {
                    trial[output] = at;
                    let with = cost(&trial);
                    if with.is_some_and(|with| now.is_none_or(|now| with < now)) {
                        now = with;
                        chosen[output] = at;
                    }
                }
            }
            if now == before {
                break;
            }
        }
        if now.is_some_and(|now| best.is_none_or(|best| now < best)) {
            best = now;
        }
    }
    best
}

/// A change of one output's design that leaves the cost of the set equal and improves that output,
/// if there is one.
pub fn improvement(
    shelf: &Shelf<'_>,
    book: &Book<'_>,
    outputs: &[(u64, Vec<Passing>)],
    chosen: &[Passing],
) -> Option<(usize, Passing)> {
    let usages: Vec<Usage> = outputs
        .iter()
        .zip(chosen)
        .map(|((quantity, _), design)| book.usage(shelf, design.pick, *quantity))
        .collect();
    let cost = book.cost(&usages.iter().collect::<Vec<_>>())?;
    for (at, (quantity, designs)) in outputs.iter().enumerate() {
        for design in designs {
            if !precedes(shelf, design, &chosen[at]) {
                continue;
            }
            let mut with: Vec<&Usage> = usages.iter().collect();
            let usage = book.usage(shelf, design.pick, *quantity);
            with[at] = &usage;
            if book.cost(&with) == Some(cost) {
                return Some((at, *design));
            }
        }
    }
    None
}

/// A figure of the parts of some designs.
type Measure<'f> = &'f dyn Fn(&[(usize, u64)]) -> Option<u64>;

/// The least measure of any set of designs, one an output. The measure of the parts of some
/// designs must never be above that of more designs; `None` stands for a set that is not allowed.
/// The outer `None`: too many sets to go through.
fn least(
    shelf: &Shelf<'_>,
    book: &Book<'_>,
    outputs: &[(u64, Vec<Passing>)],
    measure: Measure<'_>,
) -> Option<Option<u64>> {
    let options: Vec<Vec<Usage>> = outputs
        .iter()
        .map(|(quantity, designs)| {
            let all = designs.iter().map(|design| {
                let usage = book.usage(shelf, design.pick, *quantity);
                Usage { fixed: 0, ..usage }
            });
            let mut all: Vec<Usage> = all.collect::<BTreeSet<_>>().into_iter().collect();
            all.sort_by_key(|usage| measure(&usage.parts));
            all
        })
        .collect();
    let mut best = None;
    let mut nodes = 0;
    descend(&options, &mut Vec::new(), measure, &mut best, &mut nodes);
    (nodes <= NODES).then_some(best)
}

fn descend<'u>(
    options: &'u [Vec<Usage>],
    chosen: &mut Vec<&'u Usage>,
    measure: Measure<'_>,
    best: &mut Option<u64>,
    nodes: &mut u64,
) {
    *nodes += 1;
    if *nodes > NODES {
        return;
    }
    let Some(so_far) = measure(&Book::together(chosen)) else { return };
    if best.is_some_and(|best| so_far >= best) {
        return;
    }
    let Some(next) = options.get(chosen.len()) else {
        *best = Some(so_far);
        return;
    };
    for usage in next {
        chosen.push(usage);
        descend(options, chosen, measure, best, nodes);
        chosen.pop();
    }
}

/// The fewest order lines with which every output gets a design, bought from stock where that is
/// asked for.
pub fn least_lines(
    shelf: &Shelf<'_>,
    book: &Book<'_>,
    outputs: &[(u64, Vec<Passing>)],
    from_stock: bool,
) -> Option<Option<u64>> {
    least(shelf, book, outputs, &|parts| {
        let had = parts.iter().all(|&(offer, needed)| book.buy(offer, needed).is_some());
        (had || !from_stock).then_some(parts.len() as u64)
    })
}

/// The fewest units that stock is short of with so many lines.
pub fn least_shortage(
    shelf: &Shelf<'_>,
    book: &Book<'_>,
    outputs: &[(u64, Vec<Passing>)],
    lines: Option<u64>,
) -> Option<Option<u64>> {
    least(shelf, book, outputs, &|parts| {
        let few = lines.is_none_or(|most| parts.len() as u64 <= most);
        few.then(|| parts.iter().map(|&(offer, needed)| book.shortage(offer, needed)).sum())
    })
}
