//! The whole answer to a request, by exhaustive search, and where the program's answer parts
//! from it.

use ampthrift::answers::{Choice, ChosenDesign, JointReason, OutputAnswer, Status, Verdict};
use ampthrift::purchase::Bill;
use ampthrift::quantity::Money;
use ampthrift::request::{Output, Request};

use super::compare::{connection, differences};
use super::designs::{Passing, Pick, Shelf};
use super::family::{
    Optimum, best_alone, improvement, least_lines, least_shortage, optimum, tie_key,
};
use super::money::{Book, Usage};
use super::physics::evaluate;

/// What exhaustive search finds.
pub struct Answer<'a> {
    pub shelf: Shelf<'a>,
    pub book: Book<'a>,
    /// The designs that pass, for each output.
    pub passing: Vec<Vec<Passing>>,
    /// The least cost of all outputs that have a design; `None` when there is none.
    pub optimum: Option<Optimum>,
}

impl<'a> Answer<'a> {
    pub fn new(shelf: Shelf<'a>) -> Self {
        let request = shelf.request;
        let book = Book::new(&shelf);
        let passing: Vec<_> = request.outputs.iter().map(|output| shelf.passing(output)).collect();
        let mut all = Self { shelf, book, passing, optimum: None };
        let family = all.family();
        all.optimum =
            (!family.is_empty()).then(|| optimum(request, &all.shelf, &all.book, &family));
        all
    }

    /// Quantity and designs of each output that has any.
    pub fn family(&self) -> Vec<(u64, Vec<Passing>)> {
        let outputs = self.shelf.request.outputs.iter();
        outputs
            .zip(&self.passing)
            .filter(|(_, designs)| !designs.is_empty())
            .map(|(output, designs)| (output.quantity, designs.clone()))
            .collect()
    }

    /// The design that a single output gets.
    pub fn single(&self) -> Option<(i128, Passing)> {
        match &self.shelf.request.outputs[..] {
            [one] => best_alone(&self.shelf, &self.book, one.quantity, &self.passing[0]),
            _ => None,
        }
    }
}

/// The place on the shelf of a design given by order codes.
fn find(shelf: &Shelf<'_>, design: &ChosenDesign) -> Result<Pick, String> {
    fn at<T>(all: &[T], wanted: &str, code: impl Fn(&T) -> &str) -> Result<usize, String> {
        all.iter()
            .position(|part| code(part) == wanted)
            .ok_or_else(|| format!("{wanted} is not allowed"))
    }
    let mut codes: Vec<_> = design.elements.iter().map(|e| e.order_code.as_str()).collect();
    if !codes.is_sorted() {
        return Err(format!("elements out of order: {codes:?}"));
    }
    codes.sort_unstable();
    let network = shelf.networks.iter().position(|net| {
        connection(net.joined) == design.connection
            && net.values.iter().map(|&value| shelf.values[value].code.as_str()).eq(codes.clone())
    });
    let network = network.ok_or_else(|| format!("{codes:?} is no network"))?;
    let net = &shelf.networks[network];
    let near = |a: f64, b: f64| (a - b).abs() <= 1e-12 * b;
    let whole = near(design.ohms.value(), net.ohms);
    let mut each = design.elements.iter().zip(&net.values);
    if !whole || !each.all(|(own, &value)| near(own.ohms.value(), shelf.values[value].ohms)) {
        return Err(format!("resistances of {design:?}"));
    }
    Ok(Pick {
        reference: at(&shelf.references, &design.reference, |r| &r.order_code)?,
        amplifier: at(&shelf.amplifiers, &design.amplifier, |a| &a.order_code)?,
        network,
        lift: match &design.lift {
            None => None,
            Some((code, count)) => Some((at(&shelf.lifts, code, |l| &l.order_code)?, *count)),
        },
        adjustment: match &design.adjustment {
            None => None,
            Some(code) => Some(at(&shelf.adjustments, code, |a| &a.order_code)?),
        },
    })
}

