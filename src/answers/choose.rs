//! `choose`: the cheapest set for a request, audited before it is given out.

use std::sync::atomic::{AtomicBool, Ordering};
use std::time::{Duration, Instant};

use rayon::prelude::*;

use crate::catalog::{Catalog, Fault};
use crate::circuit::{Evaluation, cautions, evaluate};
use crate::purchase::{self, Family, Outcome, Watch, bill, tidy};
use crate::quantity::Money;
use crate::request::{Request, Unstated};
use crate::search::{Amount, Common, Costs, Market, OutputSpace, Pick, TooDear, price_faults};

use super::choice::{Choice, JointReason, OutputAnswer, Status, Verdict};
use super::design::{chosen, design_of};
use super::reasons::reasons;

/// Where a search stands, for someone who waits.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Progress {
    /// What it is doing.
    pub phase: String,
    /// Best total so far.
    pub best: Option<Money>,
    /// Lower bound so far.
    pub bound: Option<Money>,
}

/// How a search is run.
#[derive(Default)]
pub struct Options<'o> {
    /// Threads; all of the machine's when not given. The answer does not depend on it.
    pub threads: Option<usize>,
    /// When to give the best set so far.
    pub time_limit: Option<Duration>,
    /// Told of every step.
    pub progress: Option<&'o (dyn Fn(&Progress) + Sync)>,
    /// Set from outside to stop early.
    pub stop: Option<&'o AtomicBool>,
}

/// Why there is no answer.
#[derive(Debug, thiserror::Error)]
pub enum ChooseError {
    /// Catalogue and request don't go together.
    #[error("the catalogue and the request do not go together")]
    Input(Vec<Fault>),
    /// Prices times quantities are beyond exact counting.
    #[error("prices and quantities are too large to be counted exactly")]
    TooDear,
    /// Nothing was found before the search was stopped, and nothing is proved.
    #[error("stopped before any set of designs was found; whether there is one is not known")]
    Stopped,
    /// The answer did not pass its audit, or threads could not be started.
    #[error("internal error: {0}")]
    Internal(String),
}

/// Finds the cheapest set of designs for a request.
///
/// # Errors
/// A price without an exchange rate, a search stopped before it found anything, or an answer that
/// did not pass its audit.
pub fn choose(
    catalog: &Catalog,
    request: &Request,
    options: &Options<'_>,
) -> Result<Choice, ChooseError> {
    let threads = options.threads.unwrap_or(0);
    let pool = rayon::ThreadPoolBuilder::new()
        .num_threads(threads)
        .build()
        .map_err(|error| ChooseError::Internal(error.to_string()))?;
    pool.install(|| choose_here(catalog, request, options))
}

struct Watcher<'o> {
    options: &'o Options<'o>,
    deadline: Option<Instant>,
}

impl Watch for Watcher<'_> {
    fn stop(&self) -> bool {
        self.options.stop.is_some_and(|flag| flag.load(Ordering::Relaxed))
            || self.deadline.is_some_and(|deadline| Instant::now() >= deadline)
    }

    fn note(&self, phase: &str, best: Option<i64>, bound: Option<i64>) {
        if let Some(progress) = self.options.progress {
            let money = |micros: i64| Money::from_micros(i128::from(micros));
            let (best, bound) = (best.map(money), bound.map(money));
            progress(&Progress { phase: phase.to_owned(), best, bound });
        }
    }
}

fn choose_here(
    catalog: &Catalog,
    request: &Request,
    options: &Options<'_>,
) -> Result<Choice, ChooseError> {
    let deadline = options.time_limit.map(|limit| Instant::now() + limit);
    let watch = Watcher { options, deadline };
    watch.note("designs", None, None);
    let faults = price_faults(catalog, request);
    if !faults.is_empty() {
        return Err(ChooseError::Input(faults));
    }
    let market = Market::new(catalog, request).map_err(|TooDear| ChooseError::TooDear)?;
    let common = Common::new(&market);
    let spaces: Vec<OutputSpace<'_>> = request
        .outputs
        .par_iter()
        .map(|output| OutputSpace::new(&market, &common, output, output.accuracy.value()))
        .collect();
    let free = Costs::proportional(
        &market,
        vec![0i64; market.offers()],
        0,
        vec![0; market.adjustments.len()],
    );
    let feasible: Vec<bool> =
        spaces.par_iter().map(|s| s.cheapest(&free, i64::HUGE).is_some()).collect();

    let family = Family::new(
        &market,
        spaces.iter().zip(&feasible).filter(|(_, ok)| **ok).map(|(space, _)| space).collect(),
    );
    let mut answer = Answer::default();
    if !family.spaces.is_empty() {
        answer.take(&family, purchase::solve(&family, &watch))?;
    }
    let mut designs = answer.designs.into_iter();
    let mut outputs = Vec::with_capacity(spaces.len());
    for (space, feasible) in spaces.iter().zip(&feasible) {
        let output = space.output;
        let verdict = if !feasible {
            Verdict::Infeasible(reasons(&market, &common, output))
        } else if let Some((design, evaluation)) = designs.next() {
            Verdict::Chosen(design, evaluation)
        } else {
            Verdict::NoCommonSet
        };
        outputs.push(OutputAnswer {
            name: output.name.clone(),
            current: output.current.value(),
            target: output.accuracy,
            quantity: output.quantity,
            method: request.budget.word(),
            verdict,
        });
    }
    let impossible = feasible.contains(&false) || !answer.joint_reasons.is_empty();
    let mut notes = market.notes.clone();
    notes.extend(cautions(request));
    Ok(Choice {
        title: request.title.clone(),
        status: match (impossible, answer.proved) {
            (true, _) => Status::Infeasible,
            (false, true) => Status::Optimal,
            (false, false) => Status::Gap,
        },
        currency: request.currency.clone(),
        totals: answer.totals,
        outputs,
        purchase: answer.purchase,
        joint_reasons: answer.joint_reasons,
        notes,
    })
}

