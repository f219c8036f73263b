//! Text, JSON and CSV from finished results; computes nothing.
//!
//! Nothing here prints or asks the terminal anything: what a terminal can show comes in as a
//! [`Screen`], and what goes out is a `String`.

mod check;
pub mod csv;
pub mod json;
mod screen;
pub mod text;
mod users;

pub use check::{CatalogCheck, KindCount};
pub use screen::{Ink, Screen, Terminal};

/// The formats in which a result can be had.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Format {
    /// For people.
    #[default]
    Text,
    /// For programs.
    Json,
    /// For spreadsheets.
    Csv,
}
