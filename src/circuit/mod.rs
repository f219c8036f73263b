//! The floated-reference arrangement: operating window, error terms, budget methods, audit.

mod contribution;
mod design;
mod evaluation;
mod frame;
mod limits;
mod terms;

pub use contribution::{Contribution, total_of};
pub use design::{Connection, Design, Element, LiftStack, Network};
pub use evaluation::{Compliance, Evaluation, LimitLine, NotStated, TermLine};
pub use frame::Frame;
pub use limits::{LIMITS, LimitDef, LimitId};
pub use terms::{TERMS, TermDef, TermId};
