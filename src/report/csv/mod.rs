//! CSV for spreadsheets: one flat table a command, with a header line.
//!
//! Quoting is that of RFC 4180 (lines end in a plain line feed). A text that a spreadsheet would
//! take for a formula is written with an apostrophe in front, which spreadsheets hide or show as
//! is; figures are never touched. Figures are in SI base units, ratios in ppm, with a point as
//! the decimal sign.

mod check;
mod choice;
mod table;

pub use check::check;
pub use choice::choice;
pub use table::CsvError;
