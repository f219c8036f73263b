//! A family of outputs: all in one table, then each in short.

use std::collections::BTreeSet;

use super::design::{self, LABEL};
use super::figures::{current, network_ohms, nominal_ohms, room, target, total_beside};
use super::grid::{Grid, Side};
use super::page::{INDENT, Page, plain, tied};
use super::{budget, infeasible, limits, words};
use crate::answers::{ChosenDesign, OutputAnswer, Verdict};
use crate::circuit::{Connection, Evaluation};
use crate::report::Ink;

/// Columns that tell how an output does; the others tell what it is built from.
const FIGURES: [&str; 5] = ["output", "current", "target", "total", "spare"];

pub(super) fn write(page: &mut Page, outputs: &[OutputAnswer]) {
    page.gap();
    write_table(page, outputs);
    for output in outputs {
        match &output.verdict {
            Verdict::Chosen(design, evaluation) => write_output(page, output, design, evaluation),
            Verdict::NoCommonSet => {}
            Verdict::Infeasible(reasons) => {
                page.gap();
                infeasible::write(page, output, reasons);
            }
        }
    }
}

fn write_table(page: &mut Page, outputs: &[OutputAnswer]) {
    let mut grid = Grid::new()
        .column("output", Side::Left)
        .column("current", Side::Right)
        .column("target", Side::Right)
        .column("total", Side::Right)
        .column("spare", Side::Right)
        .column("reference", Side::Left)
        .column("amplifier", Side::Left)
        .column("R", Side::Right)
        .column("lift", Side::Left)
        .column("adjustment", Side::Left);
    for output in outputs {
        grid.row(row(output));
    }
    let common = grid.take_constant(&FIGURES);
    if grid.width() + INDENT <= page.screen.width {
        grid.write(page, INDENT);
    } else {
        write_stacked(page, grid);
    }
    let chosen = outputs.iter().filter(|output| matches!(output.verdict, Verdict::Chosen(..)));
    let methods: BTreeSet<&str> = chosen.map(|output| output.method).collect();
    let methods: Vec<&str> = methods.into_iter().collect();
    if !methods.is_empty() {
        page.led(INDENT, "totals: ", INDENT * 2, None, &format!("{}, in ppm", methods.join(", ")));
    }
    let common: Vec<String> = common.iter().map(|(title, text)| labelled(title, text)).collect();
    if !common.is_empty() {
        page.led(INDENT, "every design: ", INDENT * 2, None, &common.join(", "));
    }
}

/// Figures in columns, and under each row what the output is built from.
fn write_stacked(page: &mut Page, grid: Grid) {
    let parts = grid.labelled_rows(&FIGURES);
    let grid = grid.only(&FIGURES);
    if grid.width() + INDENT > page.screen.width {
        grid.write(page, INDENT);
        return;
    }
    let lines = grid.lines(page.screen.colour);
    let mut parts = parts.into_iter();
    for (number, line) in lines.iter().enumerate() {
        page.line(INDENT, line);
        // The first line is the header.
        if number == 0 {
            continue;
        }
        let cells = parts.next().unwrap_or_default();
        let texts = cells.iter().filter(|(_, text)| !text.is_empty() && text != NONE);
        let texts: Vec<String> = texts.map(|(title, text)| labelled(title, text)).collect();
        if !texts.is_empty() {
            page.wrapped(INDENT * 3, INDENT * 3, &texts.join(", "));
        }
    }
}

/// The cell of a part that a design does without.
const NONE: &str = "none";

fn labelled(title: &str, text: &str) -> String {
    if text == NONE { format!("no {title}") } else { tied(&format!("{title} {text}")) }
}

fn row(output: &OutputAnswer) -> Vec<String> {
    let mut cells = vec![plain(&output.name), current(output.current), target(output.target)];
    match &output.verdict {
        Verdict::Chosen(design, evaluation) => {
            cells.push(total_beside(evaluation.total, output.target));
            cells.push(room(evaluation.total, output.target));
            cells.push(plain(&design.reference));
            cells.push(plain(&design.amplifier));
            cells.push(ohms(design));
            cells.push(design::lift(design).map_or(NONE.to_owned(), |lift| untied(&lift)));
            cells.push(design.adjustment.as_deref().map_or(NONE.to_owned(), plain));
        }
        Verdict::NoCommonSet => cells.extend(std::iter::repeat_n(String::new(), 7)),
        Verdict::Infeasible(_) => {
            cells.push("no design".to_owned());
            cells.extend(std::iter::repeat_n(String::new(), 6));
        }
    }
    cells
}

fn untied(text: &str) -> String {
    text.replace('\u{a0}', " ")
}

fn ohms(design: &ChosenDesign) -> String {
    match design.connection {
        Connection::Single => nominal_ohms(design.ohms),
        Connection::Series | Connection::Parallel => network_ohms(design.ohms),
    }
}

fn write_output(
    page: &mut Page,
    output: &OutputAnswer,
    design: &ChosenDesign,
    evaluation: &Evaluation,
) {
    page.gap();
    let verdict = format!(
        "{}, {} built",
        tied(&format!(
            "{} of {}",
            total_beside(evaluation.total, output.target),
            target(output.target)
        )),
        output.quantity,
    );
    let lead = format!("{}  ", plain(&output.name));
    page.led(0, &lead, INDENT, Some(Ink::Bold), &verdict);
    page.field("resistor", LABEL, &design::network(design));
    let room = page.screen.width.saturating_sub(LABEL + 2);
    for (number, line) in budget::top(output, evaluation, room).iter().enumerate() {
        page.field(if number == 0 { "budget" } else { "" }, LABEL, &tied(line));
    }
    let closest: Vec<String> = limits::by_closeness(evaluation)
        .iter()
        .take(2)
        .map(|line| {
            let name = words(line.limit.def().name);
            tied(&format!("{name} {} to spare", limits::margin(line)))
        })
        .collect();
    if !closest.is_empty() {
        page.field("limits", LABEL, &closest.join(", "));
    }
    page.field("load", LABEL, &limits::compliance(&evaluation.compliance));
}
