//! What is asked: outputs, conditions, rules on parts, and how the purchase is counted.

mod model;

pub use model::{
    BoxReading, Budget, Conditions, Load, Output, PurchaseRules, Request, Rules, Unstated,
};