/// What differs between the program's answer and the exhaustive one; empty when all agrees.
pub fn parts_from(choice: &Choice, answer: &Answer<'_>) -> Vec<String> {
    let mut all = Vec::new();
    let request = answer.shelf.request;
    if choice.outputs.len() != request.outputs.len() {
        return vec![format!("{} outputs", choice.outputs.len())];
    }
    let no_set = answer.optimum == Some(Optimum::NoSet);
    let lacking = answer.passing.iter().any(Vec::is_empty);
    let status = if lacking || no_set { Status::Infeasible } else { Status::Optimal };
    if choice.status != status {
        all.push(format!("status {:?} against {status:?}", choice.status));
    }
    let mut chosen = Vec::new();
    for (at, (output, own)) in request.outputs.iter().zip(&choice.outputs).enumerate() {
        match one_output(answer, at, output, own, no_set) {
            Ok(design) => chosen.extend(design),
            Err(why) => all.push(format!("{}: {why}", output.name)),
        }
    }
    if !all.is_empty() {
        return all;
    }
    match answer.optimum {
        Some(Optimum::Least(least)) => costs(choice, answer, &chosen, least, &mut all),
        Some(Optimum::NoSet) => no_common_set(choice, answer, &mut all),
        Some(Optimum::TooMany) => {}
        None => {
            if choice.totals.is_some() || choice.purchase.is_some() {
                all.push(format!("totals of nothing: {:?}", choice.totals));
            }
        }
    }
    all
}

/// Checks one output; gives its design, where it has one.
fn one_output(
    answer: &Answer<'_>,
    at: usize,
    output: &Output,
    own: &OutputAnswer,
    no_set: bool,
) -> Result<Option<Passing>, String> {
    let shelf = &answer.shelf;
    let passing = &answer.passing[at];
    if own.name != output.name
        || own.current != output.current.value()
        || own.target != output.accuracy
        || own.quantity != output.quantity
        || own.method != shelf.request.budget.word()
    {
        return Err(format!("another output: {own:?}"));
    }
    match &own.verdict {
        Verdict::Chosen(design, evaluation) => {
            let pick = find(shelf, design)?;
            let built = shelf.built(pick);
            let plain = evaluate(shelf.request, output, &built).ok_or("the lift cannot be used")?;
            let found = differences(evaluation, &plain);
            if !found.is_empty() {
                return Err(found.join("; "));
            }
            let design = passing.iter().find(|design| design.pick == pick);
            design.map(|design| Some(*design)).ok_or_else(|| "the design does not pass".to_owned())
        }
        Verdict::NoCommonSet if no_set && !passing.is_empty() => Ok(None),
        Verdict::Infeasible(reasons) if passing.is_empty() => {
            let best = shelf.best_total(output);
            match (&reasons.best, best) {
                (None, None) => Ok(None),
                (Some((ppm, design)), Some(best)) => {
                    let built = shelf.built(find(shelf, design)?);
                    let plain = evaluate(shelf.request, output, &built).ok_or("unusable lift")?;
                    let same = |ppm: f64| (ppm - best).abs() <= 1e-9 * best.max(1.0);
                    if same(ppm.value()) && same(plain.total) && plain.window {
                        Ok(None)
                    } else {
                        let total = plain.total;
                        Err(format!("best {ppm:?} (its design {total}) against {best}"))
                    }
                }
                (own, best) => Err(format!("best {own:?} against {best:?}")),
            }
        }
        verdict => Err(format!("{verdict:?} against {} designs that pass", passing.len())),
    }
}

fn costs(
    choice: &Choice,
    answer: &Answer<'_>,
    chosen: &[Passing],
    least: i128,
    all: &mut Vec<String>,
) {
    let shelf = &answer.shelf;
    let least = Money::from_micros(least);
    if choice.totals != Some((least, least)) {
        all.push(format!("totals {:?} against {least:?}", choice.totals));
    }
    if !choice.joint_reasons.is_empty() {
        all.push(format!("reasons {:?}", choice.joint_reasons));
    }
    let family = answer.family();
    if family.len() != chosen.len() {
        all.push(format!("{} designs against {}", chosen.len(), family.len()));
        return;
    }
    let usages: Vec<Usage> = family
        .iter()
        .zip(chosen)
        .map(|((quantity, _), design)| answer.book.usage(shelf, design.pick, *quantity))
        .collect();
    let usages: Vec<&Usage> = usages.iter().collect();
    let cost = answer.book.cost(&usages).map(Money::from_micros);
    if cost != Some(least) {
        all.push(format!("the designs cost {cost:?}, the least is {least:?}"));
    }
    match &choice.purchase {
        Some(own) => bill(own, answer, &usages, least, all),
        None => all.push("no purchase".to_owned()),
    }
    if let Some((at, better)) = improvement(shelf, &answer.book, &family, chosen) {
        let (own, better) = (chosen[at], better);
        all.push(format!(
            "of equal cost {:?} at {} ppm, not {:?} at {} ppm",
            tie_key(shelf, better.pick),
            better.total,
            tie_key(shelf, own.pick),
            own.total
        ));
    }
    if let (Some((_, single)), [own]) = (answer.single(), chosen)
        && tie_key(shelf, single.pick) != tie_key(shelf, own.pick)
    {
        all.push(format!(
            "{:?} against {:?}",
            tie_key(shelf, own.pick),
            tie_key(shelf, single.pick)
        ));
    }
}

