//! Part records: reading them, checking them, and what can be ordered.

mod build;
mod clash;
mod codes;
mod doubts;
mod fault;
mod folder;
mod load;
mod model;
mod places;
mod record;
mod refusals;
mod schema;
pub mod stream;
mod suggest;
mod value;
mod view;
pub mod yaml;

pub use fault::{Fault, Severity};
pub use load::{Loaded, load};
pub use model::{
    Adjustment, Ageing, Amplifier, Catalog, DropPoint, ExchangeRates, GrowthLaw, Kind, Lifecycle,
    Lift, ListedValue, Place, PriceBreak, PriceList, Reference, ResistorType, Supply, TempcoMethod,
    Values,
};
pub use schema::{Better, Dimension, Fallback, Field, FieldForm, KIND_WORDS, field_named, fields};
pub use suggest::{find_suggestion, nearest_name};
