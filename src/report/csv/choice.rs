//! The CSV of `choose`.
//!
//! One table for everything, so that one file can be filtered by its first column:
//!
//! | section | output | item | order_code | quantity | bought | each, cost | value | bound | margin | unit | note |
//! | --- | --- | --- | --- | --- | --- | --- | --- | --- | --- | --- | --- |
//! | `result` | | `status`, `total_cost`, `lower_bound` | | | | cost | | | | currency | status word |
//! | `purchase` | | kind of part | what to order | needed | bought | yes | | | | currency | outputs that use it |
//! | `cost` | | `parts`, `lines`, `placement`, `adjustment` | | | | cost | | | | currency | |
//! | `output` | name | `current`, `total` | | built | | | figure | target | | A, ppm | method, or `no design`, `no common set` |
//! | `design` | name | kind of part, `network` | code | pieces | | | Ω | | | ohm | connection |
//! | `term` | name | term | | | | | ppm | | | ppm | remark |
//! | `limit` | name | limit | | | | | left side | right side | margin | unit | |
//! | `compliance` | name | `load_min`, `load_max`, `output_resistance` | | | | | figure | | | V, ohm | |
//! | `not-stated` | name | field | part | | | | | | | | |
//! | `best` | name | as `design`, and `total` | | | | | | target | | | |
//! | `removed` | name | kind of part | | offers | | | | | | | limit or rule |
//! | `relaxation` | name | figure | | | | | what would do | what it is | | | |
//! | `reason` | | rule | part | needed | | | | allowed | | | |
//! | `note` | | | | | | | | | | | text |

use super::table::{CsvError, figure, finish, text};
use crate::answers::{Cause, Choice, ChosenDesign, OutputAnswer, Reasons, Verdict};
use crate::catalog::Kind;
use crate::circuit::Evaluation;
use crate::purchase::Bill;
use crate::quantity::Money;
use crate::report::users::users;

/// The header, and with it the order of the columns.
const HEADER: [&str; 13] = [
    "section",
    "output",
    "item",
    "order_code",
    "quantity",
    "bought",
    "each",
    "cost",
    "value",
    "bound",
    "margin",
    "unit",
    "note",
];

/// One row; what does not apply stays empty.
#[derive(Clone, Debug, Default)]
struct Row<'a> {
    section: &'static str,
    output: &'a str,
    item: &'a str,
    order_code: &'a str,
    quantity: Option<u64>,
    bought: Option<u64>,
    each: Option<Money>,
    cost: Option<Money>,
    value: Option<f64>,
    bound: Option<f64>,
    margin: Option<f64>,
    unit: &'a str,
    note: &'a str,
}

impl Row<'_> {
    fn cells(&self) -> Result<Vec<String>, CsvError> {
        let count = |number: Option<u64>| number.map_or(String::new(), |number| number.to_string());
        let money = |money: Option<Money>| money.map_or(String::new(), |money| money.to_string());
        let number = |number: Option<f64>| number.map_or(Ok(String::new()), figure);
        Ok(vec![
            self.section.to_owned(),
            text(self.output).into_owned(),
            text(self.item).into_owned(),
            text(self.order_code).into_owned(),
            count(self.quantity),
            count(self.bought),
            money(self.each),
            money(self.cost),
            number(self.value)?,
            number(self.bound)?,
            number(self.margin)?,
            text(self.unit).into_owned(),
            text(self.note).into_owned(),
        ])
    }
}

/// Rows under way.
struct Rows(Vec<Vec<String>>);

impl Rows {
    fn add(&mut self, row: &Row<'_>) -> Result<(), CsvError> {
        self.0.push(row.cells()?);
        Ok(())
    }
}

/// The whole answer as one table.
///
/// # Errors
/// A figure that is not a finite number, which the engine never hands out.
pub fn choice(choice: &Choice) -> Result<String, CsvError> {
    let mut rows = Rows(vec![HEADER.map(str::to_owned).to_vec()]);
    add_result(&mut rows, choice)?;
    if let Some(bill) = &choice.purchase {
        add_purchase(&mut rows, choice, bill)?;
    }
    for output in &choice.outputs {
        add_output(&mut rows, output)?;
    }
    for reason in &choice.joint_reasons {
        rows.add(&Row {
            section: "reason",
            item: reason.rule,
            order_code: reason.order_code.as_deref().unwrap_or(""),
            quantity: Some(reason.needed),
            // Counts this large do not occur; a float holds them exactly up to 2^53.
            bound: Some(reason.allowed as f64),
            ..Row::default()
        })?;
    }
    for note in &choice.notes {
        rows.add(&Row { section: "note", note, ..Row::default() })?;
    }
    finish(&rows.0)
}

fn add_result(rows: &mut Rows, choice: &Choice) -> Result<(), CsvError> {
    let row = Row { section: "result", ..Row::default() };
    rows.add(&Row { item: "status", note: choice.status.word(), ..row.clone() })?;
    if let Some((total, bound)) = choice.totals {
        let row = Row { unit: &choice.currency, ..row };
        rows.add(&Row { item: "total_cost", cost: Some(total), ..row.clone() })?;
        rows.add(&Row { item: "lower_bound", cost: Some(bound), ..row })?;
    }
    Ok(())
}