/// The purchase list, line by line.
fn bill(own: &Bill, answer: &Answer<'_>, usages: &[&Usage], total: Money, all: &mut Vec<String>) {
    let purchase = &answer.shelf.request.purchase;
    let book = &answer.book;
    let mut wanted = Vec::new();
    for (offer, needed) in Book::together(usages) {
        let Some(buy) = book.buy(offer, needed) else { continue };
        let (kind, code) = book.label(offer);
        wanted.push((kind, code.to_owned(), needed, buy.bought, buy.each, buy.cost));
    }
    wanted.sort();
    let listed: Vec<_> = own
        .lines
        .iter()
        .map(|line| {
            let code = line.order_code.clone();
            (code, line.needed, line.bought, line.each.micros(), line.cost.micros())
        })
        .collect();
    let parts: i128 = wanted.iter().map(|line| line.5).sum();
    let wanted: Vec<_> = wanted.into_iter().map(|(_, a, b, c, d, e)| (a, b, c, d, e)).collect();
    if listed != wanted {
        all.push(format!("purchase {listed:?} against {wanted:?}"));
    }
    let lines = purchase.line_cost.micros() * wanted.len() as i128;
    let placed: u64 = usages.iter().flat_map(|usage| &usage.parts).map(|(_, needed)| needed).sum();
    let placement = purchase.placement_cost.micros() * i128::from(placed);
    let fixed: i128 = usages.iter().map(|usage| usage.fixed).sum();
    let sums = [parts, lines, placement, fixed - placement].map(Money::from_micros);
    let found = [own.parts_cost, own.lines_cost, own.placement_cost, own.adjustment_cost];
    if found != sums || own.total() != total {
        all.push(format!("sums {found:?} against {sums:?}"));
    }
}

/// Totals and reasons where no set keeps the rules on the purchase.
fn no_common_set(choice: &Choice, answer: &Answer<'_>, all: &mut Vec<String>) {
    let request: &Request = answer.shelf.request;
    if choice.totals.is_some() || choice.purchase.is_some() {
        all.push("totals without a common set".to_owned());
    }
    let family = answer.family();
    let (shelf, book) = (&answer.shelf, &answer.book);
    let rule = "purchase.lines_max";
    let asked = request.purchase.lines_max;
    let too_many = |allowed, needed| JointReason { rule, order_code: None, allowed, needed };
    let (about_lines, about_stock): (Vec<_>, Vec<_>) =
        choice.joint_reasons.iter().cloned().partition(|reason| reason.rule == rule);
    if request.rules.in_stock {
        match least_lines(shelf, book, &family, true) {
            None => return,
            Some(Some(needed)) => {
                let wanted = vec![too_many(asked.unwrap_or(u64::MAX), needed)];
                if choice.joint_reasons != wanted {
                    all.push(format!("{:?} against {wanted:?}", choice.joint_reasons));
                }
                return;
            }
            Some(None) => {}
        }
    }
    // Either nobody asks for stock, or there is not enough of it for any set.
    let Some(Some(fewest)) = least_lines(shelf, book, &family, false) else { return };
    let wanted = match asked {
        Some(allowed) if allowed < fewest => vec![too_many(allowed, fewest)],
        _ => Vec::new(),
    };
    if about_lines != wanted {
        all.push(format!("{about_lines:?} against {wanted:?}"));
    }
    if !request.rules.in_stock {
        if !about_stock.is_empty() {
            all.push(format!("nobody asks for stock: {about_stock:?}"));
        }
        return;
    }
    let lines = asked.map(|allowed| allowed.max(fewest));
    let Some(Some(short)) = least_shortage(shelf, book, &family, lines) else { return };
    let named: u64 = about_stock.iter().map(|reason| reason.needed - reason.allowed).sum();
    if named != short {
        all.push(format!("{about_stock:?} against {short} units short"));
    }
    for reason in &about_stock {
        let stock = reason.order_code.as_deref().and_then(|code| book.stock(code));
        if reason.rule != "rules.in_stock" || stock != Some(reason.allowed) {
            all.push(format!("{reason:?} against a stock of {stock:?}"));
        }
    }
}
