//! The answer to `check`.

use super::faults;
use super::grid::{Grid, Side};
use super::page::{INDENT, Page, counted, plain, tied};
use crate::catalog::Severity;
use crate::report::{CatalogCheck, Ink, Screen};

/// What the catalogue holds and what is wrong or doubtful in it.
#[must_use]
pub fn check(check: &CatalogCheck, screen: Screen) -> String {
    let mut page = Page::new(screen);
    let (lead, ink) = match (check.number_of(Severity::Error), check.number_of(Severity::Doubt)) {
        (0, 0) => ("good: ".to_owned(), Ink::Good),
        (0, _) => (format!("{}: ", faults::summary(&check.faults)), Ink::Bold),
        _ => (format!("{}: ", faults::summary(&check.faults)), Ink::Bad),
    };
    let size = format!(
        "catalogue {} with {} in {}",
        plain(&check.folder),
        tied(&counted(check.records as u64, "record", "records")),
        tied(&counted(check.files as u64, "file", "files")),
    );
    page.led(0, &lead, INDENT, Some(ink), &size);
    if check.left_out > 0 {
        let left_out = counted(check.left_out as u64, "record has", "records have");
        page.wrapped(0, 0, &format!("{left_out} errors and cannot be used"));
    }
    page.gap();
    let mut grid = Grid::new()
        .column("", Side::Left)
        .column("types", Side::Right)
        .column("order codes", Side::Right)
        .optional(1, "", Side::Left);
    for count in &check.counts {
        let made = match count.made_to_order {
            0 => String::new(),
            number => format!("and {} made to order", counted(number, "type", "types")),
        };
        let kind = count.kind.word().to_owned();
        grid.row([kind, count.types.to_string(), count.offers.to_string(), made]);
    }
    grid.write(&mut page, INDENT);
    if !check.faults.is_empty() {
        page.gap();
        faults::write(&mut page, &check.faults);
    }
    page.finish()
}
