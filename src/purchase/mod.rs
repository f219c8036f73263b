//! Price lists, the exact cost of a quantity, the integer program, bound and proof.

mod bill;
mod bound;
mod branch;
mod family;
mod local;
mod model;
mod price;
mod solve;
mod solver;
mod tidy;

pub use bill::{Bill, BillLine, bill};
pub use family::{Demand, Family, Terms, uses};
pub use local::Incumbent;
pub use price::{Buy, cheapest_buy};
pub use solve::{Outcome, Watch, solve};
pub use tidy::tidy;
