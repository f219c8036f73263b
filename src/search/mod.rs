//! Enumeration of designs, dominance, the pricing oracle.

mod accurate;
mod candidates;
mod combos;
mod costs;
mod errors;
mod glob;
mod listing;
mod market;
mod networks;
mod oracle;
mod pairing;
mod rules;
mod space;
mod ties;

pub use combos::{Combo, Goal, Slot};
pub use costs::{Amount, Costs};
pub use listing::{ListedFrame, ListedNetwork, ListedPair, Listing};
pub use market::{Market, OfferId, RuleRemovals, Stocked, Tariff, TooDear, price_faults};
pub use networks::ValueTable;
pub use oracle::{Pick, PickedNetwork};
pub use space::{Common, FrameSpace, NetSpace, OutputSpace, PartIn};
