//! The JSON output: serde structs in the key order of the format, so that a program can read our
//! results back with the same types.

mod check;
mod choice;
mod number;

pub(super) use check::severity;
pub use check::{CheckJson, FaultJson, KindJson};
pub use choice::{
    BillJson, BillLineJson, ChoiceJson, ComplianceJson, DesignJson, ElementJson, JointReasonJson,
    LiftJson, LimitJson, NetworkJson, NotStatedJson, OutputJson, ReasonsJson, RelaxationJson,
    RemovedJson, TermJson,
};
pub use number::Number;

use serde::Serialize;

/// The number that every JSON object of ours carries as `format`; it rises when a reader would
/// have to change.
pub const FORMAT: u32 = 1;

/// One JSON object as text, indented, with a line end.
///
/// # Errors
/// A figure that is not a finite number, which the engine never hands out.
pub fn text<T: Serialize>(object: &T) -> Result<String, serde_json::Error> {
    let mut text = serde_json::to_string_pretty(object)?;
    text.push('\n');
    Ok(text)
}
