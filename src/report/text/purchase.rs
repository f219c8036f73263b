//! What to order and what it costs.

use super::figures::aligned;
use super::grid::{Grid, Side};
use super::page::{INDENT, Page, counted, plain};
use crate::answers::{Choice, Verdict};
use crate::purchase::Bill;
use crate::quantity::Money;
use crate::report::Ink;
use crate::report::users::{User, users};

/// More outputs than this are counted, not named.
const NAMED: usize = 3;

/// The order lines, and the sum of everything.
pub(super) fn write(page: &mut Page, choice: &Choice, bill: &Bill) {
    if bill.lines.is_empty() {
        return;
    }
    page.heading("What to order", &format!("prices in {}", plain(&choice.currency)));
    let users = users(choice);
    let spare = bill.lines.iter().any(|line| line.bought != line.needed);
    let mut grid = Grid::new().optional(1, "", Side::Left).column("order code", Side::Left);
    if spare {
        grid = grid.column("need", Side::Right);
    }
    grid = grid.column("buy", Side::Right).column("each", Side::Right).column("cost", Side::Right);
    let family = choice.outputs.len() > 1;
    if family {
        grid = grid.optional(2, "for", Side::Left);
    }
    let each = aligned(bill.lines.iter().map(|line| line.each));
    let cost = aligned(bill.lines.iter().map(|line| line.cost));
    for ((line, each), cost) in bill.lines.iter().zip(each).zip(cost) {
        let user = users.get(line.order_code.as_str());
        let mut cells =
            vec![user.map_or("", |user| user.kind.word()).to_owned(), plain(&line.order_code)];
        if spare {
            cells.push(line.needed.to_string());
        }
        cells.extend([line.bought.to_string(), each, cost]);
        if family {
            cells.push(user.map_or_else(String::new, |user| named(user, choice)));
        }
        grid.row(cells);
    }
    grid.write(page, INDENT);
    if spare {
        let remark = "More is bought than needed where that costs less, or where the order has \
                      a smallest size.";
        page.wrapped(INDENT, INDENT, remark);
    }
    write_sum(page, choice, bill);
}

fn write_sum(page: &mut Page, choice: &Choice, bill: &Bill) {
    page.heading("What it costs", "");
    let lines = counted(bill.lines.len() as u64, "order line", "order lines");
    let entries: [(String, Money); 4] = [
        ("parts".to_owned(), bill.parts_cost),
        (format!("for {lines}"), bill.lines_cost),
        ("placement".to_owned(), bill.placement_cost),
        ("adjustment".to_owned(), bill.adjustment_cost),
    ];
    // What costs nothing is left out, the parts never.
    let entries: Vec<_> = entries
        .into_iter()
        .filter(|(name, cost)| *cost != Money::ZERO || name == "parts")
        .collect();
    let total = choice.totals.map_or_else(|| bill.total(), |(total, _)| total);
    let amounts = aligned(entries.iter().map(|(_, cost)| *cost).chain([total]));
    let names = entries.iter().map(|(name, _)| name.clone());
    let names = names.chain([format!("total {}", plain(&choice.currency))]);
    let mut grid = Grid::new().column("", Side::Left).column("", Side::Right);
    for (name, amount) in names.zip(amounts) {
        grid.row([name, amount]);
    }
    grid.ink_last(Ink::Bold);
    grid.write(page, INDENT);
}

/// The outputs that use an order line, in a few words.
fn named(user: &User<'_>, choice: &Choice) -> String {
    let designs =
        choice.outputs.iter().filter(|o| matches!(o.verdict, Verdict::Chosen(..))).count();
    match user.outputs.len() {
        number if number == designs && number > 1 => "all".to_owned(),
        number if number > NAMED => format!("{number} outputs"),
        _ => plain(&user.outputs.join(", ")),
    }
}
