//! The CSV of `check`: one row a fault, and one a kind with what there is of it.

use super::table::{CsvError, finish, text};
use crate::report::CatalogCheck;
use crate::report::json::severity;

/// The header, and with it the order of the columns. A row of the section `kind` has a kind of
/// part as its record, and in its message how many types and order codes there are.
const HEADER: [&str; 8] =
    ["section", "file", "line", "column", "record", "field", "message", "hint"];

/// What `check` found as one table.
///
/// # Errors
/// The writer refuses; with rows in memory this does not happen.
pub fn check(check: &CatalogCheck) -> Result<String, CsvError> {
    let mut rows = vec![HEADER.map(str::to_owned).to_vec()];
    for count in &check.counts {
        let mut row = vec![String::new(); HEADER.len()];
        let message = format!(
            "types {}, order codes {}, types made to order {}",
            count.types, count.offers, count.made_to_order
        );
        for (index, cell) in [(0, "kind"), (4, count.kind.word()), (6, message.as_str())] {
            if let Some(place) = row.get_mut(index) {
                cell.clone_into(place);
            }
        }
        rows.push(row);
    }
    for fault in &check.faults {
        let optional = |value: &Option<String>| text(value.as_deref().unwrap_or("")).into_owned();
        rows.push(vec![
            severity(fault.severity).to_owned(),
            text(&fault.place.file.display().to_string()).into_owned(),
            fault.place.line.to_string(),
            fault.place.column.to_string(),
            optional(&fault.record),
            optional(&fault.field),
            text(&fault.message).into_owned(),
            optional(&fault.hint),
        ]);
    }
    finish(&rows)
}
