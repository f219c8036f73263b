//! What eats the error budget.

use super::figures::{bar, decimals_beside, fixed_ppm, share, target};
use super::grid::{Grid, Side};
use super::page::{INDENT, Page, plain, tied};
use super::words;
use crate::answers::OutputAnswer;
use crate::circuit::{Evaluation, REMOVED_BY_ADJUSTMENT, TermLine};
use crate::quantity::Ppm;

/// Widest bar that still reads as one.
const BAR_MAX: usize = 32;
/// A shorter bar says nothing.
const BAR_MIN: usize = 8;

/// The last row.
const TOTAL: &str = "total";

/// The terms, largest first; those that came out at zero in one line.
pub(super) fn write(page: &mut Page, output: &OutputAnswer, evaluation: &Evaluation) {
    let remark = format!("{}; a full bar is the {} allowed", output.method, target(output.target));
    page.heading("What eats the budget", &remark);
    let decimals = decimals_beside(output.target);
    let sorted = by_size(evaluation);
    let name = |line: &&TermLine| words(line.term.def().name);
    let mut grid = Grid::new()
        .column("", Side::Left)
        .column("ppm", Side::Right)
        .column("share", Side::Right)
        .optional(1, "", Side::Left);
    let counted = sorted.iter().filter(|line| line.ppm.value() > 0.0);
    let mut rows: Vec<(String, Ppm)> = counted.map(|line| (name(line), line.ppm)).collect();
    rows.push((TOTAL.to_owned(), evaluation.total));
    let names = rows.iter().map(|(name, _)| name.chars().count()).max().unwrap_or(0);
    let bars = bar_width(page.screen.width, names);
    for (name, ppm) in rows {
        let mut drawn = bars.map_or(String::new(), |width| bar(ppm / output.target, width));
        if name == TOTAL {
            // What is left of the target shows as dots.
            let left = bars.unwrap_or(0).saturating_sub(drawn.chars().count());
            drawn.push_str(&"·".repeat(left));
        }
        grid.row([name, fixed_ppm(ppm, decimals), share(ppm, output.target), drawn]);
    }
    grid.write(page, INDENT);
    let (removed, others): (Vec<&TermLine>, Vec<&TermLine>) =
        sorted.iter().partition(|line| removed_size(line).is_some());
    let zero = others.iter().filter(|line| line.ppm.value() <= 0.0 && line.note.is_none());
    let zero: Vec<String> = zero.map(name).collect();
    if !zero.is_empty() {
        page.led(INDENT, "zero: ", INDENT * 2, None, &zero.join(", "));
    }
    write_removed(page, &removed);
    write_remarks(page, &others);
}

/// What an adjustment removed of a term, as its remark tells.
fn removed_size(line: &TermLine) -> Option<&str> {
    let size = line.note.as_deref()?.strip_suffix(REMOVED_BY_ADJUSTMENT)?;
    Some(size.trim_end())
}

/// Terms that an adjustment removed, in one paragraph.
fn write_removed(page: &mut Page, lines: &[&TermLine]) {
    let removed: Vec<String> = lines
        .iter()
        .filter_map(|line| {
            let size = plain(removed_size(line)?);
            Some(tied(&format!("{} {size}", words(line.term.def().name))))
        })
        .collect();
    if !removed.is_empty() {
        let lead = format!("{REMOVED_BY_ADJUSTMENT}: ");
        page.led(INDENT, &lead, INDENT * 2, None, &removed.join(", "));
    }
}

/// Room for a bar beside the names, the ppm and the share.
fn bar_width(page: usize, names: usize) -> Option<usize> {
    let taken = INDENT + names + 2 + 8 + 2 + 5 + 2;
    let room = page.saturating_sub(taken).min(BAR_MAX);
    (room >= BAR_MIN).then_some(room)
}

/// Remarks on terms, those with one wording together.
fn write_remarks(page: &mut Page, lines: &[&TermLine]) {
    let mut remarks: Vec<(&str, Vec<String>)> = Vec::new();
    for line in lines {
        let Some(note) = &line.note else { continue };
        let name = words(line.term.def().name);
        match remarks.iter_mut().find(|(known, _)| known == note) {
            Some((_, names)) => names.push(name),
            None => remarks.push((note, vec![name])),
        }
    }
    for (note, names) in remarks {
        let lead = format!("{}: ", names.join(", "));
        page.wrapped(INDENT, INDENT * 2, &format!("{lead}{}", plain(note)));
    }
}

/// The terms by size, largest first; equal ones in the order of the table.
pub(super) fn by_size(evaluation: &Evaluation) -> Vec<&TermLine> {
    let mut lines: Vec<&TermLine> = evaluation.terms.iter().collect();
    lines.sort_by(|a, b| b.ppm.value().total_cmp(&a.ppm.value()));
    lines
}

/// The few largest terms with bars, for one output of a family.
pub(super) fn top(output: &OutputAnswer, evaluation: &Evaluation, width: usize) -> Vec<String> {
    const MOST: usize = 3;
    let decimals = decimals_beside(output.target);
    let sorted = by_size(evaluation);
    let counted: Vec<_> = sorted.iter().filter(|line| line.ppm.value() > 0.0).collect();
    // A term below a tenth of the total is not where to look first.
    let large = |line: &&&&TermLine| line.ppm.value() * 10.0 >= evaluation.total.value();
    let shown: Vec<_> = counted.iter().take(MOST).filter(large).collect();
    let mut grid =
        Grid::new().column("", Side::Right).column("", Side::Left).column("", Side::Left);
    let names = shown.iter().map(|line| line.term.def().name.len()).max().unwrap_or(0);
    let bars = bar_width(width, names);
    for line in &shown {
        let drawn = bars.map_or(String::new(), |width| bar(line.ppm / output.target, width));
        let ppm = format!("{} ppm", fixed_ppm(line.ppm, decimals));
        grid.row([ppm, words(line.term.def().name), drawn]);
    }
    let mut lines = grid.lines(false);
    let rest = counted.len() - shown.len();
    if rest > 0 {
        lines.push(match rest {
            1 => "and 1 smaller term".to_owned(),
            _ => format!("and {rest} smaller terms"),
        });
    }
    lines
}
