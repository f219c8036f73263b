//! What is asked: outputs, conditions, rules on parts, and how the purchase is counted.

mod conditions;
pub mod fields;
mod flags;
mod model;
mod outputs;
mod read;
mod reader;
#[cfg(test)]
mod tests;

pub use flags::{DEFAULT_NAME, DEFAULT_QUANTITY, FlagDef, from_flags, request_flags};
pub use model::{
    BoxReading, Budget, Conditions, Load, Output, PurchaseRules, Request, Rules, Unstated,
};
pub use read::{load, read};
