//! Tables without borders that never break or cut a cell: an order code must stay copyable. A
//! table that is too wide gives up its optional columns first, then turns into one small
//! paragraph a row.

use comfy_table::{Attribute, Cell, CellAlignment, Color, ContentArrangement, Table, presets};
use unicode_width::UnicodeWidthStr;

use super::page::{Page, tied};
use crate::report::Ink;

/// Where a column's cells stand.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Side {
    Left,
    Right,
}

/// One column.
#[derive(Clone, Copy, Debug)]
struct Column {
    title: &'static str,
    side: Side,
    /// Columns of the highest rank are left out first; those without one, never.
    rank: Option<u8>,
}

/// One cell.
#[derive(Clone, Debug)]
struct Entry {
    text: String,
    ink: Option<Ink>,
}

/// A table under way.
#[derive(Clone, Debug, Default)]
pub(super) struct Grid {
    columns: Vec<Column>,
    rows: Vec<Vec<Entry>>,
}

/// Space between columns.
const BETWEEN: u16 = 2;

impl Grid {
    pub(super) fn new() -> Self {
        Self::default()
    }

    /// Adds a column that is always shown.
    pub(super) fn column(mut self, title: &'static str, side: Side) -> Self {
        self.columns.push(Column { title, side, rank: None });
        self
    }

    /// Adds a column that a narrow page leaves out: those of the highest rank first, and those of
    /// one rank together.
    pub(super) fn optional(mut self, rank: u8, title: &'static str, side: Side) -> Self {
        self.columns.push(Column { title, side, rank: Some(rank) });
        self
    }

    /// Adds a row, one text a column.
    pub(super) fn row<T: Into<String>>(&mut self, cells: impl IntoIterator<Item = T>) {
        let entry = |text: T| Entry { text: text.into(), ink: None };
        self.rows.push(cells.into_iter().map(entry).collect());
    }

    /// Gives the last cell of the last row an emphasis.
    pub(super) fn ink_last(&mut self, ink: Ink) {
        if let Some(entry) = self.rows.last_mut().and_then(|row| row.last_mut()) {
            entry.ink = Some(ink);
        }
    }

    /// Whether there are no rows.
    pub(super) const fn is_empty(&self) -> bool {
        self.rows.is_empty()
    }

    /// The width of the whole table with nothing left out.
    pub(super) fn width(&self) -> usize {
        let columns = self.columns.len();
        let widest = |index: usize| {
            let cells = self.rows.iter().filter_map(|row| row.get(index));
            let title = self.columns.get(index).map_or(0, |column| column.title.width());
            cells.map(|cell| cell.text.width()).max().unwrap_or(0).max(title)
        };
        (0..columns).map(widest).sum::<usize>() + usize::from(BETWEEN) * columns.saturating_sub(1)
    }

    /// Takes out columns in which every row that says anything says the same, but not those named
    /// in `keep`, and hands back what they said. What only one row says stays; a column in which
    /// no row says anything goes without a word.
    pub(super) fn take_constant(&mut self, keep: &[&str]) -> Vec<(&'static str, String)> {
        let mut taken = Vec::new();
        for index in (0..self.columns.len()).rev() {
            let Some(column) = self.columns.get(index) else { continue };
            let cells = self.rows.iter().filter_map(|row| row.get(index)).map(|c| &c.text);
            let said: Vec<&String> = cells.filter(|text| !text.is_empty()).collect();
            match said.as_slice() {
                [] => {}
                [_] => continue,
                [first, others @ ..] => {
                    if keep.contains(&column.title) || others.iter().any(|cell| cell != first) {
                        continue;
                    }
                    taken.insert(0, (column.title, (*first).clone()));
                }
            }
            self.drop_column(index);
        }
        taken
    }

    /// The cells of all columns but those in `without`, each with its title, row by row.
    pub(super) fn labelled_rows(&self, without: &[&str]) -> Vec<Vec<(&'static str, String)>> {
        let labelled = |row: &Vec<Entry>| {
            let cells = self.columns.iter().zip(row);
            let cells = cells.filter(|(column, _)| !without.contains(&column.title));
            cells.map(|(column, entry)| (column.title, entry.text.clone())).collect()
        };
        self.rows.iter().map(labelled).collect()
    }

    /// The table with only these columns.
    pub(super) fn only(mut self, titles: &[&str]) -> Self {
        for index in (0..self.columns.len()).rev() {
            if self.columns.get(index).is_some_and(|column| !titles.contains(&column.title)) {
                self.drop_column(index);
            }
        }
        self
    }

    fn drop_column(&mut self, index: usize) {
        self.columns.remove(index);
        for row in &mut self.rows {
            if index < row.len() {
                row.remove(index);
            }
        }
    }