type Worked = (Box<super::choice::ChosenDesign>, Box<Evaluation>);

/// What the purchase search came to, audited.
#[derive(Default)]
struct Answer {
    proved: bool,
    totals: Option<(Money, Money)>,
    designs: Vec<Worked>,
    purchase: Option<purchase::Bill>,
    joint_reasons: Vec<JointReason>,
}

impl Answer {
    fn take(&mut self, family: &Family<'_, '_>, outcome: Outcome) -> Result<(), ChooseError> {
        let market = family.market;
        let too_many_lines = |needed| JointReason {
            rule: "purchase.lines_max",
            order_code: None,
            allowed: family.terms.lines_max.unwrap_or(0),
            needed,
        };
        match outcome {
            Outcome::Found { best, bound } => {
                let picks = tidy(family, best.picks);
                let bill = bill(family, &picks).ok_or_else(|| differs("the purchase list"))?;
                let total = Money::from_micros(i128::from(best.total));
                let bound = Money::from_micros(i128::from(bound));
                if bill.total() != total || bound > total {
                    return Err(differs("the purchase"));
                }
                let lines_max = family.terms.lines_max;
                if lines_max.is_some_and(|most| bill.lines.len() as u64 > most) {
                    return Err(differs("the number of order lines"));
                }
                self.proved = bound == total;
                self.totals = Some((total, bound));
                self.designs = family
                    .spaces
                    .iter()
                    .zip(&picks)
                    .map(|(space, pick)| audited(space, pick))
                    .collect::<Result<_, _>>()?;
                self.purchase = Some(bill);
            }
            Outcome::TooManyLines(needed) => self.joint_reasons.push(too_many_lines(needed)),
            Outcome::OutOfStock { short, lines } => {
                self.joint_reasons.extend(lines.map(too_many_lines));
                self.joint_reasons.extend(short.into_iter().map(|(offer, needed)| JointReason {
                    rule: "rules.in_stock",
                    order_code: Some(market.order_code(offer)),
                    allowed: market.tariff(offer).most.unwrap_or(0),
                    needed,
                }));
            }
            Outcome::Open => return Err(ChooseError::Stopped),
        }
        Ok(())
    }
}

/// Recomputes a design by the circuit's plain path and compares it with the search's sums.
fn audited(space: &OutputSpace<'_>, pick: &Pick) -> Result<Worked, ChooseError> {
    let request = space.market.request;
    let design = design_of(space, pick);
    let evaluation = evaluate(request, space.output, &design)
        .map_err(|limit| differs(&format!("limit {}", limit.def().name)))?;
    let name = &space.output.name;
    if !evaluation.window_holds {
        return Err(differs(&format!("the operating window of {name}")));
    }
    if !evaluation.accuracy_holds {
        return Err(differs(&format!("the accuracy of {name}")));
    }
    if request.rules.unstated == Unstated::Reject && !evaluation.not_stated.is_empty() {
        return Err(differs(&format!("the stated figures of {name}")));
    }
    let (fast, plain) = (space.total_of(pick), evaluation.total.value());
    let agree = (fast - plain).abs() <= 1e-9 * plain.abs().max(1.0);
    if !agree {
        return Err(differs(&format!("the total of {name} ({fast} against {plain} ppm)")));
    }
    Ok((Box::new(chosen(&design)), Box::new(evaluation)))
}

fn differs(what: &str) -> ChooseError {
    ChooseError::Internal(format!("{what} came out otherwise when it was computed again"))
}
