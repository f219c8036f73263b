//! The floated-reference arrangement: operating window, error terms, budget methods, audit.

mod amplifier_terms;
mod board_terms;
mod cautions;
mod check;
mod compliance;
mod contribution;
mod design;
mod elements;
mod evaluate;
mod evaluation;
mod failures;
mod figure;
mod frame;
mod limits;
mod network_terms;
mod reference_terms;
mod terms;
mod window;
mod wired;

pub use cautions::cautions;
pub use contribution::{Contribution, total_of};
pub use design::{Connection, Design, Element, LiftStack, Network};
pub use elements::ElementBounds;
pub use evaluate::{REMOVED_BY_ADJUSTMENT, evaluate};
pub use evaluation::{Compliance, Evaluation, LimitLine, NotStated, TermLine};
pub use frame::Frame;
pub use limits::{LIMITS, LimitDef, LimitId, LoadEnd};
pub use terms::{Nature, Owner, TERMS, TermDef, TermId};
pub use wired::{ElementChoice, mismatch};