    /// The table's lines, header first, at its natural width.
    pub(super) fn lines(&self, colour: bool) -> Vec<String> {
        let mut table = Table::new();
        table.load_style(presets::NOTHING);
        table.set_content_arrangement(ContentArrangement::Disabled);
        // The terminal is not to be asked: what it can do has been decided already.
        table.force_no_tty();
        if colour {
            table.enforce_styling();
        }
        if self.columns.iter().any(|column| !column.title.is_empty()) {
            let title = |column: &Column| styled(column.title, None, column.side);
            table.set_header(self.columns.iter().map(title).collect::<Vec<_>>());
        }
        for row in &self.rows {
            let cells = row.iter().zip(&self.columns);
            let cells = cells.map(|(entry, column)| styled(&entry.text, entry.ink, column.side));
            table.add_row(cells.collect::<Vec<_>>());
        }
        let last = self.columns.len().saturating_sub(1);
        for (index, column) in table.column_iter_mut().enumerate() {
            column.set_padding((0, if index == last { 0 } else { BETWEEN }));
        }
        table.lines().map(|line| line.trim_end().to_owned()).collect()
    }

    /// Writes the table, standing in by `indent`, in the widest form that the page takes.
    pub(super) fn write(mut self, page: &mut Page, indent: usize) {
        let room = page.screen.width.saturating_sub(indent);
        while self.width() > room {
            let Some(rank) = self.columns.iter().filter_map(|column| column.rank).max() else {
                break;
            };
            for index in (0..self.columns.len()).rev() {
                if self.columns.get(index).is_some_and(|column| column.rank == Some(rank)) {
                    self.drop_column(index);
                }
            }
        }
        if self.width() <= room {
            for line in self.lines(page.screen.colour) {
                page.line(indent, &line);
            }
        } else {
            self.write_paragraphs(page, indent);
        }
    }

    fn write_paragraphs(&self, page: &mut Page, indent: usize) {
        for row in &self.rows {
            let named = row.iter().zip(&self.columns).filter(|(entry, _)| !entry.text.is_empty());
            let texts: Vec<String> = named
                .enumerate()
                .map(|(number, (entry, column))| {
                    let bare = number == 0 || column.title.is_empty();
                    let title = if bare { "" } else { column.title };
                    tied(format!("{title} {}", entry.text).trim_start())
                })
                .collect();
            page.wrapped(indent, indent + 2, &texts.join(", "));
        }
    }
}

fn styled(text: &str, ink: Option<Ink>, side: Side) -> Cell {
    let cell = Cell::new(text).set_alignment(match side {
        Side::Left => CellAlignment::Left,
        Side::Right => CellAlignment::Right,
    });
    match ink {
        None => cell,
        Some(Ink::Bold) => cell.add_attribute(Attribute::Bold),
        Some(Ink::Good) => cell.fg(Color::Green),
        Some(Ink::Bad) => cell.fg(Color::Red),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::report::Screen;

    fn bill() -> Grid {
        let mut grid = Grid::new()
            .column("order code", Side::Left)
            .column("buy", Side::Right)
            .column("cost", Side::Right)
            .optional(1, "for", Side::Left);
        grid.row(["REF-A", "1000", "4100.00", "all"]);
        grid.row(["RES-4K99", "25", "9.75", "pt100"]);
        grid
    }

    fn written(width: usize) -> String {
        let mut page = Page::new(Screen { width, colour: false });
        bill().write(&mut page, 2);
        page.finish()
    }

    #[test]
    fn figures_stand_on_the_right() {
        assert_eq!(
            written(80),
            "  order code   buy     cost  for\n  REF-A       1000  4100.00  all\n  RES-4K99      25     9.75  pt100\n"
        );
    }

    #[test]
    fn a_narrow_page_loses_optional_columns_then_the_table() {
        assert_eq!(
            written(30),
            "  order code   buy     cost\n  REF-A       1000  4100.00\n  RES-4K99      25     9.75\n"
        );
        assert_eq!(
            written(22),
            "  REF-A, buy 1000,\n    cost 4100.00\n  RES-4K99, buy 25,\n    cost 9.75\n"
        );
    }

    #[test]
    fn width_is_that_of_the_lines() {
        let grid = bill();
        let widest = grid.lines(false).iter().map(|line| line.width()).max();
        assert_eq!(Some(grid.width()), widest);
    }

    #[test]
    fn constant_columns_are_said_once() {
        let mut grid = Grid::new().column("name", Side::Left).column("lift", Side::Left);
        grid.row(["a", "none"]);
        grid.row(["b", "none"]);
        assert_eq!(grid.take_constant(&["name"]), [("lift", "none".to_owned())]);
        assert_eq!(grid.lines(false), ["name", "a", "b"]);
    }

    #[test]
    fn colour_is_written_only_when_asked() {
        let mut grid = bill();
        grid.ink_last(Ink::Bad);
        assert!(grid.lines(false).iter().all(|line| !line.contains('\u{1b}')));
        assert!(grid.lines(true).iter().any(|line| line.contains('\u{1b}')));
    }
}
