//! Price lists, the exact cost of a quantity, the integer program, bound and proof.

mod bill;

pub use bill::{Bill, BillLine};
