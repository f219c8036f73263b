//! Part records: reading them, checking them, and what can be ordered.

mod fault;
mod model;
mod places;
pub mod stream;
pub mod yaml;

pub use fault::{Fault, Severity};
pub use model::{
    Adjustment, Ageing, Amplifier, Catalog, DropPoint, ExchangeRates, GrowthLaw, Kind, Lifecycle,
    Lift, ListedValue, Place, PriceBreak, PriceList, Reference, ResistorType, Supply, TempcoMethod,
    Values,
};