fn add_purchase(rows: &mut Rows, choice: &Choice, bill: &Bill) -> Result<(), CsvError> {
    let users = users(choice);
    for line in &bill.lines {
        let user = users.get(line.order_code.as_str());
        rows.add(&Row {
            section: "purchase",
            item: user.map_or("", |user| user.kind.word()),
            order_code: &line.order_code,
            quantity: Some(line.needed),
            bought: Some(line.bought),
            each: Some(line.each),
            cost: Some(line.cost),
            unit: &choice.currency,
            note: &user.map_or_else(String::new, |user| user.outputs.join("; ")),
            ..Row::default()
        })?;
    }
    let sums = [
        ("parts", bill.parts_cost),
        ("lines", bill.lines_cost),
        ("placement", bill.placement_cost),
        ("adjustment", bill.adjustment_cost),
    ];
    for (item, cost) in sums {
        let unit = &choice.currency;
        rows.add(&Row { section: "cost", item, cost: Some(cost), unit, ..Row::default() })?;
    }
    Ok(())
}

fn add_output(rows: &mut Rows, output: &OutputAnswer) -> Result<(), CsvError> {
    let row = Row { section: "output", output: &output.name, ..Row::default() };
    let built = Some(output.quantity);
    let current = Some(output.current.value());
    rows.add(&Row { item: "current", quantity: built, value: current, unit: "A", ..row.clone() })?;
    let total = Row { item: "total", bound: Some(output.target.value()), unit: "ppm", ..row };
    match &output.verdict {
        Verdict::Chosen(design, evaluation) => {
            let value = evaluation.total.value();
            rows.add(&Row { value: Some(value), note: output.method, ..total })?;
            add_design(rows, "design", &output.name, design)?;
            add_evaluation(rows, &output.name, evaluation)
        }
        Verdict::NoCommonSet => rows.add(&Row { note: "no common set", ..total }),
        Verdict::Infeasible(reasons) => {
            rows.add(&Row { note: "no design", ..total })?;
            add_reasons(rows, output, reasons)
        }
    }
}

fn add_design(
    rows: &mut Rows,
    section: &'static str,
    output: &str,
    design: &ChosenDesign,
) -> Result<(), CsvError> {
    let row = Row { section, output, ..Row::default() };
    let one = Some(1);
    for (kind, code) in [(Kind::Reference, &design.reference), (Kind::Amplifier, &design.amplifier)]
    {
        rows.add(&Row { item: kind.word(), order_code: code, quantity: one, ..row.clone() })?;
    }
    rows.add(&Row {
        item: "network",
        value: Some(design.ohms.value()),
        unit: "ohm",
        note: design.connection.word(),
        ..row.clone()
    })?;
    for element in &design.elements {
        rows.add(&Row {
            item: Kind::Resistor.word(),
            order_code: &element.order_code,
            quantity: one,
            value: Some(element.ohms.value()),
            unit: "ohm",
            ..row.clone()
        })?;
    }
    if let Some((code, count)) = &design.lift {
        let quantity = Some(u64::from(*count));
        rows.add(&Row { item: Kind::Lift.word(), order_code: code, quantity, ..row.clone() })?;
    }
    if let Some(code) = &design.adjustment {
        rows.add(&Row { item: Kind::Adjustment.word(), order_code: code, ..row })?;
    }
    Ok(())
}

fn add_evaluation(rows: &mut Rows, output: &str, evaluation: &Evaluation) -> Result<(), CsvError> {
    for line in &evaluation.terms {
        rows.add(&Row {
            section: "term",
            output,
            item: line.term.def().name,
            value: Some(line.ppm.value()),
            unit: "ppm",
            note: line.note.as_deref().unwrap_or(""),
            ..Row::default()
        })?;
    }
    for line in &evaluation.limits {
        let definition = line.limit.def();
        rows.add(&Row {
            section: "limit",
            output,
            item: definition.name,
            value: Some(line.value),
            bound: Some(line.bound),
            margin: Some(line.margin),
            unit: definition.unit,
            ..Row::default()
        })?;
    }
    let compliance = &evaluation.compliance;
    let figures = [
        ("load_min", Some(compliance.load_min.value()), "V"),
        ("load_max", Some(compliance.load_max.value()), "V"),
        ("output_resistance", compliance.output.map(|ohms| ohms.value()), "ohm"),
    ];
    for (item, value, unit) in figures {
        rows.add(&Row { section: "compliance", output, item, value, unit, ..Row::default() })?;
    }
    for figure in &evaluation.not_stated {
        rows.add(&Row {
            section: "not-stated",
            output,
            item: figure.field,
            order_code: &figure.order_code,
            ..Row::default()
        })?;
    }
    Ok(())
}

fn add_reasons(rows: &mut Rows, output: &OutputAnswer, reasons: &Reasons) -> Result<(), CsvError> {
    let row = Row { output: &output.name, ..Row::default() };
    if let Some((total, design)) = &reasons.best {
        rows.add(&Row {
            section: "best",
            item: "total",
            value: Some(total.value()),
            bound: Some(output.target.value()),
            unit: "ppm",
            ..row.clone()
        })?;
        add_design(rows, "best", &output.name, design)?;
    }
    for removed in &reasons.removed {
        let note = match removed.cause {
            Cause::Limit(limit) => format!("limit {}", limit.def().name),
            Cause::Rule(rule) => format!("rule {rule}"),
        };
        rows.add(&Row {
            section: "removed",
            item: removed.kind.word(),
            quantity: Some(removed.offers),
            note: &note,
            ..row.clone()
        })?;
    }
    for change in &reasons.relaxations {
        rows.add(&Row {
            section: "relaxation",
            item: &change.figure,
            value: Some(change.to),
            bound: Some(change.from),
            ..row.clone()
        })?;
    }
    Ok(())
}
